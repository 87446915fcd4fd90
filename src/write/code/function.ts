/** Whole functions: head, named intermediate values, branches, result, and the comment above, in the habits of each language. */
import type { Expression } from '../../expression/index.ts';
import { attempt, Declined, type Outcome } from '../../outcome.ts';
import { codeWriter, type CodeWriter } from './expression.ts';
import { codeLanguage, type CodeLanguage } from './languages.ts';
import type { Code, CodeOptions } from './options.ts';

export type Statement =
  /** With `rounded`, the value is converted to the float type where the language has no declarations of it (`np.float32(...)`, `Math.fround(...)`). */
  | { readonly kind: 'let'; readonly name: string; readonly value: Expression; readonly rounded?: boolean }
  /** A condition (a relation, or a conjunction in order) under which the inner statements run; they end with a `return`. */
  | { readonly kind: 'if'; readonly condition: Expression; readonly then: readonly Statement[] }
  /** Stops where a condition does not hold, in the language's way (removed from release builds where the language does so). */
  | { readonly kind: 'assert'; readonly conditions: readonly Expression[]; readonly message: string }
  | { readonly kind: 'return'; readonly value: Expression; readonly rounded?: boolean };

export interface FunctionText {
  readonly name: string;
  readonly parameters: readonly string[];
  readonly body: readonly Statement[];
  readonly comment?: readonly string[];
}

/** Comment lines in the language's own style; an empty line stays a comment. Fails nowhere: an unknown language gets `//`. */
export function commentLines(language: string, lines: readonly string[]): readonly string[] {
  const mark = codeLanguage(language)?.comment.line ?? '//';
  return lines.map((line) => `${mark} ${line}`.trimEnd());
}

interface Shape {
  readonly head: (name: string, parameters: readonly string[], type: string) => readonly string[];
  readonly foot: (name: string) => readonly string[];
  readonly assign: (name: string, type: string, value: string) => string;
  readonly open: (condition: string) => string;
  readonly close: string | null;
  readonly result: (value: string, name: string) => readonly string[];
  readonly indent: string;
}

const typed = (parameters: readonly string[], type: string): string => parameters.map((p) => `${type} ${p}`).join(', ');
const after = (parameters: readonly string[], type: string): string => parameters.map((p) => `${p}: ${type}`).join(', ');
const braces = (head: Shape['head'], assign: Shape['assign'], more: Partial<Shape> = {}): Shape => ({
  head,
  foot: () => ['}'],
  assign,
  open: (condition) => `if (${condition}) {`,
  close: '}',
  result: (value) => [`return ${value};`],
  indent: '    ',
  ...more,
});

