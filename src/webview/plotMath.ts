/** Numbers behind the plots: ticks, paths, and where the sampled error keeps the tolerance. No drawing. */
import type { FitPlotAnswer, PlotAnswer } from '../protocol.ts';

export interface Range {
  readonly low: number;
  readonly high: number;
}

/** About `count` round numbers inside the range. */
export function ticks({ low, high }: Range, count: number): readonly number[] {
  const raw = (high - low) / Math.max(1, count);
  if (!(raw > 0) || !Number.isFinite(raw)) return [];
  const power = 10 ** Math.floor(Math.log10(raw));
  const step = ([1, 2, 5, 10].find((m) => m * power >= raw) ?? 10) * power;
  const first = Math.ceil(low / step - 1e-9);
  const found: number[] = [];
  for (let i = first; i * step <= high + step * 1e-9; i += 1) found.push(Number((i * step).toPrecision(12)));
  return found;
}

/** Whole decades inside the range of exponents, thinned to at most `count`. */
export function decades({ low, high }: Range, count: number): readonly number[] {
  const step = Math.max(1, Math.ceil((high - low) / count));
  const found: number[] = [];
  for (let e = Math.ceil(low / step) * step; e <= high; e += step) found.push(e);
  return found;
}

const finite = (value: number | null | undefined): value is number => typeof value === 'number' && Number.isFinite(value);

/** What the ordinate should show: all of the function, and the sum as far as it stays near. */
export function ordinate(plot: PlotAnswer): Range {
  const f = plot.f.filter(finite);
  const low = Math.min(...f);
  const high = Math.max(...f);
  if (f.length === 0) return { low: -1, high: 1 };
  const room = high > low ? (high - low) * 0.12 : Math.max(Math.abs(high), 1) * 0.5;
  return { low: low - room, high: high + room };
}

/** Sampled distance of function and sum; null where either has no value. Zero is a rounding accident and becomes the least double step. */
export function errors(plot: PlotAnswer, relative: boolean): readonly (number | null)[] {
  return plot.x.map((_, i) => {
    const f = plot.f[i];
    const sum = plot.sum[i];
    if (!finite(f) || !finite(sum)) return null;
    const distance = Math.abs(f - sum);
    return relative ? (f === 0 ? null : distance / Math.abs(f)) : distance;
  });
}

/** Below this a sampled difference of doubles is rounding, not error. */
export function noiseFloor(plot: PlotAnswer, relative: boolean): number {
  const largest = Math.max(...plot.f.filter(finite).map(Math.abs), 0);
  return 2.3e-16 * (relative ? 1 : Math.max(largest, 1e-300));
}

/** The longest run of samples whose error is within the tolerance. One missing value inside a run (a removable singularity) does not end it. */
export function validity(x: readonly number[], error: readonly (number | null)[], tolerance: number): Range | null {
  const holds = (i: number): boolean => finite(error[i]) && (error[i] ?? Infinity) <= tolerance;
  let best: Range | null = null;
  let start: number | null = null;
  for (let i = 0; i <= x.length; i += 1) {
    const within = i < x.length && (holds(i) || (error[i] === null && holds(i - 1) && holds(i + 1)));
    if (within && start === null) start = i;
    if (!within && start !== null) {
      const run = { low: x[start] ?? 0, high: x[i - 1] ?? 0 };
      if (!best || run.high - run.low > best.high - best.low) best = run;
      start = null;
    }
  }
  return best;
}

/** Beyond so many bounds a tolerance would press the curve flat, and is told in words only. */
const TOLERANCE_IN_SIGHT = 8;

/** Symmetric about zero, with room for the bound, every sample and, where it is near enough, the tolerance. */
export function signedSpan({ error, bound, tolerance }: FitPlotAnswer): Range {
  const largest = Math.max(bound, ...error.filter(finite).map(Math.abs));
  const shown = Math.max(largest, tolerance !== null && tolerance <= TOLERANCE_IN_SIGHT * largest ? tolerance : 0) || 1;
  return { low: -1.15 * shown, high: 1.15 * shown };
}

/** The sample with the largest error in size. */
export function worst(x: readonly number[], error: readonly (number | null)[]): { readonly at: number; readonly error: number } | null {
  let found: { readonly at: number; readonly error: number } | null = null;
  error.forEach((value, i) => {
    const at = x[i];
    if (finite(value) && at !== undefined && (!found || Math.abs(value) > Math.abs(found.error))) found = { at, error: value };
  });
  return found;
}

/** SVG path data through the points, broken where a value is missing or far outside. */
export function pathThrough(x: readonly number[], y: readonly (number | null)[], toX: (x: number) => number, toY: (y: number) => number, inside: Range): string {
  const reach = inside.high - inside.low;
  let path = '';
  let pen = false;
  x.forEach((at, i) => {
    const value = y[i];
    if (!finite(value) || value < inside.low - reach || value > inside.high + reach) {
      pen = false;
      return;
    }
    path += `${pen ? 'L' : 'M'}${toX(at).toFixed(1)} ${toY(value).toFixed(1)}`;
    pen = true;
  });
  return path;
}

const SUPERSCRIPT: Readonly<Record<string, string>> = { '-': '⁻', '0': '⁰', '1': '¹', '2': '²', '3': '³', '4': '⁴', '5': '⁵', '6': '⁶', '7': '⁷', '8': '⁸', '9': '⁹' };
export const powerOfTen = (exponent: number): string => (exponent === 0 ? '1' : `10${[...String(exponent)].map((c) => SUPERSCRIPT[c] ?? c).join('')}`);
export const short = (value: number): string => String(Number(value.toPrecision(4))).replace('-', '−');
