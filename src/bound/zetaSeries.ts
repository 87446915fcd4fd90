/**
 * Taylor series of h(s) = zeta(s) - 1/(s - 1), an entire function, by Euler-Maclaurin summation (DLMF 25.2.9 with the pole taken out):
 * h = sum_(n<N) n^-s + (N^(1-s) - 1)/(s - 1) + N^-s/2 + sum_(k=1..M) B_2k/(2k)! s (s+1) ... (s+2k-2) N^(1-s-2k) + R,
 * |R| <= |s + 2M + 1|/(Re s + 2M + 1) |term M + 1| (Backlund's estimate, from memory; Edwards, Riemann's Zeta Function, 6.4).
 */
import { Q } from '../expression/index.ts';
import { Declined } from '../outcome.ts';
import { type Ball, real } from '../rigorous/index.ts';
import type { RealSeries } from './holonomic.ts';

const BOUND_BITS = 64;
/** Radius of the disc on which the remainder R is bounded for its coefficients. */
const INNER = 2;

/** B_2k/(2k)!. */
const weightOf = (k: number): { readonly num: bigint; readonly den: bigint } => {
  let factorial = 1n;
  for (let i = 2; i <= 2 * k; i += 1) factorial *= BigInt(i);
  return Q.divide(real.bernoulliNumber(2 * k), Q.rational(factorial));
};

const isZero = (x: Ball): boolean => x.mid === 0n && x.rad === 0n;
const up = (x: Ball): Ball => real.upperEnd(real.absolute(x));

function exp(x: Ball, bits: number): Ball {
  const value = real.exp(x, bits);
  if (value === null) throw new Declined('undecided', 'The zeta function could not be bounded so far out; choose a smaller interval.');
  return value;
}

/** N^x upwards. */
function powerOf(N: number, x: Ball, bits: number): Ball {
  return N === 1 ? real.ONE : exp(real.multiply(x, real.log(real.fromInteger(N), bits) ?? real.ZERO, bits), bits);
}

/** |s (s+1) ... (s+m-1)| upwards for |s| <= size. */
function risingSize(size: Ball, m: number): Ball {
  let product = real.ONE;
  for (let i = 0; i < m; i += 1) product = real.upperEnd(real.multiply(product, real.add(size, real.fromInteger(i), BOUND_BITS), BOUND_BITS));
  return product;
}

/** |R| upwards on |s - centre| <= radius; null where Re s + 2M + 1 may not be positive. */
function restSize(centre: Ball, radius: Ball, N: number, M: number): Ball | null {
  const size = real.upperEnd(real.add(real.absolute(centre), radius, BOUND_BITS));
  const low = real.lowerEnd(real.subtract(centre, radius, BOUND_BITS));
  const gap = real.lowerEnd(real.add(low, real.fromInteger(2 * M + 1), BOUND_BITS));
  if (!real.isPositive(gap)) return null;
  const ratio = real.divide(real.add(size, real.fromInteger(2 * M + 1), BOUND_BITS), gap, BOUND_BITS);
  return ratio && up(real.multiply(ratio, termSize(size, low, N, M + 1), BOUND_BITS));
}
function termSize(size: Ball, low: Ball, N: number, k: number): Ball {
  const power = powerOf(N, real.subtract(real.fromInteger(1 - 2 * k), low, BOUND_BITS), BOUND_BITS);
  return up(real.multiply(real.multiply(real.fromRational(weightOf(k), BOUND_BITS), risingSize(size, 2 * k - 1), BOUND_BITS), power, BOUND_BITS));
}

/** |h| upwards on |s - centre| <= radius. */
function entireSize(centre: Ball, radius: Ball): Ball | null {
  const [N, M] = [3, 4 + Math.ceil(real.toDouble(radius) / 2)];
  const size = real.upperEnd(real.add(real.absolute(centre), radius, BOUND_BITS));
  const low = real.lowerEnd(real.subtract(centre, radius, BOUND_BITS));
  const rest = restSize(centre, radius, N, M);
  if (rest === null) return null;
  let sum = rest;
  for (let n = 1; n < N; n += 1) sum = real.add(sum, powerOf(n, real.negate(low), BOUND_BITS), BOUND_BITS);
  // |(e^(-L u) - 1)/u| <= L e^(L |u|).
  const L = real.log(real.fromInteger(N), BOUND_BITS) ?? real.ZERO;
  const u = real.upperEnd(real.add(real.absolute(real.subtract(centre, real.ONE, BOUND_BITS)), radius, BOUND_BITS));
  sum = real.add(sum, real.multiply(L, exp(real.multiply(L, u, BOUND_BITS), BOUND_BITS), BOUND_BITS), BOUND_BITS);
  sum = real.add(sum, powerOf(N, real.negate(low), BOUND_BITS), BOUND_BITS);
  for (let k = 1; k <= M; k += 1) sum = real.add(sum, termSize(size, low, N, k), BOUND_BITS);
  return up(sum);
}

