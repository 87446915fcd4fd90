/** Named constants as real balls, cached by precision. */
import { pi } from './ball-circular.ts';
import { exp, log, logTwo } from './ball-exponential.ts';
import { add, divide, multiply, powerInteger, subtract } from './ball-operations.ts';
import { sqrt } from './ball-powers.ts';
import { fromInteger, fromRational, ONE, round, rounded, scaleByPowerOfTwo, withRadius, ZERO } from './ball.ts';
import type { Ball } from './ball.types.ts';

function cached(compute: (precision: number) => Ball): (precision: number) => Ball {
  let have = 0;
  let value: Ball = ZERO;
  return (precision) => {
    if (precision > have) {
      have = Math.max(128, precision + (precision >> 2));
      value = compute(have + 16);
    }
    return round(value, precision);
  };
}

function defined(x: Ball | null): Ball {
  if (x === null) throw new Error('a constant was computed from an undefined value');
  return x;
}

/** Euler's number. */
export const e = cached((p) => defined(exp(ONE, p)));

/**
 * Euler's constant by algorithm B1 of Brent & McMillan, Math. Comp. 34 (1980):
 * gamma = U/V - log n + error, U = sum (n^k/k!)^2 (H_k - log n) taken with the logarithm outside, V = sum (n^k/k!)^2; 0 < error < pi e^(-4n).
 */
export const eulerGamma = cached((p) => {
  const n = BigInt(Math.ceil(p * 0.1733) + 4);
  const bits = p + 24 + Math.ceil(Number(n) * 3);
  const one = 1n << BigInt(bits);
  // Terms b_k = (n^k/k!)^2 and a_k = b_k H_k in fixed point, by b_k = b_(k-1) n^2/k^2 and a_k = (a_(k-1) n^2/k + b_k)/k.
  let b = one;
  let a = 0n;
  let sumA = 0n;
  let sumB = one;
  let count = 0n;
  for (let k = 1n; b !== 0n || k <= n; k += 1n) {
    b = (b * n * n) / (k * k);
    a = ((a * n * n) / k + b) / k;
    sumA += a;
    sumB += b;
    count = k;
  }
  // Truncation in every b_k is below (1 + its share of the predecessor's), which a factor e^(2n) covers; the same for a_k with one more factor count.
  // The last b is below one ulp and k > 2n there, so the tail is below the same bound.
  const slack = (count + 2n) * (count + 2n) * (1n << BigInt(Math.ceil(Number(n) * 2.89) + 2));
  const quotient = defined(divide({ mid: sumA, rad: slack, exp: -bits }, { mid: sumB, rad: slack, exp: -bits }, p + 16));
  const tail = defined(exp(fromInteger(-4n * n), 40));
  return withRadius(subtract(quotient, defined(log(fromInteger(n), p + 16)), p), multiply(fromInteger(4), tail, 40));
});

/** Catalan's constant: pi/8 log(2 + sqrt 3) + 3/8 sum 1/((2k+1)^2 C(2k,k)) (Ramanujan). Terms fall by a factor below 1/4 + 1/(4k). */
export const catalan = cached((p) => {
  const bits = p + 16;
  // The reciprocal central binomial by 1/C(2k,k) = 1/C(2k-2,k-1) * k/(2(2k-1)).
  let reciprocal = 1n << BigInt(bits);
  let sum = reciprocal;
  let terms = 1n;
  for (let k = 1n; reciprocal !== 0n; k += 1n) {
    reciprocal = (reciprocal * k) / (2n * (2n * k - 1n));
    sum += reciprocal / ((2n * k + 1n) * (2n * k + 1n));
    terms += 1n;
  }
  const series: Ball = { mid: 3n * sum, rad: 9n * terms + 9n, exp: -bits - 3 };
  const root = defined(sqrt(fromInteger(3), p + 8));
  const first = scaleByPowerOfTwo(multiply(pi(p + 8), defined(log(add(fromInteger(2), root, p + 8), p + 8)), p + 8), -3);
  return add(first, series, p);
});

/**
 * zeta(s) for integers s >= 2: Borwein's alternating sum (Canadian Math. Soc. Conf. Proc. 27 (2000), algorithm 2)
 * zeta(s) = -1/(d_n (1 - 2^(1-s))) sum_(k<n) (-1)^k (d_k - d_n)/(k+1)^s + error, |error| <= 3/(3 + sqrt 8)^n / (1 - 2^(1-s)), d_k partial sums of n (n+i-1)! 4^i/((n-i)! (2i)!).
 */
function zetaPositive(s: number, p: number): Ball {
  if (s > p + 4) return withRadius(ONE, { mid: 1n, rad: 0n, exp: 1 - s });
  const n = Math.ceil((p + 8) * 0.3933) + 4;
  const weights = borweinWeights(n);
  const last = weights[n] ?? 1n;
  const bits = p + 16;
  let sum = 0n;
  const order = BigInt(s);
  for (let k = 0; k < n; k += 1) {
    const term = (((weights[k] ?? 0n) - last) << BigInt(bits)) / BigInt(k + 1) ** order;
    sum += k % 2 === 0 ? term : -term;
  }
  // Each division loses less than one unit; all are then divided by d_n (1 - 2^(1-s)) >= d_n/2.
  const scaled = -((sum << BigInt(s - 1)) / (last * ((1n << BigInt(s - 1)) - 1n)));
  const value: Ball = { mid: scaled, rad: BigInt(2 * n) + 4n, exp: -bits };
  // 6/(3 + sqrt 8)^n: log2(3 + sqrt 8) > 2.543.
  return rounded(value.mid, value.rad + (1n << BigInt(Math.max(0, bits + 3 - Math.floor(2.543 * n)))), -bits, p);
}

