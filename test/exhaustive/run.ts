/**
 * Emitted C for binary32 over every float of each interval, with and without contraction: the proven bound against the worst error seen.
 * Run: npx esbuild test/exhaustive/run.ts --bundle --platform=node --format=esm --outfile=.cache/exhaustive.mjs && node .cache/exhaustive.mjs [step]
 */
import { compileAndRun } from './compile.ts';
import { CASES, fitOf, harness } from './programs.ts';
import { Q } from '../../src/expression/index.ts';

const step = Number(process.argv[2] ?? 1);
let failed = 0;
for (const c of CASES) {
  const found = fitOf(c);
  const bound = Q.toDouble(found.error.total);
  for (const flags of [['-ffp-contract=off'], ['-ffp-contract=fast', '-mfma']]) {
    const [worst = NaN, where, count] = compileAndRun('gcc', harness(c, found, step), [...flags, '-O2']).split(' ').map(Number);
    const holds = worst <= bound;
    if (!holds) failed += 1;
    const share = Q.toDouble(Q.divide(found.error.evaluation, found.error.total));
    console.log(`${holds ? 'holds' : 'FAILS'} ${c.text} [${c.low}, ${c.high}] ${c.measure} degree ${found.degree} ${flags[0]}: bound ${bound.toExponential(4)} worst ${worst.toExponential(4)} at ${where}, ratio ${(bound / worst).toFixed(3)}, rounding ${(share * 100).toFixed(0)} %, ${count} floats`);
  }
}
process.exitCode = failed > 0 ? 1 : 0;
