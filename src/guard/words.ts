/** Numbers and sentences of a guard, for answers and comments. */
import { type Expression, Q } from '../expression/index.ts';
import { filledLines, type FloatFormat } from '../fit/index.ts';
import { real } from '../rigorous/index.ts';
import { toPlain } from '../write/index.ts';

/** A bound as a decimal rounded up. */
export const decimal = (x: number, digits = 4): string => real.rationalToDecimal(Q.fromDouble(x), digits, 1);

export interface CommentFacts {
  readonly function: Expression;
  readonly variable: string;
  readonly interval: readonly [string, string];
  readonly format: FloatFormat;
  readonly whole: number;
  readonly series: number | null;
  readonly direct: number | null;
  readonly switchText: string | null;
  readonly terms: number | null;
  readonly assumptions: readonly string[];
}

export function commentOf(facts: CommentFacts): string[] {
  const branches =
    facts.series !== null && facts.switchText !== null ? ` (${decimal(facts.series)} within ${facts.switchText} of the point, by ${facts.terms} ${facts.terms === 1 ? 'term' : 'terms'} of the series${facts.direct === null ? '' : `; ${decimal(facts.direct)} beyond`})` : '';
  return [
    `${toPlain(facts.function)} for ${facts.variable.replace(/\\/g, '')} in [${facts.interval.join(', ')}], ${facts.format.name}.`,
    `Proven for every ${facts.format.name} argument in the interval, evaluation included: relative error at most ${decimal(facts.whole)}${branches}.`,
    `Assumes: ${facts.assumptions.join('; ')}.`,
    'Valid only on this interval and in this format. In safety-related code follow your own standards and have it reviewed by qualified people.',
  ].flatMap(filledLines);
}
