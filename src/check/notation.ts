/** Right pieces in the author's own notation. */
import { build, PLAIN_STYLE, type DocumentStyle, type Expression } from '../expression/index.ts';
import { toLatex, toPlain, toUnicode } from '../write/index.ts';

/** How the claim is written: LaTeX with its habits, or one line of plain or Unicode text. */
export interface Notation {
  readonly kind: 'latex' | 'unicode' | 'plain';
  readonly style: DocumentStyle;
}

/** The habits that the claim itself shows. */
export function notationOf(text: string, language: 'latex' | 'plain'): Notation {
  const plainUnicode = language === 'plain' && /[²³⁴⁵⁶⁷⁸⁹⁰ⁿ−·√α-ω]/u.test(text);
  const style: DocumentStyle = {
    ...PLAIN_STYLE,
    fraction: /\\tfrac/.test(text) ? '\\tfrac' : /\\dfrac/.test(text) ? '\\dfrac' : /\\frac/.test(text) || !/\w\s*\/\s*\w/.test(text) ? '\\frac' : 'slash',
    coefficient: /\\[td]?frac\s*(?:\{\s*\d+!?\s*\}\s*\{\s*\d+!?\s*\}|\d\s*\d)\s*\\?[,!]?\s*[a-zA-Z(\\]/.test(text) ? 'outside' : 'inside',
    logarithm: /\\log/.test(text) && !/\\ln/.test(text) ? '\\log' : '\\ln',
    order: orderStyle(text),
  };
  return { kind: language === 'latex' ? 'latex' : plainUnicode ? 'unicode' : 'plain', style };
}

function orderStyle(text: string): DocumentStyle['order'] {
  const found = /(\\mathcal\s*\{?\s*O\s*\}?|\\order|\\[bB]igO|\\Order)\s*(\{|\\left)?/.exec(text);
  if (!found?.[1]) return /O\s*\\left/.test(text) ? { ...PLAIN_STYLE.order, argument: 'growing' } : PLAIN_STYLE.order;
  return { macro: found[1].trim(), little: 'o', argument: found[2] === '{' && !/mathcal/.test(found[1]) ? 'braces' : found[2] === '\\left' ? 'growing' : 'parentheses' };
}

export function writeIn(notation: Notation, e: Expression): string {
  if (notation.kind === 'latex') return toLatex(e, notation.style);
  return notation.kind === 'unicode' ? toUnicode(e) : toPlain(e);
}

/** A term to be set into a sum: ` + a` or ` - a`. */
export function signedIn(notation: Notation, e: Expression): string {
  const negative = e.kind === 'negation';
  const body = negative ? e.operand : e;
  const minus = notation.kind === 'unicode' ? '−' : '-';
  return `${negative ? minus : '+'} ${writeIn(notation, body.kind === 'sum' ? build.product(build.number(1), body) : body)}`;
}
