/** Samples of a function and its partial sum over an interval, for drawing only: doubles from enclosures, never part of a proof. */
import { type ClosedInterval } from '../bound/index.ts';
import { type Expansion, partialSum } from '../expand/index.ts';
import { freeSymbols } from '../expression/index.ts';
import { describe } from '../functions/index.ts';
import type { PlotAnswer } from '../protocol.ts';
import { encloseReal, real } from '../rigorous/index.ts';

const SAMPLES = 160;
const BITS = 96;
/** An infinite end is drawn out to this many times the finite end. */
const FAR = 8;

export function plotAnswer(expansion: Expansion, interval: ClosedInterval): PlotAnswer | undefined {
  const { variable } = expansion;
  if (variable.kind !== 'symbol' || freeSymbols(expansion.function).some((name) => name !== variable.name)) return undefined;
  const end = (e: ClosedInterval['lower']): number | null => {
    const value = encloseReal(e, new Map(), BITS, describe);
    return value ? real.toDouble(value) : null;
  };
  let [low, high] = [end(interval.lower), end(interval.upper)];
  if (low === null && high === null) return undefined;
  low ??= (high ?? -1) < 0 ? FAR * (high ?? -1) : (high ?? 0) - FAR;
  high ??= low > 0 ? FAR * low : low + FAR;
  const sum = partialSum(expansion);
  const x: number[] = [];
  const f: (number | null)[] = [];
  const s: (number | null)[] = [];
  const error: (number | null)[] = [];
  for (let k = 0; k <= SAMPLES; k += 1) {
    const at = low + ((high - low) * k) / SAMPLES;
    const place = new Map([[variable.name, real.fromDouble(at)]]);
    const [value, approximation] = [encloseReal(expansion.function, place, BITS, describe), encloseReal(sum, place, BITS, describe)];
    x.push(at);
    f.push(value && finite(real.toDouble(value)));
    s.push(approximation && finite(real.toDouble(approximation)));
    error.push(value && approximation && finite(Math.abs(real.toDouble(real.subtract(value, approximation, BITS)))));
  }
  return { x, f, sum: s, error };
}

const finite = (v: number): number | null => (Number.isFinite(v) ? v : null);
