/** Tolerances and percentages that a text states beside a claim: proved or refuted on the interval they are said to hold on. */
import { boundDifference } from '../bound/index.ts';
import { Q, type Expression, type Rational } from '../expression/index.ts';
import type { Setting } from './context.ts';
import { enclose } from './enclose.ts';
import type { StatedInterval } from './intervals.ts';
import type { Statement } from './statements.ts';

export type AccuracyVerdict =
  | { readonly kind: 'holds'; readonly error: string }
  | { readonly kind: 'fails'; readonly error: string }
  | { readonly kind: 'undecided'; readonly reason: string };

/** sup |f - sum| over the interval against the stated tolerance, by proven bounds: from above on the whole of it, from below on what every reading of it contains. */
export function judgeAccuracy(statement: Statement, interval: StatedInterval, f: Expression, sum: Expression, setting: Setting): AccuracyVerdict {
  const [low, high] = [enclose(interval.whole.low), enclose(interval.whole.high)];
  const [leastLow, leastHigh] = [enclose(interval.least.low), enclose(interval.least.high)];
  if (!low || !high || !leastLow || !leastHigh || Q.compare(leastLow.high, leastHigh.low) >= 0) return { kind: 'undecided', reason: 'The ends of the interval are not plain numbers.' };
  const problem = { function: f, approximation: sum, variable: setting.variable, measure: statement.measure, budget: setting.budget };
  const through = typeof setting.point === 'object' && setting.point.kind === 'number' ? { through: setting.point.value } : {};
  const wide = boundDifference({ ...problem, ...through, low: low.low, high: high.high });
  if (!wide.ok) return { kind: 'undecided', reason: wide.error.message };
  const error = decimalUp(wide.value.upper, statement.percent);
  if (Q.compare(wide.value.upper, statement.tolerance) <= 0) return { kind: 'holds', error };
  const narrow = boundDifference({ ...problem, ...through, low: leastLow.high, high: leastHigh.low });
  if (!narrow.ok) return { kind: 'undecided', reason: narrow.error.message };
  const reached = interval.least === interval.whole ? error : decimalUp(narrow.value.upper, statement.percent);
  if (Q.compare(narrow.value.lower, statement.refuting) > 0) return { kind: 'fails', error: reached };
  return { kind: 'undecided', reason: `The stated tolerance is too close to the largest error to be decided: the error on this interval is proved to lie between ${decimal(narrow.value.lower, statement.percent, 'down')} and ${error}.` };
}

/** Two significant digits, rounded up; percent where the text has percent. */
export const decimalUp = (value: Rational, percent: boolean): string => decimal(value, percent, 'up');

function decimal(value: Rational, percent: boolean, direction: 'up' | 'down'): string {
  const shown = percent ? Q.multiply(value, Q.rational(100)) : value;
  if (Q.isZero(shown)) return '0';
  let exponent = Math.floor(Math.log10(Q.toDouble(shown)));
  const unitOf = (e: number): Rational => (e >= 0 ? Q.rational(10n ** BigInt(e)) : Q.rational(1n, 10n ** BigInt(-e)));
  const scaled = Q.divide(shown, unitOf(exponent - 1));
  let digits = direction === 'up' ? -Q.floor(Q.negate(scaled)) : Q.floor(scaled);
  if (digits >= 100n && direction === 'up') {
    digits = 10n;
    exponent += 1;
  }
  const text = digits.toString();
  const number = exponent >= -4 && exponent < 2 ? Number(`${text}e${exponent - 1}`).toString() : `${text.charAt(0)}.${text.slice(1)}e${exponent}`;
  return percent ? `${number} %` : number;
}
