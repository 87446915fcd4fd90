/** Sizes near the point: leading terms, and which of two functions is smaller. Everything is exact; what cannot be decided says so. */
import { build, dependsOn, type Expression, literalRational, Q, type Rational } from '../expression/index.ts';
import { expand, type Expansion } from '../expand/index.ts';
import type { Outcome } from '../outcome.ts';
import type { Setting } from './context.ts';
import { enclose } from './enclose.ts';

/** t^power * L^log, larger power meaning smaller. */
export interface Size {
  readonly power: Rational;
  readonly log: number;
}

/** Negative where a is the larger function near the point, positive where it is the smaller one. */
export function compareSizes(a: Size, b: Size): number {
  const byPower = Q.compare(a.power, b.power);
  return byPower !== 0 ? byPower : b.log - a.log;
}

export function expandIn(setting: Setting, f: Expression, request: { readonly terms: number } | { readonly order: Rational }): Outcome<Expansion> {
  return expand({ function: f, variable: build.symbol(setting.variable), point: setting.point, side: setting.side, assumptions: setting.assumptions, ...request }, setting.budget);
}

export type Leading =
  | { readonly kind: 'zero' }
  /** A pure power with logarithms: coefficient * t^power * L^log. */
  | { readonly kind: 'monomial'; readonly size: Size; readonly coefficient: Expression }
  /** On another scale; only quotients can be compared. */
  | { readonly kind: 'other' }
  | { readonly kind: 'undecided'; readonly reason: string; readonly needsTime: boolean };

/** Leading terms already found, by setting and by tree. */
const found = new WeakMap<Setting, WeakMap<Expression, Leading>>();

/** The leading term of a function at the point. */
export function leading(setting: Setting, f: Expression): Leading {
  const known = found.get(setting) ?? new WeakMap<Expression, Leading>();
  found.set(setting, known);
  const before = known.get(f);
  if (before) return before;
  const result = computeLeading(setting, f);
  known.set(f, result);
  return result;
}

function computeLeading(setting: Setting, f: Expression): Leading {
  const direct = monomialSize(setting, f);
  if (direct) return direct;
  const result = expandIn(setting, f, { terms: 1 });
  if (!result.ok) return { kind: 'undecided', reason: result.error.message, needsTime: result.error.code === 'over-budget' };
  const { terms, prefactor, exact } = result.value;
  const [first] = terms;
  if (!first) return exact ? { kind: 'zero' } : { kind: 'undecided', reason: 'No term of the difference was found.', needsTime: false };
  if (prefactor || first.power.kind !== 'number') return { kind: 'other' };
  if (first.scale && !isOscillation(first.scale)) return { kind: 'other' };
  if (first.scale) return { kind: 'monomial', size: { power: first.power.value, log: first.log }, coefficient: build.product(first.coefficient, first.scale) };
  return { kind: 'monomial', size: { power: first.power.value, log: first.log }, coefficient: first.coefficient };
}

/** Sines and cosines only: bounded, and not tending to 0, so that the power alone is the size. */
function isOscillation(e: Expression): boolean {
  switch (e.kind) {
    case 'call':
      return e.function === 'sin' || e.function === 'cos';
    case 'power':
      return e.exponent.kind === 'number' && e.exponent.value.num > 0n && isOscillation(e.base);
    case 'product':
      return e.factors.every(isOscillation);
    default:
      return false;
  }
}

/** Products and quotients of the variable's powers are read off the tree: no engine is needed for `3 x^2/8`. */
function monomialSize(setting: Setting, f: Expression): Leading | null {
  const direction = setting.point === 'inf' ? -1 : typeof setting.point === 'object' && setting.point.kind === 'number' && Q.isZero(setting.point.value) ? 1 : 0;
  if (direction === 0) return null;
  const parts = takeApart(f, setting.variable);
  if (!parts) return null;
  return { kind: 'monomial', size: { power: direction === 1 ? parts.power : Q.negate(parts.power), log: 0 }, coefficient: parts.coefficient };
}

