/** Pieces of LaTeX: how tightly they bind, which names stand without parentheses, how two of them are joined. */
import { type Expression, Q } from '../expression/index.ts';
import { isGreekWord, latexSymbol } from './symbols.ts';

/** How tightly a text binds. A part in a place that needs more than it has gets parentheses. */
export const enum Level {
  Relation = 0,
  Sum = 1,
  Product = 2,
  /** `\sin x`: binds like a product on its right side only. */
  Prefix = 3,
  Power = 4,
  Atom = 5,
}

export interface Written {
  readonly text: string;
  readonly level: Level;
  /** Higher than a line of text: parentheses around it must grow. */
  readonly tall: boolean;
  /** Ends with an argument without parentheses (`2\sin x`), which would take in what follows. */
  readonly open?: boolean;
}

/** Joins two pieces of LaTeX so that a command name does not swallow a letter. */
export function glue(a: string, b: string): string {
  if (a === '') return b;
  if (/\\[A-Za-z]+$/.test(a) && /^[A-Za-z]/.test(b)) return `${a} ${b}`;
  return a + b;
}

/** Names after which an author leaves the parentheses away, and which take a power before their argument. */
export const BARE_NAMES = /^\\(?:(?:arc)?(?:sin|cos|tan)|cot|sec|csc|(?:sin|cos|tan|cot)h|ln|log|lg|exp|operatorname\{(?:ar[cs]?\w+|sech|csch)\})(?:\^(?:.|\{[^{}]*\}))?$/;
/** Commands that LaTeX defines without packages; other function names are written as operators. */
const STANDARD_COMMANDS = new Set('arccos arcsin arctan arg cos cosh cot coth csc deg det dim exp gcd hom inf ker lg lim ln log max min Pr sec sin sinh sup tan tanh'.split(' '));

/** The command where LaTeX defines it without packages, else the name as an operator. */
export function standardCommand(name: string): string {
  const word = /^\\([A-Za-z]+)$/.exec(name)?.[1];
  return word === undefined || STANDARD_COMMANDS.has(word) || isGreekWord(word) ? name : `\\operatorname{${word}}`;
}

export const atom = (text: string): Written => ({ text, level: Level.Atom, tall: false });
/** With a space in front where the text would run into what stands before. */
export const spaced = (text: string): string => (/^[A-Za-z0-9(]/.test(text) ? ` ${text}` : text);
/** Primes go before a subscript's end: `y_i` differentiated is `y_i'`, which TeX sets the same way as `y'_i`. */
export const withPrimes = (base: string, mark: string): string => (base.includes('^') ? `{${base}}${mark}` : `${base}${mark}`);

/** An argument that needs no parentheses after `\sin`: a letter, a number, a fraction, or a product of letters led by a number. */
export function standsBare(e: Expression, text: string): boolean {
  if (text.startsWith('-')) return false;
  switch (e.kind) {
    case 'symbol':
      return !/^\\mathrm/.test(latexSymbol(e.name));
    case 'constant':
      return true;
    case 'call':
      return e.function === 'abs';
    case 'number':
      return e.written === undefined;
    case 'quotient':
      return /^\\[dt]?frac/.test(text);
    case 'product':
      return e.factors.every((f, i) => (f.kind === 'symbol' && !/^\\mathrm/.test(latexSymbol(f.name))) || f.kind === 'constant' || (i === 0 && f.kind === 'number' && Q.isInteger(f.value)));
    default:
      return false;
  }
}

/** Brackets of a template that stand around a list of arguments grow with it. */
export function withGrowingBrackets(text: string, args: readonly string[]): string {
  for (let i = 0; i < args.length; i += 1) {
    const inside = `(${args.slice(i).join(', ')})`;
    if (text.endsWith(inside)) return `${text.slice(0, -inside.length)}\\left${inside.slice(0, -1)}\\right)`;
  }
  return text;
}
