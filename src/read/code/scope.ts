/** What is visible around a place: names, types, imports, constants, the enclosing function. */
import { type Expression, freeSymbols, type Span } from '../../expression/index.ts';
import { attempt } from '../../outcome.ts';
import type { Environment, Imports, Remark } from './environment.ts';
import type { CodeLanguage } from './languages/index.ts';
import { listValue } from './listValue.ts';
import { readMeaning } from './meaning.ts';
import { parseByPrecedence } from './precedence/index.ts';
import type { AssignCode, Code, FunctionCode, LambdaCode } from './syntax.ts';
import { pathTo, walkCode } from './syntax.ts';
import { declaredType, floating, INTEGER, UNKNOWN, type ValueType } from './types.ts';

export interface Declaration {
  readonly name: string;
  readonly type: string;
  readonly value: Code | null;
  readonly constant: boolean;
  readonly kind: 'variable' | 'parameter' | 'function';
  readonly span: Span;
  /** Part of the file's own level or of a class, not of a function around the place. */
  readonly outer: boolean;
}

/** The declarations of one block, function head or file, by name; the last one of a name counts. */
type Level = ReadonlyMap<string, Declaration>;

export interface Scope {
  /** Outermost first. */
  readonly levels: readonly Level[];
  readonly imports: Imports;
  readonly importNodes: readonly { readonly path: string; readonly span: Span }[];
  readonly enclosing: FunctionCode | LambdaCode | null;
  readonly statement: Span | null;
  /** The name that the value of the statement around the place goes to. */
  readonly target: string | null;
  /** How often each plain name is assigned to in the whole document. */
  readonly assignments: ReadonlyMap<string, number>;
}

const targetName = (code: AssignCode): string | null => (code.target.kind === 'name' ? code.target.text : null);

/** `c[2] = ...` changes the list c. */
const changedList = (target: Code): string | null => (target.kind === 'index' && target.object.kind === 'name' ? target.object.text : target.kind === 'call' && target.callee.kind === 'name' ? target.callee.text : null);

const CHANGING: ReadonlySet<string> = new Set(['append', 'push', 'push_back', 'pop', 'pop_back', 'insert', 'extend', 'remove', 'removeLast', 'sort', 'reverse', 'clear', 'fill', 'splice', 'shift', 'unshift', 'add', 'swap', 'rotate_left', 'rotate_right', 'resize', 'truncate', 'emplace_back']);

/** `c.append(...)`, `push!(c, ...)` change the list c. */
function changedByCall(code: Code): string | null {
  if (code.kind !== 'call') return null;
  if (code.callee.kind === 'member' && code.callee.object.kind === 'name' && CHANGING.has(code.callee.name)) return code.callee.object.text;
  const [first] = code.args;
  return code.callee.kind === 'name' && code.callee.text.endsWith('!') && first?.kind === 'name' ? first.text : null;
}

function declarationOf(code: Code, outer: boolean): readonly Declaration[] {
  const span = { start: code.start, end: code.end };
  switch (code.kind) {
    case 'declare':
      if (code.value?.kind === 'lambda') return [{ name: code.name, type: code.type, value: code.value, constant: code.constant, kind: 'function', span, outer }];
      return [{ name: code.name, type: code.type, value: code.value, constant: code.constant, kind: 'variable', span, outer }];
    case 'assign': {
      const name = targetName(code);
      if (name === null || !/^:?=$/.test(code.operator)) return [];
      return [{ name, type: code.type, value: code.value, constant: false, kind: code.value.kind === 'lambda' ? 'function' : 'variable', span, outer }];
    }
    case 'function':
      return [{ name: code.name, type: code.returns, value: null, constant: true, kind: 'function', span, outer }];
    default:
      return [];
  }
}

/** Declarations directly inside a node, through blocks that open no scope of their own for this purpose (several declarators, classes, namespaces). */
function* directly(code: Code): Generator<Code> {
  const stack: Code[] = code.kind === 'block' || code.kind === 'opaque' ? [...(code.kind === 'block' ? code.body : code.parts)].reverse() : [];
  for (let here = stack.pop(); here; here = stack.pop()) {
    if (here.kind === 'block' || here.kind === 'opaque') {
      const parts = here.kind === 'block' ? here.body : here.parts;
      for (let i = parts.length - 1; i >= 0; i -= 1) {
        const part = parts[i];
        if (part) stack.push(part);
      }
    } else yield here;
  }
}

function importsOf(root: Code): { readonly imports: Imports; readonly nodes: readonly { readonly path: string; readonly span: Span }[] } {
  const modules = new Map<string, string>();
  const names = new Map<string, { readonly module: string; readonly original: string }>();
  const open: string[] = [];
  const nodes: { readonly path: string; readonly span: Span }[] = [];
  for (const code of directly(root.kind === 'block' ? root : { kind: 'block', body: [root], start: root.start, end: root.end })) {
    if (code.kind !== 'import') continue;
    nodes.push({ path: code.path, span: { start: code.start, end: code.end } });
    const path = code.path.replaceAll('::', '.');
    if (code.alias !== null) modules.set(code.alias, path);
    else if (code.names.length === 0) modules.set(path.split(/[./]/).at(-1) ?? path, path);
    for (const [original, local] of code.names) {
      if (original === '*') open.push(path);
      else names.set(local, { module: path, original });
    }
  }
  return { imports: { modules, names, open }, nodes };
}

