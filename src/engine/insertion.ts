/** The result as the document would write it: in prose its own mathematical style, in code its own language and float type. */
import type { Expansion } from '../expand/index.ts';
import { type DocumentStyle, PLAIN_STYLE } from '../expression/index.ts';
import { documentStyle } from '../read/index.ts';
import type { InsertionAnswer } from '../protocol.ts';
import { codeLanguage, continuationLatex, expansionLatex, hornerExpression } from '../write/index.ts';

export interface InsertionPlace {
  readonly document: string;
  readonly language: string;
  /** The text of the expression itself. */
  readonly expression: string;
}

export function insertionAnswer(expansion: Expansion, place: InsertionPlace): InsertionAnswer {
  const style = styleOf(place);
  return { continuation: continuationLatex(expansion, style), expansion: expansionLatex(expansion, style), code: codeOf(expansion, place) };
}

/** The habits of a document of prose; what they leave open is written plainly. */
function styleOf({ document, language }: InsertionPlace): DocumentStyle {
  if (codeLanguage(language)) return PLAIN_STYLE;
  const habits = documentStyle(document, { language });
  return {
    ...PLAIN_STYLE,
    order: { macro: habits.order, little: 'o', argument: habits.orderTakesGroup ? 'braces' : 'parentheses' },
    fraction: habits.coefficient === 'slash' ? 'slash' : habits.fraction,
    coefficient: habits.coefficient === 'before' ? 'outside' : 'inside',
    logarithm: habits.logarithm,
    approximation: habits.approximation,
    ending: habits.remainder === 'approximation' ? 'none' : habits.remainder,
    dots: habits.dots,
  };
}

function codeOf(expansion: Expansion, { language, expression, document }: InsertionPlace): InsertionAnswer['code'] {
  if (!codeLanguage(language)) return null;
  const written = hornerExpression(expansion, { language, ...(isSingle(expression, language) ? { format: 'binary32' } : {}), ...libraryPrefix(expression, document, language) });
  return written.ok ? written.value : null;
}

/** Single precision shows in a literal's suffix or in a library name that carries it. */
function isSingle(expression: string, language: string): boolean {
  if (language === 'rust') return /\d_?f32\b/.test(expression);
  return /(?<![\w.])\d+\.?\d*(?:[eE][-+]?\d+)?[fF]\b/.test(expression) || /\b(?:sin|cos|tan|exp|log|sqrt|pow|atan|asin|acos|sinh|cosh|tanh|expm1|log1p)f\s*\(/.test(expression);
}

/** `np.` or `math.` as the expression itself, else its file, calls the library. */
export function libraryPrefix(expression: string, document: string, language: string): { readonly prefix?: string } {
  if (language !== 'python') return {};
  const used = /\b(np|numpy|math|mp)\.\w+\s*\(/.exec(expression) ?? /\b(np|numpy|math)\.\w+\s*\(/.exec(document);
  return used?.[1] ? { prefix: `${used[1]}.` } : {};
}
