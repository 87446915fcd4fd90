/**
 * Solutions of initial-value problems in powers of a small parameter (regular perturbation): x = x_0(t) + epsilon x_1(t) + ...
 * The problem at epsilon = 0 must be linear with constant coefficients, or have a constant solution; every correction then solves the same linear
 * equation with a known right side, which is integrated exactly in powers, exponentials and oscillations.
 * Source: Bender & Orszag, Advanced Mathematical Methods, 1978, ch. 7 and 11.1 (secular terms) (from memory).
 */
import type { Element } from '../../algebra/types.ts';
import { build, dependsOn, type Expression, freeSymbols, Q, substitute } from '../../expression/index.ts';
import { differentiate } from '../../functions/index.ts';
import { attempt, type Budget, Declined, type Outcome } from '../../outcome.ts';
import { addElements, type Context, isRational, isZero, multiplyElements, negateElement, plainText, Series, Stream, unnamed } from '../../series/index.ts';
import { requireShallow } from '../depth.ts';
import { recentre } from '../equation.ts';
import { evaluate } from '../evaluate.ts';
import type { Expansion, ExpansionProblem, ExpansionTerm } from '../expansion.ts';
import { openSide } from '../open-side.ts';
import { bind } from '../session.ts';
import { addModes, constantModes, differentiateModes, type ExponentialPolynomial, exponentOf, type Mode, modesOf, scaleModes, treeOf, valueAtZero } from './exponential-polynomial.ts';
import { exponentsOf, halfAndDiscriminant, withoutBars } from './frobenius.ts';
import { falling, plainName, startValues } from './initial-value.ts';
import { solveSystem } from './linear-system.ts';
import { invertOperator, type Polynomial, scalePolynomial, trimmed } from './operator.ts';
import { coefficientReader } from './parameter-series.ts';
import { secularNote } from './secular.ts';
import { functionTree } from './solve.ts';
import { type DifferentialStatement, slot, standsForUnknown } from './statement.ts';

export interface PerturbationProblem extends Omit<ExpansionProblem, 'function' | 'point' | 'side'> {
  readonly statement: DifferentialStatement;
}

/** Terms beyond the zeroth that vanish before the sum is tested for being exact. */
const QUIET = 4;

/**
 * The solution in powers of problem.variable, with coefficients as functions of the independent variable.
 * Rejects: singular perturbations (the highest derivative is multiplied by the parameter), problems that are not solved in closed form at parameter 0, systems.
 */
export function expandPerturbation(problem: PerturbationProblem, budget: Budget): Outcome<Expansion> {
  return attempt(() => {
    problem.statement.equations.forEach(requireShallow);
    try {
      return new Perturbation(problem, budget).expansion();
    } catch (error) {
      // A question about a symbol that stands for the solution is none that an assumption could answer.
      if (error instanceof Declined && error.about.some(standsForUnknown)) throw new Declined('no-expansion', 'A function in the equation is not analytic along the solution (its sign or a root of it changes there), which is not expanded; choose a scaling in which it is analytic.');
      throw error;
    }
  });
}

class Perturbation {
  private readonly c: Context;
  private readonly small: string;
  private readonly name: string;
  private readonly order: number;
  /** t - t_0. */
  private readonly time = "time'";
  private readonly notes: string[] = [];
  private readonly equationTerms: (k: number) => Expression;
  private readonly initialTerms: (derivative: number) => (k: number) => Element;
  /** Coefficients of the linear operator, lowest derivative first. */
  private operator: Polynomial = [];
  private basis: readonly { readonly mode: Pick<Mode, 're' | 'im'>; readonly power: number }[] = [];
  private readonly solved: ExponentialPolynomial[][] = [];
  private readonly assumed: string[] = [];

