/**
 * Emitted C for binary32 over every float of each interval, with and without contraction: the proven bound against the worst error seen.
 * Run: npx esbuild test/exhaustive/run.ts --bundle --platform=node --format=esm --outfile=.cache/exhaustive.mjs && node .cache/exhaustive.mjs [--every N] [--from I] [--to J]
 */
import { hasFma } from './compile.ts';
import { overFloats } from './everyFloat.ts';
import { lineOf, type ReportLine, runOptions, summarise } from './options.ts';
import { CASES, fitOf, runOf } from './programs.ts';
import { Q } from '../../src/expression/index.ts';

const { every, from, to } = runOptions(process.argv.slice(2), CASES.length);
const fma = hasFma();
const lines: ReportLine[] = [];
for (const c of CASES.slice(from, to)) {
  const found = fitOf(c);
  const { error } = found;
  const seen = overFloats(runOf(c, found), every, fma);
  const share = Q.toDouble(Q.divide(error.evaluation, error.total));
  // A bound below the smallest normal number is stated apart; breaking it breaks the promise.
  const small = c.measure === 'relative' && seen.subnormal > Q.toDouble(error.subnormal ?? Q.ZERO);
  const line: ReportLine = {
    subject: `${c.text} [${c.low}, ${c.high}] ${c.measure} degree ${found.degree}${c.form ? ` ${c.form}` : ''}${c.contraction ? ` ${c.contraction}` : ''}`,
    bound: Q.toDouble(error.total),
    worst: small ? Infinity : seen.worst,
    at: seen.at,
    most: share > 0.5 ? 2.5 : 1.5,
    seen: `separate ${seen.separate.toExponential(4)}, fused ${seen.fused.toExponential(4)}, rounding ${(share * 100).toFixed(0)} % of the bound, ${seen.floats} floats`,
    seconds: seen.seconds,
  };
  lines.push(line);
  process.stdout.write(`${lineOf(line)}\n`);
}
summarise(lines, `functions${every === 1 ? ' over every float' : ` over every ${every}th float`}`);
