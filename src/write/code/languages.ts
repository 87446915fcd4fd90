/** One row a language: how its numbers, powers, calls and comments look. Library names themselves are in the descriptions of the functions. */
import type { FloatFormat } from '../float.ts';

export type CodeLanguage =
  | 'c' | 'cpp' | 'python' | 'javascript' | 'typescript' | 'java' | 'csharp' | 'go' | 'rust' | 'julia' | 'fortran' | 'matlab' | 'r' | 'glsl' | 'hlsl' | 'kotlin' | 'swift';

/** How one float type of a language is named and written. */
export interface FloatType {
  /** The type's name in a declaration; empty where the language declares none. */
  readonly name: string;
  readonly suffix: string;
  /** Replaces `e` of a decimal exponent (Fortran's `d`, Julia's `f`). */
  readonly exponentLetter?: string;
  /** Text around a literal where there is no suffix: `Math.fround(`, `np.float32(`. */
  readonly wrap?: readonly [string, string];
  readonly hexadecimal: boolean;
}

export interface CallStyle {
  /** `Math.`, `std::`, `math.`; a method call where `method` is set. */
  readonly prefix: string;
  readonly method?: boolean;
  /** Appended to a library name (`f` in C's `sinf`). */
  readonly suffix?: string;
  /** A cast around the call where the library has the other float type only. */
  readonly cast?: readonly [string, string];
  readonly argumentCast?: readonly [string, string];
  readonly imports: readonly string[];
}

export interface LanguageRow {
  readonly id: CodeLanguage;
  readonly title: string;
  /** Family under which the functions' descriptions list library names. */
  readonly family: string;
  readonly floats: Partial<Readonly<Record<FloatFormat, FloatType>>>;
  readonly calls: Partial<Readonly<Record<FloatFormat, CallStyle>>>;
  /** An infix power, or none (then products, `pow`). */
  readonly powerOperator: '**' | '^' | '.^' | null;
  /** Operators other than `*` and `/`. */
  readonly times?: string;
  readonly divide?: string;
  /** True where integer literals may stand for floats, `1/3` included (binary64 only). */
  readonly integersMix: boolean;
  readonly comment: { readonly line: string };
  readonly constants: Readonly<Record<string, string>>;
  /** Fused multiply-add as text, or null where the language has none. */
  readonly fma: ((a: string, b: string, c: string, format: FloatFormat) => { readonly text: string; readonly imports: readonly string[] }) | null;
  /** A condition choosing between two values, as an expression; null where the language has none. */
  readonly choose: ((condition: string, yes: string, no: string) => string) | null;
  readonly notEqual?: string;
  readonly reserved: readonly string[];
}

const plain = (name: string, more: Partial<FloatType> = {}): FloatType => ({ name, suffix: '', hexadecimal: false, ...more });
const calls = (prefix: string, imports: readonly string[] = [], more: Partial<CallStyle> = {}): CallStyle => ({ prefix, imports, ...more });
const fused = (name: string, imports: readonly string[] = []) => (a: string, b: string, c: string) => ({ text: `${name}(${a}, ${b}, ${c})`, imports });
const words = (text: string): readonly string[] => text.split(' ');

const ternary = (c: string, a: string, b: string): string => `${c} ? ${a} : ${b}`;
const ifElse = (c: string, a: string, b: string): string => `if (${c}) ${a} else ${b}`;

const MATH_H = '#include <math.h>';
const CMATH = '#include <cmath>';

const javascript = {
  family: 'javascript',
  floats: { binary64: plain('number'), binary32: plain('number', { wrap: ['Math.fround(', ')'] }) },
  calls: { binary64: calls('Math.'), binary32: calls('Math.', [], { cast: ['Math.fround(', ')'] }) },
  powerOperator: '**',
  integersMix: true,
  comment: { line: '//' },
  constants: { pi: 'Math.PI', e: 'Math.E' },
  fma: null,
  choose: ternary,
  reserved: words('break case catch class const continue debugger default delete do else export extends false finally for function if import in instanceof new null return super switch this throw true try typeof var void while with yield let static await enum'),
} as const;

