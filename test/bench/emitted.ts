/** Time of emitted C against the library call that it replaces, in one program: the measured ratio beside the estimate that answers carry. */
import { compileTimes, type TimedPair } from './emittedPrograms.ts';
import { benchEngine } from './measure.ts';

export interface SpeedRow {
  readonly name: string;
  readonly estimated: number;
  readonly measured: number;
}

interface Case {
  readonly text: string;
  readonly call: string;
  readonly interval: readonly [string, string];
  readonly tolerance: readonly [number, number];
}
/** Tolerances for binary32 and binary64: a few units of the format, as one would ask for in place of the library. */
const CASES: readonly Case[] = [
  { text: 'sin(x)', call: 'sin', interval: ['-3/4', '3/4'], tolerance: [1e-6, 1e-14] },
  { text: 'exp(x)', call: 'exp', interval: ['-1/2', '1/2'], tolerance: [1e-6, 1e-14] },
  { text: 'log(x)', call: 'log', interval: ['3/4', '3/2'], tolerance: [1e-6, 1e-13] },
  { text: 'tan(x)', call: 'tan', interval: ['-1/2', '1/2'], tolerance: [1e-6, 1e-13] },
  { text: 'atan(x)', call: 'atan', interval: ['-1/2', '1/2'], tolerance: [1e-6, 1e-13] },
  { text: 'tanh(x)', call: 'tanh', interval: ['-1/2', '1/2'], tolerance: [1e-6, 1e-13] },
  { text: 'erf(x)', call: 'erf', interval: ['-1', '1'], tolerance: [1e-6, 1e-13] },
  { text: 'cbrt(x)', call: 'cbrt', interval: ['1', '2'], tolerance: [1e-5, 1e-10] },
  { text: 'acos(x)', call: 'acos', interval: ['-1/2', '1/2'], tolerance: [1e-6, 1e-13] },
];

/** The first `count` functions, each in both formats. */
export async function emittedSpeeds(count = CASES.length): Promise<readonly SpeedRow[]> {
  const engine = await benchEngine();
  const pairs: (TimedPair & { readonly estimated: number })[] = [];
  for (const { text, call, interval, tolerance } of CASES.slice(0, count)) {
    for (const [k, format] of (['binary32', 'binary64'] as const).entries()) {
      const answer = await engine.ask({ ask: 'fit', text, language: 'c', interval, tolerance: tolerance[k], format, budget_ms: 60_000 });
      if (!answer.ok || !('speed' in answer) || !answer.speed) continue;
      const ends = interval.map((e) => Number(e.split('/')[0]) / Number(e.split('/')[1] ?? 1));
      pairs.push({ name: `${text} ${format}`, code: answer.code, call: format === 'binary32' ? `${call}f` : call, type: format === 'binary32' ? 'float' : 'double', low: ends[0] ?? 0, high: ends[1] ?? 1, estimated: answer.speed.ratio });
    }
  }
  const measured = compileTimes(pairs);
  return pairs.map(({ name, estimated }, k) => ({ name, estimated, measured: measured[k] ?? NaN }));
}
