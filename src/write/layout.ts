/** The arrangement of one term of an expansion as a person writes it: sign in front, one fraction, numbers before constants before symbols, positive powers on their own side of the bar. */
import { build, Q, type Expression, type Rational } from '../expression/index.ts';

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

export function invertFactors(a: Factors): Factors | null {
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
    case 'power':
      return powerFactors(e.base, e.exponent) ?? { ...NO_FACTORS, numerator: [e] };
    default:
      return { ...NO_FACTORS, numerator: [e] };
  }
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

/** Where a factor goes in a printed product: numbers, roots of numbers, constants, symbols, then the rest; sums and functions last. */
function rank(e: Expression): number {
  const base = e.kind === 'power' && !(e.base.kind === 'constant' && e.base.name === 'e') ? e.base : e;
  switch (base.kind) {
    case 'number':
      return e.kind === 'power' ? 1 : 0;
    case 'root':
      return base.radicand.kind === 'number' ? 1 : 3;
    case 'constant':
      return base.name === 'i' ? 2.5 : 2;
    case 'symbol':
      return 3;
    case 'sum':
      return 5;
    default:
      return 4;
  }
}

/** The tree of a monomial with one fraction bar. `last` are factors that stand at the end of the numerator (or of the denominator where they are inverted): the powers of the variable. */
export function arrange(factors: Factors, last: Factors = NO_FACTORS, placement: 'inside' | 'outside' = 'inside'): Expression {
  const negative = factors.negative !== last.negative;
  const coefficient = Q.multiply(factors.coefficient, last.coefficient);
  const ordered = (list: readonly Expression[]): Expression[] => [...list].sort((a, b) => rank(a) - rank(b));
  const [leading, trailing] = [ordered(factors.numerator), [...last.numerator]];
  const numerator = mergePowers([...leading, ...trailing]);
  const denominator = mergePowers([...ordered(factors.denominator), ...last.denominator]);
  const magnitude = placement === 'outside' ? outside(coefficient, numerator, denominator) : inside(coefficient, numerator, denominator);
  return negative ? build.negation(magnitude) : magnitude;
}

function withNumber(value: bigint, factors: readonly Expression[]): Expression {
  return build.product(...(value === 1n && factors.length > 0 ? [] : [build.number(value)]), ...factors);
}

function inside(coefficient: Rational, numerator: readonly Expression[], denominator: readonly Expression[]): Expression {
  const [only] = denominator;
  if (Q.isOne(coefficient) && numerator.length === 0 && denominator.length === 1 && only?.kind === 'power' && only.exponent.kind === 'number' && !Q.isInteger(only.exponent.value)) {
    return build.power(only.base, Q.negate(only.exponent.value));
  }
  const above = withNumber(coefficient.num, numerator);
  if (coefficient.den === 1n && denominator.length === 0) return above;
  return build.quotient(above, withNumber(coefficient.den, denominator));
}

function outside(coefficient: Rational, numerator: readonly Expression[], denominator: readonly Expression[]): Expression {
  if (coefficient.den === 1n || numerator.length === 0) return inside(coefficient, numerator, denominator);
  const front = build.quotient(build.number(coefficient.num), withNumber(coefficient.den, denominator));
  return build.product(front, ...numerator);
}

/** Neighbouring powers of one base with numeric exponents become one power; a factor that cancels disappears. */
function mergePowers(list: readonly Expression[]): Expression[] {
  const merged: Expression[] = [];
  for (const factor of list) {
    const previous = merged.at(-1);
    const joined = previous ? joinPowers(previous, factor) : null;
    if (joined) merged[merged.length - 1] = joined;
    else merged.push(factor);
  }
  return merged;
}

function joinPowers(a: Expression, b: Expression): Expression | null {
  const part = (e: Expression): { base: Expression; exponent: Rational } =>
    e.kind === 'power' && e.exponent.kind === 'number' ? { base: e.base, exponent: e.exponent.value } : { base: e, exponent: Q.ONE };
  const [x, y] = [part(a), part(b)];
  if (x.base.kind !== 'symbol' || y.base.kind !== 'symbol' || x.base.name !== y.base.name) return null;
  const exponent = Q.add(x.exponent, y.exponent);
  return Q.isOne(exponent) ? x.base : build.power(x.base, exponent);
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