/** Coefficients of h about a real centre > 0, and the factor of d^length in the rest for |d| <= reach. Null where the centre is too near to 1 without being 1, or too far out. */
export function zetaSeries(centre: Ball, reach: Ball, precision: number, length: number): RealSeries | null {
  const c = real.toDouble(centre);
  const D = real.toDouble(real.upperEnd(reach));
  if (!(c > 0.25) || c > 60 || !(D < 8)) return null;
  const u0 = real.subtract(centre, real.ONE, precision + 64);
  const atPole = isZero(u0);
  const lost = atPole ? 0 : Math.max(0, -Math.log2(Math.abs(real.toDouble(u0))));
  if (!(lost < 12)) return null;
  const work = precision + 64 + Math.ceil(lost * length);
  const N = Math.ceil(precision / 6) + 6;
  const M = N;
  const factorials: Ball[] = [real.ONE];
  for (let k = 1; k <= length; k += 1) factorials.push(real.multiply(factorials[k - 1] ?? real.ONE, real.fromInteger(k), work));
  /** Coefficients of n^-(centre + d) = n^-centre e^(-d log n). */
  const exponential = (L: Ball, start: Ball): Ball[] => {
    const list: Ball[] = [];
    let value = start;
    for (let k = 0; k <= length; k += 1) {
      list.push(value);
      value = real.divide(real.multiply(value, real.negate(L), work), real.fromInteger(k + 1), work) ?? real.ZERO;
    }
    return list;
  };
  const total: Ball[] = Array.from({ length }, (_, k) => (k === 0 ? real.ONE : real.ZERO));
  const add = (k: number, x: Ball): void => {
    if (k < length) total[k] = real.add(total[k] ?? real.ZERO, x, work);
  };
  for (let n = 2; n < N; n += 1) {
    const L = real.log(real.fromInteger(n), work) ?? real.ZERO;
    exponential(L, exp(real.negate(real.multiply(centre, L, work)), work)).forEach((x, k) => add(k, x));
  }
  const L = real.log(real.fromInteger(N), work) ?? real.ZERO;
  const last = exponential(L, exp(real.negate(real.multiply(centre, L, work)), work));
  if (atPole) {
    // (e^(-L d) - 1)/d.
    exponential(L, real.ONE).forEach((x, k) => {
      if (k > 0) add(k - 1, x);
    });
  } else {
    let previous = real.ZERO;
    for (let k = 0; k < length; k += 1) {
      const scaled = real.multiply(last[k] ?? real.ZERO, real.fromInteger(N), work);
      const next: Ball | null = real.divide(real.subtract(k === 0 ? real.subtract(scaled, real.ONE, work) : scaled, previous, work), u0, work);
      if (next === null) return null;
      add(k, next);
      previous = next;
    }
  }
  // 1/2 + sum B_2k/(2k)! N^(1-2k) (s)_(2k-1) as a polynomial in d, times N^-s.
  const polynomial: Ball[] = Array.from({ length }, () => real.ZERO);
  polynomial[0] = real.fromRational(Q.HALF, work);
  let rising: Ball[] = [real.ONE];
  const times = (list: readonly Ball[], a: number): Ball[] => {
    const root = real.add(centre, real.fromInteger(a), work);
    const product: Ball[] = [];
    for (let k = 0; k < Math.min(length, list.length + 1); k += 1) product.push(real.add(real.multiply(list[k] ?? real.ZERO, root, work), list[k - 1] ?? real.ZERO, work));
    return product;
  };
  rising = times(rising, 0);
  for (let k = 1; k <= M; k += 1) {
    const scale = real.fromRational(Q.divide(weightOf(k), Q.rational(BigInt(N) ** BigInt(2 * k - 1))), work);
    rising.forEach((x, i) => {
      polynomial[i] = real.add(polynomial[i] ?? real.ZERO, real.multiply(x, scale, work), work);
    });
    rising = times(times(rising, 2 * k - 1), 2 * k);
  }
  for (let i = 0; i < length; i += 1) for (let j = 0; i + j < length; j += 1) add(i + j, real.multiply(polynomial[i] ?? real.ZERO, last[j] ?? real.ZERO, work));
  const rest = restSize(centre, real.fromInteger(INNER), N, M);
  const radius = real.fromDouble(Math.max(4, 8 * D));
  const size = entireSize(centre, radius);
  const power = real.powerInteger(radius, length, BOUND_BITS);
  const share = real.divide(reach, radius, BOUND_BITS);
  const gap = share && real.lowerEnd(real.subtract(real.ONE, real.upperEnd(share), BOUND_BITS));
  const tail = size && power && gap ? real.divide(size, real.multiply(power, gap, BOUND_BITS), BOUND_BITS) : null;
  if (rest === null || tail === null) return null;
  const coefficients = total.map((x, k) => real.withRadius(x, real.scaleByPowerOfTwo(rest, -k)));
  return { coefficients, remainder: real.union(real.negate(up(tail)), up(tail), BOUND_BITS) };
}
