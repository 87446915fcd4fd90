/**
 * True claims built from published expansions, and mutants of them: one coefficient, sign, exponent, factorial or order changed.
 * Whether a mutant is still true is decided here from the published coefficients alone, in exact rationals; the engine is not asked.
 */
import { readFileSync } from 'node:fs';
import { build, type DocumentStyle, type Expression, freeSymbols, literalRational, PLAIN_STYLE, Q, type Rational } from '../../src/expression/index.ts';
import { readExact, readExpression } from '../../src/read/index.ts';
import { toLatex, toPlain, toUnicode } from '../../src/write/index.ts';

export interface Published {
  readonly id: string;
  readonly latex: string;
  readonly variable: string;
  readonly parameters: readonly string[];
  readonly terms: readonly { readonly coefficient: Rational; readonly power: number }[];
  /** Power of the first term left out; its coefficient is not zero. */
  readonly remainder: number;
  readonly source: string;
}

interface Row {
  readonly id: string;
  readonly kind: string;
  readonly latex: string;
  readonly variable: string;
  readonly point: string;
  readonly prefactor?: string;
  readonly terms: readonly (readonly [string, string, number, string?])[];
  readonly remainder: readonly [string, number, string?];
  readonly parameters: Readonly<Record<string, string>>;
  readonly source: string;
}

/** Rows at 0 with rational coefficients and whole powers: what can be mutated and judged by arithmetic. */
export function publishedRows(file: string): readonly Published[] {
  const rows = readFileSync(file, 'utf8')
    .trim()
    .split('\n')
    .map((line) => JSON.parse(line) as Row);
  return rows.flatMap((row) => {
    const read = readExpression(row.latex, 'latex', { symbols: [row.variable] });
    if (!read.ok || freeSymbols(read.value).join() !== row.variable) return [];
    if (row.kind !== 'explicit' || row.point !== '0' || row.prefactor !== undefined || row.terms.length < 3 || Object.keys(row.parameters).length > 0) return [];
    const terms = row.terms.map(([c, p, log, scale]) => {
      const exact = readExact(c);
      const coefficient = exact.ok ? literalRational(exact.value) : null;
      return coefficient && log === 0 && scale === undefined && /^-?\d+$/.test(p) ? { coefficient, power: Number(p) } : null;
    });
    const known = terms.filter((t) => t !== null);
    if (known.length !== terms.length || row.remainder[1] !== 0 || !/^\d+$/.test(row.remainder[0])) return [];
    return [{ id: row.id, latex: row.latex, variable: row.variable, parameters: [], terms: known, remainder: Number(row.remainder[0]), source: row.source }];
  });
}

export type Mark = 'O' | 'o' | 'dots' | 'none';
export interface Printed {
  readonly text: string;
  readonly language: string;
}
/** One printed term: sign and body are separate texts. */
interface Piece {
  readonly negative: boolean;
  readonly body: string;
}

/** A way to print: five notations. */
export interface Notation {
  readonly name: string;
  readonly language: string;
  readonly mark: Mark;
  readonly minus: string;
  term(coefficient: Rational, power: number, variable: string): string;
  wrap(left: string, right: string): string;
  order(power: number, variable: string, little: boolean): string;
  readonly dots: string;
  left(row: Published): string | null;
}

const power = (variable: string, p: number): Expression => (p === 0 ? build.number(1) : p === 1 ? build.symbol(variable) : build.power(build.symbol(variable), p));
function tree(c: Rational, p: number, variable: string, outside: boolean): Expression {
  const x = power(variable, p);
  const [num, den] = [build.number(c.num), build.number(c.den)];
  if (p === 0) return c.den === 1n ? num : build.quotient(num, den);
  if (c.den === 1n) return c.num === 1n ? x : build.product(num, x);
  if (outside) return build.product(build.quotient(num, den), x);
  return build.quotient(c.num === 1n ? x : build.product(num, x), den);
}

