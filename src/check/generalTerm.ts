/**
 * A general term proved for all indices. The printed coefficient has a rational ratio c(k+1)/c(k), so the series satisfies a linear differential equation
 * D(T - 1) (S - first) = x^s N(T) S with T = (x d/dx - b)/s on terms x^(s k + b); the function is put into the same equation and the result proved zero.
 * Two power series with the same first terms that satisfy it are equal, since D has no zero at later indices (Stanley 1980, from memory: D-finite series).
 */
import { createField } from '../algebra/index.ts';
import { build, dependsOn, type Expression, type Linear, linearIn, literalRational, Q, type Rational, substitute } from '../expression/index.ts';
import type { Setting } from './context.ts';
import { differentiate } from '../functions/index.ts';

/** c(k+1)/c(k) = factor * product of above / product of below, each linear in k. */
interface Ratio {
  readonly factor: Expression;
  readonly above: readonly Factor[];
  readonly below: readonly Factor[];
}
/** slope k + shift, and what is added to it that does not hold k: the alpha of (alpha - k). */
interface Factor extends Linear {
  readonly parameter?: Expression;
}

const ONE: Ratio = { factor: build.number(1), above: [], below: [] };

const multiply = (a: Ratio, b: Ratio): Ratio => ({ factor: build.product(a.factor, b.factor), above: [...a.above, ...b.above], below: [...a.below, ...b.below] });
const invert = (a: Ratio): Ratio => ({ factor: build.quotient(build.number(1), a.factor), above: a.below, below: a.above });

/** c(k+1)/c(k) by structure; null where it is not of this kind. */
function ratioOf(c: Expression, index: string): Ratio | null {
  if (!dependsOn(c, index)) return ONE;
  switch (c.kind) {
    case 'negation':
      return ratioOf(c.operand, index);
    case 'product': {
      let all: Ratio = ONE;
      for (const f of c.factors) {
        const inner = ratioOf(f, index);
        if (!inner) return null;
        all = multiply(all, inner);
      }
      return all;
    }
    case 'quotient': {
      const [above, below] = [ratioOf(c.numerator, index), ratioOf(c.denominator, index)];
      return above && below && multiply(above, invert(below));
    }
    case 'power': {
      if (!dependsOn(c.base, index)) {
        const exponent = linearIn(c.exponent, index);
        return exponent && { ...ONE, factor: build.power(c.base, exponent.slope) };
      }
      const exponent = literalRational(c.exponent);
      const inner = ratioOf(c.base, index);
      if (!inner || !exponent || !Q.isInteger(exponent) || exponent.num > 8n || exponent.num < -8n) return null;
      let all: Ratio = ONE;
      for (let i = 0n; i < (exponent.num < 0n ? -exponent.num : exponent.num); i += 1n) all = multiply(all, exponent.num < 0n ? invert(inner) : inner);
      return all;
    }
    case 'call':
      return callRatio(c.function, c.args, index);
    default: {
      const linear = linearIn(c, index);
      return linear && { ...ONE, above: [{ slope: linear.slope, shift: Q.add(linear.shift, linear.slope) }], below: [linear] };
    }
  }
}

function callRatio(id: string, args: readonly Expression[], index: string): Ratio | null {
  const [first, second] = args;
  if (id === 'factorial' && first) return factorialRatio(linearIn(first, index));
  if (id === 'gamma' && first) {
    const linear = linearIn(first, index);
    return factorialRatio(linear && { slope: linear.slope, shift: Q.subtract(linear.shift, Q.ONE) });
  }
  if (id === 'doubleFactorial' && first) {
    const linear = linearIn(first, index);
    return linear && Q.equal(linear.slope, Q.rational(2)) ? { ...ONE, above: [{ slope: linear.slope, shift: Q.add(linear.shift, Q.rational(2)) }] } : null;
  }
  if (id === 'binomial' && first && second) {
    const [n, k] = [linearIn(first, index), linearIn(second, index)];
    if (k && !dependsOn(first, index)) return upperParameter(first, k);
    if (!n || !k) return null;
    const parts = [factorialRatio(n), factorialRatio(k), factorialRatio({ slope: Q.subtract(n.slope, k.slope), shift: Q.subtract(n.shift, k.shift) })];
    const [a, b, d] = parts;
    return a && b && d ? multiply(a, multiply(invert(b), invert(d))) : null;
  }
  return null;
}

/** Binomial(a, k + t) advances by (a - k - t)/(k + t + 1). */
function upperParameter(a: Expression, lower: Linear): Ratio | null {
  if (!Q.equal(lower.slope, Q.ONE)) return null;
  return { ...ONE, above: [{ slope: Q.MINUS_ONE, shift: Q.negate(lower.shift), parameter: a }], below: [{ slope: Q.ONE, shift: Q.add(lower.shift, Q.ONE) }] };
}

/** (s k + t)! advances by (s k + t + 1) ... (s k + t + s). */
function factorialRatio(linear: Linear | null): Ratio | null {
  if (!linear || !Q.isInteger(linear.slope) || linear.slope.num < 0n || linear.slope.num > 6n) return null;
  const factors: Linear[] = [];
  for (let j = 1n; j <= linear.slope.num; j += 1n) factors.push({ slope: linear.slope, shift: Q.add(linear.shift, Q.rational(j)) });
  return { ...ONE, above: factors };
}

