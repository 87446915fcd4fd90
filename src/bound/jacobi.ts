/**
 * Taylor series of sn, cn, dn in the argument, for a fixed real modulus with |k| <= 1: sn' = cn dn, cn' = -sn dn, dn' = -k^2 sn cn (DLMF 22.13.1 - 22.13.3) by recurrence from the three values.
 * The factor of d^K in the rest is f^(K)(xi)/K! for some xi in reach (Lagrange); the same recurrence, started from sets that hold the three functions all over it, encloses that.
 * Those sets: the values at the centre widened by the reach, since no derivative exceeds 1 (k^2 for dn), and what DLMF 22.4 allows: |sn|, |cn| <= 1, sqrt(1 - k^2) <= dn <= 1.
 */
import { describe } from '../functions/index.ts';
import { type Ball, real } from '../rigorous/index.ts';
import type { RealSeries } from './holonomic.ts';

export type JacobiName = 'jacobiSn' | 'jacobiCn' | 'jacobiDn';
export const isJacobi = (id: string): id is JacobiName => id === 'jacobiSn' || id === 'jacobiCn' || id === 'jacobiDn';
const BOUND_BITS = 64;

type Triple = readonly [readonly Ball[], readonly Ball[], readonly Ball[]];

function recurrence(start: readonly [Ball, Ball, Ball], kSquared: Ball, count: number, work: number): Triple {
  const [s, c, d] = start.map((value) => [value]) as [Ball[], Ball[], Ball[]];
  const product = (a: readonly Ball[], b: readonly Ball[], n: number): Ball => {
    let sum = real.ZERO;
    for (let i = 0; i <= n; i += 1) sum = real.add(sum, real.multiply(a[i] ?? real.ZERO, b[n - i] ?? real.ZERO, work), work);
    return sum;
  };
  for (let n = 0; n + 1 < count; n += 1) {
    const over = (x: Ball): Ball => real.divide(x, real.fromInteger(n + 1), work) ?? real.ZERO;
    const next = [product(c, d, n), real.negate(product(s, d, n)), real.negate(real.multiply(kSquared, product(s, c, n), work))].map(over);
    s.push(next[0] ?? real.ZERO);
    c.push(next[1] ?? real.ZERO);
    d.push(next[2] ?? real.ZERO);
  }
  return [s, c, d];
}

const cache = new Map<string, Triple | null>();
const CACHE_SIZE = 256;

/** sn, cn, dn at one place: dn is positive there (DLMF 22.6.1), and so need not be evaluated by itself. */
function valuesAt(u: Ball, modulus: Ball, kSquared: Ball, work: number): readonly (Ball | null)[] {
  const [s, c] = (['jacobiSn', 'jacobiCn'] as const).map((name) => describe(name)?.encloseReal?.([u, modulus], work) ?? null);
  const d = s ? real.sqrt(real.subtract(real.ONE, real.multiply(kSquared, real.multiply(s, s, work), work), work), work) : null;
  return [s ?? null, c ?? null, d];
}

/** The series about `centre` for distances up to `reach`; null where |k| may exceed 1 or a value cannot be enclosed. */
export function jacobiSeries(id: JacobiName, modulus: Ball, centre: Ball, reach: Ball, precision: number, length: number): RealSeries | null {
  const work = precision + 24;
  const kSquared = real.multiply(modulus, modulus, work);
  if (real.compare(real.upperEnd(kSquared), real.ONE) === 1) return null;
  const key = [modulus, centre].map((b) => `${b.mid},${b.rad},${b.exp}`).join('|') + `|${precision}`;
  let known = cache.get(key);
  if (known === undefined || (known !== null && known[0].length < length)) {
    // A longer series starts from the values of the shorter one.
    const [s, c, d] = known ? known.map((list) => list[0]) : valuesAt(centre, modulus, kSquared, work);
    known = s && c && d ? recurrence([s, c, d], kSquared, length, work) : null;
    if (cache.size >= CACHE_SIZE) cache.clear();
    cache.set(key, known);
  }
  if (known === null) return null;
  const [s, c, d] = known;
  const spread = real.upperEnd(real.absolute(reach));
  const unit = real.fromEnds(real.fromInteger(-1), real.ONE, BOUND_BITS);
  const least = real.sqrt(real.maximum(real.ZERO, real.lowerEnd(real.subtract(real.ONE, kSquared, BOUND_BITS))), BOUND_BITS) ?? real.ZERO;
  const widened = (value: Ball | undefined, by: Ball): Ball => real.add(value ?? real.ZERO, real.union(real.negate(by), by, BOUND_BITS), BOUND_BITS);
  const all: readonly [Ball, Ball, Ball] = [
    real.intersection(widened(s[0], spread), unit, BOUND_BITS) ?? unit,
    real.intersection(widened(c[0], spread), unit, BOUND_BITS) ?? unit,
    real.intersection(widened(d[0], real.multiply(spread, real.upperEnd(kSquared), BOUND_BITS)), real.fromEnds(real.lowerEnd(least), real.ONE, BOUND_BITS), BOUND_BITS) ?? unit,
  ];
  const index = id === 'jacobiSn' ? 0 : id === 'jacobiCn' ? 1 : 2;
  const remainder = recurrence(all, kSquared, length + 1, BOUND_BITS)[index][length];
  return remainder ? { coefficients: known[index].slice(0, length), remainder } : null;
}
