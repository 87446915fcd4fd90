/** Fits whose emitted C is compiled and run over every float of their interval, with a reference in wider precision. */
import { Q } from '../../src/expression/index.ts';
import { type Fit, fit, type FitProblem, formatByName } from '../../src/fit/index.ts';
import { budget } from '../../src/outcome.ts';
import { readExact } from '../../src/read/index.ts';

export interface ExhaustiveCase {
  readonly text: string;
  readonly low: string;
  readonly high: string;
  readonly measure: 'absolute' | 'relative' | 'ulp';
  readonly tolerance?: string;
  readonly degree?: number;
  readonly form?: 'horner' | 'estrin';
  readonly contraction?: 'any' | 'fma';
  /** C expression of the reference in long double `x`; libm's long double functions stay within a few units of the 64th bit. */
  readonly reference: string;
}

export const CASES: readonly ExhaustiveCase[] = [
  { text: 'sin(x)', low: '-3/4', high: '3/4', measure: 'ulp', degree: 9, reference: 'sinl(x)' },
  { text: 'sin(x)', low: '-3/4', high: '3/4', measure: 'relative', degree: 5, reference: 'sinl(x)' },
  { text: 'cos(x)', low: '-3/4', high: '3/4', measure: 'ulp', degree: 8, reference: 'cosl(x)' },
  { text: 'exp(x)', low: '-7/20', high: '7/20', measure: 'ulp', degree: 6, reference: 'expl(x)' },
  { text: 'exp(x)', low: '-1/2', high: '1/2', measure: 'absolute', degree: 3, form: 'estrin', reference: 'expl(x)' },
  { text: 'log(x)', low: '3/4', high: '3/2', measure: 'relative', degree: 6, reference: 'logl(x)' },
  { text: 'log(1+x)', low: '-1/4', high: '1/4', measure: 'ulp', degree: 9, reference: 'log1pl(x)' },
  { text: 'atan(x)', low: '-1/2', high: '1/2', measure: 'relative', degree: 9, reference: 'atanl(x)' },
  { text: 'atan(x)/x', low: '-1', high: '1', measure: 'absolute', degree: 8, reference: 'x == 0 ? 1 : atanl(x)/x' },
  { text: 'tan(x)', low: '-1/2', high: '1/2', measure: 'ulp', degree: 11, contraction: 'fma', reference: 'tanl(x)' },
  { text: 'asin(x)', low: '-1/2', high: '1/2', measure: 'absolute', degree: 9, form: 'estrin', contraction: 'fma', reference: 'asinl(x)' },
  { text: 'tanh(x)', low: '-1/2', high: '1/2', measure: 'relative', degree: 7, reference: 'tanhl(x)' },
  { text: 'sqrt(x)', low: '1/2', high: '2', measure: 'ulp', degree: 7, reference: 'sqrtl(x)' },
  { text: 'gamma(x)', low: '1', high: '2', measure: 'absolute', degree: 7, reference: 'tgammal(x)' },
  { text: 'erf(x)', low: '-1', high: '1', measure: 'relative', degree: 11, reference: 'erfl(x)' },
  { text: 'exp(x) - 1', low: '-1/4', high: '1/4', measure: 'ulp', degree: 7, reference: 'expm1l(x)' },
];

export function fitOf(c: ExhaustiveCase, format = 'binary32', language = 'c'): Fit {
  const number = formatByName(format);
  const [f, low, high] = [c.text, c.low, c.high].map((t) => {
    const read = readExact(t);
    if (!read.ok) throw new Error(`${t}: ${read.error.message}`);
    return read.value;
  });
  if (!number || !f || !low || !high) throw new Error('case');
  const end = (text: string) => {
    const [num, den = '1'] = text.split('/');
    return Q.rational(BigInt(num ?? 0), BigInt(den));
  };
  const problem: FitProblem = {
    function: f,
    variable: 'x',
    low: end(c.low),
    high: end(c.high),
    measure: c.measure,
    ...(c.tolerance ? { tolerance: Q.fromDecimal(c.tolerance) ?? Q.ZERO } : {}),
    ...(c.degree === undefined ? {} : { degree: c.degree }),
    format: number,
    language,
    form: c.form ?? 'horner',
    contraction: c.contraction ?? 'any',
    method: 'minimax',
    pieces: 1,
    intervalText: [c.low, c.high],
  };
  const result = fit(problem, budget(60_000));
  if (!result.ok) throw new Error(`${c.text}: ${result.error.message}`);
  return result.value;
}

/** A C program that prints the worst error over every `step`-th float of the interval, and how many floats it saw. */
export function harness(c: ExhaustiveCase, { code }: Fit, step: number): string {
  const name = /(\w+)\(float x\)/.exec(code.code)?.[1] ?? '';
  const ratio = (t: string): string => t.replace(/^(-?\d+)(?:\/(\d+))?$/, (_, a: string, b?: string) => `${a}.0L/${b ?? '1'}.0L`);
  // The unit: 1, |f|, or one ulp of f. Relative errors are only promised for normal values.
  const unit = { absolute: '1', relative: 'fabsl(f)', ulp: 'ulp(f)' }[c.measure];
  const skipped = c.measure === 'relative' ? '|| fabsl(f) < 0x1p-126L' : '';
  return `#include <math.h>
#include <stdio.h>
#include <string.h>
#include <stdint.h>
${code.code}
static long double ulp(long double y) { int e; y = fabsl(y); if (y < 0x1p-126L) return 0x1p-149L; frexpl(y, &e); return ldexpl(1, e - 24); }
static long double reference(long double x) { return ${c.reference}; }
static float from_bits(uint32_t b) { float v; memcpy(&v, &b, 4); return v; }
static uint32_t to_bits(float v) { uint32_t b; memcpy(&b, &v, 4); return b; }
static long double worst = 0; static float where = 0; static unsigned long count = 0;
static void look(float x) {
  const long double f = reference(x);
  count++;
  if (f == 0 ${skipped}) { if (f == 0 && ${name}(x) != 0 && ${c.measure === 'absolute' ? '0' : '1'}) worst = INFINITY; return; }
  const long double e = fabsl((long double)${name}(x) - f) / ${unit};
  if (!(e <= worst)) { worst = e; where = x; }
}
/* Every float of [low, high] with the sign of s, 0 <= low <= high in magnitude. */
static void run(float low, float high, float s) { for (uint32_t b = to_bits(low); b <= to_bits(high); b += ${step}) look(s * from_bits(b)); look(s * high); }
static float inside(long double v, int up) { float r = (float)v; if (up && r < v) r = nextafterf(r, INFINITY); if (!up && r > v) r = nextafterf(r, -INFINITY); return r; }
int main(void) {
  const float low = inside(${ratio(c.low)}, 1), high = inside(${ratio(c.high)}, 0);
  if (low >= 0) run(low, high, 1); else if (high <= 0) run(-high, -low, -1); else { run(0, high, 1); run(0, -low, -1); }
  printf("%.17Lg %.9g %lu\\n", worst, where, count);
  return 0;
}
`;
}
