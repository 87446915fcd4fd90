/** Solutions of differential equations in powers of the independent variable, at a point where the equation is regular. */
import type { Element } from '../../algebra/types.ts';
import { build, type Expression, Q, substitute } from '../../expression/index.ts';
import { Declined } from '../../outcome.ts';
import { finiteStream, isRational, isZero, multiplyElements, Series, type Term, unnamed } from '../../series/index.ts';
import type { ExpansionProblem } from '../expansion.ts';
import { type OpenSide, openSide } from '../open-side.ts';
import { type SideResult, takeTerms } from '../side.ts';
import type { Budget } from '../../outcome.ts';
import { linearInHighest, solvedForHighest } from './highest.ts';
import { type DifferentialStatement, slot } from './statement.ts';
import { Taylor, TaylorRoom } from './taylor.ts';

/** Initial values by slot: those given, and symbols for those that are free. */
export interface StartValues {
  readonly value: (name: string, derivative: number) => Expression;
  /** Conditions of the result: which symbols stand for free constants. */
  readonly notes: readonly string[];
}

/** A symbol for y^(k) at the point: `y_0`, `y'_0`, `\dot{\theta}_0`; the value itself, `y'(0)`, where that name is taken. */
function constantSymbol(statement: DifferentialStatement, name: string, derivative: number, taken: ReadonlySet<string>): Expression {
  const base = /^(.*?)(_.*)?$/.exec(name);
  const stem = base?.[1] ?? name;
  const symbol = base?.[2] ? null : `${stem}${"'".repeat(derivative)}_0`;
  if (symbol !== null && !taken.has(symbol)) return build.symbol(symbol);
  return { kind: 'apply', name, args: [statement.point ?? build.number(0)], derivatives: [derivative] };
}

/** Values at the start of all derivatives below the highest. Rejects values for derivatives that the equation itself determines. */
export function startValues(statement: DifferentialStatement, taken: ReadonlySet<string>): StartValues {
  const notes: string[] = [];
  const values = new Map<string, Expression>();
  for (const v of statement.initial) {
    const key = slot(v.name, v.derivative);
    if (values.has(key)) throw new Declined('bad-request', `The value of ${derivativeName(v.name, v.derivative)} is given twice; leave one out.`);
    values.set(key, v.value);
  }
  const point = statement.point ?? build.number(0);
  for (const u of statement.unknowns) {
    for (let k = 0; k < u.order; k += 1) {
      const key = slot(u.name, k);
      if (values.has(key)) continue;
      const symbol = constantSymbol(statement, u.name, k, taken);
      values.set(key, symbol);
      notes.push(symbol.kind === 'symbol' ? `${plainName(symbol.name)} = ${derivativeName(u.name, k)}(${plainPoint(point)}) is a free constant` : `${derivativeName(u.name, k)}(${plainPoint(point)}) is a free constant`);
    }
  }
  for (const v of statement.initial) {
    const u = statement.unknowns.find((x) => x.name === v.name);
    if (!u) throw new Declined('bad-request', `A value of ${plainName(v.name)} is given, but no equation holds its derivative; add the equation.`);
    if (v.derivative >= u.order) throw new Declined('bad-request', `The value of ${derivativeName(v.name, v.derivative)} follows from the equation; leave it out.`);
  }
  return { value: (name, derivative) => values.get(slot(name, derivative)) as Expression, notes };
}

export const plainName = (name: string): string => name.replace(/\\([A-Za-z]+)/g, '$1').replace(/[{}]/g, '');
const derivativeName = (name: string, derivative: number): string => `${plainName(name)}${"'".repeat(derivative)}`;
export const plainPoint = (e: Expression): string => (e.kind === 'number' ? Q.toText(e.value) : e.kind === 'symbol' ? plainName(e.name) : e.kind === 'constant' ? e.name : 'the point');

export interface RegularSolution {
  readonly side: OpenSide;
  /** Of each unknown function, in h = variable - point. */
  readonly series: ReadonlyMap<string, Taylor>;
}

