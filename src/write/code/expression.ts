/** Expression -> code that evaluates in the very order of the tree: sums and products from the left, quotients where they stand. */
import { build, Q, type Expression, type Rational } from '../../expression/index.ts';
import { codeWriting, describe } from '../../functions/index.ts';
import { attempt, Declined, type Outcome } from '../../outcome.ts';
import { isRepresentable, type FloatFormat } from '../float.ts';
import { splitSign } from '../factors.ts';
import { Binding, type Piece } from '../linear.ts';
import { identifierOf } from '../symbols.ts';
import { type BinaryCall, binaryCall, isBinaryCall } from './binary.ts';
import { CONSTANT_VALUES } from './constants.ts';
import { codeLanguage, type CallStyle, type LanguageRow } from './languages.ts';
import { literal } from './literal.ts';
import { pythonCall } from './python.ts';
import type { Code, CodeOptions } from './options.ts';

/** The largest power of a plain name that is written as a product where the language has no power operator. */
const LARGEST_PRODUCT = 4n;

/**
 * The expression in a programming language, with the imports it needs. Fails with `bad-request` for a language that is not in the table, `unknown-function` where
 * the language has no such library call, and `bad-request` for what no single expression can say (sums over an index, integrals, O-terms).
 */
export function toCode(expression: Expression, options: CodeOptions): Outcome<Code> {
  return attempt(() => {
    const writer = codeWriter(options);
    const { text } = writer.write(expression);
    return { text, imports: [...writer.imports] };
  });
}

export function rowOf(language: string): LanguageRow {
  const row = codeLanguage(language);
  if (!row) throw new Declined('bad-request', `Code is not written in the language "${language}"; choose one of the supported languages.`);
  return row;
}

export const formatOf = (options: CodeOptions, row: LanguageRow): FloatFormat => options.format ?? (row.floats.binary64 && row.calls.binary64 ? 'binary64' : 'binary32');

export interface CodeWriter {
  write(e: Expression): Piece;
  readonly imports: ReadonlySet<string>;
  /** Adds lines that the file needs at its head. */
  readonly require: (imports: readonly string[]) => void;
  readonly row: LanguageRow;
  readonly format: FloatFormat;
}

export function codeWriter(options: CodeOptions): CodeWriter {
  const row = rowOf(options.language);
  const format = formatOf(options, row);
  if (!row.floats[format]) throw new Declined('bad-request', `${row.title} has no ${format} type; choose another format.`);
  return new Writer(row, format, options);
}

const atom = (text: string): Piece => ({ text, binding: Binding.Atom });
const enclosed = (piece: Piece, binding: Binding): string => (piece.binding >= binding ? piece.text : `(${piece.text})`);

class Writer implements CodeWriter {
  readonly imports = new Set<string>();
  readonly require = (imports: readonly string[]): void => imports.forEach((line) => this.imports.add(line));
  readonly row: LanguageRow;
  readonly format: FloatFormat;
  readonly #options: CodeOptions;
  readonly #reserved: ReadonlySet<string>;

  constructor(row: LanguageRow, format: FloatFormat, options: CodeOptions) {
    this.row = row;
    this.format = format;
    this.#options = options;
    this.#reserved = new Set(row.reserved);
  }