  constructor(
    private readonly problem: PerturbationProblem,
    budget: Budget,
  ) {
    const { statement } = problem;
    const [unknown] = statement.unknowns;
    const [equation] = statement.equations;
    if (!unknown || !equation || statement.unknowns.length > 1 || statement.equations.length > 1) throw new Declined('no-expansion', 'Systems are not expanded in a small parameter; eliminate all unknown functions but one.');
    if (problem.variable.kind !== 'symbol') throw new Declined('bad-request', 'The small parameter must be one symbol here; give a ratio a name of its own.');
    this.small = problem.variable.name;
    this.name = unknown.name;
    this.order = unknown.order;
    const side = openSide({ variable: problem.variable, point: build.number(0), assumptions: problem.assumptions }, 'right', budget);
    const c = side.context;
    this.c = c;
    const point = statement.point ?? build.number(0);
    if (dependsOn(point, this.small)) throw new Declined('no-expansion', 'The initial point depends on the small parameter; substitute a new variable that starts at a fixed point.');
    const shifted = substitute(equation, statement.variable, build.sum(point, build.symbol(this.time)));
    const slots = Array.from({ length: this.order + 1 }, (_, j) => [slot(this.name, j), this.formal(j)] as const);
    this.equationTerms = coefficientReader(c, () => evaluate(bind(side.session, slots), shifted), (e) => c.field.toExpression(e));
    const taken = new Set([equation, ...statement.initial.map((v) => v.value)].flatMap(freeSymbols));
    const start = startValues(statement, taken);
    this.notes.push(...start.notes);
    const memo = new Map<number, (k: number) => Element>();
    this.initialTerms = (derivative) => {
      const known = memo.get(derivative) ?? coefficientReader(c, () => evaluate(side.session, start.value(this.name, derivative)), (e) => e);
      memo.set(derivative, known);
      return known;
    };
  }

  private readonly symbolOf = (derivative: number, k: number): string => `${this.name}~${derivative}~${k}`;

  /** sum over k of epsilon^k x_k^(j), with a symbol for each. */
  private formal(derivative: number): Series {
    const { c } = this;
    return new Series(c.scale.local, new Stream((k) => ({ exponent: Q.rational(k), coefficient: c.field.fromExpression(build.symbol(this.symbolOf(derivative, k))) })), unnamed);
  }

  /** The derivative of the k-th solution where it is found; zero for the one that is sought. */
  private known(symbol: string): ExponentialPolynomial | null {
    const [name, derivative, k] = symbol.split('~');
    if (name !== this.name || derivative === undefined || k === undefined) return null;
    return this.solved[Number(k)]?.[Number(derivative)] ?? [];
  }

  private linearise(): void {
    const { c, order } = this;
    const zeroth = this.equationTerms(0);
    const rates = Array.from({ length: order + 1 }, (_, j) => differentiate(zeroth, this.symbolOf(j, 0)));
    const isTop = rates[order];
    if (!isTop || (isTop.kind === 'number' && Q.isZero(isTop.value))) throw new Declined('no-expansion', 'The highest derivative is multiplied by the small parameter (a singular perturbation): the solution has no expansion in its powers that holds everywhere; rescale the variable inside the boundary layer.');
    const constant = rates.map((r) => {
      const rate = r ? c.field.fromExpression(r) : null;
      return rate && (isRational(rate) || !c.field.parameters(rate).some((s) => standsForUnknown(s) || s === this.time)) ? rate : null;
    });
    if (constant.every((a) => a !== null)) {
      this.operator = constant as Element[];
      this.basis = this.homogeneous();
      return;
    }
    // Not linear: a solution that stays where it starts serves too.
    const still = this.initialTerms(0)(0);
    for (let j = 1; j < order; j += 1) if (!isZero(c, this.initialTerms(j)(0))) throw unsolved();
    const at = (e: Expression): Expression => Array.from({ length: order + 1 }, (_, j) => j).reduce((tree, j) => substitute(tree, this.symbolOf(j, 0), j === 0 ? c.field.toExpression(still) : build.number(0)), e);
    const rest = at(zeroth);
    if (dependsOn(rest, this.time) || !isZero(c, c.field.fromExpression(rest))) throw unsolved();
    const coefficients = rates.map((r) => (r ? at(r) : null));
    if (coefficients.some((r) => r === null || dependsOn(r, this.time))) throw unsolved();
    this.operator = coefficients.map((r) => c.field.fromExpression(r as Expression));
    if (isZero(c, this.operator[order] as Element)) throw unsolved();
    this.basis = this.homogeneous();
    this.keep(constantModes(c, still));
  }

