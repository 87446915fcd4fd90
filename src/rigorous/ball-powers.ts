/** Roots and powers of real balls. `null`: part of the ball lies outside the domain. */
import type { Rational } from '../expression/index.ts';
import { exp, log } from './ball-exponential.ts';
import { divide, multiply, powerInteger } from './ball-operations.ts';
import { byDerivative, increasing, RADIUS_PRECISION } from './ball-propagation.ts';
import { isExact, isNonNegative, isPositive } from './ball-sets.ts';
import { absoluteUpper, exponentOf, fromEnds, fromInteger, fromRational, lowerEnd, midpoint, negate, rounded, upperEnd, ZERO } from './ball.ts';
import type { Ball } from './ball.types.ts';
import { bitLength, rootFloor, squareRootFloor } from './bits.ts';

/** Square root; null unless every number of x is at least 0. */
export function sqrt(x: Ball, precision: number): Ball | null {
  return root(x, 2, precision);
}

function rootExact(x: Ball, n: number, precision: number): Ball {
  if (x.mid === 0n) return ZERO;
  let shift = Math.max(0, n * (precision + 2) - bitLength(x.mid));
  shift += (((x.exp - shift) % n) + n) % n;
  const radicand = x.mid << BigInt(shift);
  const value = n === 2 ? squareRootFloor(radicand) : rootFloor(radicand, n);
  return rounded(value, value ** BigInt(n) === radicand ? 0n : 1n, (x.exp - shift) / n, precision + 2);
}

/** Real n-th root, n >= 1; of negative numbers only where n is odd, null otherwise. */
export function root(x: Ball, n: number, precision: number): Ball | null {
  if (x.mid < 0n && n % 2 === 1) {
    const positive = root(negate(x), n, precision);
    return positive === null ? null : negate(positive);
  }
  if (isExact(x)) return x.mid < 0n ? null : rootExact(x, n, precision);
  if (!isNonNegative(x)) {
    if (n % 2 === 0) return null;
    const low = negate(rootExact(negate(lowerEnd(x)), n, Math.min(precision, 64)));
    return fromEnds(low, rootExact(upperEnd(x), n, Math.min(precision, 64)), precision);
  }
  if (x.rad << 6n > x.mid) return increasing((e, p) => rootExact(e, n, p), x, precision);
  const value = rootExact(midpoint(x), n, precision);
  // |f'| = f/(n x) at the lower end is largest there; f(lower) <= f(mid).
  const slope = divide(absoluteUpper(value), multiply(fromInteger(n), lowerEnd(x), RADIUS_PRECISION), RADIUS_PRECISION);
  return slope === null ? null : byDerivative(value, x, absoluteUpper(slope));
}

/** x^q for a rational q: by roots where the denominator is small, else exp(q log x). x >= 0 unless q is an integer; x > 0 where q < 0. */
export function powerRational(x: Ball, q: Rational, precision: number): Ball | null {
  if (q.den === 1n) return powerInteger(x, q.num, precision);
  if (q.den <= 16n && bitLength(q.num) < 12) {
    const base = root(x, Number(q.den), precision + bitLength(q.num) + 4);
    return base === null || (x.mid < 0n) ? null : powerInteger(base, q.num, precision);
  }
  if (q.num > 0n && !isPositive(x)) {
    if (!isNonNegative(x)) return null;
    if (isExact(x)) return ZERO;
    const high = powerRational(upperEnd(x), q, Math.min(precision, 64));
    return high === null ? null : fromEnds(ZERO, high, precision);
  }
  return power(x, fromRational(q, precision + 16), precision);
}

/** x^y = exp(y log x) for x > 0. */
export function power(x: Ball, y: Ball, precision: number): Ball | null {
  const extra = Math.max(0, exponentOf(y)) + 40;
  const logarithmOfBase = log(x, precision + extra);
  return logarithmOfBase === null ? null : exp(multiply(logarithmOfBase, y, precision + extra), precision);
}