/** f = coefficient * x^power with a coefficient free of x; null where f is not of this form by its structure, or the coefficient is 0. */
function takeApart(f: Expression, name: string): { readonly power: Rational; readonly coefficient: Expression } | null {
  switch (f.kind) {
    case 'symbol':
      if (f.name === name) return { power: Q.ONE, coefficient: build.number(1) };
      return { power: Q.ZERO, coefficient: f };
    case 'number':
      return Q.isZero(f.value) ? null : { power: Q.ZERO, coefficient: f };
    case 'negation': {
      const inner = takeApart(f.operand, name);
      return inner && { power: inner.power, coefficient: build.negation(inner.coefficient) };
    }
    case 'product': {
      let power = Q.ZERO;
      const coefficients: Expression[] = [];
      for (const factor of f.factors) {
        const inner = takeApart(factor, name);
        if (!inner) return null;
        power = Q.add(power, inner.power);
        if (!build.isOneNumber(inner.coefficient)) coefficients.push(inner.coefficient);
      }
      return { power, coefficient: build.product(...coefficients) };
    }
    case 'quotient': {
      const [above, below] = [takeApart(f.numerator, name), takeApart(f.denominator, name)];
      if (!above || !below) return null;
      return { power: Q.subtract(above.power, below.power), coefficient: build.isOneNumber(below.coefficient) ? above.coefficient : build.quotient(above.coefficient, below.coefficient) };
    }
    case 'power': {
      if (!dependsOn(f, name)) return { power: Q.ZERO, coefficient: f };
      const exponent = literalRational(f.exponent);
      if (!exponent || !Q.isInteger(exponent)) return null;
      const inner = takeApart(f.base, name);
      if (!inner || !build.isOneNumber(inner.coefficient)) return inner && exponent.num > 0n ? { power: Q.multiply(inner.power, exponent), coefficient: build.power(inner.coefficient, exponent) } : null;
      return { power: Q.multiply(inner.power, exponent), coefficient: inner.coefficient };
    }
    case 'constant':
    case 'call':
      return dependsOn(f, name) || (f.kind === 'call' && f.function !== 'factorial') ? null : { power: Q.ZERO, coefficient: f };
    default:
      return null;
  }
}

export type Comparison = 'smaller' | 'same' | 'larger' | { readonly undecided: string; readonly needsTime: boolean };

/** Size of a against b near the point: `smaller` means a/b -> 0, `same` that a/b stays between two positive bounds. a = 0 is smaller than everything. */
export function compare(setting: Setting, a: Expression, b: Expression): Comparison {
  const first = leading(setting, a);
  if (first.kind === 'zero') return 'smaller';
  if (first.kind === 'undecided') return { undecided: first.reason, needsTime: first.needsTime };
  const second = leading(setting, b);
  if (second.kind === 'zero') return 'larger';
  if (first.kind === 'monomial' && second.kind === 'monomial') {
    const order = compareSizes(first.size, second.size);
    return order > 0 ? 'smaller' : order < 0 ? 'larger' : 'same';
  }
  return compareQuotient(setting, build.quotient(a, b));
}

function compareQuotient(setting: Setting, quotient: Expression): Comparison {
  const ratio = leading(setting, quotient);
  if (ratio.kind === 'zero') return 'smaller';
  if (ratio.kind === 'undecided') return { undecided: ratio.reason, needsTime: ratio.needsTime };
  if (ratio.kind === 'monomial') {
    const order = compareSizes(ratio.size, { power: Q.ZERO, log: 0 });
    return order > 0 ? 'smaller' : order < 0 ? 'larger' : 'same';
  }
  const grown = leading(setting, build.call('log', build.call('abs', quotient)));
  if (grown.kind !== 'monomial' || compareSizes(grown.size, { power: Q.ZERO, log: 0 }) >= 0) return { undecided: 'The sizes of the two sides could not be compared.', needsTime: false };
  const sign = signOfExpression(grown.coefficient);
  if (sign === 0) return { undecided: 'The sizes of the two sides could not be compared.', needsTime: false };
  return sign < 0 ? 'smaller' : 'larger';
}

function signOfExpression(e: Expression): number {
  const range = enclose(e);
  return range === null ? 0 : Q.signOf(range.low) > 0 ? 1 : Q.signOf(range.high) < 0 ? -1 : 0;
}