/** A term c(k) x^(slope k + shift) in the variable. */
export interface GeneralTerm {
  readonly index: string;
  readonly coefficient: Expression;
  readonly power: Linear;
}

/** The term taken apart; null where it is not coefficient times a power with an exponent linear in the index. */
export function generalTermOf(body: Expression, index: string, variable: string): GeneralTerm | null {
  let power: Linear = { slope: Q.ZERO, shift: Q.ZERO };
  const visit = (e: Expression, sign: 1 | -1): Expression | null => {
    if (!dependsOn(e, variable)) return e;
    switch (e.kind) {
      case 'symbol':
        power = { ...power, shift: Q.add(power.shift, Q.rational(sign)) };
        return build.number(1);
      case 'power': {
        const exponent = linearIn(e.exponent, index);
        if (e.base.kind !== 'symbol' || !exponent) {
          const inner = e.base.kind === 'product' || e.base.kind === 'quotient' || e.base.kind === 'negation' ? scaled(e.base) : null;
          if (!inner || !exponent) return null;
          power = { slope: Q.add(power.slope, Q.multiply(Q.rational(sign), Q.multiply(exponent.slope, inner.times))), shift: Q.add(power.shift, Q.multiply(Q.rational(sign), Q.multiply(exponent.shift, inner.times))) };
          return build.power(inner.rest, e.exponent);
        }
        power = { slope: Q.add(power.slope, Q.multiply(Q.rational(sign), exponent.slope)), shift: Q.add(power.shift, Q.multiply(Q.rational(sign), exponent.shift)) };
        return build.number(1);
      }
      case 'negation': {
        const inner = visit(e.operand, sign);
        return inner && build.negation(inner);
      }
      case 'product': {
        const parts = e.factors.map((f) => visit(f, sign));
        const known = parts.filter((p) => p !== null);
        return known.length === parts.length ? build.product(...known) : null;
      }
      case 'quotient': {
        const [above, below] = [visit(e.numerator, sign), visit(e.denominator, sign === 1 ? -1 : 1)];
        return above && below && build.quotient(above, below);
      }
      default:
        return null;
    }
  };
  /** c x^m as a base: (-x^2)^k, (x/2)^k. */
  const scaled = (e: Expression): { readonly rest: Expression; readonly times: Rational } | null => {
    const saved = power;
    power = { slope: Q.ZERO, shift: Q.ZERO };
    const rest = visit(e, 1);
    const inside = power;
    power = saved;
    return rest && Q.isZero(inside.slope) && Q.isInteger(inside.shift) ? { rest, times: inside.shift } : null;
  };
  const coefficient = visit(body, 1);
  return coefficient && { index, coefficient, power };
}

/** The value at one index, simple numbers put in. */
export const atIndex = (e: Expression, index: string, k: number): Expression => substitute(e, index, build.number(k));

/** True where f is proved to be the sum over k >= lower of the term, `agreeing` first coefficients having been compared. */
export function isProved(f: Expression, term: GeneralTerm, lower: number, agreeing: number, setting: Setting): boolean {
  const ratio = ratioOf(term.coefficient, term.index);
  const { slope, shift } = term.power;
  if (!ratio || Q.signOf(slope) <= 0 || ratio.above.length > 6 || ratio.below.length > 6) return false;
  if (typeof setting.point !== 'object' || setting.point.kind !== 'number' || !Q.isZero(setting.point.value)) return false;
  // A later index at which the equation leaves a coefficient free would break uniqueness.
  const limit = Q.rational(lower + agreeing - 2);
  if (ratio.below.some((l) => l.parameter !== undefined || Q.isZero(l.slope) || Q.compare(Q.negate(Q.divide(l.shift, l.slope)), limit) >= 0)) return false;
  const x = setting.variable;
  const first = build.product(atIndex(term.coefficient, term.index, lower), build.power(build.symbol(x), Q.add(Q.multiply(slope, Q.rational(lower)), shift)));
  const left = applyAll(build.difference(f, first), ratio.below, term.power, Q.MINUS_ONE, x);
  const right = applyAll(f, ratio.above, term.power, Q.ZERO, x);
  if (!left || !right) return false;
  const residue = build.difference(left, build.product(ratio.factor, build.power(build.symbol(x), slope), right));
  const field = createField([...setting.assumptions, { kind: 'relation', left: build.symbol(x), relation: '>', right: build.number(0) }], setting.budget);
  try {
    return field.isZero(field.fromExpression(residue)) === 'yes';
  } catch {
    return false;
  }
}

/** Product of (slope (T + offset) + shift) over the factors, T = (x d/dx - b)/s, applied to g. */
function applyAll(g: Expression, factors: readonly Factor[], power: Linear, offset: Rational, x: string): Expression | null {
  let result: Expression = g;
  for (const l of factors) {
    const slope = differentiate(result, x);
    if (!slope) return null;
    const theta = build.product(build.symbol(x), slope);
    const scale = Q.divide(l.slope, power.slope);
    // l.slope * ((theta - b)/s + offset) + l.shift
    const constant = Q.add(Q.add(Q.multiply(Q.negate(power.shift), scale), Q.multiply(l.slope, offset)), l.shift);
    result = build.sum(build.product(build.number(scale), theta), build.product(l.parameter ? build.sum(build.number(constant), l.parameter) : build.number(constant), result));
  }
  return result;
}
