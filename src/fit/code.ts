/** A program as code: a function (or one expression) with a comment that states what was proved and under which assumptions. */
import { build, type Expression, mapChildren, Q, type Rational } from '../expression/index.ts';
import { Declined } from '../outcome.ts';
import { type CodeOptions, codeLanguage, commentLines, functionCode, type LanguageRow, type Statement, toCode } from '../write/index.ts';
import type { FloatFormat } from './format.ts';
import { formatByName, roundTo, ulp } from './format.ts';
import type { Arithmetic, Program } from './program.ts';
import { wrapCode } from './wrap.ts';

export interface FitCodeText {
  /** Imports, comment and function. */
  readonly code: string;
  /** Comment and function without the imports. */
  readonly body: string;
  readonly imports: readonly string[];
}

export interface FitCodeRequest {
  /** Ascending; each serves arguments up to `below`, the last one all others. */
  readonly branches: readonly { readonly below: Rational; readonly program: Program }[];
  readonly variable: string;
  readonly language: string;
  readonly format: FloatFormat;
  readonly name: string;
  readonly comment: readonly string[];
  /** One expression in the variable instead of a function. */
  readonly expression: boolean;
  /** What the function asserts of its parameters. */
  readonly ranges?: readonly ParameterRange[];
}

/** The language row for an emit name. Throws Declined for one that code is not written in. */
export function rowFor(language: string): LanguageRow {
  const row = codeLanguage(language);
  if (!row) throw new Declined('bad-request', `Code is not written in the language "${language}"; choose c, cpp, rust, python, javascript, typescript, java, csharp, go, julia, fortran, matlab, r, glsl, hlsl, kotlin or swift.`);
  return row;
}

const computesInDoubles = (row: LanguageRow): boolean => row.family === 'javascript';

/** The float type that code in this language is written in for a format: its own, or a wider one for formats that are only stored (binary16, bfloat16). */
export function codeFormat(language: string, format: FloatFormat): FloatFormat {
  const row = rowFor(language);
  if (row.floats[format.name]) return format;
  for (const name of format.name === 'binary16' || format.name === 'bfloat16' ? (['binary32', 'binary64'] as const) : []) {
    const wider = formatByName(name);
    if (row.floats[name] && wider?.kind === 'float') return wider;
  }
  throw new Declined('bad-request', `${row.title} has no ${format.name} type; choose another format or language.`);
}

/** In which formats code in this language computes for a result of the format. */
export function machineArithmetic(language: string, format: FloatFormat): Arithmetic {
  const row = rowFor(language);
  if (computesInDoubles(row) && format.name === 'binary32') {
    const operations = formatByName('binary64');
    if (operations?.kind === 'float') return { operations, result: format };
  }
  return { operations: codeFormat(language, format), result: format };
}

export type Fusing = 'exactly' | 'perhaps' | 'never';
/** Whether the language's fused multiply-add rounds once for certain. A shader may compute it in two steps; Go's goes through binary64 for binary32. */
export function fusing(language: string, format: FloatFormat): Fusing {
  const row = rowFor(language);
  if (!row.fma) return 'never';
  return row.id === 'glsl' || (row.id === 'hlsl' && format.name !== 'binary64') || (row.id === 'go' && format.name !== 'binary64') ? 'perhaps' : 'exactly';
}

/** Name of a function in the habits of the language. */
export function functionName(words: readonly string[], language: string): string {
  const camel = ['javascript', 'java', 'csharp', 'go', 'kotlin', 'swift', 'glsl', 'hlsl'].includes(rowFor(language).family);
  const [first = 'f', ...rest] = words.map((w) => w.replace(/[^A-Za-z0-9]/g, ''));
  return camel ? first + rest.map((w) => w.charAt(0).toUpperCase() + w.slice(1)).join('') : [first, ...rest].join('_').toLowerCase();
}

function inlined({ steps, result }: Program): Expression {
  const values = new Map<string, Expression>();
  const visit = (e: Expression): Expression => (e.kind === 'symbol' ? (values.get(e.name) ?? e) : mapChildren(e, visit));
  for (const step of steps) values.set(step.name, visit(step.value));
  return visit(result);
}

