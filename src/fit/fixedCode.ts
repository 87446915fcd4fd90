/** Fixed-point programs as integer code: one helper that multiplies and rounds, one function. */
import type { Expression } from '../expression/index.ts';
import { Declined } from '../outcome.ts';
import { commentLines } from '../write/index.ts';
import { type FitCodeText, rowFor } from './code.ts';
import type { FixedFormat } from './format.ts';
import type { Program } from './program.ts';

interface IntegerLanguage {
  readonly imports: readonly string[];
  /** Lines of the helper: (a b + half) >> n, rounded to nearest. */
  readonly multiply: (name: string, half: string, shift: number) => readonly string[];
  readonly head: (name: string, x: string) => string;
  readonly assign: (name: string, value: string) => string;
  readonly result: (value: string) => string;
  readonly foot: string | null;
  readonly camel: boolean;
  /** Bits of a product that the helper holds exactly, the sign not counted. */
  readonly productBits: number;
  readonly indent: string;
}

const braced = (more: Partial<IntegerLanguage> & Pick<IntegerLanguage, 'multiply' | 'head' | 'assign'>): IntegerLanguage => ({
  imports: [],
  result: (value) => `return ${value};`,
  foot: '}',
  camel: false,
  productBits: 63,
  indent: '    ',
  ...more,
});

const LANGUAGES: Readonly<Record<string, IntegerLanguage>> = {
  c: braced({
    imports: ['#include <stdint.h>'],
    multiply: (f, half, n) => [`static inline int32_t ${f}(int32_t a, int32_t b)`, '{', `    return (int32_t)(((int64_t)a*b + ${half}) >> ${n});`, '}'],
    head: (f, x) => `static inline int32_t ${f}(int32_t ${x})\n{`,
    assign: (n, v) => `const int32_t ${n} = ${v};`,
  }),
  cpp: braced({
    imports: ['#include <cstdint>'],
    multiply: (f, half, n) => [`inline std::int32_t ${f}(std::int32_t a, std::int32_t b)`, '{', `    return static_cast<std::int32_t>((static_cast<std::int64_t>(a)*b + ${half}) >> ${n});`, '}'],
    head: (f, x) => `inline std::int32_t ${f}(std::int32_t ${x})\n{`,
    assign: (n, v) => `const std::int32_t ${n} = ${v};`,
  }),
  java: braced({
    multiply: (f, half, n) => [`static int ${f}(int a, int b) {`, `    return (int) (((long) a*b + ${half}) >> ${n});`, '}'],
    head: (f, x) => `static int ${f}(int ${x}) {`,
    assign: (n, v) => `final int ${n} = ${v};`,
    camel: true,
  }),
  csharp: braced({
    multiply: (f, half, n) => [`static int ${f}(int a, int b)`, '{', `    return (int)(((long)a*b + ${half}) >> ${n});`, '}'],
    head: (f, x) => `static int ${f}(int ${x})\n{`,
    assign: (n, v) => `int ${n} = ${v};`,
    camel: true,
  }),
  go: braced({
    multiply: (f, half, n) => [`func ${f}(a, b int32) int32 {`, `\treturn int32((int64(a)*int64(b) + ${half}) >> ${n})`, '}'],
    head: (f, x) => `func ${f}(${x} int32) int32 {`,
    assign: (n, v) => `${n} := ${v}`,
    result: (v) => `return ${v}`,
    camel: true,
    indent: '\t',
  }),
  rust: braced({
    multiply: (f, half, n) => [`fn ${f}(a: i32, b: i32) -> i32 {`, `    ((i64::from(a)*i64::from(b) + ${half}) >> ${n}) as i32`, '}'],
    head: (f, x) => `fn ${f}(${x}: i32) -> i32 {`,
    assign: (n, v) => `let ${n}: i32 = ${v};`,
  }),
  kotlin: braced({
    multiply: (f, half, n) => [`fun ${f}(a: Int, b: Int): Int = ((a.toLong()*b + ${half}) shr ${n}).toInt()`],
    head: (f, x) => `fun ${f}(${x}: Int): Int {`,
    assign: (n, v) => `val ${n} = ${v}`,
    result: (v) => `return ${v}`,
    camel: true,
  }),
  swift: braced({
    multiply: (f, half, n) => [`func ${f}(_ a: Int32, _ b: Int32) -> Int32 {`, `    return Int32((Int64(a)*Int64(b) + ${half}) >> ${n})`, '}'],
    head: (f, x) => `func ${f}(_ ${x}: Int32) -> Int32 {`,
    assign: (n, v) => `let ${n}: Int32 = ${v}`,
    result: (v) => `return ${v}`,
    camel: true,
  }),
  javascript: braced({
    multiply: (f, half, n) => [`function ${f}(a, b) {`, `  return Math.floor((a*b + ${half})/${2 ** n});`, '}'],
    head: (f, x) => `function ${f}(${x}) {`,
    assign: (n, v) => `const ${n} = ${v};`,
    camel: true,
    productBits: 52,
    indent: '  ',
  }),
  typescript: braced({
    multiply: (f, half, n) => [`function ${f}(a: number, b: number): number {`, `  return Math.floor((a*b + ${half})/${2 ** n});`, '}'],
    head: (f, x) => `function ${f}(${x}: number): number {`,
    assign: (n, v) => `const ${n} = ${v};`,
    camel: true,
    productBits: 52,
    indent: '  ',
  }),
  python: {
    imports: [],
    multiply: (f, half, n) => [`def ${f}(a, b):`, `    return (a*b + ${half}) >> ${n}`],
    head: (f, x) => `def ${f}(${x}):`,
    assign: (n, v) => `${n} = ${v}`,
    result: (v) => `return ${v}`,
    foot: null,
    camel: false,
    productBits: Infinity,
    indent: '    ',
  },
};

