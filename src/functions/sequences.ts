/** Exact number sequences behind the coefficients: factorials, harmonic, Bernoulli, Euler, Stirling numbers. All are cached and grow on demand. */
import { Q, type Rational } from '../expression/index.ts';

/** A sequence given by its first member and the step from member k - 1 to member k; members are kept. */
export function recurrence<T>(first: T, step: (k: number, previous: T) => T): (k: number) => T {
  const members: T[] = [first];
  return (k) => {
    for (let i = members.length; i <= k; i++) members.push(step(i, members[i - 1] as T));
    return members[k] as T;
  };
}

/** A sequence whose member k needs all earlier members. */
export function fullRecurrence<T>(initial: readonly T[], step: (k: number, earlier: readonly T[]) => T): (k: number) => T {
  const members: T[] = [...initial];
  return (k) => {
    for (let i = members.length; i <= k; i++) members.push(step(i, members));
    return members[k] as T;
  };
}

export const factorial: (n: number) => bigint = recurrence(1n, (k, previous) => previous * BigInt(k));

/** n!! for n >= -1. */
const oddDouble = recurrence(1n, (k, previous) => previous * BigInt(2 * k - 1));
const evenDouble = recurrence(1n, (k, previous) => previous * BigInt(2 * k));
export const doubleFactorial = (n: number): bigint => (n % 2 === 0 ? evenDouble(n / 2) : oddDouble((n + 1) / 2));

const harmonicTables = new Map<number, (n: number) => Rational>();
/** sum of j^-order, j = 1..n. */
export function harmonicNumber(n: number, order = 1): Rational {
  let table = harmonicTables.get(order);
  if (!table) {
    table = recurrence(Q.ZERO, (k, previous) => Q.add(previous, Q.rational(1, BigInt(k) ** BigInt(order))));
    harmonicTables.set(order, table);
  }
  return table(n);
}

let tangents: bigint[] = [];
/** Tangent numbers T_1..T_n by Brent & Harvey, "Fast computation of Bernoulli, tangent and secant numbers" (2011), algorithm TangentNumbers: O(n^2) small products. */
function tangentNumber(n: number): bigint {
  if (n > tangents.length) {
    const size = Math.max(32, 2 * tangents.length, n);
    const t: bigint[] = [0n, 1n];
    for (let k = 2; k <= size; k++) t[k] = BigInt(k - 1) * (t[k - 1] as bigint);
    for (let k = 2; k <= size; k++) {
      for (let j = k; j <= size; j++) t[j] = BigInt(j - k) * (t[j - 1] as bigint) + BigInt(j - k + 2) * (t[j] as bigint);
    }
    tangents = t.slice(1);
  }
  return tangents[n - 1] as bigint;
}

let secants: bigint[] = [];
/** Secant numbers |E_{2n}|, the same source. */
function secantNumber(n: number): bigint {
  if (n >= secants.length) {
    const size = Math.max(32, 2 * secants.length, n);
    const s: bigint[] = [1n];
    for (let k = 1; k <= size; k++) s[k] = BigInt(k) * (s[k - 1] as bigint);
    for (let k = 1; k <= size; k++) {
      for (let j = k + 1; j <= size; j++) s[j] = BigInt(j - k) * (s[j - 1] as bigint) + BigInt(j - k + 1) * (s[j] as bigint);
    }
    secants = s;
  }
  return secants[n] as bigint;
}

const bernoulliCache: (Rational | undefined)[] = [];
/** B_n with B_1 = -1/2 (DLMF 24.2.1). */
export function bernoulli(n: number): Rational {
  if (n === 0) return Q.ONE;
  if (n === 1) return Q.rational(-1, 2);
  if (n % 2 === 1) return Q.ZERO;
  const cached = bernoulliCache[n];
  if (cached) return cached;
  const m = n / 2;
  const four = 1n << BigInt(n);
  const value = Q.rational((m % 2 === 1 ? 1n : -1n) * BigInt(n) * tangentNumber(m), four * (four - 1n));
  bernoulliCache[n] = value;
  return value;
}

/** E_n (DLMF 24.2.6). */
export const eulerNumber = (n: number): bigint => (n % 2 === 1 ? 0n : (n % 4 === 0 ? 1n : -1n) * secantNumber(n / 2));

const binomialRows = recurrence<readonly bigint[]>([1n], (_, row) => [1n, ...row.slice(1).map((value, i) => value + (row[i] as bigint)), 1n]);
export const binomial = (n: number, k: number): bigint => (k < 0 || k > n ? 0n : (binomialRows(n)[k] as bigint));

const stirlingRows = recurrence<readonly bigint[]>([1n], (n, row) => Array.from({ length: n + 1 }, (_, k) => (row[k - 1] ?? 0n) + BigInt(n - 1) * (row[k] ?? 0n)));
/** Unsigned Stirling numbers of the first kind (DLMF 26.8). */
export const stirlingCycle = (n: number, k: number): bigint => stirlingRows(n)[k] ?? 0n;

/** (a)_n for a rational a. */
export function risingFactorial(a: Rational, n: number): Rational {
  let value = Q.ONE;
  for (let i = 0; i < n; i++) value = Q.multiply(value, Q.add(a, Q.rational(i)));
  return value;
}
