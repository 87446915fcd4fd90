/** Both sides as they are judged: short writings written out, factors that only one side shows taken off. */
import { build, dependsOn, type Expression } from '../expression/index.ts';
import { calibrated } from './calibrate.ts';
import type { Claim } from './claims.ts';
import type { Setting } from './context.ts';
import { normalise } from './normalise.ts';
import { leading } from './size.ts';
import { hasMarks, withoutMarks } from './truncated.ts';

/** Short writings written out, and a factor that only the printed side has fixed by the leading terms. */
export function prepared(given: Expression, printed: Claim, setting: Setting): { readonly f: Expression; readonly claim: Claim } {
  const { f, side } = normalise(given, printed.side, setting.variable);
  return { f, claim: { ...printed, side: calibrated(f, side, setting) } };
}

/** As prepared; and `f = P (1 + ...)` with a P that is no power, as in Stirling's series, is judged as `f/P = 1 + ...`. */
export function reduced(given: Expression, printed: Claim, setting: Setting): { readonly f: Expression; readonly claim: Claim } {
  const whole = prepared(given, printed, setting);
  const { side } = whole.claim;
  if (side.kind !== 'product') return whole;
  const sums = side.factors.filter((factor) => factor.kind === 'sum' && dependsOn(withoutMarks(factor), setting.variable));
  const [sum] = sums;
  if (!sum || sums.length !== 1) return whole;
  const front = build.product(...side.factors.filter((factor) => factor !== sum));
  if (!dependsOn(front, setting.variable) || hasMarks(front) || leading(setting, front).kind !== 'other') return whole;
  return { f: build.quotient(whole.f, front), claim: { ...whole.claim, side: sum } };
}