  write(e: Expression): Piece {
    switch (e.kind) {
      case 'number':
        return this.#number(e.value);
      case 'constant':
        return this.#constant(e.name);
      case 'symbol':
        return atom(this.#name(e.name));
      case 'negation': {
        const inner = enclosed(this.write(e.operand), Binding.Product);
        return { text: `-${inner.startsWith('-') ? `(${inner})` : inner}`, binding: Binding.Unary };
      }
      case 'sum':
        return this.#sum(e.terms);
      case 'product':
        return this.#product(e.factors);
      case 'quotient':
        return { text: `${this.#numerator(e.numerator)}${this.row.divide ?? '/'}${enclosed(this.write(e.denominator), Binding.Power)}`, binding: Binding.Product };
      case 'power':
        return this.#power(e.base, e.exponent);
      case 'root':
        return this.#root(e.degree, e.radicand);
      case 'call':
        return this.#call(e.function, e.args);
      case 'apply':
        if (e.derivatives.some((d) => d > 0) || e.args.length === 0) throw new Declined('bad-request', `The derivative of ${e.name} has no name in code; replace it first.`);
        return atom(`${this.#name(e.name)}(${e.args.map((a) => this.write(a).text).join(', ')})`);
      case 'relation':
        return { text: e.sides.map((s) => enclosed(this.write(s), Binding.Sum)).reduce((left, right, i) => `${left} ${this.#relation(e.relations[i - 1] ?? '=')} ${right}`), binding: Binding.Relation };
      case 'piecewise':
        return this.#piecewise(e.branches);
      default:
        throw new Declined('bad-request', `A formula with ${DESCRIPTIONS[e.kind] ?? 'this construct'} cannot be written as one line of code; expand it first.`);
    }
  }

  #name(symbol: string): string {
    if (this.#options.nameOf) return this.#options.nameOf(symbol);
    if (/^[\p{L}_][\p{L}\p{N}_]*(?:(?:\.|->|::)[\p{L}_][\p{L}\p{N}_]*)*$/u.test(symbol) && !this.#reserved.has(symbol)) return symbol;
    const name = identifierOf(symbol);
    return this.#reserved.has(name) ? `${name}_` : name;
  }

  #literal(value: Rational): Piece {
    const text = literal(value, this.format, this.row, this.#options.literal);
    if (text === null) throw new Declined('bad-request', `The number ${Q.toText(value).slice(0, 40)} is beyond the largest ${this.format} value; choose a wider format.`);
    if (text.startsWith('np.')) this.imports.add('import numpy as np');
    return { text, binding: text.startsWith('-') ? Binding.Unary : Binding.Atom };
  }

  #number(value: Rational): Piece {
    if (value.den === 1n && this.row.integersMix && this.format === 'binary64' && (value.num < 0n ? -value.num : value.num) <= 1n << 53n) {
      return { text: `${value.num}`, binding: value.num < 0n ? Binding.Unary : Binding.Atom };
    }
    if (value.den === 1n || isDecimal(value.den) || isRepresentable(value, this.format)) return this.#literal(value);
    const [num, den] = [Q.rational(value.num), Q.rational(value.den)];
    if (!isRepresentable(num, this.format) || !isRepresentable(den, this.format)) return this.#literal(value);
    return { text: `${this.#numerator(build.number(num))}${this.row.divide ?? '/'}${this.#number(den).text}`, binding: Binding.Product };
  }

  #numerator(e: Expression): string {
    return enclosed(this.write(e), Binding.Product);
  }

