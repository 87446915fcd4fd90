/** Taylor coefficients of polygamma functions at a real centre by Hurwitz zeta values, and their remainder on a real interval. */
import { type Ball, real } from '../rigorous/index.ts';
import type { RealSeries } from './holonomic.ts';

/**
 * zeta(s, a) = sum_(j>=0) (a + j)^-s for integers s >= 2 and a > 0, by Euler-Maclaurin summation (DLMF 25.11.28 with real s > 0: the remainder lies between zero and
 * the first term left out, because the summand is completely monotonic).
 */
export function hurwitzZeta(s: number, a: Ball, precision: number): Ball | null {
  const work = precision + 16;
  const far = Math.ceil(precision / 5) + 4;
  const start = real.toDouble(real.lowerEnd(a));
  if (!(start > 0)) return null;
  const direct = Math.max(0, Math.ceil(far - start));
  let sum = real.ZERO;
  for (let j = 0; j < direct; j += 1) {
    const term = real.powerInteger(real.add(a, real.fromInteger(j), work), -s, work);
    if (term === null) return null;
    sum = real.add(sum, term, work);
  }
  const b = real.add(a, real.fromInteger(direct), work);
  const inverse = real.divide(real.ONE, b, work);
  const lead = real.powerInteger(b, 1 - s, work);
  if (inverse === null || lead === null) return null;
  sum = real.add(sum, real.divide(lead, real.fromInteger(s - 1), work) ?? real.ZERO, work);
  let power = real.multiply(lead, inverse, work);
  sum = real.add(sum, real.scaleByPowerOfTwo(power, -1), work);
  // B_2i/(2i)! s (s+1) ... (s+2i-2) b^(1-s-2i): the factor beside B_2i is carried along.
  const square = real.multiply(inverse, inverse, work);
  let factor = real.multiply(real.multiply(power, inverse, work), real.fromInteger(s), work);
  factor = real.scaleByPowerOfTwo(factor, -1);
  for (let i = 1; i < 4 * precision; i += 1) {
    const bernoulli = real.bernoulliNumber(2 * i);
    const term = real.multiply(factor, real.fromRational(bernoulli, work), work);
    if (real.exponentOf(term) < real.exponentOf(sum) - precision - 2) return real.add(sum, real.union(real.ZERO, term, 64), precision + 8);
    sum = real.add(sum, term, work);
    const next = BigInt(s + 2 * i - 1) * BigInt(s + 2 * i);
    factor = real.divide(real.multiply(real.multiply(factor, square, work), real.fromInteger(next), work), real.fromInteger((2 * i + 1) * (2 * i + 2)), work) ?? real.ZERO;
    power = real.multiply(power, square, work);
  }
  return null;
}

/** psi(a) = log a - 1/(2a) - sum B_2i/(2i a^2i), remainder between zero and the first term left out (DLMF 5.11.2 and 5.11(ii)), after moving a to the right. */
function digammaAt(a: Ball, precision: number): Ball | null {
  const work = precision + 16;
  const start = real.toDouble(real.lowerEnd(a));
  if (!(start > 0)) return null;
  const steps = Math.max(0, Math.ceil(precision / 5 + 4 - start));
  let sum = real.ZERO;
  for (let j = 0; j < steps; j += 1) {
    const term = real.reciprocal(real.add(a, real.fromInteger(j), work), work);
    if (term === null) return null;
    sum = real.subtract(sum, term, work);
  }
  const b = real.add(a, real.fromInteger(steps), work);
  const [logarithm, inverse] = [real.log(b, work), real.reciprocal(b, work)];
  if (logarithm === null || inverse === null) return null;
  sum = real.add(sum, real.subtract(logarithm, real.scaleByPowerOfTwo(inverse, -1), work), work);
  const square = real.multiply(inverse, inverse, work);
  let power = square;
  for (let i = 1; i < 4 * precision; i += 1) {
    const bernoulli = real.bernoulliNumber(2 * i);
    const term = real.multiply(power, real.fromRational({ num: -bernoulli.num, den: bernoulli.den * BigInt(2 * i) }, work), work);
    if (real.exponentOf(term) < -precision - 4) return real.add(sum, real.union(real.ZERO, term, 64), precision + 8);
    sum = real.add(sum, term, work);
    power = real.multiply(power, square, work);
  }
  return null;
}

/** psi^(m)(c + d) = sum_k (-1)^(m+1+k) (m+k)!/k! zeta(m+k+1, c) d^k, psi^(0) = psi; remainder by zeta(s, xi) <= xi^-s + xi^(1-s)/(s-1). */
export function polygammaSeries(m: number, centre: Ball, lowest: Ball, precision: number, length: number): RealSeries | null {
  const coefficients: Ball[] = [];
  let weight = real.ONE;
  for (let i = 2; i <= m; i += 1) weight = real.multiply(weight, real.fromInteger(i), precision + 16);
  for (let k = 0; k < length; k += 1) {
    const value = m + k === 0 ? digammaAt(centre, precision) : hurwitzZeta(m + k + 1, centre, precision);
    if (value === null) return null;
    const signed = m + k === 0 || (m + 1 + k) % 2 === 0 ? value : real.negate(value);
    coefficients.push(real.multiply(signed, weight, precision + 8));
    weight = real.divide(real.multiply(weight, real.fromInteger(m + k + 1), precision + 16), real.fromInteger(k + 1), precision + 16) ?? real.ZERO;
  }
  const s = m + length + 1;
  const [first, second] = [real.powerInteger(lowest, -s, 64), real.powerInteger(lowest, 1 - s, 64)];
  if (first === null || second === null || !real.isPositive(lowest)) return null;
  const size = real.multiply(weight, real.add(first, real.divide(second, real.fromInteger(s - 1), 64) ?? real.ZERO, 64), 64);
  const remainder = real.union(real.ZERO, real.upperEnd(size), 64);
  return { coefficients, remainder: (m + 1 + length) % 2 === 0 ? remainder : real.negate(remainder) };
}
