/** Products and quotients taken apart into a sign, a number, factors above and factors below. */
import { build, type Expression, Q, type Rational } from '../expression/index.ts';
import { splitExponential } from './exponential.ts';

/** e = sign * coefficient * product of numerator / product of denominator, without changing any value. */
export interface Factors {
  /** Not negative unless the sign says so; the sign is kept apart. */
  readonly negative: boolean;
  readonly coefficient: Rational;
  readonly numerator: readonly Expression[];
  readonly denominator: readonly Expression[];
}

export const NO_FACTORS: Factors = { negative: false, coefficient: Q.ONE, numerator: [], denominator: [] };

export function multiplyFactors(a: Factors, b: Factors): Factors {
  return {
    negative: a.negative !== b.negative,
    coefficient: Q.multiply(a.coefficient, b.coefficient),
    numerator: [...a.numerator, ...b.numerator],
    denominator: [...a.denominator, ...b.denominator],
  };
}

function invertFactors(a: Factors): Factors | null {
  if (Q.isZero(a.coefficient)) return null;
  return { negative: a.negative, coefficient: Q.reciprocal(a.coefficient), numerator: a.denominator, denominator: a.numerator };
}

/** Takes products, quotients, negations and integer powers of monomials apart; anything else is one factor. A zero denominator is left as it stands. */
export function factorsOf(e: Expression): Factors {
  switch (e.kind) {
    case 'number':
      return { negative: e.value.num < 0n, coefficient: Q.absolute(e.value), numerator: [], denominator: [] };
    case 'negation': {
      const inner = factorsOf(e.operand);
      return { ...inner, negative: !inner.negative };
    }
    case 'product':
      return e.factors.map(factorsOf).reduce(multiplyFactors, NO_FACTORS);
    case 'quotient': {
      const below = invertFactors(factorsOf(e.denominator));
      return below ? multiplyFactors(factorsOf(e.numerator), below) : { ...NO_FACTORS, numerator: [e] };
    }
    case 'call':
      return (e.function === 'exp' && e.args[0] ? exponentialFactors(e.args[0]) : null) ?? { ...NO_FACTORS, numerator: [e] };
    case 'power':
      return (e.base.kind === 'constant' && e.base.name === 'e' ? exponentialFactors(e.exponent) : powerFactors(e.base, e.exponent)) ?? { ...NO_FACTORS, numerator: [e] };
    default:
      return { ...NO_FACTORS, numerator: [e] };
  }
}

function exponentialFactors(exponent: Expression): Factors | null {
  if (exponent.kind === 'number' && exponent.value.num < 0n) {
    const below = build.number(Q.negate(exponent.value));
    return { ...NO_FACTORS, denominator: [build.isOneNumber(below) ? build.constant('e') : build.power(build.constant('e'), below)] };
  }
  const split = splitExponential(exponent);
  if (!split) return null;
  const start: Factors = split.rest ? { ...NO_FACTORS, numerator: [build.power(build.constant('e'), split.rest)] } : NO_FACTORS;
  return split.powers.map(({ base, exponent: e }) => (build.isOneNumber(e) ? factorsOf(base) : (powerFactors(base, e) ?? { ...NO_FACTORS, numerator: [build.power(base, e)] }))).reduceRight((all, f) => multiplyFactors(f, all), start);
}

/** base^exponent taken apart where that is an identity on the whole domain: integer exponents of monomials, and the sign of any rational exponent. */
export function powerFactors(base: Expression, exponent: Expression): Factors | null {
  if (exponent.kind === 'negation' || (exponent.kind === 'number' && exponent.value.num < 0n)) {
    const positive = exponent.kind === 'negation' ? exponent.operand : build.number(Q.negate(exponent.value));
    if (base.kind === 'constant' && base.name === 'e') return null;
    const inner = powerFactors(base, positive) ?? { ...NO_FACTORS, numerator: [build.power(base, positive)] };
    return invertFactors(inner);
  }
  if (exponent.kind !== 'number' || !Q.isInteger(exponent.value)) return null;
  const n = exponent.value.num;
  if (n === 0n) return NO_FACTORS;
  if (n === 1n) return factorsOf(base);
  const inner = factorsOf(base);
  const separable = base.kind === 'number' || base.kind === 'product' || base.kind === 'quotient' || base.kind === 'negation';
  if (!separable || n > 100000n) return null;
  const raise = (f: Expression): Expression => raised(f, n);
  if (!Q.isOne(inner.coefficient) && n * BigInt(inner.coefficient.num.toString(2).length + inner.coefficient.den.toString(2).length) > 100000n) return null;
  return {
    negative: inner.negative && n % 2n === 1n,
    coefficient: Q.power(inner.coefficient, n),
    numerator: inner.numerator.map(raise),
    denominator: inner.denominator.map(raise),
  };
}

/** f^n with a numeric exponent of f multiplied in. Valid for integers n, whatever the inner exponent. */
function raised(f: Expression, n: bigint): Expression {
  if (f.kind === 'power' && f.exponent.kind === 'number') {
    const exponent = Q.multiply(f.exponent.value, Q.rational(n));
    return Q.isOne(exponent) ? f.base : build.power(f.base, exponent);
  }
  return n === 1n ? f : build.power(f, n);
}

/** The sign that a writer puts in front, and what follows it. */
export function splitSign(e: Expression): { readonly negative: boolean; readonly magnitude: Expression } {
  switch (e.kind) {
    case 'negation':
      return { negative: true, magnitude: e.operand };
    case 'number':
      return e.value.num < 0n ? { negative: true, magnitude: build.number(Q.negate(e.value)) } : { negative: false, magnitude: e };
    case 'product': {
      const [first, ...rest] = e.factors;
      if (!first) return { negative: false, magnitude: e };
      const inner = splitSign(first);
      if (!inner.negative) return { negative: false, magnitude: e };
      const kept = inner.magnitude.kind === 'number' && Q.isOne(inner.magnitude.value) ? rest : [inner.magnitude, ...rest];
      return { negative: true, magnitude: build.product(...kept) };
    }
    case 'quotient': {
      const inner = splitSign(e.numerator);
      return inner.negative ? { negative: true, magnitude: { ...e, numerator: inner.magnitude } } : { negative: false, magnitude: e };
    }
    default:
      return { negative: false, magnitude: e };
  }
}