  private keep(x: ExponentialPolynomial): void {
    const derivatives = [x];
    for (let j = 0; j < this.order; j += 1) derivatives.push(differentiateModes(this.c, derivatives[j] as ExponentialPolynomial));
    this.solved.push(derivatives);
  }

  /** t^power exp(mode t) for each zero of the characteristic polynomial. */
  private homogeneous(): typeof this.basis {
    const { c } = this;
    const p = trimmed(c, this.operator);
    const low = p.findIndex((a) => !isZero(c, a));
    const modes: { mode: Pick<Mode, 're' | 'im'>; multiplicity: number }[] = low > 0 ? [{ mode: { re: Q.ZERO, im: Q.ZERO }, multiplicity: low }] : [];
    const rest = p.slice(low);
    if (rest.length === 3) modes.push(...this.quadratic(rest as [Element, Element, Element]));
    else if (rest.length > 1) {
      for (const { value, multiplicity } of exponentsOf(c, rest)) {
        if (!isRational(value) && c.field.isReal(value) !== 'yes') throw new Declined('no-expansion', 'The characteristic equation of the problem at parameter 0 has complex zeros beyond a quadratic one, which is not solved; lower its order.');
        modes.push({ mode: { re: value, im: Q.ZERO }, multiplicity });
      }
    }
    return modes.flatMap(({ mode, multiplicity }) => Array.from({ length: multiplicity }, (_, power) => ({ mode, power })));
  }

  private quadratic(coefficients: readonly [Element, Element, Element]): { mode: Pick<Mode, 're' | 'im'>; multiplicity: number }[] {
    const { c } = this;
    const f = c.field;
    const { half, discriminant } = halfAndDiscriminant(c, coefficients);
    if (isZero(c, discriminant)) return [{ mode: { re: half, im: Q.ZERO }, multiplicity: 2 }];
    let sign = f.sign(discriminant);
    if (sign === 'undecided') {
      this.assumed.push(`${plainText(f.toExpression(f.negate(discriminant)))} > 0`);
      sign = -1;
    }
    if (sign === 'complex') throw new Declined('needs-assumption', 'The characteristic equation of the problem at parameter 0 is not real; say that its coefficients are real.');
    const root = f.fromExpression(withoutBars(f.toExpression(f.power(sign === -1 ? f.negate(discriminant) : discriminant, Q.HALF))));
    if (sign === -1) return [root, f.negate(root)].map((im) => ({ mode: { re: half, im }, multiplicity: 1 }));
    return [f.add(half, root), f.subtract(half, root)].map((re) => ({ mode: { re, im: Q.ZERO }, multiplicity: 1 }));
  }

  /** The next solution: particular by the operator's inverse, homogeneous from the initial values. */
  private solveNext(): ExponentialPolynomial {
    const { c, order } = this;
    const k = this.solved.length;
    const right = scaleModes(c, modesOf(c, this.equationTerms(k), this.time, (s) => this.known(s)), Q.MINUS_ONE);
    let x: ExponentialPolynomial = [];
    for (const mode of right) {
      const operator = recentre(c, this.operator, exponentOf(c, mode));
      const lead = operator.find((a) => !(isRational(a) ? a.num === 0n : isZero(c, a)));
      if (lead !== undefined) for (const factor of c.field.factorsThatMayVanish(lead)) this.assumed.push(`${plainText(c.field.toExpression(factor))} != 0`);
      x = addModes(c, x, [{ ...mode, polynomial: invertOperator(c, operator, mode.polynomial) }]);
    }
    const missing: Element[] = [];
    let derivative = x;
    for (let j = 0; j < order; j += 1) {
      missing.push(addElements(c, this.initialTerms(j)(k), negateElement(c, valueAtZero(c, derivative))));
      derivative = differentiateModes(c, derivative);
    }
    const weights = solveSystem(c, Array.from({ length: order }, (_, j) => this.basis.map(({ mode, power }) => this.startOf(mode, power, j))), missing);
    this.basis.forEach(({ mode, power }, i) => {
      x = addModes(c, x, [{ ...mode, polynomial: scalePolynomial(c, [...Array.from({ length: power }, () => Q.ZERO), Q.ONE], weights[i] as Element) }]);
    });
    this.keep(x);
    return x;
  }

