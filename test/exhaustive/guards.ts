/**
 * Emitted guards in C for binary32 over every float of each interval, with and without contraction: the proven bound against the worst error seen.
 * Run: npx esbuild test/exhaustive/guards.ts --bundle --platform=node --format=esm --outfile=.cache/guards.mjs && node .cache/guards.mjs [--every N] [--from I] [--to J]
 */
import { hasFma } from './compile.ts';
import { overFloats } from './everyFloat.ts';
import { guardOf, guardRunOf, GUARDS } from './guardPrograms.ts';
import { lineOf, type ReportLine, runOptions, summarise } from './options.ts';

/** The library is assumed to be right to one ulp; it is mostly nearer, and that is part of the ratio. */
const MOST = 2.5;
const { every, from, to } = runOptions(process.argv.slice(2), GUARDS.length);
const fma = hasFma();
const lines: ReportLine[] = [];
for (const c of GUARDS.slice(from, to)) {
  const found = guardOf(c);
  const seen = overFloats(guardRunOf(c, found), every, fma);
  const line: ReportLine = {
    subject: `${c.text} [${c.interval.join(', ')}] ${found.terms ?? 'no'} terms`,
    bound: found.bound.whole,
    worst: seen.worst,
    at: seen.at,
    most: MOST,
    seen: `separate ${seen.separate.toExponential(4)}, fused ${seen.fused.toExponential(4)}, ${seen.floats} floats`,
    seconds: seen.seconds,
  };
  lines.push(line);
  process.stdout.write(`${lineOf(line)}\n`);
}
summarise(lines, `guards${every === 1 ? ' over every float' : ` over every ${every}th float`}`);
