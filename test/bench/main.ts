import { CASES } from './cases.ts';
import { benchEngine, medianOf } from './measure.ts';

async function main(): Promise<void> {
  const engine = await benchEngine();
  for (const timed of CASES) {
    const { median, ok } = await medianOf(engine, timed);
    process.stdout.write(`${timed.name.padEnd(38)} ${median.toFixed(2).padStart(9)} ms   aim ${String(timed.aim).padStart(4)} ms   ratio ${(median / timed.aim).toFixed(3)}${ok ? '' : '   (declined)'}\n`);
  }
}
void main();
