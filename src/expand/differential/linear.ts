/** Linear equations of one unknown function as operators sum over i of h^i I_i(theta) with theta = h d/dh, about a point. */
import type { Element } from '../../algebra/types.ts';
import { build, dependsOn, type Expression, substitute } from '../../expression/index.ts';
import { Q } from '../../expression/index.ts';
import { differentiate } from '../../functions/index.ts';
import { Declined } from '../../outcome.ts';
import { addElements, type Context, isRational, isZero, multiplyElements, negateElement, Series } from '../../series/index.ts';
import { evaluate } from '../evaluate.ts';
import type { OpenSide } from '../open-side.ts';
import type { Polynomial } from './operator.ts';
import { type DifferentialStatement, slot } from './statement.ts';

/** sum over j of coefficients[j] y^(j) + free = 0. */
export interface LinearEquation {
  readonly coefficients: readonly Expression[];
  readonly free: Expression;
}

/** The equation of one unknown as a linear one; null where it is not linear. */
export function linearEquation(statement: DifferentialStatement): LinearEquation | null {
  const [equation] = statement.equations;
  const [unknown] = statement.unknowns;
  if (!equation || !unknown || statement.unknowns.length !== 1 || statement.equations.length !== 1) return null;
  const slots = Array.from({ length: unknown.order + 1 }, (_, k) => slot(unknown.name, k));
  const coefficients: Expression[] = [];
  for (const s of slots) {
    const derivative = differentiate(equation, s);
    if (!derivative || slots.some((other) => dependsOn(derivative, other))) return null;
    coefficients.push(derivative);
  }
  return { coefficients, free: slots.reduce((tree, s) => substitute(tree, s, build.number(0)), equation) };
}

/** Laurent coefficients in h, found as they are asked for; `lowest` is the first power with a coefficient that is not zero, null for zero. */
export interface Laurent {
  readonly lowest: number | null;
  readonly at: (power: number) => Element;
  /** The last power, where the coefficients are known to end; else null. */
  readonly highest: () => number | null;
}

const MOST_VANISHING = 200;

/** Rejects what has other powers of h than whole ones. */
export function laurentOf(side: OpenSide, e: Expression): Laurent {
  const { context: c, session } = side;
  const value = evaluate(session, side.fromVariable(e));
  if (!(value instanceof Series)) {
    const none = isZero(c, value);
    return { lowest: none ? null : 0, at: (power) => (power === 0 ? value : Q.ZERO), highest: () => 0 };
  }
  const refuse = (): never => {
    throw new Declined('no-expansion', 'A coefficient of the equation has no series in whole powers at this point; choose another point.');
  };
  if (value.element.kind !== 'local') return refuse();
  const known = new Map<number, Element>();
  let index = 0;
  let reached = -Infinity;
  const advance = (): boolean => {
    const term = value.stream.at(index);
    if (!term) {
      reached = Infinity;
      return false;
    }
    index += 1;
    if (term.coefficient instanceof Series || term.order || !isRational(term.exponent) || term.exponent.den !== 1n) return refuse();
    reached = Number(term.exponent.num);
    known.set(reached, term.coefficient);
    return true;
  };
  let lowest: number | null = null;
  for (let k = 0; k < MOST_VANISHING && lowest === null && advance(); k += 1) {
    const found = known.get(reached);
    if (found !== undefined && !isZero(c, found)) lowest = reached;
  }
  return {
    lowest,
    at: (power) => {
      while (reached < power && advance()) c.budget.check();
      return known.get(power) ?? Q.ZERO;
    },
    highest: () => {
      for (let k = 0; k < MOST_VANISHING && reached < Infinity; k += 1) advance();
      return reached === Infinity ? Math.max(0, ...known.keys()) : null;
    },
  };
}

/** h^(-shift) times the equation: sum over i >= 0 of h^i I_i(theta) y + right = 0. */
export interface EulerForm {
  readonly shift: number;
  /** Coefficients of I_i in theta, lowest first; I_0 is the indicial polynomial. */
  readonly operator: (i: number) => Polynomial;
  readonly right: (power: number) => Element;
  readonly rightLowest: number | null;
  /** Largest i with an I_i or a power of the right side that is not zero, where the coefficients are polynomials; else null. */
  readonly degree: () => number | null;
}

/** Rejects irregular singular points. */
export function eulerForm(side: OpenSide, equation: LinearEquation): EulerForm {
  const c = side.context;
  const parts = equation.coefficients.map((a) => laurentOf(side, a));
  const order = parts.length - 1;
  let shift = Infinity;
  parts.forEach((p, j) => {
    if (p.lowest !== null) shift = Math.min(shift, p.lowest - j);
  });
  const top = parts[order];
  if (!top || top.lowest === null || top.lowest - order !== shift) {
    throw new Declined('no-expansion', 'The point is an irregular singular point of the equation, where its solutions are in general no powers times series; choose another point.');
  }
  const fallings = fallingFactorials(c, order);
  const memo = new Map<number, Polynomial>();
  const operator = (i: number): Polynomial => {
    const known = memo.get(i);
    if (known) return known;
    const total: Element[] = Array.from({ length: order + 1 }, () => Q.ZERO);
    parts.forEach((p, j) => {
      const a = p.at(i + shift + j);
      (fallings[j] as Polynomial).forEach((b, k) => {
        total[k] = addElements(c, total[k] as Element, multiplyElements(c, a, b));
      });
    });
    memo.set(i, total);
    return total;
  };
  const free = laurentOf(side, equation.free);
  const degree = (): number | null => {
    const ends = [...parts.map((p, j) => (p.lowest === null ? -Infinity : (p.highest() ?? Infinity) - j)), free.lowest === null ? -Infinity : (free.highest() ?? Infinity)];
    const most = Math.max(...ends) - shift;
    return Number.isFinite(most) ? most : null;
  };
  return { shift, operator, right: (power) => free.at(power + shift), rightLowest: free.lowest === null ? null : free.lowest - shift, degree };
}

/** theta (theta - 1) ... (theta - j + 1) for j up to the order. */
function fallingFactorials(c: Context, order: number): Polynomial[] {
  const all: Polynomial[] = [[Q.ONE]];
  for (let j = 0; j < order; j += 1) {
    const last = all[j] as Polynomial;
    const next: Element[] = Array.from({ length: last.length + 1 }, () => Q.ZERO);
    last.forEach((a, k) => {
      next[k + 1] = addElements(c, next[k + 1] as Element, a);
      next[k] = addElements(c, next[k] as Element, negateElement(c, multiplyElements(c, a, Q.rational(j))));
    });
    all.push(next);
  }
  return all;
}
