/**
 * Emitted C with a reduced argument, binary32, over every float of each interval: the proven bound against the worst error seen.
 * Run: npx esbuild test/exhaustive/reductions.ts --bundle --platform=node --format=esm --outfile=.cache/reductions.mjs && node .cache/reductions.mjs [--every N] [--from I] [--to J]
 */
import { hasFma } from './compile.ts';
import { overFloats } from './everyFloat.ts';
import { lineOf, type ReportLine, runOptions, summarise } from './options.ts';
import { fitOf, runOf } from './programs.ts';
import { REDUCED_CASES } from './reducedCases.ts';
import { Q } from '../../src/expression/index.ts';

const { every, from, to } = runOptions(process.argv.slice(2), REDUCED_CASES.length);
const fma = hasFma();
const lines: ReportLine[] = [];
for (const c of REDUCED_CASES.slice(from, to)) {
  const found = fitOf(c);
  const { error } = found;
  const seen = overFloats(runOf(c, found), every, fma);
  const small = c.measure === 'relative' && seen.subnormal > Q.toDouble(error.subnormal ?? Q.ZERO);
  const line: ReportLine = {
    subject: `${c.text} [${c.low}, ${c.high}] ${c.measure} degree ${found.degree}${found.reduction ? '' : ' NOT REDUCED'}`,
    bound: Q.toDouble(error.total),
    worst: small || !found.reduction ? Infinity : seen.worst,
    at: seen.at,
    most: 2.5,
    seen: `separate ${seen.separate.toExponential(4)}, fused ${seen.fused.toExponential(4)}, ${seen.floats} floats`,
    seconds: seen.seconds,
  };
  lines.push(line);
  process.stdout.write(`${lineOf(line)}\n`);
}
summarise(lines, `reduced functions over every ${every === 1 ? '' : `${every}th `}float`);