const SHAPES: Readonly<Record<CodeLanguage, Shape>> = {
  c: braces((f, p, t) => [`static inline ${t} ${f}(${typed(p, t)})`, '{'], (n, t, v) => `const ${t} ${n} = ${v};`),
  cpp: braces((f, p, t) => [`inline ${t} ${f}(${typed(p, t)})`, '{'], (n, t, v) => `const ${t} ${n} = ${v};`),
  java: braces((f, p, t) => [`static ${t} ${f}(${typed(p, t)}) {`], (n, t, v) => `final ${t} ${n} = ${v};`),
  csharp: braces((f, p, t) => [`static ${t} ${f}(${typed(p, t)})`, '{'], (n, t, v) => `${t} ${n} = ${v};`),
  glsl: braces((f, p, t) => [`${t} ${f}(${typed(p, t)})`, '{'], (n, t, v) => `${t} ${n} = ${v};`),
  hlsl: braces((f, p, t) => [`${t} ${f}(${typed(p, t)})`, '{'], (n, t, v) => `${t} ${n} = ${v};`),
  javascript: braces((f, p) => [`function ${f}(${p.join(', ')}) {`], (n, _, v) => `const ${n} = ${v};`, { indent: '  ' }),
  typescript: braces((f, p, t) => [`function ${f}(${after(p, t)}): ${t} {`], (n, _, v) => `const ${n} = ${v};`, { indent: '  ' }),
  rust: braces((f, p, t) => [`fn ${f}(${after(p, t)}) -> ${t} {`], (n, t, v) => `let ${n}: ${t} = ${v};`, { open: (c) => `if ${c} {` }),
  swift: braces((f, p, t) => [`func ${f}(${p.map((q) => `_ ${q}: ${t}`).join(', ')}) -> ${t} {`], (n, t, v) => `let ${n}: ${t} = ${v}`, { open: (c) => `if ${c} {`, result: (v) => [`return ${v}`] }),
  kotlin: braces((f, p, t) => [`fun ${f}(${after(p, t)}): ${t} {`], (n, _, v) => `val ${n} = ${v}`, { result: (v) => [`return ${v}`] }),
  go: braces((f, p, t) => [`func ${f}(${p.join(', ')} ${t}) ${t} {`], (n, _, v) => `${n} := ${v}`, { open: (c) => `if ${c} {`, result: (v) => [`return ${v}`], indent: '\t' }),
  python: { head: (f, p) => [`def ${f}(${p.join(', ')}):`], foot: () => [], assign: (n, _, v) => `${n} = ${v}`, open: (c) => `if ${c}:`, close: null, result: (v) => [`return ${v}`], indent: '    ' },
  julia: { head: (f, p, t) => [`function ${f}(${p.map((q) => `${q}::${t}`).join(', ')})::${t}`], foot: () => ['end'], assign: (n, _, v) => `${n} = ${v}`, open: (c) => `if ${c}`, close: 'end', result: (v) => [`return ${v}`], indent: '    ' },
  r: braces((f, p) => [`${f} <- function(${p.join(', ')}) {`], (n, _, v) => `${n} <- ${v}`, { result: (v) => [`return(${v})`], indent: '  ' }),
  matlab: { head: (f, p) => [`function result = ${f}(${p.join(', ')})`], foot: () => ['end'], assign: (n, _, v) => `${n} = ${v};`, open: (c) => `if ${c}`, close: 'end', result: (v) => [`result = ${v};`, 'return'], indent: '    ' },
  fortran: {
    head: (f, p, t) => [`pure function ${f}(${p.join(', ')}) result(value)`, `    ${t}, intent(in) :: ${p.join(', ')}`, `    ${t} :: value`],
    foot: (f) => [`end function ${f}`],
    assign: (n, _, v) => `${n} = ${v}`,
    open: (c) => `if (${c}) then`,
    close: 'end if',
    result: (v) => [`value = ${v}`, 'return'],
    indent: '    ',
  },
};

/** A function in the language, its comment above it, with the imports it needs. Names must be identifiers of the language already. */
export function functionCode(text: FunctionText, options: CodeOptions): Outcome<Code> {
  return attempt(() => {
    const writer = codeWriter(options);
    const { row, format } = writer;
    const type = row.floats[format]?.name ?? '';
    const shape = SHAPES[row.id];
    const comment = commentLines(row.id, text.comment ?? []);
    const lines = [...comment, ...shape.head(text.name, text.parameters, type)];
    const opening = comment.length + 1;
    if (row.id === 'fortran') {
      const names = declared(text.body);
      if (names.length > 0) lines.push(`    ${type} :: ${names.join(', ')}`);
    }
    writeStatements(text.body, writer, shape, type, shape.indent, lines, text.name);
    lines.push(...shape.foot(text.name));
    if (row.id !== 'fortran') return { text: lines.join('\n'), imports: [...writer.imports] };
    // A use statement stands inside its program unit, before every declaration.
    const within = [...lines.slice(0, opening), ...[...writer.imports].map((line) => shape.indent + line), ...lines.slice(opening)];
    return { text: within.join('\n'), imports: [] };
  });
}

function converted({ value, rounded }: { readonly value: Expression; readonly rounded?: boolean }, writer: CodeWriter): string {
  const { text } = writer.write(value);
  const wrap = rounded ? writer.row.floats[writer.format]?.wrap : undefined;
  return wrap ? `${wrap[0]}${text}${wrap[1]}` : text;
}