const latexOrder = (macro: string) => (p: number, v: string, little: boolean): string => `${little ? 'o' : macro}(${v}^{${p}})`;
/** n! where the denominator is one. */
function factorialOf(den: bigint): number | null {
  let f = 1n;
  for (let n = 2; n < 25; n += 1) {
    f *= BigInt(n);
    if (f === den) return n;
  }
  return null;
}
const style = (changes: Partial<DocumentStyle>): DocumentStyle => ({ ...PLAIN_STYLE, ...changes });

export const NOTATIONS: readonly Notation[] = [
  {
    name: 'LaTeX display with O', language: 'latex', mark: 'O', minus: '-', dots: '\\cdots',
    term: (c, p, v) => toLatex(tree(c, p, v, true), style({})),
    wrap: (l, r) => `Then\n\\[ ${l} = ${r}. \\]\n`,
    order: latexOrder('\\mathcal{O}'), left: (row) => row.latex,
  },
  {
    name: 'LaTeX align with dots and factorials', language: 'latex', mark: 'dots', minus: '-', dots: '\\dots',
    term: (c, p, v) => {
      const n = factorialOf(c.den);
      return n === null || c.num !== 1n || p === 0 ? toLatex(tree(c, p, v, false), style({})) : `\\frac{${toLatex(power(v, p))}}{${n}!}`;
    },
    wrap: (l, r) => `\\begin{align}\n  ${l} &= ${r}\n\\end{align}\n`,
    order: latexOrder('O'), left: (row) => row.latex,
  },
  {
    name: 'Markdown with an approximation sign', language: 'markdown', mark: 'none', minus: '-', dots: '',
    term: (c, p, v) => toLatex(tree(c, p, v, false), style({ fraction: 'slash' })),
    wrap: (l, r) => `For small values we have $${l} \\approx ${r}$ here.\n`,
    order: latexOrder('O'), left: (row) => row.latex,
  },
  {
    name: 'comment in Unicode', language: 'c', mark: 'dots', minus: '−', dots: '...',
    term: (c, p, v) => toUnicode(tree(c, p, v, false)),
    wrap: (l, r) => `// ${l} ≈ ${r}\ndouble f(double x);\n`,
    order: (p, v) => `O(${v}^${p})`,
    left: (row) => plainLeft(row, toPlain),
  },
  {
    name: 'plain comment with o', language: 'python', mark: 'o', minus: '-', dots: '',
    term: (c, p, v) => toPlain(tree(c, p, v, false)),
    wrap: (l, r) => `# ${l} = ${r}\nx = 1\n`,
    order: (p, v, little) => `${little ? 'o' : 'O'}(${v}^${p})`,
    left: (row) => plainLeft(row, toPlain),
  },
];

