/** The largest |f - sum| (or of its ratio to f) over an interval, by dense sampling in 192-bit balls and a search around the largest sample: what a bound is measured against. */
import { type Expression, Q } from '../../src/expression/index.ts';
import { type Expansion, partialSum } from '../../src/expand/index.ts';
import { describe } from '../../src/functions/index.ts';
import type { Measure } from '../../src/bound/index.ts';
import { type Ball, encloseReal, real } from '../../src/rigorous/index.ts';

const BITS = 192;
const GRID = 20;
const NARROWINGS = 12;

/** f - sum (or the ratio) at x; null where undefined. */
export function remainderAtBall(expansion: Expansion, variable: string, x: Ball, measure: Measure, parameters: ReadonlyMap<string, Ball>): Ball | null {
  const point = typeof expansion.point === 'object' ? encloseReal(expansion.point, new Map(), BITS, describe) : null;
  const side = expansion.left && point && real.compare(x, point) === -1 ? expansion.left : expansion;
  const environment = new Map([...parameters, [variable, x] as const]);
  const [f, s] = [encloseReal(side.function, environment, BITS, describe), encloseReal(partialSum(side), environment, BITS, describe)];
  if (f === null || s === null) return null;
  const difference = real.absolute(real.subtract(f, s, BITS));
  return measure === 'absolute' ? difference : real.divide(difference, real.absolute(f), BITS);
}

/** At infinity the interval is sampled in 1/x, with the end itself left out. Null where nothing could be evaluated. */
export function largestRemainder(expansion: Expansion, variable: string, interval: { readonly lower: Expression; readonly upper: Expression }, measure: Measure, parameters: ReadonlyMap<string, Ball> = new Map()): Ball | null {
  const [a, b] = [interval.lower, interval.upper].map((end) => encloseReal(end, parameters, BITS + 64, describe));
  if (!a && !b) return null;
  const place = (s: number): Ball | null => {
    const share = real.fromRational(Q.fromDouble(s), BITS);
    if (a && b) return real.midpoint(real.add(a, real.multiply(real.subtract(b, a, BITS), share, BITS), BITS));
    const end = a ?? b;
    return end && s > 0 ? real.divide(end, share, BITS) : null;
  };
  let best: { readonly s: number; readonly value: Ball } | null = null;
  const sample = (s: number): void => {
    const x = place(s);
    const value = x && remainderAtBall(expansion, variable, s === 0 && a ? a : s === 1 && b ? b : x, measure, parameters);
    if (value && (best === null || real.compare(value, best.value) === 1)) best = { s, value };
  };
  for (let k = 0; k <= GRID; k += 1) sample(k / GRID);
  let step = 0.4 / GRID;
  for (let k = 0; k < NARROWINGS; k += 1, step /= 2) {
    const centre = (best as { readonly s: number } | null)?.s ?? 0;
    for (const s of [centre - step, centre + step]) if (s >= 0 && s <= 1) sample(s);
  }
  return (best as { readonly value: Ball } | null)?.value ?? null;
}