function writeStatements(body: readonly Statement[], writer: CodeWriter, shape: Shape, type: string, indent: string, lines: string[], name: string): void {
  if (body.length === 0) throw new Declined('bad-request', 'A function needs at least one statement.');
  for (const statement of body) {
    if (statement.kind === 'let' && statement.value.kind === 'piecewise' && (!writer.row.choose || writer.row.id === 'fortran')) lines.push(...assigned(statement.name, statement.value.branches, writer, shape, type).map((line) => indent + line));
    else if (statement.kind === 'let') lines.push(indent + shape.assign(statement.name, type, converted(statement, writer)));
    else if (statement.kind === 'assert') lines.push(...asserted(statement.conditions.map((c) => writer.write(c).text), statement.message, writer).map((line) => indent + line));
    else if (statement.kind === 'return') lines.push(...shape.result(converted(statement, writer), name).map((line) => indent + line));
    else {
      lines.push(indent + shape.open(writer.write(statement.condition).text));
      writeStatements(statement.then, writer, shape, type, indent + shape.indent, lines, name);
      if (shape.close !== null) lines.push(indent + shape.close);
    }
  }
}

type Assertion = (conditions: readonly string[], message: string) => { readonly lines: readonly string[]; readonly imports?: readonly string[] };
const both = (conditions: readonly string[], and = ' && '): string => conditions.join(and);
const thrown: Assertion = (c, message) => ({ lines: [`if (!(${both(c)})) throw new RangeError('${message}');`] });
/** Null where the language cannot stop. */
const ASSERTIONS: Readonly<Record<CodeLanguage, Assertion | null>> = {
  c: (c) => ({ lines: [`assert(${both(c)});`], imports: ['#include <assert.h>'] }),
  cpp: (c) => ({ lines: [`assert(${both(c)});`], imports: ['#include <cassert>'] }),
  rust: (c, message) => ({ lines: [`debug_assert!(${both(c)}, "${message}");`] }),
  python: (c, message) => ({ lines: [`assert ${both(c, ' and ')}, "${message}"`] }),
  javascript: thrown,
  typescript: thrown,
  java: (c, message) => ({ lines: [`assert ${both(c)} : "${message}";`] }),
  csharp: (c, message) => ({ lines: [`System.Diagnostics.Debug.Assert(${both(c)}, "${message}");`] }),
  go: (c, message) => ({ lines: [`if !(${both(c)}) {`, `\tpanic("${message}")`, '}'] }),
  julia: (c, message) => ({ lines: [`@assert ${both(c)} "${message}"`] }),
  fortran: (c, message) => ({ lines: [`if (.not. (${both(c, ' .and. ')})) error stop "${message}"`] }),
  matlab: (c, message) => ({ lines: [`assert(${both(c)}, '${message}');`] }),
  r: (c) => ({ lines: [`stopifnot(${c.join(', ')})`] }),
  glsl: null,
  hlsl: null,
  kotlin: (c, message) => ({ lines: [`require(${both(c)}) { "${message}" }`] }),
  swift: (c, message) => ({ lines: [`precondition(${both(c)}, "${message}")`] }),
};

function asserted(conditions: readonly string[], message: string, { row, require }: CodeWriter): readonly string[] {
  const assertion = ASSERTIONS[row.id];
  if (!assertion) throw new Declined('bad-request', `${row.title} has no assertions; leave the assertion out.`);
  const { lines, imports } = assertion(conditions, message);
  require(imports ?? []);
  return lines;
}

/** A choice without a conditional expression: the value of the last branch, overwritten from the last condition to the first. */
function assigned(name: string, branches: readonly { readonly condition: Expression | null; readonly value: Expression }[], writer: CodeWriter, shape: Shape, type: string): readonly string[] {
  const set = writer.row.id === 'go' ? `${name} =` : null;
  return [...branches].reverse().flatMap(({ condition, value }) => {
    const text = writer.write(value).text;
    if (!condition) return [shape.assign(name, type, text)];
    const line = set ? `${set} ${text}` : shape.assign(name, type, text);
    return [shape.open(writer.write(condition).text), shape.indent + line, ...(shape.close === null ? [] : [shape.close])];
  });
}

function declared(body: readonly Statement[]): readonly string[] {
  const names = body.flatMap((s) => (s.kind === 'let' ? [s.name] : s.kind === 'if' ? declared(s.then) : []));
  return [...new Set(names)];
}
