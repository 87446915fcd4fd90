/**
 * Taylor series of the complete elliptic integral Pi(n, m) in m for a fixed real n < 1: 2 (n - m) dPi/dm = Pi + E(m)/(m - 1) (DLMF 19.4.4 in the parameter m) by recurrence from the values of Pi and E.
 * Under the integral of DLMF 19.2.8 |1 - m sin^2| >= 1 - (c + R) sin^2 on |m - c| = R, so that |Pi(n, m)| <= Pi(n, c + R) there while c + R < 1: Cauchy's estimate of the rest.
 */
import { build } from '../expression/index.ts';
import { describe } from '../functions/index.ts';
import { type Ball, real } from '../rigorous/index.ts';
import { equationSeries, hypergeometricAtZero, type RealSeries } from './holonomic.ts';

const BOUND_BITS = 64;
/** Bits that the recurrence may lose per coefficient near m = n, where its equation is singular and Pi is not. */
const MOST_LOST = 12;

/** Coefficients of E(m): at zero, where its equation is singular, those of its hypergeometric series (DLMF 19.5.2). */
function secondKind(centre: Ball, work: number, length: number): readonly Ball[] | null {
  if (centre.mid !== 0n || centre.rad !== 0n) return equationSeries('ellipticEParameter', [build.symbol('parameter')], 0, centre, real.ZERO, new Map(), 'ellipticEParameter for the third kind', work, length)?.coefficients ?? null;
  const [half, one] = [build.number({ num: 1n, den: 2n }), build.number(1)];
  const series = hypergeometricAtZero([build.number(2), one, build.negation(half), half, one, build.symbol('parameter')], real.ZERO, work, length);
  const quarterTurn = real.scaleByPowerOfTwo(real.pi(work), -1);
  return series && series.coefficients.map((c) => real.multiply(c, quarterTurn, work));
}

/** The series about `centre` for |m - centre| <= reach; null where n < 1 or centre + reach < 1 is not proved, or the centre is too near to n without being n. */
export function thirdKindSeries(n: Ball, centre: Ball, reach: Ball, precision: number, length: number): RealSeries | null {
  if (real.compare(real.upperEnd(n), real.ONE) !== -1) return null;
  const room = real.toDouble(real.lowerEnd(real.subtract(real.ONE, centre, BOUND_BITS))) * (1 - 1e-9);
  const D = real.toDouble(real.upperEnd(real.absolute(reach))) * (1 + 1e-12);
  if (!(D < 0.97 * room)) return null;
  const distance = real.subtract(n, centre, precision + 64);
  const singular = distance.mid === 0n && distance.rad === 0n;
  const lost = singular ? 0 : Math.max(0, Math.log2(room / Math.abs(real.toDouble(distance))));
  if (!(lost < MOST_LOST) || (!singular && real.containsZero(distance))) return null;
  const work = precision + 32 + Math.ceil(lost * (length + 2));
  const second = secondKind(centre, work, length + 1);
  const value = describe('ellipticPiParameter')?.encloseReal?.([n, centre], work);
  if (second === null || !value) return null;
  // g = E(m)/(m - 1) about the centre.
  const below = real.subtract(centre, real.ONE, work);
  const g: Ball[] = [];
  for (let k = 0; k <= length; k += 1) {
    const quotient = real.divide(real.subtract(second[k] ?? real.ZERO, g[k - 1] ?? real.ZERO, work), below, work);
    if (quotient === null) return null;
    g.push(quotient);
  }
  const away = real.subtract(n, centre, work);
  const coefficients: Ball[] = [value];
  for (let k = 0; k + 1 < length; k += 1) {
    // 2 (n - c)(k + 1) y_(k+1) = (2k + 1) y_k + g_k; at c = n the left side is zero.
    const next = singular
      ? real.divide(real.negate(g[k + 1] ?? real.ZERO), real.fromInteger(2 * k + 3), work)
      : real.divide(real.add(real.multiply(real.fromInteger(2 * k + 1), coefficients[k] ?? real.ZERO, work), g[k] ?? real.ZERO, work), real.multiply(real.fromInteger(2 * k + 2), away, work), work);
    if (next === null) return null;
    coefficients.push(next);
  }
  let best: Ball | null = null;
  for (const share of [0.97, 0.9, 0.75, 0.5]) {
    const R = share * room;
    if (R < 1.05 * D) continue;
    const radius = real.fromDouble(R);
    const size = describe('ellipticPiParameter')?.encloseReal?.([n, real.add(centre, radius, BOUND_BITS)], BOUND_BITS);
    const power = real.powerInteger(radius, length, BOUND_BITS);
    const quotient = real.divide(real.fromDouble(D), radius, BOUND_BITS);
    const gap = quotient && real.lowerEnd(real.subtract(real.ONE, quotient, BOUND_BITS));
    const rest = size && power && gap && real.isPositive(gap) ? real.divide(real.upperEnd(size), real.multiply(power, gap, BOUND_BITS), BOUND_BITS) : null;
    if (rest !== null && (best === null || real.compare(rest, best) === -1)) best = real.upperEnd(rest);
  }
  return best && { coefficients, remainder: real.union(real.negate(best), best, BOUND_BITS) };
}
