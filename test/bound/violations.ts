/**
 * The large run, by hand: bundle with esbuild (gmp-wasm external or bundled) and run `node violations.mjs <first seed> <count> [milliseconds a case]`.
 * Case k of the run is a function of its seed alone, so ranges of seeds can run beside each other and be taken up again where one stopped: each finished hundred is printed.
 * Exit status 1 where a bound was violated. Bound over true maximum is taken against the largest of 50 samples, which can only make the ratio look worse than it is.
 */
import { generator } from '../rigorous/random.ts';
import { judge as mpfrJudge } from '../rigorous/mpfr.ts';
import { judge, randomSetting, type Trial } from './sampling.ts';

const print = (...parts: readonly (string | number | undefined)[]): void => void process.stdout.write(`${parts.join(' ')}\n`);
const first = Number(process.argv[2] ?? 1);
const count = Number(process.argv[3] ?? 200);
const milliseconds = Number(process.argv[4] ?? 4000);
const mpfr = await mpfrJudge(256);
const trials: Trial[] = [];
const reasons = new Map<string, number>();
for (let seed = first; seed < first + count; seed += 1) {
  const random = generator(seed);
  // The first numbers of neighbouring seeds are alike.
  for (let k = 0; k < 8; k += 1) random();
  const trial = judge(randomSetting(random), random, milliseconds, mpfr);
  trials.push(trial);
  if (trial.outcome === 'violated') print('VIOLATED', `seed ${seed}`, trial.text, trial.ratio);
  if (trial.outcome === 'declined') {
    const reason = (trial.reason ?? '').replace(/\d+/g, '#');
    reasons.set(reason, (reasons.get(reason) ?? 0) + 1);
    print('declined', `seed ${seed}`, trial.text, '-', trial.reason, `${trial.milliseconds.toFixed(0)} ms`);
  }
  if (trial.milliseconds > 1000 && trial.outcome !== 'declined') print('slow', `seed ${seed}`, trial.text, trial.outcome, `${trial.milliseconds.toFixed(0)} ms`);
  if (trial.outcome === 'held' && (trial.ratio > 1.1 || trial.lowerRatio > 1.0001)) print('loose', `seed ${seed}`, trial.text, trial.ratio.toFixed(4), trial.lowerRatio.toFixed(4));
  if ((seed - first + 1) % 100 === 0) print(`done: seeds ${first} to ${seed}`);
}
const quantile = (list: readonly number[], q: number): number => list[Math.min(list.length - 1, Math.floor(q * list.length))] ?? NaN;
const sorted = (pick: (t: Trial) => number): number[] => trials.filter((t) => t.outcome === 'held').map(pick).filter(Number.isFinite).sort((a, b) => a - b);
const by = (outcome: Trial['outcome']): number => trials.filter((t) => t.outcome === outcome).length;
print((['held', 'violated', 'unbounded', 'declined', 'not expanded'] as const).map((o) => `${o} ${by(o)}`).join(', '));
for (const [name, list] of [['ratio', sorted((t) => t.ratio)], ['ms', sorted((t) => t.milliseconds)]] as const) print(name, [0.5, 0.9, 0.99, 1].map((q) => quantile(list, q).toPrecision(7)).join(' '));
print(`${trials.length} cases, ${by('violated')} violations, ${by('declined')} declined${[...reasons].map(([reason, n]) => `; ${n} ${reason}`).join('')}`);
if (by('violated') > 0) process.exitCode = 1;