/** Throws Declined where the language cannot say it (no such float type, for one). */
export function fitCode({ branches, variable, language, format, name, comment, expression, ranges }: FitCodeRequest): FitCodeText {
  const row = rowFor(language);
  const options: CodeOptions = { language, format: format.name, literal: { hexadecimal: 'where inexact' } };
  const [first] = branches;
  if (!first) throw new RangeError('no program');
  if (expression) {
    if (ranges) throw new Declined('bad-request', 'An assertion needs a function; ask for the result function.');
    if (branches.length > 1) throw new Declined('bad-request', 'Several pieces need a function with branches; ask for the result function.');
    const written = toCode(inlined(first.program), options);
    if (!written.ok) throw new Declined(written.error.code, written.error.message);
    const wrap = computesInDoubles(row) ? row.floats[format.name]?.wrap : undefined;
    const body = wrap ? `${wrap[0]}${written.value.text}${wrap[1]}` : written.value.text;
    return { code: body, body, imports: written.value.imports };
  }
  const statements = ({ steps, result }: Program): Statement[] => [...steps.map((step): Statement => ({ kind: 'let', ...step })), { kind: 'return', value: result, rounded: computesInDoubles(row) }];
  const body: Statement[] = branches.flatMap(({ below, program }, k): Statement[] => {
    if (k === branches.length - 1) return statements(program);
    return [{ kind: 'if', condition: { kind: 'relation', sides: [build.symbol(variable), build.number(below)], relations: ['<='] }, then: statements(program) }];
  });
  return wholeFunction({ name, parameters: [variable], body, language, format, comment, ...(ranges ? { ranges } : {}) });
}

/** A closed range of a parameter. */
export interface ParameterRange {
  readonly name: string;
  readonly low: Rational;
  readonly high: Rational;
  /** As it is written: `[-1, pi/4]`. */
  readonly text: string;
}

/** The range with floats as ends, none outside it. */
function assertion({ name, low, high, text }: ParameterRange, format: FloatFormat): Statement {
  const inward = (end: Rational, way: 1 | -1): Rational => {
    const near = roundTo(end, format) ?? end;
    return Q.compare(near, end) * way >= 0 ? near : (roundTo(Q.add(near, Q.multiply(Q.rational(way), ulp(near, format))), format) ?? near);
  };
  const x = build.symbol(name);
  const relation = (sign: '>=' | '<=', end: Rational): Expression => ({ kind: 'relation', sides: [x, build.number(end)], relations: [sign] });
  return { kind: 'assert', conditions: [relation('>=', inward(low, 1)), relation('<=', inward(high, -1))], message: `${name} outside ${text}` };
}

export interface FunctionRequest {
  readonly name: string;
  readonly parameters: readonly string[];
  readonly body: readonly Statement[];
  readonly language: string;
  readonly format: FloatFormat;
  readonly comment: readonly string[];
  readonly ranges?: readonly ParameterRange[];
}

/** A function of floats with its comment, its parameters converted to the format first where the language declares no types. */
export function wholeFunction({ name, parameters, body, language, format, comment, ranges = [] }: FunctionRequest): FitCodeText {
  const row = rowFor(language);
  const options: CodeOptions = { language, format: format.name, literal: { hexadecimal: 'where inexact' } };
  // Without declared types the argument decides in which format the operations round.
  const untyped = row.floats[format.name]?.wrap !== undefined && row.floats[format.name]?.name === '';
  const converted = untyped ? parameters.map((p): Statement => ({ kind: 'let', name: p, value: build.symbol(p), rounded: true })) : [];
  const written = functionCode({ name, parameters, body: [...converted, ...ranges.map((range) => assertion(range, format)), ...body] }, options);
  if (!written.ok) throw new Declined(written.error.code, written.error.message);
  const text = [...commentLines(row.id, comment), ...written.value.text.split('\n').flatMap((line) => wrapCode(line, row))].join('\n');
  const { imports } = written.value;
  return { code: `${imports.length > 0 ? `${imports.join('\n')}\n\n` : ''}${text}\n`, body: `${text}\n`, imports };
}
