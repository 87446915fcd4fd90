/** Names, members and calls: library functions of the language, constants, or symbols. */
import { build, type Expression, Q, type Span } from '../../expression/index.ts';
import { acceptsArity, codeCall, describe, lookupCode } from '../../functions/index.ts';
import { Declined } from '../../outcome.ts';
import { libraryArithmetic } from './arithmetic.ts';
import type { Environment, Meaning } from './environment.ts';
import { readFold } from './folds.ts';
import { entryOf, positionOf } from './lists.ts';
import { libraryName, namedConstant, segments } from './paths.ts';
import type { CallCode, Code, MemberCode, NameCode } from './syntax.ts';
import { combine, declaredType, floating, INTEGER, UNKNOWN, type ValueType } from './types.ts';

type Read = (code: Code) => Meaning;

const spelled = (code: Code, env: Environment): string => env.text.slice(code.start, code.end).replace(/\s+/g, '');
const WORDS: ReadonlySet<string> = new Set(['true', 'false', 'True', 'False', 'None', 'null', 'nullptr', 'undefined', 'NULL', 'nil', 'nothing', 'NaN', 'nan', 'NAN', '.true.', '.false.']);

export function readName(code: NameCode, env: Environment): Meaning {
  const span = { start: code.start, end: code.end };
  const constant = namedConstant(segments(code) ?? [code.text], env);
  if (constant) return { expression: { ...constant, span }, type: floating(null, null) };
  const counter = env.counters?.get(env.spell(code.text));
  if (counter !== undefined) return { expression: { kind: 'number', value: Q.rational(counter), span }, type: { ...INTEGER, flexible: false } };
  if (WORDS.has(code.text) && !env.isLocal(code.text)) throw new Declined('unreadable', `${code.text} is no number; select an arithmetic expression.`, span);
  const name = env.spell(code.text);
  return { expression: { kind: 'symbol', name, span }, type: env.typeOf(code.text) };
}

export function readMember(code: MemberCode, env: Environment, read: Read): Meaning {
  const span = { start: code.start, end: code.end };
  const path = segments(code);
  if (path) {
    const constant = namedConstant(path, env);
    if (constant) return { expression: { ...constant, span }, type: constantType(path, env) };
  }
  const property = env.language.functions && Object.hasOwn(env.language.functions, code.name) ? env.language.functions[code.name] : undefined;
  if (env.language.methods && property && code.separator === '.' && (env.language.family === 'kotlin' || env.language.family === 'swift')) {
    const inner = read(code.object);
    return { expression: { ...build.call(property, inner.expression), written: code.name, span }, type: inner.type };
  }
  if (code.object.kind === 'call' || code.object.kind === 'binary') throw new Declined('unreadable', `The member ${code.name} of a computed value cannot be read; put it into a variable first.`, span);
  return { expression: { kind: 'symbol', name: spelled(code, env), span }, type: UNKNOWN };
}

/** `f32::consts::PI`, `Float.pi`, `std::numbers::pi_v<float>`: the format stands in the path. */
function constantType(path: readonly string[], env: Environment): ValueType {
  for (const segment of path) {
    const inner = /<(.*)>$/s.exec(segment)?.[1];
    const format = env.language.floatTypes[inner ?? segment];
    if (format && Object.hasOwn(env.language.floatTypes, inner ?? segment)) return floating(format, 'function');
  }
  return floating(null, null);
}

