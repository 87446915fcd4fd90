/** Guards whose emitted C is compiled and run over every float of their interval, with a reference in wider precision that does not cancel. */
import { Q } from '../../src/expression/index.ts';
import { formatByName } from '../../src/fit/index.ts';
import { guard, type Guarded } from '../../src/guard/index.ts';
import { budget } from '../../src/outcome.ts';
import { readExact } from '../../src/read/index.ts';
import { rationalOf } from '../../src/rigorous/index.ts';

export interface GuardCase {
  readonly text: string;
  readonly point?: string;
  /** `inf` for an end without limit. */
  readonly interval: readonly [string, string];
  /** C expression in long double `x`, without cancellation; libm's long double functions stay within a few units of the 64th bit. */
  readonly reference: string;
  readonly tolerance?: string;
}

/** sum of c(k) x^k, the terms falling fast enough for |x| <= 1/2 in long double. */
const series = (small: string, large: string): string => `fabsl(x) < 0.25L ? (${small}) : (${large})`;

export const GUARDS: readonly GuardCase[] = [
  { text: '(1 - cos(x))/(x*x)', interval: ['-1', '1'], reference: 'x == 0 ? 0.5L : 0.5L*powl(sinl(x/2)/(x/2), 2)' },
  { text: '(exp(x) - 1)/x', interval: ['-1', '1'], reference: 'x == 0 ? 1 : expm1l(x)/x' },
  { text: 'atan(x)/x', interval: ['-1', '1'], reference: 'x == 0 ? 1 : atanl(x)/x' },
  { text: 'sin(x)/x', interval: ['-3', '3'], reference: 'x == 0 ? 1 : sinl(x)/x' },
  { text: 'sqrt(1 + x^2) - 1', interval: ['-4', '4'], reference: 'x*x/(sqrtl(1 + x*x) + 1)' },
  { text: 'log(1+x) - x', interval: ['-1/2', '1'], reference: series('x*x*(-1.0L/2+x*(1.0L/3+x*(-1.0L/4+x*(1.0L/5+x*(-1.0L/6+x*(1.0L/7+x*(-1.0L/8+x*(1.0L/9+x*(-1.0L/10+x*(1.0L/11+x*(-1.0L/12+x*(1.0L/13+x*(-1.0L/14+x*(1.0L/15))))))))))))))', 'log1pl(x) - x') },
  { text: '1/x - 1/tan(x)', interval: ['-1', '1'], reference: series('x*(1.0L/3+x*x*(1.0L/45+x*x*(2.0L/945+x*x*(1.0L/4725+x*x*(2.0L/93555+x*x*(1382.0L/638512875+x*x*(4.0L/18243225)))))))', '1/x - 1/tanl(x)') },
  { text: '(x - sin(x) - x^3/6)/x^5', interval: ['-1', '1'], reference: '-1.0L/120+x*x*(1.0L/5040+x*x*(-1.0L/362880+x*x*(1.0L/39916800+x*x*(-1.0L/6227020800+x*x/1307674368000.0L))))' },
  { text: 'x - sin(x)', interval: ['-1', '1'], reference: series('x*x*x*(1.0L/6+x*x*(-1.0L/120+x*x*(1.0L/5040+x*x*(-1.0L/362880+x*x*(1.0L/39916800)))))', 'x - sinl(x)') },
  { text: 'sqrt(x+1) - sqrt(x)', interval: ['0', 'inf'], reference: '1/(sqrtl(x + 1) + sqrtl(x))' },
  { text: '1 - sqrt(1 - x)', interval: ['-1', '1/2'], reference: 'x/(1 + sqrtl(1 - x))' },
  { text: 'log(x)/(x - 1)', point: '1', interval: ['1/2', '2'], reference: 'x == 1 ? 1 : log1pl(x - 1)/(x - 1)' },
];

export function guardOf(c: GuardCase, format = 'binary32', language = 'c'): Guarded {
  const number = formatByName(format);
  const exact = (text: string): Q.Rational | null => {
    const read = readExact(text);
    return read.ok ? rationalOf(read.value) : null;
  };
  const read = readExact(c.text);
  if (number?.kind !== 'float' || !read.ok) throw new Error(c.text);
  const point = exact(c.point ?? '0') ?? Q.ZERO;
  const found = guard(
    {
      function: read.value, variable: 'x', point, format: number, language, library: 1, intervalText: c.interval,
      interval: { low: exact(c.interval[0]), high: exact(c.interval[1]) },
      ...(c.tolerance ? { tolerance: Q.fromDecimal(c.tolerance) ?? Q.ONE } : {}),
    },
    budget(300_000),
  );
  if (!found.ok) throw new Error(`${c.text}: ${found.error.message}`);
  return found.value;
}

/** A C program that prints the worst relative error over every `step`-th float of the interval, its place, how many floats it saw, and how many of the results were not finite. */
export function guardHarness(c: GuardCase, { code }: Guarded, step: number): string {
  const end = (t: string): string => (t === 'inf' ? 'INFINITY' : t === '-inf' ? '-INFINITY' : t.replace(/^(-?\d+)(?:\/(\d+))?$/, (_, a: string, b?: string) => `${a}.0L/${b ?? '1'}.0L`));
  return `#include <math.h>
#include <stdio.h>
#include <string.h>
#include <stdint.h>
#include <float.h>
${code}
static long double reference(long double x) { return ${c.reference}; }
static float from_bits(uint32_t b) { float v; memcpy(&v, &b, 4); return v; }
static uint32_t to_bits(float v) { uint32_t b; memcpy(&b, &v, 4); return b; }
static long double worst = 0; static float where = 0; static unsigned long count = 0;
static void look(float x) {
  const long double f = reference(x);
  count++;
  if (fabsl(f) < 0x1p-126L) return;
  const long double e = fabsl(((long double)guarded(x) - f) / f);
  if (!(e <= worst)) { worst = e; where = x; }
}
/* Every float of [low, high] with the sign of s, 0 <= low <= high in magnitude. */
static void run(float low, float high, float s) { for (uint32_t b = to_bits(low); b <= to_bits(high); b += ${step}) look(s * from_bits(b)); look(s * high); look(s * low); }
static float inside(long double v, int up) { if (isinf(v)) return v > 0 ? FLT_MAX : -FLT_MAX; float r = (float)v; if (up && r < v) r = nextafterf(r, INFINITY); if (!up && r > v) r = nextafterf(r, -INFINITY); return r; }
int main(void) {
  const float low = inside(${end(c.interval[0])}, 1), high = inside(${end(c.interval[1])}, 0);
  if (low >= 0) run(low, high, 1); else if (high <= 0) run(-high, -low, -1); else { run(0, high, 1); run(0, -low, -1); }
  printf("%.17Lg %.9g %lu\\n", worst, where, count);
  return 0;
}
`;
}
