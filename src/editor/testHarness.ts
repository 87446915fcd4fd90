/** A C program that measures, on the user's own machine, how far a truncated expansion is from the function over every float of an interval. */
import type { Consultation } from './consultant.ts';

const RATIONAL = /^-?\d+(\/\d+)?$/;
/** Functions of the C standard's <math.h>, which have a variant for long double. */
const CALL = /\b(a?(?:sin|cos|tan)h?|exp|exp2|expm1|log|log2|log10|log1p|sqrt|cbrt|pow|hypot|fabs|fma|fmin|fmax|atan2|erf|erfc|tgamma|lgamma)\s*\(/g;

/** `code` is the function in C, of one variable; null where there is none. Works for an expression of any language, whose function is the same. */
export function testHarness(code: string | null, { answer, asked }: Consultation): string | null {
  if (code === null || !answer.ok || answer.prefactor !== undefined || !answer.reading) return null;
  if (!answer.terms.every((term) => RATIONAL.test(term.coefficient) && /^-?\d+$/.test(term.power) && term.log === 0 && term.scale === undefined)) return null;
  if (answer.reading.point !== '0' && answer.reading.pointLatex !== '0') return null;
  const variable = onlyVariable(code);
  if (variable === null) return null;
  const interval = asked.interval ?? ['-0.5', '0.5'];
  const [from, to] = interval.map(literal);
  if (!from || !to) return null;
  const terms = answer.terms.map((term) => `(${term.coefficient.replace('/', '.0L/')}.0L) * powl(v, ${term.power})`);
  return `/* Largest error of the truncated expansion
 *   ${answer.text}
 * over every float of [${interval.join(', ')}], against long double. Build and run:
 *   cc -O2 harness.c -lm && ./a.out
 */
#include <math.h>
#include <stdio.h>

static long double reference(long double ${variable}) { return ${code.replace(CALL, '$1l(').replace(/(?<![\w.])((?:\d+\.\d*|\.\d+)(?:e[-+]?\d+)?)f?\b/gi, '$1L')}; }
static long double sum(long double v) { return ${terms.join('\n    + ') || '0.0L'}; }

int main(void) {
  const float from = (float)(${from}), to = (float)(${to});
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

/** An end of the interval as C says it; null for what is neither a decimal nor a ratio of integers. */
const literal = (end: string): string | null => (/^-?\d+$/.test(end) ? `${end}.0` : /^-?(?:\d+\.\d*|\.\d+|\d+(?=e))(?:e-?\d+)?$/i.test(end) ? end : /^-?\d+\/\d+$/.test(end) ? `${end.replace('/', '.0/')}.0` : null);

/** The one name in the code that is no call and no constant. */
function onlyVariable(code: string): string | null {
  const names = new Set([...code.matchAll(/[A-Za-z_]\w*(?!\w*\s*\()/g)].map(([name]) => name).filter((name) => !/^(?:M_[A-Z0-9_]+|e\d*|L)$/.test(name)));
  const [name, ...more] = names;
  return name !== undefined && more.length === 0 ? name : null;
}