function plainLeft(row: Published, write: (e: Expression) => string): string | null {
  const read = readExpression(row.latex, 'latex', { symbols: [row.variable] });
  if (!read.ok || /\\/.test(row.variable)) return null;
  const text = write(read.value);
  const again = readExpression(text, 'plain', { symbols: [row.variable] });
  return again.ok && !/int\(|sum\(|limit\(/.test(text) ? text : null;
}

const lastPower = (row: Published): number => row.terms.at(-1)?.power ?? 0;

function pieces(row: Published, notation: Notation, change: { readonly term?: number; readonly coefficient?: Rational; readonly power?: number } = {}): readonly Piece[] {
  return row.terms.map((t, i) => {
    const c = i === change.term ? (change.coefficient ?? t.coefficient) : t.coefficient;
    const p = i === change.term ? (change.power ?? t.power) : t.power;
    return { negative: c.num < 0n, body: notation.term(Q.absolute(c), p, row.variable) };
  });
}

function print(row: Published, notation: Notation, list: readonly Piece[], orderPower: number): string | null {
  const left = notation.left(row);
  if (left === null) return null;
  const sum = list.map((piece, i) => (i === 0 ? `${piece.negative ? notation.minus : ''}${piece.body}` : ` ${piece.negative ? notation.minus : '+'} ${piece.body}`)).join('');
  const ending = notation.mark === 'O' || notation.mark === 'o' ? ` + ${notation.order(orderPower, row.variable, notation.mark === 'o')}` : notation.mark === 'dots' ? ` + ${notation.dots}` : '';
  return notation.wrap(left, sum + ending);
}

/** The order that is printed for a true claim: the published one for O, the last kept power for o. */
const printedOrder = (row: Published, mark: Mark): number => (mark === 'o' ? lastPower(row) : row.remainder);

export function trueClaim(row: Published, notation: Notation): string | null {
  return print(row, notation, pieces(row, notation), printedOrder(row, notation.mark));
}

export interface Mutant {
  readonly row: Published;
  readonly notation: Notation;
  readonly what: 'coefficient' | 'sign' | 'exponent' | 'factorial' | 'order';
  readonly text: string;
  /** By the published coefficients. */
  readonly stillTrue: boolean;
  /** Where the text differs from the true one. */
  readonly changed: { readonly start: number; readonly end: number };
}

export function mutantsOf(row: Published, notation: Notation): readonly Mutant[] {
  const original = trueClaim(row, notation);
  if (original === null) return [];
  const out: Mutant[] = [];
  const add = (what: Mutant['what'], text: string | null, stillTrue: boolean): void => {
    if (text !== null && text !== original) out.push({ row, notation, what, text, stillTrue, changed: difference(original, text) });
  };
  const order = printedOrder(row, notation.mark);
  const printedWith = (list: readonly Piece[], p = order): string | null => print(row, notation, list, p);
  row.terms.forEach((t, i) => {
    const c = t.coefficient;
    const changedCoefficients: readonly Rational[] = [Q.rational(c.num + (c.num < 0n ? -1n : 1n), c.den), Q.rational(c.num, c.den + 1n), ...(c.den > 2n ? [Q.rational(c.num, c.den - 1n)] : [])];
    for (const changed of changedCoefficients) if (changed.num !== 0n) add('coefficient', printedWith(pieces(row, notation, { term: i, coefficient: changed })), Q.equal(changed, c));
    add('sign', printedWith(pieces(row, notation, { term: i, coefficient: Q.negate(c) })), false);
    const free = (p: number): boolean => !row.terms.some((other) => other.power === p);
    for (const p of [t.power + 1, t.power - 1]) if (t.power > 0 && p > 0 && free(p) && (notation.mark !== 'O' || p < row.remainder)) add('exponent', printedWith(pieces(row, notation, { term: i, power: p })), false);
    const n = factorialOf(c.den);
    if (n !== null && c.num * c.num === 1n && n > 2) {
      add('factorial', printedWith(pieces(row, notation, { term: i, coefficient: Q.rational(c.num, BigInt(n)) })), Q.equal(Q.rational(c.num, BigInt(n)), c));
    }
  });
  if (notation.mark === 'O') {
    add('order', printedWith(pieces(row, notation), order + 1), false);
    if (order - 1 > lastPower(row)) add('order', printedWith(pieces(row, notation), order - 1), true);
  }
  if (notation.mark === 'o') add('order', printedWith(pieces(row, notation), row.remainder), false);
  return out;
}

/** The stretch of the second text that differs, widened to whole numbers. */
function difference(a: string, b: string): { readonly start: number; readonly end: number } {
  let start = 0;
  while (start < a.length && start < b.length && a[start] === b[start]) start += 1;
  let tail = 0;
  while (tail < a.length - start && tail < b.length - start && a[a.length - 1 - tail] === b[b.length - 1 - tail]) tail += 1;
  let end = b.length - tail;
  const digit = (i: number): boolean => /[\d!⁰¹²³⁴⁵⁶⁷⁸⁹]/u.test(b.charAt(i));
  while (start > 0 && digit(start - 1) && (digit(start) || digit(start - 1))) start -= 1;
  while (end < b.length && digit(end)) end += 1;
  return { start, end: Math.max(end, start + 1) };
}
