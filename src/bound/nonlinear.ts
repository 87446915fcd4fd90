/**
 * Taylor series of functions with a differential equation that is not linear, by power-series recurrences. The factor of d^K in the rest is f^(K)(xi)/K! for some xi of the interval (Lagrange):
 * the same recurrence, started from the values on the whole interval, encloses it. For inverf, whose derivatives are polynomials in inverf with nonnegative coefficients times positive factors,
 * the rest at the far end is taken instead: no |d| makes it larger.
 */
import { Q } from '../expression/index.ts';
import { describe } from '../functions/index.ts';
import { type Ball, real } from '../rigorous/index.ts';
import type { RealSeries } from './holonomic.ts';

/** Coefficients of f, `count` of them, from its value at the centre (a set of values gives sets of coefficients); null where the equation is singular there. */
type Recurrence = (value: Ball, count: number, work: number) => Ball[] | null;

/** sum over i + j = n of a_i b_j. */
function convolution(a: readonly Ball[], b: readonly Ball[], n: number, work: number): Ball {
  let sum = real.ZERO;
  for (let i = 0; i <= n; i += 1) sum = real.add(sum, real.multiply(a[i] ?? real.ZERO, b[n - i] ?? real.ZERO, work), work);
  return sum;
}
/** The next coefficient of e^q from those of q as far as n: n E_n = sum j q_j E_(n-j). */
function nextExponential(q: readonly Ball[], e: readonly Ball[], n: number, work: number): Ball {
  let sum = real.ZERO;
  for (let j = 1; j <= n; j += 1) sum = real.add(sum, real.multiply(real.multiply(real.fromInteger(j), q[j] ?? real.ZERO, work), e[n - j] ?? real.ZERO, work), work);
  return real.divide(sum, real.fromInteger(n), work) ?? real.ZERO;
}

/** f' = sqrt(pi)/2 e^(f^2) (DLMF 7.17.1 differentiated). */
const inverseErf: Recurrence = (value, count, work) => {
  const half = real.scaleByPowerOfTwo(real.sqrt(real.pi(work), work) ?? real.ONE, -1);
  const f = [value];
  const q = [real.multiply(value, value, work)];
  const start = real.exp(q[0] ?? real.ZERO, work);
  if (start === null) return null;
  const e = [start];
  for (let n = 0; n + 1 < count; n += 1) {
    f.push(real.divide(real.multiply(half, e[n] ?? real.ZERO, work), real.fromInteger(n + 1), work) ?? real.ZERO);
    q.push(convolution(f, f, n + 1, work));
    e.push(nextExponential(q, e, n + 1, work));
  }
  return f;
};

/** P f' = 1 with P = (1 + f) e^f (DLMF 4.13.1 differentiated). */
const lambert: Recurrence = (value, count, work) => {
  const f = [value];
  const start = real.exp(value, work);
  if (start === null) return null;
  const e = [start];
  const p = [real.multiply(real.add(real.ONE, value, work), start, work)];
  const lead = p[0] ?? real.ZERO;
  if (real.containsZero(lead)) return null;
  for (let n = 0; n + 1 < count; n += 1) {
    let sum = n === 0 ? real.ONE : real.ZERO;
    for (let j = 1; j <= n; j += 1) sum = real.subtract(sum, real.multiply(real.multiply(p[j] ?? real.ZERO, real.fromInteger(n + 1 - j), work), f[n + 1 - j] ?? real.ZERO, work), work);
    const next = real.divide(sum, real.multiply(lead, real.fromInteger(n + 1), work), work);
    if (next === null) return null;
    f.push(next);
    e.push(nextExponential(f, e, n + 1, work));
    p.push(real.add(e[n + 1] ?? real.ZERO, convolution(f, e, n + 1, work), work));
  }
  return f;
};

/** (1 + f) f' = f (DLMF 4.13.13). */
const wrightOmega: Recurrence = (value, count, work) => {
  const f = [value];
  const lead = real.add(real.ONE, value, work);
  if (real.containsZero(lead)) return null;
  for (let n = 0; n + 1 < count; n += 1) {
    let sum = f[n] ?? real.ZERO;
    for (let j = 1; j <= n; j += 1) sum = real.subtract(sum, real.multiply(real.multiply(f[j] ?? real.ZERO, real.fromInteger(n + 1 - j), work), f[n + 1 - j] ?? real.ZERO, work), work);
    const next = real.divide(sum, real.multiply(lead, real.fromInteger(n + 1), work), work);
    if (next === null) return null;
    f.push(next);
  }
  return f;
};

const RECURRENCES: Readonly<Record<string, Recurrence>> = { erfinv: inverseErf, lambertW: lambert, wrightOmega };
export const hasRecurrence = (id: string): boolean => Object.hasOwn(RECURRENCES, id);

/** Pieces that are halved meet again at the same places, and ladders of terms come back to them. */
const values = new Map<string, Ball | null>();
const MOST_VALUES = 512;
function valueOf(id: string, others: readonly Ball[], x: Ball, bits: number): Ball | null {
  const key = [id, bits, ...[...others, x].map((b) => `${b.mid},${b.rad},${b.exp}`)].join('|');
  let value = values.get(key);
  if (value === undefined) {
    value = describe(id)?.encloseReal?.([...others, x], bits) ?? null;
    if (values.size >= MOST_VALUES) values.clear();
    values.set(key, value);
  }
  return value;
}

/** `others`: the constant arguments before the varying one, as numbers. All functions of the list are monotonic where they are real, so that values at two ends enclose those between. */
export function recurrenceSeries(id: string, others: readonly Ball[], centre: Ball, hull: Ball, reach: Ball, precision: number, length: number): RealSeries | null {
  const recurrence = RECURRENCES[id];
  if (!recurrence) return null;
  const work = precision + 40 + 2 * length;
  const at = (x: Ball): Ball | null => valueOf(id, others, x, work);
  const above = (x: Ball): Ball | null => valueOf(id, others, x, 80);
  const value = at(centre);
  const coefficients = value && recurrence(value, length, work);
  if (!coefficients) return null;
  if (id === 'erfinv') {
    const rest = inverseErfRest(at, coefficients, centre, reach, work);
    if (rest !== null) return { coefficients, remainder: real.union(real.negate(rest), rest, 64) };
  }
  const [low, high] = [above(real.lowerEnd(hull)), above(real.upperEnd(hull))];
  const all = low && high && recurrence(real.union(low, high, 64), length + 1, 64);
  const remainder = all?.[length];
  return remainder ? { coefficients, remainder } : null;
}

/** (f(|c| + D) - sum a_k D^k)/D^K with the coefficients about |c|; null where that argument is not below 1. */
function inverseErfRest(at: (x: Ball) => Ball | null, coefficients: readonly Ball[], centre: Ball, reach: Ball, work: number): Ball | null {
  const negative = real.isNegative(centre);
  if (!negative && !real.isNonNegative(centre)) return null;
  const D = real.upperEnd(reach);
  const far = real.add(real.absolute(centre), D, work);
  const value = real.compare(far, real.fromRational(Q.rational(4095, 4096), work)) === -1 ? at(far) : null;
  if (value === null || (D.mid === 0n && D.rad === 0n)) return null;
  // About -c the even coefficients change their sign, since the function is odd.
  const sum = coefficients.reduceRight((total, a, k) => real.add(negative && k % 2 === 0 ? real.negate(a) : a, real.multiply(D, total, work), work), real.ZERO);
  const power = real.powerInteger(D, coefficients.length, work);
  const rest = power && real.divide(real.subtract(value, sum, work), power, 64);
  return rest && real.upperEnd(real.absolute(rest));
}
