/**
 * Emitted C for binary64 over random doubles, uniform in the interval and uniform in the exponent: the proven bound against the worst error seen.
 * Run: npx esbuild test/exhaustive/doubles.ts --bundle --platform=node --format=esm --outfile=.cache/doubles.mjs && node .cache/doubles.mjs [samples]
 */
import { Q } from '../../src/expression/index.ts';
import { compileAndRun } from './compile.ts';
import { type ExhaustiveCase, fitOf } from './programs.ts';

const CASES: readonly ExhaustiveCase[] = [
  { text: 'sin(x)', low: '-3/4', high: '3/4', measure: 'ulp', degree: 13, reference: 'sinl(x)' },
  { text: 'exp(x)', low: '-7/20', high: '7/20', measure: 'ulp', degree: 11, reference: 'expl(x)' },
  { text: 'log(x)', low: '3/4', high: '3/2', measure: 'relative', degree: 18, reference: 'logl(x)' },
  { text: 'atan(x)', low: '-1/2', high: '1/2', measure: 'relative', degree: 21, reference: 'atanl(x)' },
  { text: 'cos(x)', low: '-3/4', high: '3/4', measure: 'absolute', degree: 14, contraction: 'fma', reference: 'cosl(x)' },
];
const samples = Number(process.argv[2] ?? 100_000_000);
for (const c of CASES) {
  const found = fitOf(c, 'binary64');
  const bound = Q.toDouble(found.error.total);
  const name = /(\w+)\(double x\)/.exec(found.code.code)?.[1] ?? '';
  const ratio = (t: string): string => t.replace(/^(-?\d+)(?:\/(\d+))?$/, (_, a: string, b?: string) => `(${a}.0/${b ?? '1'}.0)`);
  const unit = { absolute: '1', relative: 'fabsl(f)', ulp: 'ulp(f)' }[c.measure];
  const source = `#include <math.h>
#include <stdio.h>
#include <stdint.h>
${found.code.code}
static inline long double ulp(long double y) { int e; y = fabsl(y); if (y < 0x1p-1022L) return 0x1p-1074L; frexpl(y, &e); return ldexpl(1, e - 53); }
static uint64_t state = 88172645463325252u;
static double next(void) { state ^= state << 13; state ^= state >> 7; state ^= state << 17; return (double)(state >> 11) * 0x1p-53; }
int main(void) {
  const double low = ${ratio(c.low)}, high = ${ratio(c.high)};
  long double worst = 0; double where = 0;
  for (long k = 0; k < ${samples}; k++) {
    double x = low + (high - low) * next();
    if (k % 4 == 0 && low < 0) x = ldexp(x, -(int)(next() * 1100));
    if (x < low || x > high) continue;
    const long double f = ${c.reference};
    if (fabsl(f) < 0x1p-1022L && ${c.measure === 'relative' ? 1 : 0}) continue;
    if (f == 0) continue;
    const long double e = fabsl((long double)${name}(x) - f) / ${unit};
    if (!(e <= worst)) { worst = e; where = x; }
  }
  printf("%.10Lg %.17g", worst, where);
  return 0;
}`;
  for (const flags of [['-ffp-contract=off'], ['-ffp-contract=fast', '-mfma']]) {
    const [worst = NaN, where] = compileAndRun('gcc', source, ['-O2', ...flags]).split(' ').map(Number);
    console.log(`${worst <= bound ? 'holds' : 'FAILS'} ${c.text} ${c.measure} ${flags[0]}: bound ${bound.toExponential(4)} worst ${worst.toExponential(4)} at ${where}, ratio ${(bound / worst).toFixed(3)}`);
    if (!(worst <= bound)) process.exitCode = 1;
  }
}
