/** Secular terms: corrections that outgrow the leading solution as time goes on. Source: Bender & Orszag, Advanced Mathematical Methods, 1978, 11.1 (from memory). */
import { Q } from '../../expression/index.ts';
import { type Context, isRational } from '../../series/index.ts';
import type { ExponentialPolynomial, Mode } from './exponential-polynomial.ts';

/**
 * In words up to when the expansion serves, where solution k grows while the first one that is not zero stays bounded; else null.
 * `solutions` holds the solutions 0 to k, `names` those of the independent variable and of the parameter.
 */
export function secularNote(c: Context, solutions: readonly ExponentialPolynomial[], k: number, names: { readonly time: string; readonly parameter: string }): string | null {
  const start = solutions.findIndex((x) => x.length > 0);
  const leading = solutions[start] ?? [];
  if (k === start || leading.some((m) => growthOf(c, m) !== null)) return null;
  const growing = (solutions[k] ?? []).map((m) => growthOf(c, m)).filter((g) => g !== null);
  if (growing.length === 0) return null;
  const { time: t, parameter: small } = names;
  const powers = growing.filter((g) => typeof g === 'number');
  const exponential = growing.length > powers.length;
  const most = Math.max(0, ...powers);
  const growth = exponential ? 'exponentially' : most === 1 ? `like ${t}` : `like ${t}^${most}`;
  const raised = (power: number): string => (power === 1 ? small : `${small}^${power}`);
  const range = exponential ? `${raised(k - start)} times it is small` : `${raised(k - start)}*${most === 1 ? t : `${t}^${most}`} is small`;
  return `the term in ${raised(k)} grows ${growth} (secular): valid while ${range}`;
}

/** The power of t with which a mode grows, 'exponential', or null where it stays bounded as t grows. */
function growthOf(c: Context, m: Mode): number | 'exponential' | null {
  const sign = isRational(m.re) ? Q.signOf(m.re) : c.field.sign(m.re);
  if (sign === 1) return 'exponential';
  if (sign === 0) return m.polynomial.length > 1 ? m.polynomial.length - 1 : null;
  return null;
}
