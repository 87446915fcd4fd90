/** Recognising exact values in expressions, as `value` rules need it: rationals, rational multiples of pi, square roots. */
import { build, type Expression, joinRationals, Q, type Rational, rationalOf } from '../expression/index.ts';

/** An integer of moderate size (|n| at most `limit`), as a JavaScript number. */
export function asInteger(e: Expression, limit = 100000): number | null {
  const value = rationalOf(e);
  return value && Q.isInteger(value) && Q.compare(Q.absolute(value), Q.rational(limit)) <= 0 ? Number(value.num) : null;
}

/** q where e = q * base, base being recognised by `isBase`; q = 0 for zero. */
function multipleOf(e: Expression, isBase: (e: Expression) => boolean, depth = 40): Rational | null {
  if (depth < 0) return null;
  if (isBase(e)) return Q.ONE;
  switch (e.kind) {
    case 'number':
      return Q.isZero(e.value) ? Q.ZERO : null;
    case 'negation': {
      const inner = multipleOf(e.operand, isBase, depth - 1);
      return inner && Q.negate(inner);
    }
    case 'sum':
      return joinRationals(e.terms, Q.ZERO, Q.add, (term) => multipleOf(term, isBase, depth - 1));
    case 'product': {
      let found: Rational | null = null;
      let scale = Q.ONE;
      for (const factor of e.factors) {
        const plain = rationalOf(factor);
        if (plain) {
          scale = Q.multiply(scale, plain);
          continue;
        }
        const inner: Rational | null = found ? null : multipleOf(factor, isBase, depth - 1);
        if (!inner) return null;
        found = inner;
      }
      return found && Q.multiply(scale, found);
    }
    case 'quotient': {
      const numerator = multipleOf(e.numerator, isBase, depth - 1);
      const denominator = rationalOf(e.denominator);
      return numerator && denominator && !Q.isZero(denominator) ? Q.divide(numerator, denominator) : null;
    }
    default:
      return null;
  }
}

/** q where e = q pi. */
export const asMultipleOfPi = (e: Expression): Rational | null => multipleOf(e, (part) => part.kind === 'constant' && part.name === 'pi');

/** q where e = q i pi (either order of the factors). */
export function asMultipleOfImaginaryPi(e: Expression): Rational | null {
  const isUnit = (part: Expression): boolean =>
    part.kind === 'product' && part.factors.length === 2 && part.factors.some((f) => f.kind === 'constant' && f.name === 'i') && part.factors.some((f) => f.kind === 'constant' && f.name === 'pi');
  const direct = multipleOf(e, isUnit);
  if (direct) return direct;
  if (e.kind === 'negation') {
    const inner = asMultipleOfImaginaryPi(e.operand);
    return inner && Q.negate(inner);
  }
  if (e.kind === 'quotient') {
    const inner = asMultipleOfImaginaryPi(e.numerator);
    const denominator = rationalOf(e.denominator);
    return inner && denominator && !Q.isZero(denominator) ? Q.divide(inner, denominator) : null;
  }
  if (e.kind === 'product') {
    const imaginary = e.factors.findIndex((f) => f.kind === 'constant' && f.name === 'i');
    if (imaginary < 0) return null;
    return asMultipleOfPi(build.product(...e.factors.filter((_, i) => i !== imaginary)));
  }
  return null;
}

/** sign(e) e^2 where e is a rational times a square root of a rational; null otherwise. */
export function signedSquare(e: Expression, depth = 12): Rational | null {
  if (depth < 0) return null;
  const plain = rationalOf(e);
  if (plain) return Q.multiply(plain, Q.absolute(plain));
  switch (e.kind) {
    case 'negation': {
      const inner = signedSquare(e.operand, depth - 1);
      return inner && Q.negate(inner);
    }
    case 'product':
      return joinRationals(e.factors, Q.ONE, Q.multiply, (factor) => signedSquare(factor, depth - 1));
    case 'quotient': {
      const numerator = signedSquare(e.numerator, depth - 1);
      const denominator = signedSquare(e.denominator, depth - 1);
      return numerator && denominator && !Q.isZero(denominator) ? Q.divide(numerator, denominator) : null;
    }
    case 'power': {
      const exponent = rationalOf(e.exponent);
      const base = rationalOf(e.base);
      if (!exponent || !base || base.num <= 0n || exponent.den !== 2n || Q.compare(Q.absolute(exponent), Q.rational(64)) > 0) return null;
      return Q.power(base, exponent.num);
    }
    default:
      return null;
  }
}

export const piTimes = (q: Rational): Expression => {
  if (Q.isZero(q)) return build.number(0);
  const pi = build.constant('pi');
  const size = Q.absolute(q);
  const scaled = size.num === 1n ? pi : build.product(build.number(size.num), pi);
  const value = size.den === 1n ? scaled : build.quotient(scaled, build.number(size.den));
  return q.num < 0n ? build.negation(value) : value;
};

/** sqrt(n) * q as a tree, without needless factors. */
export function rootTimes(q: Rational, radicand: number): Expression {
  if (Q.isZero(q)) return build.number(0);
  if (radicand === 1) return build.number(q);
  const root = build.squareRoot(build.number(radicand));
  return Q.isOne(q) ? root : build.product(build.number(q), root);
}
export const isConstant = (e: Expression, name: string): boolean => e.kind === 'constant' && e.name === name;
