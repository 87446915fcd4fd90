/**
 * Fixed-point kernels: a number v is stored as the integer nearest to v * 2^bits. Each kernel states its error in units of the last place (ulp = 2^-bits).
 * Doubles choose starting values only; what is returned does not depend on their accuracy except in cost.
 */
import { bitLength, divideFloor, magnitude, squareRootFloor } from './bits.ts';

/** e^x for |x| <= 1 in fixed point. Error below 2 ulp for the exact number x * 2^-bits. */
export function exponential(x: bigint, bits: number): bigint {
  const halvings = Math.max(1, Math.floor(Math.sqrt(bits) * 0.6));
  // N terms cost at most 2N+4 ulp in the sum; each squaring doubles the relative error and adds 2 ulp. N < work bits < 2^bitlength.
  const guard = halvings + 14 + bitLength(BigInt(bits));
  const work = bits + guard;
  const w = BigInt(work);
  const y = (x << BigInt(guard)) >> BigInt(halvings);
  const one = 1n << w;
  let term = one;
  let sum = one;
  for (let k = 1n; term !== 0n && term !== -1n; k += 1n) {
    term = ((term * y) >> w) / k;
    sum += term;
  }
  for (let i = 0; i < halvings; i += 1) sum = (sum * sum) >> w;
  return sum >> BigInt(guard);
}

/** [sin x, cos x] for |x| <= 1 in fixed point. Error of each below 2 ulp for the exact number x * 2^-bits. */
export function sineCosine(x: bigint, bits: number): readonly [bigint, bigint] {
  const halvings = Math.max(1, Math.floor(Math.sqrt(bits) * 0.5));
  // Both values are doubled `halvings` times: s' = 2sc, v' = 2s^2 with v = 1 - c. Each doubling multiplies an absolute error by at most 4 and adds 4 ulp.
  const guard = 2 * halvings + 14 + bitLength(BigInt(bits));
  const work = bits + guard;
  const w = BigInt(work);
  const y = (x << BigInt(guard)) >> BigInt(halvings);
  const square = (y * y) >> w;
  const one = 1n << w;
  let term = y;
  let sine = y;
  for (let k = 2n; term !== 0n && term !== -1n; k += 2n) {
    term = -((term * square) >> w) / (k * (k + 1n));
    sine += term;
  }
  let cosine = one;
  term = one;
  for (let k = 1n; term !== 0n && term !== -1n; k += 2n) {
    term = -((term * square) >> w) / (k * (k + 1n));
    cosine += term;
  }
  for (let i = 0; i < halvings; i += 1) {
    const s = sine;
    sine = (s * cosine) >> (w - 1n);
    cosine = one - ((s * s) >> (w - 1n));
  }
  return [sine >> BigInt(guard), cosine >> BigInt(guard)];
}

/** atanh(p/q) = p/q + (p/q)^3/3 + ... for |p/q| <= 1/2 in fixed point; atan where `alternating`. Error below (number of terms + 3) ulp, at most bits + 5. */
function inverseTangentSeries(p: bigint, q: bigint, bits: number, alternating: boolean): bigint {
  const w = BigInt(bits);
  const x = divideFloor(p << w, q);
  const square = (x * x) >> w;
  let power = x;
  let sum = 0n;
  for (let k = 1n; power !== 0n && power !== -1n; k += 2n) {
    sum += power / k;
    power = (power * square) >> w;
    if (alternating) power = -power;
  }
  return sum;
}

/** atanh(1/n) (or atan(1/n)) for an integer n >= 2 by whole divisions. Error below 2 * (number of terms) + 2 ulp, at most 2 * bits + 4. */
function inverseTangentOfReciprocal(n: bigint, bits: number, alternating: boolean): bigint {
  const square = n * n;
  let power = (1n << BigInt(bits)) / n;
  let sum = 0n;
  let negative = false;
  for (let k = 1n; power !== 0n; k += 2n) {
    sum = negative ? sum - power / k : sum + power / k;
    power /= square;
    if (alternating) negative = !negative;
  }
  return sum;
}

/** Cached by precision: recomputed with a third more bits when more are asked for. The returned value has an error below 1 ulp (floor of the exact value, up to one unit). */
function cached(compute: (bits: number) => bigint): (bits: number) => bigint {
  let have = 0;
  let value = 0n;
  return (bits) => {
    if (bits > have) {
      have = Math.max(256, bits + Math.floor(bits / 3));
      const guard = 2 * bitLength(BigInt(have)) + 24;
      value = compute(have + guard) >> BigInt(guard);
    }
    return value >> BigInt(have - bits);
  };
}

/** pi in fixed point: 16 atan(1/5) - 4 atan(1/239) (Machin 1706). Error below 2 ulp. */
export const piFixed = cached((bits) => 16n * inverseTangentOfReciprocal(5n, bits, true) - 4n * inverseTangentOfReciprocal(239n, bits, true));

/** log 2 in fixed point: 18 atanh(1/26) - 2 atanh(1/4801) + 8 atanh(1/8749). Error below 2 ulp. */
export const logTwoFixed = cached(
  (bits) =>
    18n * inverseTangentOfReciprocal(26n, bits, false) -
    2n * inverseTangentOfReciprocal(4801n, bits, false) +
    8n * inverseTangentOfReciprocal(8749n, bits, false),
);

/**
 * log(x * 2^-bits) for a number in [1/2, 2]. Error below 4 ulp.
 * A double y0 near log x is exact as a number; log x = y0 + 2 atanh((x e^-y0 - 1) / (x e^-y0 + 1)), and the last term is small.
 */
export function logarithm(x: bigint, bits: number): bigint {
  const guard = 16 + bitLength(BigInt(bits));
  const work = bits + guard;
  const one = 1n << BigInt(work);
  const scaled = x << BigInt(guard);
  const approximate = Math.log(Number(x >> BigInt(Math.max(0, bits - 60))) / 2 ** Math.min(bits, 60));
  const start = Number.isFinite(approximate) ? BigInt(Math.round(approximate * 2 ** 48)) : 0n;
  const y0 = work >= 48 ? start << BigInt(work - 48) : start >> BigInt(48 - work);
  const ratio = (scaled * exponential(-y0, work)) >> BigInt(work);
  const rest = 2n * inverseTangentSeries(ratio - one, ratio + one, work, false);
  return (y0 + rest) >> BigInt(guard);
}

/** atan(x * 2^-bits) for |x| <= 1. Error below 4 ulp; the start is a double, the rest atan((x cos y0 - sin y0) / (cos y0 + x sin y0)). */
export function inverseTangent(x: bigint, bits: number): bigint {
  const guard = 16 + bitLength(BigInt(bits));
  const work = bits + guard;
  const scaled = x << BigInt(guard);
  const approximate = Math.atan(Number(x >> BigInt(Math.max(0, bits - 60))) / 2 ** Math.min(bits, 60));
  const start = BigInt(Math.round(approximate * 2 ** 48));
  const y0 = work >= 48 ? start << BigInt(work - 48) : start >> BigInt(48 - work);
  const [sine, cosine] = sineCosine(y0, work);
  const w = BigInt(work);
  const numerator = ((scaled * cosine) >> w) - sine;
  const denominator = cosine + ((scaled * sine) >> w);
  return (y0 + inverseTangentSeries(numerator, denominator, work, true)) >> BigInt(guard);
}

/** Square root of x * 2^-bits >= 0. Error below 1 ulp (rounded down). */
export const squareRoot = (x: bigint, bits: number): bigint => squareRootFloor(x << BigInt(bits));

export { magnitude };