/** What is known of a document as a whole, found once. */
interface Facts {
  readonly imports: Imports;
  readonly nodes: readonly { readonly path: string; readonly span: Span }[];
  readonly assignments: ReadonlyMap<string, number>;
}
const facts = new WeakMap<Code, Facts>();
const levels = new WeakMap<Code, Level>();

function factsOf(root: Code): Facts {
  const known = facts.get(root);
  if (known) return known;
  const assignments = new Map<string, number>();
  for (const code of walkCode(root)) {
    const name = code.kind === 'declare' && code.value ? code.name : code.kind === 'assign' ? (targetName(code) ?? changedList(code.target)) : changedByCall(code);
    if (name !== null) assignments.set(name, (assignments.get(name) ?? 0) + 1);
  }
  const { imports, nodes } = importsOf(root);
  const found: Facts = { imports, nodes, assignments };
  facts.set(root, found);
  return found;
}

function levelOf(code: Code, outer: boolean): Level {
  const known = levels.get(code);
  if (known) return known;
  const level = new Map<string, Declaration>();
  const add = (d: Declaration): void => {
    if (d.name !== '') level.set(d.name, d);
  };
  // Fortran: a function's result is a variable with the type of its head.
  const result = code.kind === 'function' ? /^(.+)=(\w+)$/.exec(code.returns) : null;
  if (result?.[1] !== undefined && result[2] !== undefined) add({ name: result[2], type: result[1], value: null, constant: false, kind: 'variable', span: { start: code.start, end: code.end }, outer: false });
  if (code.kind === 'function' || code.kind === 'lambda') for (const p of code.parameters) add({ name: p.name, type: p.type, value: null, constant: false, kind: 'parameter', span: { start: p.start, end: p.end }, outer: false });
  else if (code.kind === 'block' || code.kind === 'opaque') for (const inner of directly(code)) for (const d of declarationOf(inner, outer)) add(d);
  else for (const d of declarationOf(code, outer)) add(d);
  levels.set(code, level);
  return level;
}

/** The surroundings of [start, end). After the first question about a document the cost is that of the path down to the place. */
export function scopeAt(root: Code, start: number, end: number): Scope {
  const path = pathTo(root, start, end);
  const found: Level[] = [];
  let enclosing: FunctionCode | LambdaCode | null = null;
  let statement: Span | null = null;
  let target: string | null = null;
  path.forEach((code, i) => {
    const opens = code.kind === 'function' || code.kind === 'lambda' || code.kind === 'block' || code.kind === 'opaque';
    const own: Code = code;
    if (i === 0 && !(code.kind === 'block' || code.kind === 'opaque')) {
      const level = new Map(declarationOf(own, true).map((d) => [d.name, d]));
      found.push(level);
    }
    if (opens) found.push(levelOf(code, enclosing === null));
    if (code.kind === 'function' || code.kind === 'lambda') enclosing = code;
    const parent = path[i - 1];
    if ((parent === undefined || parent.kind === 'block' || parent.kind === 'function') && code.kind !== 'block' && code.kind !== 'function') statement = { start: code.start, end: code.end };
    if (code.kind === 'declare') target = code.name;
    if (code.kind === 'assign') target = targetName(code);
  });
  const { imports, nodes, assignments } = factsOf(root);
  return { levels: found, imports, importNodes: nodes, enclosing, statement, target, assignments };
}

/** Every visible declaration, outermost first. */
export const declarationsOf = (scope: Scope): readonly Declaration[] => scope.levels.flatMap((level) => [...level.values()]);

