/** Exact numbers near a double: candidates for places that are then proved. */
import { build, type Expression, Q, type Rational } from '../expression/index.ts';

/** Exact numbers of the usual shapes within `width` of x: rationals, rational multiples of pi, square roots, logarithms and powers of e. */
export function exactNear(x: number, width: number): readonly Expression[] {
  const found: Expression[] = [];
  const offer = (value: number, spread: number, largest: bigint, make: (q: Rational) => Expression): void => {
    const q = simplest(value - spread, value + spread);
    if (q !== null && q.den <= largest && q.num <= 10_000n && q.num >= -10_000n) found.push(make(q));
  };
  const pi = Math.PI;
  offer(x, width, 1000n, (q) => build.number(q));
  if (x !== 0) {
    offer(x / pi, width / pi, 60n, (q) => build.product(build.number(q), build.constant('pi')));
    offer(x * x, 2 * Math.abs(x) * width + width * width, 200n, (q) => (x > 0 ? build.squareRoot(build.number(q)) : build.negation(build.squareRoot(build.number(q)))));
    if (Math.abs(x) < 50) offer(Math.exp(x), Math.exp(x) * width * 2, 200n, (q) => build.call('log', build.number(q)));
    offer(Math.log(Math.abs(x)), (2 * width) / Math.abs(x), 60n, (q) => (x > 0 ? build.call('exp', build.number(q)) : build.negation(build.call('exp', build.number(q)))));
  }
  return found;
}

/** The fraction with the smallest denominator in [a, b] (Stern-Brocot descent by continued fractions). */
function simplest(a: number, b: number): Rational | null {
  if (!(b >= a) || !Number.isFinite(a) || !Number.isFinite(b)) return null;
  if (a <= 0 && b >= 0) return Q.ZERO;
  if (b < 0) {
    const q = simplest(-b, -a);
    return q && Q.negate(q);
  }
  let [low, high] = [a, b];
  const digits: bigint[] = [];
  for (let depth = 0; depth < 40; depth += 1) {
    const whole = Math.floor(low);
    if (whole + 1 <= high || whole === low) {
      digits.push(BigInt(whole === low ? whole : whole + 1));
      let value = Q.rational(digits[digits.length - 1] ?? 0n);
      for (let k = digits.length - 2; k >= 0; k -= 1) value = Q.add(Q.rational(digits[k] ?? 0n), Q.reciprocal(value));
      return value;
    }
    digits.push(BigInt(whole));
    [low, high] = [1 / (high - whole), 1 / (low - whole)];
  }
  return null;
}
