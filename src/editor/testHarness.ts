/** A C program that measures, on the user's own machine, how far a truncated expansion is from the function over every float of an interval. */
import type { Consultation } from './consultant.ts';

const RATIONAL = /^-?\d+(\/\d+)?$/;
/** `numeric.sum` uses the names of mpmath, which for these functions are those of C as well. */
const C_NAMES = new Set(['sqrt', 'exp', 'log', 'sin', 'cos', 'tan', 'asin', 'acos', 'atan', 'sinh', 'cosh', 'tanh', 'asinh', 'acosh', 'atanh']);

export function testHarness(text: string, { answer, asked, language }: Consultation): string | null {
  if (!answer.ok || answer.prefactor !== undefined || !answer.reading) return null;
  if (language !== 'c' && language !== 'cpp') return null;
  if (!answer.terms.every((term) => RATIONAL.test(term.coefficient) && /^-?\d+$/.test(term.power) && term.log === 0 && term.scale === undefined)) return null;
  if (answer.reading.point !== '0' && answer.reading.pointLatex !== '0') return null;
  const variable = answer.reading.variable;
  if (!/^[A-Za-z_]\w*$/.test(variable) || C_NAMES.has(variable)) return null;
  const [from, to] = asked.interval ?? ['-0.5', '0.5'];
  const decimal = (end: string): string => (/^-?[\d.]+(e-?\d+)?$/i.test(end) ? end : /^-?\d+\/\d+$/.test(end) ? end.replace('/', '.0/') : '0.5');
  const terms = answer.terms.map((term) => `(${term.coefficient.replace('/', '.0L/')}${term.coefficient.includes('/') ? '.0L' : '.0L'}) * powl(v, ${term.power})`);
  return `/* Largest error of the truncated expansion
 *   ${answer.text}
 * over every float of [${from}, ${to}], against long double. Build and run:
 *   cc -O2 harness.c -lm && ./a.out
 */
#include <math.h>
#include <stdio.h>

static long double reference(long double ${variable}) { return ${text.replace(/\b(sqrt|exp|log|sin|cos|tan|asin|acos|atan|sinh|cosh|tanh|asinh|acosh|atanh|pow|expm1|log1p|cbrt|erf)\s*\(/g, '$1l(').replace(/(\d\.?\d*)f\b/g, '$1')}; }
static long double sum(long double v) { return ${terms.join('\n    + ') || '0.0L'}; }

int main(void) {
  const float from = (float)(${decimal(from)}), to = (float)(${decimal(to)});
  long double worst = 0;
  float where = from;
  for (float v = from; v <= to; v = nextafterf(v, INFINITY)) {
    const long double error = fabsl(reference(v) - sum(v));
    if (error > worst) { worst = error; where = v; }
  }
  printf("largest error %.6Le at %.9g\\n", worst, where);
  return 0;
}
`;
}
