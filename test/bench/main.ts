import { CASES } from './cases.ts';
import { has } from '../exhaustive/compile.ts';
import { emittedSpeeds } from './emitted.ts';
import { benchEngine, medianOf } from './measure.ts';

async function main(): Promise<void> {
  const engine = await benchEngine();
  for (const timed of CASES) {
    const { median, ok } = await medianOf(engine, timed);
    process.stdout.write(`${timed.name.padEnd(38)} ${median.toFixed(2).padStart(9)} ms   aim ${String(timed.aim).padStart(4)} ms   ratio ${(median / timed.aim).toFixed(3)}${ok ? '' : '   (declined)'}\n`);
  }
  if (!has('gcc')) return;
  process.stdout.write('\nTime of the library call over that of the emitted C, in one run\n');
  for (const { name, estimated, measured } of await emittedSpeeds()) process.stdout.write(`${name.padEnd(38)} measured ${measured.toFixed(2).padStart(6)}   estimated ${estimated.toFixed(2).padStart(6)}   measured/estimated ${(measured / estimated).toFixed(2)}\n`);
}
void main();