const weightCache = new Map<number, readonly bigint[]>();
function borweinWeights(n: number): readonly bigint[] {
  const known = weightCache.get(n);
  if (known) return known;
  const size = BigInt(n);
  // term_i = n (n+i-1)! 4^i / ((n-i)! (2i)!), an integer; term_0 = 1.
  let term = 1n;
  let sum = 1n;
  const weights = [sum];
  for (let i = 1n; i <= size; i += 1n) {
    term = (term * (size + i - 1n) * (size - i + 1n) * 4n) / ((2n * i - 1n) * (2n * i));
    sum += term;
    weights.push(sum);
  }
  if (weightCache.size > 16) weightCache.clear();
  weightCache.set(n, weights);
  return weights;
}

const zetaCache = new Map<number, Ball & { readonly precision: number }>();

/** Riemann's zeta at an integer s other than 1: exact rationals (as balls) at s <= 0, enclosures above. */
export function zeta(s: number, precision: number): Ball {
  if (!Number.isInteger(s) || s === 1) throw new RangeError('zeta has no value here');
  if (s <= 0) {
    // zeta(0) = -1/2; zeta(-n) = -B_(n+1)/(n+1).
    const bernoulli = bernoulliNumber(1 - s);
    return s === 0 ? { mid: -1n, rad: 0n, exp: -1 } : fromRational({ num: -bernoulli.num, den: bernoulli.den * BigInt(1 - s) }, precision);
  }
  const known = zetaCache.get(s);
  if (known && known.precision >= precision) return round(known, precision);
  const value = zetaPositive(s, precision + 8);
  if (zetaCache.size > 2000) zetaCache.clear();
  zetaCache.set(s, { ...value, precision });
  return round(value, precision);
}

const bernoulliList: { num: bigint; den: bigint }[] = [{ num: 1n, den: 1n }];
/** Bernoulli number B_n (B_1 = -1/2), exact: numerators over the common denominator of the tangent numbers. */
export function bernoulliNumber(n: number): { readonly num: bigint; readonly den: bigint } {
  if (n === 1) return { num: -1n, den: 2n };
  if (n % 2 === 1) return { num: 0n, den: 1n };
  const half = n / 2;
  if (half >= bernoulliList.length) growBernoulli(Math.max(32, 2 * half));
  return bernoulliList[half] ?? { num: 0n, den: 1n };
}

/** Tangent numbers T_k by Knuth & Buckholtz (Math. Comp. 21 (1967)); B_2k = (-1)^(k-1) 2k T_k / (4^k (4^k - 1)). */
function growBernoulli(count: number): void {
  const tangent: bigint[] = [0n, 1n];
  for (let k = 2; k <= count; k += 1) tangent.push(BigInt(k - 1) * (tangent[k - 1] ?? 0n));
  for (let k = 2; k <= count; k += 1) {
    for (let j = k; j <= count; j += 1) tangent[j] = BigInt(j - k) * (tangent[j - 1] ?? 0n) + BigInt(j - k + 2) * (tangent[j] ?? 0n);
  }
  for (let k = bernoulliList.length; k <= count; k += 1) {
    const four = 1n << BigInt(2 * k);
    const num = BigInt(2 * k) * (tangent[k] ?? 0n) * (k % 2 === 1 ? 1n : -1n);
    const den = four * (four - 1n);
    const common = greatestCommonDivisor(num < 0n ? -num : num, den);
    bernoulliList.push({ num: num / common, den: den / common });
  }
}

function greatestCommonDivisor(a: bigint, b: bigint): bigint {
  let x = a;
  let y = b;
  while (y !== 0n) [x, y] = [y, x % y];
  return x;
}

/**
 * Glaisher's constant A. From int_0^(1/2) log Gamma(1+x) dx = -1/2 - 7/24 log 2 + 1/4 log pi + 3/2 log A
 * and log Gamma(1+x) = -gamma x + sum_(k>=2) zeta(k) (-x)^k/k.
 */
export const glaisher = cached((p) => {
  const work = p + 16;
  let sum = scaleByPowerOfTwo(multiply(eulerGamma(work), fromInteger(-1), work), -3);
  for (let k = 2; k <= work; k += 1) {
    const term = defined(divide(zeta(k, work), fromInteger(BigInt(k) * BigInt(k + 1)), work));
    sum = add(sum, scaleByPowerOfTwo(k % 2 === 0 ? term : multiply(term, fromInteger(-1), work), -k - 1), work);
  }
  sum = withRadius(sum, { mid: 1n, rad: 0n, exp: -work });
  const logs = subtract(defined(divide(multiply(fromInteger(7), logTwo(work), work), fromInteger(24), work)), scaleByPowerOfTwo(defined(log(pi(work), work)), -2), work);
  const total = add(add(scaleByPowerOfTwo(ONE, -1), logs, work), sum, work);
  return defined(exp(defined(divide(scaleByPowerOfTwo(total, 1), fromInteger(3), work)), p));
});

export { logTwo, pi, powerInteger };