/** Bits of one number beside its sign in the language's integers; products must hold twice as many. */
export function requireIntegers(language: string, { integerBits, fractionBits, name }: FixedFormat): void {
  const row = rowFor(language);
  const found = LANGUAGES[row.id];
  if (!found) throw new Declined('bad-request', `Fixed-point code is not written in ${row.title}; choose ${Object.keys(LANGUAGES).join(', ')}.`);
  const bits = integerBits + fractionBits;
  if (2 * bits > found.productBits - 1) throw new Declined('bad-request', `Products of ${name} need ${2 * bits + 1} bits, more than ${row.title} multiplies exactly; choose at most ${Math.floor((found.productBits - 1) / 2)} bits beside the sign.`);
  if (fractionBits < 1) throw new Declined('bad-request', 'A fixed-point format needs at least one bit behind the point.');
}

/** Name of the helper beside a function of this name. */
const helperName = (name: string, camel: boolean): string => (camel ? `${name}Multiply` : `${name}_multiply`);

export function fixedCode(program: Program, variable: string, format: FixedFormat, language: string, name: string, comment: readonly string[]): FitCodeText {
  const row = rowFor(language);
  const style = LANGUAGES[row.id];
  if (!style) throw new Declined('bad-request', `Fixed-point code is not written in ${row.title}; choose another language.`);
  const helper = helperName(name, style.camel);
  const write = (e: Expression): string => {
    switch (e.kind) {
      case 'symbol':
        return e.name;
      case 'number':
        return `${(e.value.num << BigInt(format.fractionBits)) / e.value.den}`;
      case 'negation':
        return `-${write(e.operand)}`;
      case 'sum':
        return e.terms.map(write).reduce((a, b) => (b.startsWith('-') ? `${a} - ${b.slice(1)}` : `${a} + ${b}`));
      case 'product':
        return e.factors.map(write).reduce((a, b) => `${helper}(${a}, ${b})`);
      default:
        throw new Declined('bad-request', 'Only sums and products are written as fixed-point code.');
    }
  };
  const half = `${1n << BigInt(format.fractionBits - 1)}`;
  const lines = [
    ...commentLines(row.id, comment),
    ...style.multiply(helper, half, format.fractionBits),
    '',
    ...style.head(name, variable).split('\n'),
    ...program.steps.map((s) => style.indent + style.assign(s.name, write(s.value))),
    style.indent + style.result(write(program.result)),
    ...(style.foot === null ? [] : [style.foot]),
  ];
  const body = `${lines.join('\n')}\n`;
  return { code: style.imports.length > 0 ? `${style.imports.join('\n')}\n\n${body}` : body, body, imports: style.imports };
}