  /** The j-th derivative of t^power exp(mode t) at t = 0. */
  private startOf(mode: Pick<Mode, 're' | 'im'>, power: number, j: number): Element {
    if (j < power) return Q.ZERO;
    let value: Element = Q.rational(falling(j, power));
    const exponent = exponentOf(this.c, mode);
    for (let k = power; k < j; k += 1) value = multiplyElements(this.c, value, exponent);
    return value;
  }

  expansion(): Expansion {
    const { c, problem } = this;
    this.linearise();
    const { statement, terms: count, order } = problem;
    const point = statement.point ?? build.number(0);
    const atZero = point.kind === 'number' && Q.isZero(point.value);
    const time = atZero ? build.symbol(statement.variable) : build.difference(build.symbol(statement.variable), point);
    const terms: ExpansionTerm[] = [];
    let remainder: Expansion['remainder'] = null;
    let quiet = 0;
    let secular: string | null = null;
    for (let k = 0; remainder === null; k += 1) {
      c.budget.check();
      const resting = this.assumed.length;
      const x = this.solved[k]?.[0] ?? this.solveNext();
      quiet = x.length === 0 ? quiet + 1 : 0;
      if (quiet >= QUIET) {
        if (this.isExact(k)) break;
        if (quiet > QUIET + 12) throw new Declined('undecided', 'The corrections vanish to high order, and it could not be decided whether they end; ask for fewer terms.');
      }
      if (x.length === 0) continue;
      const beyond = count !== undefined ? terms.length >= count : order !== undefined && Q.compare(Q.rational(k), order) >= 0;
      if (beyond) {
        remainder = { power: build.number(k), log: 0, scale: null };
        // Conditions of the term left out are not those of the sum.
        this.assumed.length = resting;
      } else {
        terms.push({ coefficient: treeOf(c, x, time), power: build.number(k), log: 0, scale: null });
        if (!secular) {
          secular = secularNote(c, this.solved.map((s) => s[0] ?? []), k, { time: plainName(statement.variable), parameter: plainName(this.small) });
          if (secular) this.notes.push(secular);
        }
      }
    }
    const needed = [...c.field.needed].filter((a) => !a.includes('~') && !a.includes("'"));
    return {
      function: functionTree(statement, this.name),
      variable: problem.variable,
      point: build.number(0),
      side: 'both',
      local: problem.variable,
      logarithm: build.call('log', build.call('abs', problem.variable)),
      prefactor: null,
      terms,
      remainder,
      exact: remainder === null,
      divergent: false,
      oscillating: false,
      assumptions: [...new Set([...this.notes, ...this.assumed, ...c.notes.assumptions, ...needed])],
    };
  }

  /** Whether the sum found satisfies the equation and the initial values identically. */
  private isExact(k: number): boolean {
    const { c, problem } = this;
    const small = problem.variable;
    const time = build.symbol(this.time);
    const [equation] = problem.statement.equations;
    if (!equation) return false;
    const sum = (j: number): Expression => build.sum(...this.solved.slice(0, k + 1).flatMap((s, n) => ((s[j] ?? []).length > 0 ? [build.product(build.power(small, n), treeOf(c, s[j] ?? [], time))] : [])));
    const point = problem.statement.point ?? build.number(0);
    const tree = Array.from({ length: this.order + 1 }, (_, j) => j).reduce((e, j) => substitute(e, slot(this.name, j), sum(j)), substitute(equation, problem.statement.variable, build.sum(point, time)));
    if (c.field.isZero(c.field.fromExpression(tree)) !== 'yes') return false;
    // Initial values that go on beyond the order seen would show as later terms.
    return problem.statement.initial.every((v) => {
      const found = build.sum(...this.solved.slice(0, k + 1).map((s, n) => build.product(build.power(small, n), c.field.toExpression(valueAtZero(c, s[v.derivative] ?? [])))));
      return c.field.isZero(c.field.fromExpression(build.difference(v.value, found))) === 'yes';
    });
  }
}

const unsolved = (): Declined => new Declined('no-expansion', 'The problem at parameter 0 is neither linear with constant coefficients nor solved by a constant, so that its solution is not known in closed form here; choose a scaling in which it is.');