/** The environment of a place. Types of names without a written type are those of their values. */
export function environmentAt(scope: Scope, text: string, language: CodeLanguage, remarks: Remark[]): Environment {
  const fold = (name: string): string => (language.foldCase ? name.toLowerCase() : name);
  const folded = language.foldCase ? scope.levels.map(foldedLevel) : scope.levels;
  const find = (name: string): Declaration | undefined => {
    const key = fold(name);
    for (let i = folded.length - 1; i >= 0; i -= 1) {
      const found = folded[i]?.get(key);
      if (found) return found;
    }
    return undefined;
  };
  const spelling = new Map<string, string>();
  const types = new Map<string, ValueType>();
  const implicit = (language.implicitIntegers ?? false) && !hasImplicitNone(text);
  const environment: Environment = {
    language,
    text,
    imports: scope.imports,
    isLocal: (name) => find(name) !== undefined,
    isLocalFunction: (name) => find(name)?.kind === 'function',
    constantOf: (symbol) => {
      const indexed = /^(\w+)\[(\d{1,4})\]$/.exec(symbol);
      const declaration = find(indexed?.[1] ?? symbol);
      if (!declaration?.value || declaration.kind !== 'variable' || (scope.assignments.get(declaration.name) ?? 0) > 1) return null;
      const { value } = declaration;
      const list = indexed ? listValue(value, language.family, text) : null;
      const first = Number(list?.first ?? (language.family === 'julia' || language.family === 'r' ? 1 : 0));
      const code = indexed ? list?.items[Number(indexed[2]) - first] : value.kind === 'opaque' && value.what === 'macro' ? parseByPrecedence(text, language, value.start, value.end).root : value;
      if (!code || code.kind === 'list' || code.kind === 'lambda') return null;
      const read = attempt(() => readMeaning(code, { ...environment, remark: () => undefined }));
      return read.ok && isNumeric(read.value.expression) ? read.value.expression : null;
    },
    listOf: (name) => {
      const declaration = find(name);
      return declaration?.value && (scope.assignments.get(declaration.name) ?? 0) <= 1 ? listValue(declaration.value, language.family, text) : null;
    },
    remark: (span, message) => remarks.push({ span, message }),
    spell: (name) => {
      if (!language.foldCase) return name;
      const known = spelling.get(fold(name));
      if (known !== undefined) return known;
      spelling.set(fold(name), name);
      return name;
    },
    typeOf: (name) => {
      const key = fold(name);
      const known = types.get(key);
      if (known) return known;
      // A value that names itself ends here.
      types.set(key, UNKNOWN);
      const declaration = find(name);
      let type: ValueType = UNKNOWN;
      if (declaration) {
        type = declaredType(declaration.type, language);
        if (type.kind === 'unknown' && declaration.value && /^(?:|auto|var|let|val|const|:=|const auto|constexpr auto|static constexpr auto)$/.test(declaration.type.trim())) type = typeOfValue(declaration.value, environment);
      } else if (implicit && /^[i-n]/i.test(name)) type = INTEGER;
      types.set(key, type);
      return type;
    },
  };
  return environment;
}

/** A number, or a sign, quotient or product of numbers: nothing that a change elsewhere could alter. */
function isNumeric(e: Expression): boolean {
  switch (e.kind) {
    case 'number':
      return true;
    case 'negation':
      return isNumeric(e.operand);
    case 'quotient':
      return isNumeric(e.numerator) && isNumeric(e.denominator);
    case 'product':
      return e.factors.every(isNumeric);
    default:
      return false;
  }
}

const foldedLevels = new WeakMap<Level, Level>();
function foldedLevel(level: Level): Level {
  const known = foldedLevels.get(level);
  if (known) return known;
  const folded: Level = new Map([...level].map(([name, d]) => [name.toLowerCase(), d]));
  foldedLevels.set(level, folded);
  return folded;
}

const withNone = new Map<string, boolean>();
/** Remembers the last text only. */
function hasImplicitNone(text: string): boolean {
  const known = withNone.get(text);
  if (known !== undefined) return known;
  withNone.clear();
  const found = /\bimplicit\s+none\b/i.test(text);
  withNone.set(text, found);
  return found;
}

function typeOfValue(value: Code, environment: Environment): ValueType {
  const quiet: Environment = { ...environment, remark: () => undefined };
  const read = attempt(() => readMeaning(value, quiet));
  if (!read.ok) return UNKNOWN;
  const { type } = read.value;
  if (type.kind === 'integer') return { ...INTEGER };
  return type.kind === 'float' ? floating(type.format, type.evidence === 'suffix' ? 'declared' : type.evidence, false) : type;
}

export interface NearbyConstant {
  readonly name: string;
  readonly value: Expression;
  readonly span: Span;
}

/** Names near the place whose value is a constant: declared constant, or assigned once to a number. */
export function constantsOf(scope: Scope, environment: Environment, macro: (start: number, end: number) => Code | null): readonly NearbyConstant[] {
  const found = new Map<string, NearbyConstant>();
  for (const declaration of declarationsOf(scope)) {
    if (declaration.kind !== 'variable' || !declaration.value) continue;
    if ((scope.assignments.get(declaration.name) ?? 0) > 1) continue;
    const code = declaration.value.kind === 'opaque' && declaration.value.what === 'macro' ? macro(declaration.value.start, declaration.value.end) : declaration.value;
    if (!code || code.kind === 'lambda' || code.kind === 'list') continue;
    const read = attempt(() => readMeaning(code, { ...environment, remark: () => undefined }));
    if (!read.ok || read.value.expression.kind === 'apply') continue;
    const free = freeSymbols(read.value.expression);
    if (free.length === 0 || free.every((name) => found.has(name))) found.set(declaration.name, { name: declaration.name, value: read.value.expression, span: declaration.span });
  }
  return [...found.values()];
}
