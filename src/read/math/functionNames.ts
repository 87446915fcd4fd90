/** Names of known functions as they stand in formulas. The descriptions in src/functions say which names there are; here they are only looked up. */
import { describe, type FunctionDescription, lookupLatex, lookupPlain } from '../../functions/index.ts';

/** A function name as read: how it is spelled, and the keys under which descriptions list it. */
export interface KnownName {
  readonly written: string;
  /** With backslash: `\sin`, `\operatorname{erf}`. */
  readonly latex: string;
  /** The plain word, or null. */
  readonly plain: string | null;
}

/** Functions that the tree has without a description, as they are written with words or marks of their own. */
const OWN: ReadonlySet<string> = new Set(['sqrt', 'cbrt', 'pow', 're', 'im', 'Re', 'Im', 'conj']);

export const commandName = (name: string): KnownName | null => (lookupLatex(`\\${name}`) ? { written: `\\${name}`, latex: `\\${name}`, plain: null } : null);

/** A word in a formula: an upright name, or an identifier of plain notation. */
export function wordName(word: string): KnownName | null {
  if (word.length < 2) return null;
  const latex = `\\operatorname{${word}}`;
  return OWN.has(word) || lookupPlain(word) || lookupLatex(latex) || lookupLatex(`\\${word}`) ? { written: word, latex, plain: word } : null;
}

export interface CallShape {
  /** Text of a subscript in canonical form, or null. */
  readonly index: string | null;
  readonly primes: number;
  readonly inverse: boolean;
  readonly arguments: number;
}

/** A description, and which of the written parts it took: the others are still to be dealt with. */
export interface Found {
  readonly description: FunctionDescription;
  readonly tookIndex: 'name' | 'argument' | 'none';
  readonly tookPrimes: boolean;
  readonly tookInverse: boolean;
  /** Leading arguments that the writing leaves out: branch 0 of W, order 0 of ber. */
  readonly leadingZero: boolean;
}

const INVERSES: Readonly<Record<string, string>> = { sin: 'asin', cos: 'acos', tan: 'atan', cot: 'acot', sec: 'asec', csc: 'acsc', sinh: 'asinh', cosh: 'acosh', tanh: 'atanh', coth: 'acoth', sech: 'asech', csch: 'acsch' };
const plainly = { tookIndex: 'none', tookPrimes: false, tookInverse: false, leadingZero: false } as const;

/** The function that a name with its decorations and number of arguments means; null where none fits. */
export function resolve(name: KnownName, shape: CallShape): Found | null {
  const count = shape.arguments;
  const latexNames = [name.latex, ...(name.plain === null ? [] : [`\\${name.plain}`])];
  const first = (f: (latex: string) => FunctionDescription | null): FunctionDescription | null => latexNames.map(f).find((d) => d !== null) ?? null;
  if (shape.primes > 0) {
    const primed = first((n) => lookupLatex(`${n}${"'".repeat(shape.primes)}`, { indices: 0, arguments: count }));
    if (primed) return { ...plainly, description: primed, tookPrimes: true };
  }
  if (shape.inverse) {
    const inverted = first((n) => lookupLatex(`${n}^{-1}`, { indices: 0, arguments: count }));
    if (inverted) return { ...plainly, description: inverted, tookInverse: true };
  }
  if (shape.index !== null) {
    const indexed = first((n) => lookupLatex(`${n}_${shape.index}`, { indices: 0, arguments: count }));
    if (indexed) return { ...plainly, description: indexed, tookIndex: 'name' };
    const withArgument = first((n) => lookupLatex(n, { indices: 1, place: 'subscript', arguments: count }));
    if (withArgument) return { ...plainly, description: withArgument, tookIndex: 'argument' };
  }
  const direct = first((n) => lookupLatex(n, { indices: 0, arguments: count })) ?? (name.plain === null ? null : lookupPlain(name.plain, count));
  if (direct) {
    const inverse = shape.inverse ? INVERSES[direct.id] : undefined;
    const description = inverse === undefined ? direct : (describe(inverse) ?? direct);
    return { ...plainly, description, tookInverse: inverse !== undefined };
  }
  if (shape.index === null) {
    const zero = first((n) => lookupLatex(n, { indices: 1, place: 'subscript', arguments: count }));
    if (zero && /^(?:lambertW|kelvin)/.test(zero.id)) return { ...plainly, description: zero, leadingZero: true };
    const word = name.plain === null ? null : lookupPlain(name.plain, count + 1);
    if (word?.id === 'lambertW' || word?.id === 'expIntegralE') return { ...plainly, description: word, leadingZero: true };
  }
  return null;
}
