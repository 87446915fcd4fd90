/**
 * Emitted C for binary64 over random doubles, uniform in the interval and every fourth uniform in the exponent towards zero: the proven bound against the worst error seen,
 * with and without contraction. The reference is long double; glibc's long double functions stay within a few units of the 64th bit (from memory), 2^-60 is added.
 * Run: npx esbuild test/exhaustive/doubles.ts --bundle --platform=node --format=esm --outfile=.cache/doubles.mjs && node .cache/doubles.mjs [--every N] [--from I] [--to J]
 * 10^8 samples a function; `--every N` takes one in N of them.
 */
import { Q } from '../../src/expression/index.ts';
import { hasFma, runUnits } from './compile.ts';
import { lineOf, type ReportLine, runOptions, summarise } from './options.ts';
import { type ExhaustiveCase, fitOf } from './programs.ts';

const SAMPLES = 100_000_000;
/** References in long double `x`. */
const CASES: readonly ExhaustiveCase[] = [
  { text: 'sin(x)', low: '-3/4', high: '3/4', measure: 'ulp', degree: 13, reference: 'sinl(x)' },
  { text: 'exp(x)', low: '-7/20', high: '7/20', measure: 'ulp', degree: 11, reference: 'expl(x)' },
  { text: 'log(x)', low: '3/4', high: '3/2', measure: 'relative', degree: 18, reference: 'logl(x)' },
  { text: 'atan(x)', low: '-1/2', high: '1/2', measure: 'relative', degree: 21, reference: 'atanl(x)' },
  { text: 'cos(x)', low: '-3/4', high: '3/4', measure: 'absolute', degree: 14, contraction: 'fma', reference: 'cosl(x)' },
  { text: 'tan(x)', low: '-1/2', high: '1/2', measure: 'relative', degree: 15, reference: 'tanl(x)' },
  { text: 'asin(x)', low: '-1/2', high: '1/2', measure: 'absolute', degree: 15, form: 'estrin', reference: 'asinl(x)' },
  { text: 'log(1+x)', low: '-1/4', high: '1/4', measure: 'relative', degree: 12, reference: 'log1pl(x)' },
  { text: 'exp(x) - 1', low: '-1/4', high: '1/4', measure: 'ulp', degree: 12, reference: 'expm1l(x)' },
  { text: 'tanh(x)', low: '-1/2', high: '1/2', measure: 'relative', degree: 17, reference: 'tanhl(x)' },
  { text: 'sqrt(x)', low: '1/2', high: '2', measure: 'relative', degree: 12, reference: 'sqrtl(x)' },
  { text: 'erf(x)', low: '-1', high: '1', measure: 'absolute', degree: 21, reference: 'erfl(x)' },
];
const UNITS = { absolute: '1', relative: 'fabsl(f)', ulp: 'ulp(f)' } as const;

const { every, from, to } = runOptions(process.argv.slice(2), CASES.length);
const fma = hasFma();
const lines: ReportLine[] = [];
for (const c of CASES.slice(from, to)) {
  const found = fitOf(c, 'binary64');
  const start = performance.now();
  const { code } = found.code;
  const name = /(\w+)\(double x\)/.exec(code)?.[1] ?? '';
  const ratio = (t: string): string => t.replace(/^(-?\d+)(?:\/(\d+))?$/, (_, a: string, b?: string) => `(${a}.0/${b ?? '1'}.0)`);
  const emitted = (as: string, flags: readonly string[]): { readonly source: string; readonly flags: readonly string[] } => ({ source: `${code}\ndouble ${as}(double x) { return ${name}(x); }\n`, flags: ['-O2', `-D${name}=inner_${as}`, ...flags] });
  const source = `#include <math.h>
#include <stdint.h>
#include <stdio.h>
double emitted_separate(double x);
double emitted_fused(double x);
static inline long double ulp(long double y) { int e; y = fabsl(y); if (y < 0x1p-1022L) return 0x1p-1074L; frexpl(y, &e); return ldexpl(1, e - 53); }
static uint64_t state = 88172645463325252u;
static double next(void) { state ^= state << 13; state ^= state >> 7; state ^= state << 17; return (double)(state >> 11) * 0x1p-53; }
int main(void) {
  const double low = ${ratio(c.low)}, high = ${ratio(c.high)};
  long double worst[2] = {0, 0}; double where[2] = {0, 0}; long count = 0;
  while (count < ${Math.ceil(SAMPLES / every)}) {
    double argument = low + (high - low) * next();
    if (count % 4 == 0 && low < 0) argument = ldexp(argument, -(int)(next() * 1100));
    if (argument < low || argument > high) continue;
    const long double x = argument, f = ${c.reference};
    count++;
    if (f == 0 || (${c.measure === 'relative' ? 1 : 0} && fabsl(f) < 0x1p-1022L)) continue;
    const long double unit = ${UNITS[c.measure]}, margin = fabsl(f) * 0x1p-60L;
    const double y[2] = {emitted_separate(argument), emitted_fused(argument)};
    for (int k = 0; k < 2; k++) {
      const long double e = (fabsl((long double)y[k] - f) + margin) / unit;
      if (!(e <= worst[k])) { worst[k] = e; where[k] = argument; }
    }
  }
  printf("%.10Lg %.17g %.10Lg %.17g %ld", worst[0], where[0], worst[1], where[1], count);
  return 0;
}`;
  const text = runUnits([emitted('emitted_separate', ['-ffp-contract=off']), emitted('emitted_fused', fma ? ['-ffp-contract=fast', '-march=native'] : ['-ffp-contract=fast']), { source, flags: ['-O2'] }]);
  const [separate = NaN, at = NaN, fused = NaN, fusedAt = NaN, count = 0] = text.split(' ').map(Number);
  const share = Q.toDouble(Q.divide(found.error.evaluation, found.error.total));
  const line: ReportLine = {
    subject: `${c.text} [${c.low}, ${c.high}] ${c.measure} degree ${found.degree}${c.form ? ` ${c.form}` : ''}${c.contraction ? ` ${c.contraction}` : ''}`,
    bound: Q.toDouble(found.error.total),
    worst: Math.max(separate, fused),
    at: fused > separate ? fusedAt : at,
    most: share > 0.5 ? 2.5 : 1.5,
    seen: `separate ${separate.toExponential(4)}, fused ${fused.toExponential(4)}, rounding ${(share * 100).toFixed(0)} % of the bound, ${count} doubles`,
    seconds: (performance.now() - start) / 1000,
  };
  lines.push(line);
  process.stdout.write(`${lineOf(line)}\n`);
}
summarise(lines, 'functions over random doubles');
