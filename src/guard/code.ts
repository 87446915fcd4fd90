/** A guard as a function in a programming language: the comparison, the series, the direct form, and a comment that states what was proved. */
import { build, children, dependsOn, type Expression, mapChildren, Q, type Rational, structureKey } from '../expression/index.ts';
import { type FloatFormat, wrapCode } from '../fit/index.ts';
import { Declined } from '../outcome.ts';
import { codeLanguage, commentLines, functionCode, type LanguageRow, parameterIn, type Statement } from '../write/index.ts';
import type { SeriesForm } from './series.ts';

export interface GuardCode {
  readonly name: readonly string[];
  readonly variable: string;
  readonly language: string;
  readonly format: FloatFormat;
  readonly comment: readonly string[];
  readonly direct: Expression;
  readonly series: { readonly form: SeriesForm; readonly point: Rational; readonly switch: Rational; /** The comparison includes the switch itself. */ readonly closed: boolean } | null;
  /** How the file calls its library (`np.`); the language's habit where absent. */
  readonly prefix?: string;
}

export function rowFor(language: string): LanguageRow {
  const row = codeLanguage(language);
  if (!row) throw new Declined('bad-request', `Code is not written in the language "${language}"; choose c, cpp, rust, python, javascript, typescript, java, csharp, go, julia, fortran, matlab, r, glsl, hlsl, kotlin or swift.`);
  return row;
}

const CAMEL = ['javascript', 'java', 'csharp', 'go', 'kotlin', 'swift', 'glsl', 'hlsl'];

function functionName(words: readonly string[], row: LanguageRow): string {
  const [first = 'f', ...rest] = words;
  return CAMEL.includes(row.family) ? first + rest.map((w) => w.charAt(0).toUpperCase() + w.slice(1)).join('') : words.join('_');
}

/** An identifier of the language for the symbol. */
export function identifierFor(symbol: string, row: LanguageRow): string {
  const plain = symbol.replace(/^\\/, '').replace(/[^A-Za-z0-9_]/g, '_').replace(/^_+|_+$/g, '');
  const name = parameterIn(/^[A-Za-z]\w*$/.test(plain) ? plain : 'x', row);
  return row.reserved.includes(name) ? `${name}_` : name;
}

export function guardCode({ name, variable, language, format, comment, direct, series, prefix }: GuardCode): { readonly code: string; readonly imports: readonly string[] } {
  const row = rowFor(language);
  if (!row.floats[format.name]) throw new Declined('bad-request', `${row.title} has no ${format.name} type; choose another format or language.`);
  const parameter = identifierFor(variable, row);
  const rename = (e: Expression): Expression => (e.kind === 'symbol' && e.name === variable ? build.symbol(parameter) : mapChildren(e, rename));
  const float = row.floats[format.name];
  const untyped = float?.wrap !== undefined && float.name === '';
  const rounded = row.family === 'javascript';
  const body: Statement[] = untyped ? [{ kind: 'let', name: parameter, value: build.symbol(parameter), rounded: true }] : [];
  if (series) {
    const { form, point, closed } = series;
    const offset = Q.isZero(point) ? build.symbol(parameter) : build.sum(build.symbol(parameter), build.number(Q.negate(point)));
    const condition: Expression = { kind: 'relation', sides: [build.call('abs', offset), build.number(series.switch)], relations: [closed ? '<=' : '<'] };
    body.push({ kind: 'if', condition, then: [...usedSteps(form).map((s): Statement => ({ kind: 'let', name: s.name, value: rename(s.value) })), { kind: 'return', value: rename(form.result), rounded }] });
  }
  const { steps, result } = named(rename(direct), new Set([parameter, ...row.reserved]));
  body.push(...steps.map((s): Statement => ({ kind: 'let', ...s })), { kind: 'return', value: result, rounded });
  const written = functionCode({ name: functionName(name, row), parameters: [parameter], body }, { language, format: format.name, literal: { hexadecimal: 'where inexact' }, ...(prefix === undefined ? {} : { prefix }) });
  if (!written.ok) throw new Declined(written.error.code, written.error.message);
  const { imports, text } = written.value;
  const whole = [...commentLines(row.id, comment), ...text.split('\n').flatMap((line) => wrapCode(line, row))].join('\n');
  return { code: `${imports.length > 0 ? `${imports.join('\n')}\n\n` : ''}${whole}\n`, imports };
}

/** A series of one term may need no offset. */
const usedSteps = ({ steps, result }: SeriesForm): SeriesForm['steps'] =>
  steps.filter((step, k) => [result, ...steps.slice(k + 1).map((s) => s.value)].some((e) => dependsOn(e, step.name)));

/** Quantities used more than once, and bases of small powers, get a name, so that each is computed once. */
export function named(e: Expression, taken: ReadonlySet<string>): { readonly steps: readonly { readonly name: string; readonly value: Expression }[]; readonly result: Expression } {
  const multiplied = powersAsProducts(e);
  const counts = new Map<string, number>();
  // What stands inside a repeated quantity is counted once with it.
  const count = (node: Expression): void => {
    const seen = counts.get(structureKey(node)) ?? 0;
    if (worthNaming(node)) counts.set(structureKey(node), seen + 1);
    if (seen === 0) children(node).forEach(count);
  };
  count(multiplied);
  const steps: { name: string; value: Expression }[] = [];
  const names = new Map<string, Expression>();
  const free = ['s', 'r', 'q', 'p', 'w', 'v', 'y', 'z'].filter((n) => !taken.has(n));
  const visit = (node: Expression): Expression => {
    if (!worthNaming(node) || (counts.get(structureKey(node)) ?? 0) < 2) return mapChildren(node, visit);
    const key = structureKey(node);
    const known = names.get(key);
    if (known) return known;
    const value = mapChildren(node, visit);
    const name = free[steps.length];
    if (name === undefined) return value;
    steps.push({ name, value });
    const symbol = build.symbol(name);
    names.set(key, symbol);
    return symbol;
  };
  const result = visit(multiplied);
  return { steps, result };
}

const worthNaming = (e: Expression): boolean => e.kind === 'call' || e.kind === 'sum' || e.kind === 'quotient' || e.kind === 'root' || (e.kind === 'power' && e.exponent.kind === 'number' && e.exponent.value.den !== 1n);

/** s^2, s^3, s^4 of anything but a plain number as products. */
function powersAsProducts(e: Expression): Expression {
  const inner = mapChildren(e, powersAsProducts);
  if (inner.kind !== 'power' || inner.exponent.kind !== 'number' || inner.exponent.value.den !== 1n || inner.base.kind === 'constant') return inner;
  const n = Number(inner.exponent.value.num);
  return n >= 2 && n <= 4 ? build.product(...Array.from({ length: n }, () => inner.base)) : inner;
}
