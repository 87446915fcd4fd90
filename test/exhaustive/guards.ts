/**
 * Emitted guards in C for binary32 over every float of each interval, with and without contraction: the proven bound against the worst error seen.
 * Run: npx esbuild test/exhaustive/guards.ts --bundle --platform=node --format=esm --outfile=.cache/guards.mjs && node .cache/guards.mjs [step [first [last]]]
 */
import { compileAndRun } from './compile.ts';
import { guardHarness, guardOf, GUARDS } from './guardPrograms.ts';

const [step = 1, first = 0, last = GUARDS.length] = process.argv.slice(2).map(Number);
let failed = 0;
for (const c of GUARDS.slice(first, last)) {
  const found = guardOf(c);
  for (const flags of [['-ffp-contract=off'], ['-ffp-contract=fast', '-mfma']]) {
    const [worst = NaN, where, count] = compileAndRun('gcc', guardHarness(c, found, step), [...flags, '-O2', '-Wno-unused-function']).split(' ').map(Number);
    const holds = worst <= found.bound.whole;
    if (!holds) failed += 1;
    console.log(`${holds ? 'holds' : 'FAILS'} ${c.text} [${c.interval.join(', ')}] terms ${found.terms ?? 'none'} ${flags[0]}: bound ${found.bound.whole.toExponential(3)} worst ${worst.toExponential(3)} at ${where}, ratio ${(found.bound.whole / worst).toFixed(3)}, ${count} floats`);
  }
}
process.exitCode = failed > 0 ? 1 : 0;