/** The solution's Taylor series. Throws Singular where the equation, solved for its highest derivatives, is singular at the start. */
export function regularSolution(statement: DifferentialStatement, start: StartValues, problem: Pick<ExpansionProblem, 'variable' | 'point' | 'assumptions'>, budget: Budget): RegularSolution {
  const system = linearInHighest(statement);
  if (!system) throw new Declined('no-expansion', 'The highest derivative does not enter linearly; solve the equation for its highest derivative first.');
  const solved = solvedForHighest(system);
  const side = openSide(problem, 'right', budget);
  const c = side.context;
  const series = new Map<string, Taylor>();
  const all = new Map<string, Taylor>();
  const room = new TaylorRoom(side, statement.variable, all);
  statement.unknowns.forEach((u, i) => {
    const given: Element[] = [];
    let factorial = Q.ONE;
    for (let k = 0; k < u.order; k += 1) {
      if (k > 1) factorial = Q.multiply(factorial, Q.rational(k));
      given.push(multiplyElements(c, c.field.fromExpression(start.value(u.name, k)), Q.divide(Q.ONE, factorial)));
    }
    const { numerator, denominator } = solved[i] as { numerator: Expression; denominator: Expression };
    const highest = build.isOneNumber(denominator) ? numerator : build.quotient(numerator, denominator);
    let rate: Taylor | null = null;
    const own = new Taylor((k) => {
      budget.check();
      rate ??= room.of(highest);
      return multiplyElements(c, rate.at(k - u.order), Q.rational(1, falling(k, u.order)));
    }, given);
    series.set(u.name, own);
    for (let j = 0; j < u.order; j += 1) all.set(slot(u.name, j), j === 0 ? own : new Taylor((k) => multiplyElements(c, own.at(k + j), Q.rational(falling(k + j, j)))));
  });
  for (const u of statement.unknowns) series.get(u.name)?.at(u.order);
  return { side, series };
}

/** n (n-1) ... (n-j+1). */
export function falling(n: number, j: number): bigint {
  let result = 1n;
  for (let k = 0; k < j; k += 1) result *= BigInt(n - k);
  return result;
}

const QUIET = 24;
const MOST_POWER = 2000;

/** As many coefficients as the terms asked for need, and the first term beyond; a solution that stops is tested in its equation and is then exact. */
export function solutionTerms(statement: DifferentialStatement, solution: RegularSolution, unknown: string, size: Pick<ExpansionProblem, 'terms' | 'order'>): SideResult {
  const { side, series } = solution;
  const c = side.context;
  const own = series.get(unknown) as Taylor;
  const terms: Term[] = [];
  let quiet = 0;
  let seen = 0;
  for (let k = 0; ; k += 1) {
    c.budget.check();
    const coefficient = own.at(k);
    const vanishes = isRational(coefficient) ? coefficient.num === 0n : c.field.isZero(coefficient) === 'yes';
    if (vanishes) {
      quiet += 1;
      if (quiet === QUIET && isExact(statement, solution, k)) break;
      if (quiet > QUIET && k > MOST_POWER) throw new Declined('undecided', 'The solution shows no further term up to a high power, and it could not be decided whether it ends; ask for fewer terms.');
      continue;
    }
    quiet = 0;
    terms.push({ exponent: Q.rational(k), coefficient });
    seen += 1;
    const beyond = size.terms !== undefined ? seen > size.terms : size.order !== undefined && Q.compare(Q.rational(k), size.order) >= 0;
    if (beyond) break;
  }
  const found = new Series(c.scale.local, finiteStream(terms), unnamed);
  return { context: c, series: found, ...takeTerms(c, terms.length > 0 ? found : Q.ZERO, size.terms, size.order), toVariable: side.toVariable };
}

/** Whether the polynomials found so far satisfy all equations identically. */
function isExact(statement: DifferentialStatement, solution: RegularSolution, degree: number): boolean {
  const { side, series } = solution;
  const c = side.context;
  const h = build.symbol(c.local);
  const polynomial = (name: string, derivative: number): Expression => {
    const own = series.get(name) as Taylor;
    const parts: Expression[] = [];
    for (let k = derivative; k <= degree; k += 1) {
      const value = multiplyElements(c, own.at(k), Q.rational(falling(k, derivative)));
      if (!(isRational(value) ? value.num === 0n : isZero(c, value))) parts.push(build.product(c.field.toExpression(value), build.power(h, k - derivative)));
    }
    return build.sum(...parts);
  };
  const known = new Map<string, Expression>();
  return statement.equations.every((equation) => {
    let tree = side.fromVariable(equation);
    for (const u of statement.unknowns) {
      for (let k = 0; k <= u.order; k += 1) {
        const key = slot(u.name, k);
        if (!known.has(key)) known.set(key, polynomial(u.name, k));
        tree = substitute(tree, key, known.get(key) as Expression);
      }
    }
    return c.field.isZero(c.field.fromExpression(tree)) === 'yes';
  });
}