export function readCall(code: CallCode, env: Environment, read: Read): Meaning {
  const span = { start: code.start, end: code.end };
  const path = segments(code.callee);
  const written = spelled(code.callee, env);
  if (code.callee.kind === 'name' && positionOf(code.callee, code.args, env) !== null) return read(entryOf(code.callee, code.args, span, env));
  const folded = readFold(code, env, read);
  if (folded) return folded;
  if (code.callee.kind === 'name' && env.isLocalFunction(code.callee.text)) return unspecified(code.callee.text, code.args, span, read);
  if (path) {
    const cast = castType(path, written, env);
    if (cast && code.args.length === 1 && code.args[0]) return conversion(cast, written, read(code.args[0]), span);
    const library = libraryName(path, env);
    if (library) {
      const found = libraryCall(library.name, library.prefix, written, code.args, span, env, read);
      if (found) return found;
    }
    const [head] = path;
    if (path.length === 1 && head !== undefined) {
      if (env.language.functions === undefined && code.args.length === 0) throw noArgument(written, span);
      return unspecified(head, code.args, span, read);
    }
  }
  if (code.callee.kind === 'member' && env.language.methods && (code.callee.separator === '.' || code.callee.separator === '?.')) {
    const found = libraryCall(code.callee.name, '', code.callee.name, [code.callee.object, ...code.args], span, env, read);
    if (found) return found;
  }
  if (path && code.args.length > 0) return unspecified(path.join('.'), code.args, span, read);
  throw new Declined('unknown-function', `The call ${written.slice(0, 60)} is not known; put its value into a variable first.`, span);
}

const noArgument = (name: string, span: Span): Declined => new Declined('unreadable', `The call ${name} has no argument; put its value into a variable first.`, span);

/** A function that nothing is known of: f(x). */
function unspecified(name: string, args: readonly Code[], span: Span, read: Read): Meaning {
  if (args.length === 0) throw noArgument(name, span);
  return { expression: { kind: 'apply', name, args: args.map((a) => read(a).expression), derivatives: args.map(() => 0), span }, type: UNKNOWN };
}

function castType(path: readonly string[], written: string, env: Environment): ValueType | null {
  const last = path[path.length - 1] ?? '';
  for (const candidate of [written, last]) {
    const type = declaredType(candidate, env.language);
    if (type.kind !== 'unknown' && !(env.language.family === 'fortran' && Object.hasOwn(env.language.arithmetic, candidate.toLowerCase()))) return type;
  }
  const [head = ''] = path;
  if ((last === 'from' || last === 'of') && path.length === 2) {
    const type = declaredType(head, env.language);
    if (type.kind !== 'unknown') return type;
  }
  return null;
}

function conversion(target: ValueType, written: string, inner: Meaning, span: Span): Meaning {
  if (target.kind === 'integer' && inner.type.kind !== 'integer' && !(inner.expression.kind === 'number' && Q.isInteger(inner.expression.value))) {
    throw new Declined('unreadable', `The conversion ${written} drops the fraction; select an expression without it.`, span);
  }
  return { expression: inner.expression, type: target };
}

/** Languages whose library functions return binary64 whatever they get. */
const ALWAYS_DOUBLE: ReadonlySet<string> = new Set(['c', 'java', 'go', 'javascript', 'r']);

function resultType(name: string, prefix: string, suffix: ValueType | null, args: readonly Meaning[], env: Environment): ValueType {
  if (suffix) return suffix;
  const { family, literalFormat } = env.language;
  if (/MathF|^f32|Float\b|^Single|^float$|math32/.test(prefix)) return floating('binary32', 'function');
  if (/^f64|^Double|^double$|^System\.Math$|^Math$/.test(prefix) && family !== 'javascript') return floating('binary64', 'function');
  if (family === 'fortran' && /^d(?:sin|cos|tan|exp|log|sqrt|abs|asin|acos|atan|sinh|cosh|tanh|atan2|log10)$/i.test(name)) return floating('binary64', 'function');
  if (ALWAYS_DOUBLE.has(family)) return floating('binary64', family === 'c' || family === 'java' || family === 'go' ? 'function' : 'language');
  const joined = args.map((a) => a.type).reduce((a, b) => combine(a, b), UNKNOWN);
  return joined.format ? floating(joined.format, joined.evidence, joined.weak) : floating(args.every((a) => a.type.kind === 'integer') ? literalFormat : null, 'language', true);
}

