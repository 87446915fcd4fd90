/** Guards whose emitted C is compiled and run over every float of their interval, with a reference in wider precision that does not cancel. */
import { Q, rationalOf } from '../../src/expression/index.ts';
import { formatByName } from '../../src/fit/index.ts';
import { guard, type Guarded } from '../../src/guard/index.ts';
import { budget } from '../../src/outcome.ts';
import { readExact } from '../../src/read/index.ts';
import type { FloatRun } from './everyFloat.ts';

export interface GuardCase {
  readonly text: string;
  readonly point?: string;
  /** `inf` for an end without limit. */
  readonly interval: readonly [string, string];
  /** C expression in double `x` that loses at most a few bits to cancellation. */
  readonly reference: string;
  readonly tolerance?: string;
  /** It has a pole in the interval. */
  readonly grows?: boolean;
}

/** A series up to `limit`, where its first term left out is below 2^-46 of the sum, the function itself beyond. */
const series = (limit: string, small: string, large: string): string => `fabs(x) < ${limit} ? (${small}) : (${large})`;

export const GUARDS: readonly GuardCase[] = [
  { text: '(1 - cos(x))/(x*x)', interval: ['-1', '1'], reference: 'x == 0 ? 0.5 : 0.5*(sin(x/2)/(x/2))*(sin(x/2)/(x/2))' },
  { text: '(exp(x) - 1)/x', interval: ['-1', '1'], reference: 'x == 0 ? 1 : expm1(x)/x' },
  { text: 'atan(x)/x', interval: ['-1', '1'], reference: 'x == 0 ? 1 : atan(x)/x' },
  { text: 'sin(x)/x', interval: ['-3', '3'], reference: 'x == 0 ? 1 : sin(x)/x' },
  { text: 'sqrt(1 + x^2) - 1', interval: ['-4', '4'], reference: 'x*x/(sqrt(1 + x*x) + 1)' },
  { text: 'log(1+x) - x', interval: ['-1/2', '1'], reference: series('0.0625', 'x*x*(-1.0/2+x*(1.0/3+x*(-1.0/4+x*(1.0/5+x*(-1.0/6+x*(1.0/7+x*(-1.0/8+x*(1.0/9+x*(-1.0/10+x*(1.0/11+x*(-1.0/12+x*(1.0/13+x*(-1.0/14+x*(1.0/15))))))))))))))', 'log1p(x) - x') },
  { text: '1/x - 1/tan(x)', interval: ['-1', '1'], reference: series('0.25', 'x*(1.0/3+x*x*(1.0/45+x*x*(2.0/945+x*x*(1.0/4725+x*x*(2.0/93555+x*x*(1382.0/638512875+x*x*(4.0/18243225)))))))', '1/x - 1/tan(x)') },
  { text: '(x - sin(x) - x^3/6)/x^5', interval: ['-1', '1'], reference: '-1.0/120+x*x*(1.0/5040+x*x*(-1.0/362880+x*x*(1.0/39916800+x*x*(-1.0/6227020800+x*x*(1.0/1307674368000.0+x*x*(-1.0/355687428096000.0+x*x/121645100408832000.0))))))' },
  { text: 'x - sin(x)', interval: ['-1', '1'], reference: series('0.25', 'x*x*x*(1.0/6+x*x*(-1.0/120+x*x*(1.0/5040+x*x*(-1.0/362880+x*x*(1.0/39916800)))))', 'x - sin(x)') },
  { text: 'sqrt(x+1) - sqrt(x)', interval: ['0', 'inf'], reference: '1/(sqrt(x + 1) + sqrt(x))' },
  { text: '1 - sqrt(1 - x)', interval: ['-1', '1/2'], reference: 'x/(1 + sqrt(1 - x))' },
  { text: 'log(x)/(x - 1)', point: '1', interval: ['1/2', '2'], reference: 'x == 1 ? 1 : log1p(x - 1)/(x - 1)' },
  { text: 'acos(1 - x)', interval: ['0', '1'], reference: '2*asin(sqrt(x/2))' },
  { text: 'exp(x)/x^2', interval: ['-1', '1'], reference: 'exp(x)/(x*x)', grows: true },
  { text: '(exp(x) - 1)/x^2', interval: ['-1', '1'], reference: 'expm1(x)/(x*x)', grows: true },
  { text: 'abs(x) - sin(x)', interval: ['0', '1'], reference: series('0.25', 'x*x*x*(1.0/6+x*x*(-1.0/120+x*x*(1.0/5040+x*x*(-1.0/362880+x*x*(1.0/39916800)))))', 'x - sin(x)') },
  { text: 'x - sin(x)', interval: ['-1', '-1/1000'], reference: series('0.25', 'x*x*x*(1.0/6+x*x*(-1.0/120+x*x*(1.0/5040+x*x*(-1.0/362880+x*x*(1.0/39916800)))))', 'x - sin(x)') },
  { text: 'acosh(1 + x)', interval: ['0', '4'], reference: 'log1p(x + sqrt(x)*sqrt(x + 2))' },
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

export const guardRunOf = (c: GuardCase, { code }: Guarded): FloatRun => ({ code, name: 'guarded', reference: c.reference, low: c.interval[0], high: c.interval[1], measure: 'relative', marginBits: 44, ...(c.grows ? { grows: true } : {}) });
