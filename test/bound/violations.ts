/**
 * The large run, by hand: bundle with esbuild and run `node violations.mjs <count> <seed>`. Prints violations (there must be none), the tightness and the time.
 * Bound over true maximum is taken against the largest of 50 samples, which can only make the ratio look worse than it is.
 */
import { generator } from '../rigorous/random.ts';
import { judge, randomSetting, type Trial } from './sampling.ts';

const print = (...parts: readonly (string | number | undefined)[]): void => void process.stdout.write(`${parts.join(' ')}\n`);
const count = Number(process.argv[2] ?? 200);
const seed = Number(process.argv[3] ?? 1);
const random = generator(seed);
const trials: Trial[] = [];
for (let i = 0; i < count; i += 1) {
  const trial = judge(randomSetting(random), random);
  trials.push(trial);
  if (trial.milliseconds > 1000) print('slow', trial.text, trial.outcome, trial.ratio.toFixed(4), trial.milliseconds.toFixed(0));
  if (trial.outcome === 'violated') print('VIOLATED', trial.text, trial.ratio);
  if (trial.outcome === 'declined') print('declined', trial.text, '-', trial.reason, `${trial.milliseconds.toFixed(0)} ms`);
  if (trial.outcome === 'held' && (trial.ratio > 1.1 || trial.lowerRatio > 1.0001)) print('loose', trial.text, trial.ratio.toFixed(4), trial.lowerRatio.toFixed(4), `${trial.milliseconds.toFixed(0)} ms`);
}
const quantile = (list: readonly number[], q: number): number => list[Math.min(list.length - 1, Math.floor(q * list.length))] ?? NaN;
const sorted = (pick: (t: Trial) => number): number[] => trials.filter((t) => t.outcome === 'held').map(pick).filter(Number.isFinite).sort((a, b) => a - b);
const by = (outcome: Trial['outcome']): number => trials.filter((t) => t.outcome === outcome).length;
print(['held', 'violated', 'unbounded', 'declined', 'not expanded'].map((o) => `${o} ${by(o as Trial['outcome'])}`).join(', '));
for (const [name, list] of [['ratio', sorted((t) => t.ratio)], ['ms', sorted((t) => t.milliseconds)]] as const) print(name, [0.5, 0.9, 0.99, 1].map((q) => quantile(list, q).toPrecision(7)).join(' '));
if (by('violated') > 0) process.exitCode = 1;