/** The library call of a bare name, its float suffix taken off where only then it is known. */
function libraryCall(bare: string, prefix: string, written: string, args: readonly Code[], span: Span, env: Environment, read: Read): Meaning | null {
  const { language } = env;
  const name = language.foldCase ? bare.toLowerCase() : bare.replace(/<.*>$/s, '');
  const candidates: { readonly name: string; readonly type: ValueType | null }[] = [{ name, type: null }];
  for (const [suffix, format] of Object.entries(language.nameSuffixes)) {
    if (name.length > suffix.length + 1 && name.endsWith(suffix)) candidates.push({ name: name.slice(0, -suffix.length), type: floating(format, 'function') });
  }
  const broadcast = language.family === 'julia' && name.endsWith('.') ? name.slice(0, -1) : null;
  if (broadcast !== null) candidates.push({ name: broadcast, type: null });
  for (const candidate of candidates) {
    const arithmetic = Object.hasOwn(language.arithmetic, candidate.name) ? language.arithmetic[candidate.name] : undefined;
    if (arithmetic) {
      const found = libraryArithmetic(arithmetic, prefix, written, args, span, env, read);
      if (found) return candidate.type ? { ...found, type: candidate.type } : withResult(found, candidate.name, prefix, env);
    }
    if (!isKnownName(candidate.name, env)) continue;
    const meanings = args.map((a) => read(a.kind === 'named' ? refuseNamed(a.name, written, span) : a));
    const call = knownCall(candidate.name, meanings.map((m) => m.expression), env);
    if (!call) continue;
    const integer = call.kind === 'call' && call.function === 'abs' && meanings.every((m) => m.type.kind === 'integer');
    const expression: Expression = call.kind === 'call' ? { ...call, written, span } : { ...call, span };
    return { expression, type: integer ? INTEGER : resultType(candidate.name, prefix, candidate.type, meanings, env) };
  }
  return null;
}

function withResult(found: Meaning, name: string, prefix: string, env: Environment): Meaning {
  if (found.type.kind === 'integer' || found.expression.kind === 'piecewise') return found;
  return { ...found, type: found.type.kind === 'float' && !ALWAYS_DOUBLE.has(env.language.family) ? found.type : resultType(name, prefix, null, [found], env) };
}

function refuseNamed(argument: string, written: string, span: Span): never {
  throw new Declined('unreadable', `The argument ${argument}= of ${written} is not understood; select an expression without it.`, span);
}

function isKnownName(name: string, env: Environment): boolean {
  const { family, functions } = env.language;
  return lookupCode(family, name) !== null || (functions !== undefined && Object.hasOwn(functions, name));
}

/** The call of a library name; null where no function of that name takes these arguments. */
function knownCall(name: string, args: readonly Expression[], env: Environment): Expression | null {
  const { family, functions } = env.language;
  const call = codeCall(family, name, args);
  if (call) return call;
  const id = functions && Object.hasOwn(functions, name) ? functions[name] : undefined;
  const description = id === undefined ? null : describe(id);
  return description && acceptsArity(description, args.length) ? build.call(description.id, ...args) : null;
}

/** True for calls that are library functions, arithmetic or conversions of the language. */
export function isLibraryCall(code: CallCode, env: Environment): boolean {
  const known = (name: string, count: number): boolean => {
    const { language } = env;
    const plain = language.foldCase ? name.toLowerCase() : name.replace(/<.*>$/s, '').replace(/\.$/, '');
    const names = [plain, ...Object.keys(language.nameSuffixes).filter((suffix) => plain.endsWith(suffix)).map((suffix) => plain.slice(0, -suffix.length))];
    return names.some((n) => Object.hasOwn(language.arithmetic, n) || knownCall(n, Array.from({ length: count }, () => build.symbol('x')), env) !== null);
  };
  const path = segments(code.callee);
  if (code.callee.kind === 'name' && env.isLocalFunction(code.callee.text)) return false;
  if (path) {
    if (code.args.length === 1 && castType(path, spelled(code.callee, env), env)) return true;
    const library = libraryName(path, env);
    if (library && known(library.name, code.args.length)) return true;
  }
  return code.callee.kind === 'member' && env.language.methods && known(code.callee.name, code.args.length + 1);
}

/** `np.where`, `ifelse`, `merge`: calls whose arguments are branches. */
export function isChoiceCall(code: CallCode, env: Environment): boolean {
  const name = segments(code.callee)?.at(-1) ?? '';
  const plain = env.language.foldCase ? name.toLowerCase() : name;
  const what = Object.hasOwn(env.language.arithmetic, plain) ? env.language.arithmetic[plain] : undefined;
  return what === 'choose' || what === 'merge';
}