  #constant(name: keyof typeof CONSTANT_VALUES | 'i' | 'infinity'): Piece {
    if (name === 'i') throw new Declined('bad-request', 'A complex number cannot be written in real code; take its real and imaginary part first.');
    if (name === 'infinity') throw new Declined('bad-request', 'Infinity is not a number of a formula in code.');
    const named = this.format === 'binary64' ? this.row.constants[name] : undefined;
    if (named === undefined) return this.#literal(CONSTANT_VALUES[name]);
    if (named.startsWith('math.')) {
      const style = this.#callStyle();
      for (const line of style.imports) this.imports.add(line);
      return atom(`${style.prefix}${named.slice('math.'.length)}`);
    }
    if (this.row.id === 'kotlin') this.imports.add('import kotlin.math.*');
    return atom(named);
  }

  #sum(terms: readonly Expression[]): Piece {
    const text = terms
      .map((term, i) => {
        const { negative, magnitude } = splitSign(term);
        const keepsOrder = term.kind === 'negation' || term.kind === 'number';
        const bare = keepsOrder ? magnitude : term;
        const minus = keepsOrder && negative;
        const piece = this.write(bare);
        const inner = piece.binding < Binding.Product || (piece.binding === Binding.Unary && (i > 0 || minus)) ? `(${piece.text})` : piece.text;
        if (i === 0) return minus ? `-${inner}` : inner;
        return ` ${minus ? '-' : '+'} ${inner.startsWith('-') ? `(${inner})` : inner}`;
      })
      .join('');
    return { text, binding: Binding.Sum };
  }

  #product(factors: readonly Expression[]): Piece {
    const times = this.row.times ?? '*';
    const [first, ...rest] = factors;
    if (!first) return this.#number(Q.ONE);
    let text = enclosed(this.write(first), Binding.Product);
    for (const factor of rest) text += `${times}${enclosed(this.write(factor), Binding.Power)}`;
    return { text, binding: Binding.Product };
  }

  #power(base: Expression, exponent: Expression): Piece {
    if (base.kind === 'constant' && base.name === 'e') return this.#call('exp', [exponent]);
    if (exponent.kind === 'number') {
      const { value } = exponent;
      if (Q.equal(value, Q.HALF)) return this.#library('sqrt', [base]);
      if (Q.equal(value, Q.negate(Q.HALF))) return this.write(build.quotient(build.number(1), build.squareRoot(base)));
      if (Q.isInteger(value)) return this.#integerPower(base, value.num);
    }
    return this.#powerCall(base, exponent);
  }

  #integerPower(base: Expression, exponent: bigint): Piece {
    if (exponent === 0n) return this.#number(Q.ONE);
    if (exponent === 1n) return this.write(base);
    if (exponent < 0n) {
      const below = enclosed(this.#integerPower(base, -exponent), Binding.Power);
      return { text: `${this.#number(Q.ONE).text}${this.row.divide ?? '/'}${below}`, binding: Binding.Product };
    }
    const inner = this.write(base);
    if (this.row.powerOperator) return { text: `${enclosed(inner, Binding.Atom)}${this.row.powerOperator}${exponent}`, binding: Binding.Power };
    if (exponent <= LARGEST_PRODUCT && base.kind === 'symbol') return { text: Array.from({ length: Number(exponent) }, () => inner.text).join('*'), binding: Binding.Product };
    if (this.row.id === 'rust') return atom(`${this.#receiver(base)}.powi(${exponent})`);
    return this.#powerCall(base, build.number(exponent));
  }

  #powerCall(base: Expression, exponent: Expression): Piece {
    const { powerOperator, id } = this.row;
    if (powerOperator) return { text: `${enclosed(this.write(base), Binding.Atom)}${powerOperator}${enclosed(this.write(exponent), Binding.Atom)}`, binding: Binding.Power };
    if (id === 'kotlin') {
      this.imports.add('import kotlin.math.*');
      return atom(`${enclosed(this.write(base), Binding.Atom)}.pow(${this.write(exponent).text})`);
    }
    return this.#library(id === 'rust' ? 'powf' : id === 'csharp' || id === 'go' ? 'Pow' : 'pow', [base, exponent]);
  }

  #root(degree: Expression, radicand: Expression): Piece {
    const three = degree.kind === 'number' && Q.equal(degree.value, Q.rational(3));
    const names: Readonly<Record<string, string>> = { c: 'cbrt', cpp: 'cbrt', python: 'cbrt', javascript: 'cbrt', java: 'cbrt', csharp: 'Cbrt', go: 'Cbrt', rust: 'cbrt', julia: 'cbrt', kotlin: 'cbrt', swift: 'cbrt' };
    const name = names[this.row.family];
    if (three && name !== undefined) return this.#library(name, [radicand]);
    if (this.row.id === 'matlab') return atom(`nthroot(${this.write(radicand).text}, ${this.write(degree).text})`);
    const even = degree.kind === 'number' && degree.value.den === 1n && degree.value.num % 2n === 0n;
    const inverse = degree.kind === 'number' ? build.number(Q.reciprocal(degree.value)) : build.quotient(build.number(1), degree);
    if (even) return this.#power(radicand, inverse);
    return this.#product([build.call('sign', radicand), build.power(build.call('abs', radicand), inverse)]);
  }

  #call(id: string, args: readonly Expression[]): Piece {
    const [a, b, c] = args;
    if (id === 'fma' && a && b && c) return this.#fused(a, b, c);
    if (isBinaryCall(id) && a) return this.#binary(id, a);
    const found = codeWriting(this.row.family, id, args);
    if (found) return this.#library(found.name, found.args);
    const definition = describe(id)?.definition;
    if (definition) return this.write(definition(args));
    throw new Declined('unknown-function', `${this.row.title} has no library function for ${describe(id)?.title ?? id}; choose another language or expand it first.`);
  }

  #binary(id: BinaryCall, a: Expression): Piece {
    const { text, imports } = binaryCall(this.row, id, this.format, enclosed(this.write(a), Binding.Atom));
    for (const line of imports) this.imports.add(line);
    // A cast in front binds less than a bracket.
    return { text, binding: /^\(\w+\)|^\(\w+\) | as f\d\d$/.test(text) ? Binding.Unary : Binding.Atom };
  }

  #fused(a: Expression, b: Expression, c: Expression): Piece {
    if (!this.row.fma) return this.#sum([build.product(a, b), c]);
    const receiver = this.row.id === 'rust' ? this.#receiver(a) : this.write(a).text;
    const { text, imports } = this.row.fma(receiver, this.write(b).text, this.write(c).text, this.format);
    for (const line of imports) this.imports.add(line);
    return atom(text);
  }

  #callStyle(): CallStyle {
    const style = this.row.calls[this.format];
    if (!style) throw new Declined('unknown-function', `${this.row.title} has no library functions for ${this.format}; choose another format.`);
    const { prefix } = this.#options;
    if (prefix === undefined || prefix === style.prefix) return style;
    return { ...style, prefix };
  }

  #library(name: string, args: readonly Expression[]): Piece {
    const style = this.#callStyle();
    if (this.row.id === 'python') {
      const found = pythonCall(name, style.prefix);
      for (const line of found.imports) this.imports.add(line);
      return atom(`${found.name}(${args.map((a) => this.write(a).text).join(', ')})`);
    }
    for (const line of style.imports) this.imports.add(line);
    if (style.method) {
      const [first, ...rest] = args;
      if (first) return atom(`${this.#receiver(first)}.${name}(${rest.map((r) => this.write(r).text).join(', ')})`);
    }
    const written = args.map((a) => this.write(a).text).map((text) => (style.argumentCast ? `${style.argumentCast[0]}${text}${style.argumentCast[1]}` : text));
    const text = `${style.prefix}${name}${style.suffix ?? ''}(${written.join(', ')})`;
    return style.cast ? { text: `${style.cast[0]}${text}${style.cast[1]}`, binding: style.cast[1] === '' ? Binding.Unary : Binding.Atom } : atom(text);
  }

  /** What a method is called on: a name or a call as it stands, anything else in parentheses. */
  #receiver(e: Expression): string {
    const piece = e.kind === 'number' ? this.#literalReceiver(e.value) : this.write(e);
    return enclosed(piece, Binding.Atom);
  }

  /** A literal without a type suffix is ambiguous as a receiver. */
  #literalReceiver(value: Rational): Piece {
    const text = literal(value, this.format, this.row);
    return text === null ? this.#number(value) : { text, binding: text.startsWith('-') ? Binding.Unary : Binding.Atom };
  }

  #relation(relation: string): string {
    if (relation === '=') return '==';
    if (relation === '!=') return this.row.notEqual ?? '!=';
    if (['<', '<=', '>', '>='].includes(relation)) return relation;
    throw new Declined('bad-request', 'This relation has no counterpart in code.');
  }

  #piecewise(branches: readonly { readonly condition: Expression | null; readonly value: Expression }[]): Piece {
    const { choose } = this.row;
    if (!choose) throw new Declined('bad-request', `${this.row.title} has no conditional expression; write it as a function with branches.`);
    const last = branches.at(-1);
    if (!last || last.condition) throw new Declined('bad-request', 'A choice between branches needs a last branch without a condition.');
    let text = this.write(last.value).text;
    for (const branch of branches.slice(0, -1).reverse()) {
      if (!branch.condition) throw new Declined('bad-request', 'Only the last branch may stand without a condition.');
      const inner = text.includes('?') || text.startsWith('if') || text.includes(' else ') ? `(${text})` : text;
      text = choose(this.write(branch.condition).text, this.write(branch.value).text, inner);
    }
    return { text, binding: Binding.Relation };
  }
}

const isDecimal = (den: bigint): boolean => {
  let rest = den;
  while (rest % 2n === 0n) rest /= 2n;
  let digits = 0;
  while (rest % 5n === 0n) {
    rest /= 5n;
    digits += 1;
  }
  return rest === 1n && digits > 0 && digits <= 17;
};

const DESCRIPTIONS: Readonly<Record<string, string>> = {
  order: 'an O-term', dots: 'dots', derivative: 'a derivative', integral: 'an integral', indexedSum: 'a sum over an index', indexedProduct: 'a product over an index', limit: 'a limit', vector: 'vectors',
};