export const LANGUAGES: Readonly<Record<CodeLanguage, LanguageRow>> = {
  c: {
    id: 'c', title: 'C', family: 'c',
    floats: { binary64: plain('double', { hexadecimal: true }), binary32: plain('float', { suffix: 'f', hexadecimal: true }) },
    calls: { binary64: calls('', [MATH_H]), binary32: calls('', [MATH_H], { suffix: 'f' }) },
    powerOperator: null, integersMix: false, comment: { line: '//' }, constants: {},
    fma: (a, b, c, format) => ({ text: `${format === 'binary32' ? 'fmaf' : 'fma'}(${a}, ${b}, ${c})`, imports: [MATH_H] }),
    choose: ternary,
    reserved: words('auto break case char const continue default do double else enum extern float for goto if inline int long register restrict return short signed sizeof static struct switch typedef union unsigned void volatile while'),
  },
  cpp: {
    id: 'cpp', title: 'C++', family: 'cpp',
    floats: { binary64: plain('double', { hexadecimal: true }), binary32: plain('float', { suffix: 'f', hexadecimal: true }) },
    calls: { binary64: calls('std::', [CMATH]), binary32: calls('std::', [CMATH]) },
    powerOperator: null, integersMix: false, comment: { line: '//' }, constants: {},
    fma: fused('std::fma', [CMATH]),
    choose: ternary,
    reserved: words('alignas alignof and asm auto bool break case catch char class const constexpr continue default delete do double else enum explicit export extern false float for friend goto if inline int long mutable namespace new not operator or private protected public register return short signed sizeof static struct switch template this throw true try typedef typename union unsigned using virtual void volatile while xor'),
  },
  python: {
    id: 'python', title: 'Python', family: 'python',
    floats: { binary64: plain(''), binary32: plain('', { wrap: ['np.float32(', ')'] }) },
    calls: { binary64: calls('math.', ['import math']), binary32: calls('np.', ['import numpy as np']) },
    powerOperator: '**', integersMix: true, comment: { line: '#' }, constants: { pi: 'math.pi', e: 'math.e' },
    fma: null,
    choose: (c, a, b) => `${a} if ${c} else ${b}`,
    reserved: words('False None True and as assert async await break class continue def del elif else except finally for from global if import in is lambda nonlocal not or pass raise return try while with yield'),
  },
  javascript: { ...javascript, id: 'javascript', title: 'JavaScript' },
  typescript: { ...javascript, id: 'typescript', title: 'TypeScript' },
  java: {
    id: 'java', title: 'Java', family: 'java',
    floats: { binary64: plain('double', { hexadecimal: true }), binary32: plain('float', { suffix: 'f', hexadecimal: true }) },
    calls: { binary64: calls('Math.'), binary32: calls('Math.', [], { cast: ['(float) ', ''] }) },
    powerOperator: null, integersMix: false, comment: { line: '//' }, constants: { pi: 'Math.PI', e: 'Math.E' },
    fma: fused('Math.fma'),
    choose: ternary,
    reserved: words('abstract assert boolean break byte case catch char class const continue default do double else enum extends final finally float for goto if implements import instanceof int interface long native new package private protected public return short static strictfp super switch synchronized this throw throws transient try void volatile while true false null'),
  },
  csharp: {
    id: 'csharp', title: 'C#', family: 'csharp',
    floats: { binary64: plain('double'), binary32: plain('float', { suffix: 'f' }) },
    calls: { binary64: calls('Math.', ['using System;']), binary32: calls('MathF.', ['using System;']) },
    powerOperator: null, integersMix: false, comment: { line: '//' }, constants: { pi: 'Math.PI', e: 'Math.E' },
    fma: (a, b, c, format) => ({ text: `${format === 'binary32' ? 'MathF' : 'Math'}.FusedMultiplyAdd(${a}, ${b}, ${c})`, imports: ['using System;'] }),
    choose: ternary,
    reserved: words('abstract as base bool break byte case catch char checked class const continue decimal default delegate do double else enum event explicit extern false finally fixed float for foreach goto if implicit in int interface internal is lock long namespace new null object operator out override params private protected public readonly ref return sbyte sealed short sizeof stackalloc static string struct switch this throw true try typeof uint ulong unchecked unsafe ushort using virtual void volatile while'),
  },
  go: {
    id: 'go', title: 'Go', family: 'go',
    floats: { binary64: plain('float64', { hexadecimal: true }), binary32: plain('float32', { hexadecimal: true }) },
    calls: { binary64: calls('math.', ['import "math"']), binary32: calls('math.', ['import "math"'], { cast: ['float32(', ')'], argumentCast: ['float64(', ')'] }) },
    powerOperator: null, integersMix: false, comment: { line: '//' }, constants: { pi: 'math.Pi', e: 'math.E' },
    fma: (a, b, c, format) =>
      format === 'binary32' ? { text: `float32(math.FMA(float64(${a}), float64(${b}), float64(${c})))`, imports: ['import "math"'] } : { text: `math.FMA(${a}, ${b}, ${c})`, imports: ['import "math"'] },
    choose: null,
    reserved: words('break case chan const continue default defer else fallthrough for func go goto if import interface map package range return select struct switch type var'),
  },
  rust: {
    id: 'rust', title: 'Rust', family: 'rust',
    floats: { binary64: plain('f64', { suffix: 'f64' }), binary32: plain('f32', { suffix: 'f32' }) },
    calls: { binary64: calls('', [], { method: true }), binary32: calls('', [], { method: true }) },
    powerOperator: null, integersMix: false, comment: { line: '//' }, constants: { pi: 'std::f64::consts::PI', e: 'std::f64::consts::E' },
    fma: (a, b, c) => ({ text: `${a}.mul_add(${b}, ${c})`, imports: [] }),
    choose: (c, a, b) => `if ${c} { ${a} } else { ${b} }`,
    reserved: words('as async await break const continue crate dyn else enum extern false fn for if impl in let loop match mod move mut pub ref return self Self static struct super trait true type unsafe use where while abstract become box do final macro override priv typeof unsized virtual yield try'),
  },
  julia: {
    id: 'julia', title: 'Julia', family: 'julia',
    floats: { binary64: plain('Float64', { hexadecimal: true }), binary32: plain('Float32', { exponentLetter: 'f', hexadecimal: false }) },
    calls: { binary64: calls(''), binary32: calls('') },
    powerOperator: '^', integersMix: true, comment: { line: '#' }, constants: { pi: 'pi', e: 'MathConstants.e' },
    fma: fused('fma'),
    choose: ternary,
    reserved: words('baremodule begin break catch const continue do else elseif end export false finally for function global if import let local macro module quote return struct true try using while pi'),
  },
  fortran: {
    id: 'fortran', title: 'Fortran', family: 'fortran',
    floats: { binary64: plain('double precision', { exponentLetter: 'd' }), binary32: plain('real') },
    calls: { binary64: calls(''), binary32: calls('') },
    powerOperator: '**', integersMix: false, comment: { line: '!' }, constants: {},
    fma: fused('ieee_fma', ['use, intrinsic :: ieee_arithmetic, only: ieee_fma']),
    choose: (c, a, b) => `merge(${a}, ${b}, ${c})`, notEqual: '/=',
    reserved: words('value'),
  },
  matlab: {
    id: 'matlab', title: 'MATLAB', family: 'matlab',
    floats: { binary64: plain(''), binary32: plain('', { wrap: ['single(', ')'] }) },
    calls: { binary64: calls(''), binary32: calls('') },
    powerOperator: '.^', times: '.*', divide: './', integersMix: true, comment: { line: '%' }, constants: { pi: 'pi', e: 'exp(1)' },
    fma: null,
    choose: null, notEqual: '~=',
    reserved: words('break case catch classdef continue else elseif end for function global if otherwise parfor persistent return spmd switch try while pi'),
  },
  r: {
    id: 'r', title: 'R', family: 'r',
    floats: { binary64: plain('', { hexadecimal: true }) },
    calls: { binary64: calls('') },
    powerOperator: '^', integersMix: true, comment: { line: '#' }, constants: { pi: 'pi', e: 'exp(1)' },
    fma: null,
    choose: ifElse,
    reserved: words('if else repeat while function for next break TRUE FALSE NULL Inf NaN NA in T F pi'),
  },
  glsl: {
    id: 'glsl', title: 'GLSL', family: 'glsl',
    floats: { binary32: plain('float'), binary64: plain('double', { suffix: 'lf' }) },
    calls: { binary32: calls('') },
    powerOperator: null, integersMix: false, comment: { line: '//' }, constants: {},
    fma: fused('fma'),
    choose: ternary,
    reserved: words('attribute const uniform varying buffer shared break continue do for while switch case default if else in out inout float double int void bool true false discard return struct precise half sample filter input output'),
  },
  hlsl: {
    id: 'hlsl', title: 'HLSL', family: 'hlsl',
    floats: { binary32: plain('float', { suffix: 'f' }), binary64: plain('double', { suffix: 'L' }) },
    calls: { binary32: calls('') },
    powerOperator: null, integersMix: false, comment: { line: '//' }, constants: {},
    fma: (a, b, c, format) => (format === 'binary64' ? { text: `fma(${a}, ${b}, ${c})`, imports: [] } : { text: `mad(${a}, ${b}, ${c})`, imports: [] }),
    choose: ternary,
    reserved: words('bool break buffer case cbuffer centroid class const continue default discard do double else export extern false float for half if in inline inout int interface line linear matrix min16float namespace out pass point precise register return sample shared static string struct switch technique texture true typedef uint uniform unsigned vector void volatile while'),
  },
  kotlin: {
    id: 'kotlin', title: 'Kotlin', family: 'kotlin',
    floats: { binary64: plain('Double'), binary32: plain('Float', { suffix: 'f' }) },
    calls: { binary64: calls('', ['import kotlin.math.*']), binary32: calls('', ['import kotlin.math.*']) },
    powerOperator: null, integersMix: false, comment: { line: '//' }, constants: { pi: 'PI', e: 'E' },
    fma: fused('Math.fma'),
    choose: ifElse,
    reserved: words('as break class continue do else false for fun if in interface is null object package return super this throw true try typealias typeof val var when while'),
  },
  swift: {
    id: 'swift', title: 'Swift', family: 'swift',
    floats: { binary64: plain('Double', { hexadecimal: true }), binary32: plain('Float', { wrap: ['Float(', ')'], hexadecimal: true }) },
    calls: { binary64: calls('', ['import Foundation']), binary32: calls('', ['import Foundation']) },
    powerOperator: null, integersMix: false, comment: { line: '//' }, constants: { pi: 'Double.pi' },
    fma: (a, b, c) => ({ text: `fma(${a}, ${b}, ${c})`, imports: ['import Foundation'] }),
    choose: ternary,
    reserved: words('associatedtype class deinit enum extension fileprivate func import init inout internal let open operator private protocol public rethrows static struct subscript typealias var break case continue default defer do else fallthrough for guard if in repeat return switch where while as catch false is nil super self Self throw throws true try'),
  },
};

/** Language ids that are written like another one. */
const ALIASES: Readonly<Record<string, CodeLanguage>> = {
  typescriptreact: 'typescript', javascriptreact: 'javascript', 'cuda-cpp': 'cpp', cuda: 'cpp', 'objective-c': 'c', 'objective-cpp': 'cpp',
  'fortran-modern': 'fortran', 'fortran-fixed-form': 'fortran', FortranFreeForm: 'fortran', FortranFixedForm: 'fortran', fortran_free: 'fortran', 'fortran_fixed-form': 'fortran',
  octave: 'matlab', shaderlab: 'hlsl', 'jupyter-python': 'python', ipynb: 'python',
};

/** A name as a parameter of the language: in Fortran, which tells no capitals apart, a capital letter could be one of the function's own small ones. */
export const parameterIn = (name: string, row: LanguageRow): string => (row.id !== 'fortran' ? name : /^[A-Z]$/.test(name) ? 'x' : name.toLowerCase());

/** The row for an editor's language id; null for a language that code is not written in. */
export function codeLanguage(id: string): LanguageRow | null {
  if (id in LANGUAGES) return LANGUAGES[id as CodeLanguage];
  const alias = ALIASES[id];
  return alias ? LANGUAGES[alias] : null;
}
