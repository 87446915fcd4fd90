/** Lists of numbers in code: whole numbers that are known, ranges, and the order in which a loop meets the entries. */
import { Declined } from '../../outcome.ts';
import type { Span } from '../../expression/index.ts';
import type { Environment } from './environment.ts';
import { operatorMeaning } from './operators.ts';
import { segments } from './paths.ts';
import type { CallCode, Code, ListCode, OpaqueCode } from './syntax.ts';

/** What a loop's name stands for in one round: a whole number, an entry, or several of them (index and entry). */
export type Item = { readonly kind: 'whole'; readonly value: bigint } | { readonly kind: 'entry'; readonly code: Code } | { readonly kind: 'pair'; readonly items: readonly Item[] };

/** Longer ranges and lists are not followed. */
export const MOST_ROUNDS = 200;
const DEEPEST = 40;

/** The index of the first entry of a list in the language. */
const firstIndex = (env: Environment): bigint => (/^(?:fortran|julia|matlab|r)$/.test(env.language.family) ? 1n : 0n);
const spelled = (code: Code, env: Environment): string => env.text.slice(code.start, code.end).replace(/\s+/g, '');
const whole = (value: bigint): Item => ({ kind: 'whole', value });

/** The list that a piece of code names or is; null where the file does not give it once and for all. */
function listAt(code: Code, env: Environment, depth = 0): ListCode | null {
  if (depth > DEEPEST) return null;
  switch (code.kind) {
    case 'list':
      return code;
    case 'name':
      return env.listOf(code.text);
    case 'group':
      return listAt(code.inner, env, depth + 1);
    case 'unary':
      return code.operator === '&' || code.operator === '*' ? listAt(code.operand, env, depth + 1) : null;
    case 'cast':
      return listAt(code.operand, env, depth + 1);
    default:
      return null;
  }
}

/** The index of an entry where list and index are known, counted as the language does (Python's negative ones from the start). */
export function positionOf(object: Code, args: readonly Code[], env: Environment): bigint | null {
  const [index] = args;
  const list = listAt(object, env);
  const at = index && args.length === 1 && list ? wholeNumber(index, env) : null;
  return list && at !== null && at < 0n && env.language.family === 'python' ? at + BigInt(list.items.length) : at;
}

/** The entry at an index that is known while loops are followed. Throws Declined where list or index are not. */
export function entryOf(object: Code, args: readonly Code[], span: Span, env: Environment): Code {
  const list = listAt(object, env);
  const at = positionOf(object, args, env);
  const entry = list && at !== null ? list.items[Number(at - (list.first ?? firstIndex(env)))] : undefined;
  if (!entry || entry.kind === 'opaque') throw new Declined('unreadable', 'This entry of a list is not known while the loop runs; select an expression.', span);
  return entry;
}

/** A whole number made of literals, counters, constants of the file and lengths of lists; null for anything else. */
export function wholeNumber(code: Code, env: Environment, depth = 0): bigint | null {
  if (depth > DEEPEST) return null;
  const inner = (c: Code): bigint | null => wholeNumber(c, env, depth + 1);
  switch (code.kind) {
    case 'literal':
      return /^\d+(?:_?[iu](?:8|16|32|64|size)|[uUlL]+)?$/.test(code.text) ? BigInt(/^\d+/.exec(code.text)?.[0] ?? '0') : null;
    case 'name':
      return env.counters?.get(env.spell(code.text)) ?? constantWhole(code.text, env);
    case 'group':
      return inner(code.inner);
    case 'cast':
      return inner(code.operand);
    case 'unary': {
      const value = code.operator === '-' || code.operator === '+' ? inner(code.operand) : null;
      return value !== null && code.operator === '-' ? -value : value;
    }
    case 'binary': {
      const byteSize = lengthBySize(code, env);
      if (byteSize !== null) return byteSize;
      const [a, b] = [inner(code.left), inner(code.right)];
      if (a === null || b === null) return null;
      switch (operatorMeaning(code.operator, env.language)) {
        case 'add':
          return a + b;
        case 'subtract':
          return a - b;
        case 'multiply':
          return a * b;
        default:
          return null;
      }
    }
    case 'member':
      return /^(?:length|Length|size|count|Count)$/.test(code.name) ? lengthOf(code.object, env) : code.name === 'lastIndex' ? less(lengthOf(code.object, env)) : null;
    case 'call':
      return wholeCall(code, env, inner);
    default:
      return null;
  }
}

const less = (value: bigint | null): bigint | null => (value === null ? null : value - 1n);

function constantWhole(name: string, env: Environment): bigint | null {
  const value = env.constantOf(name);
  const e = value?.kind === 'negation' ? value.operand : value;
  if (e?.kind !== 'number' || e.value.den !== 1n) return null;
  return value?.kind === 'negation' ? -e.value.num : e.value.num;
}

function lengthOf(code: Code, env: Environment): bigint | null {
  const list = listAt(code, env);
  return list ? BigInt(list.items.length) : null;
}

/** `sizeof(c) / sizeof(c[0])`. */
function lengthBySize(code: Code, env: Environment): bigint | null {
  const name = /^sizeof\(?(\w+)\)?\/sizeof(?:\(?\1\[0\]\)?|\(?\*\1\)?|\((?:float|double)\))$/.exec(spelled(code, env))?.[1];
  const list = name === undefined ? null : env.listOf(name);
  return list ? BigInt(list.items.length) : null;
}

function wholeCall(code: CallCode, env: Environment, inner: (code: Code) => bigint | null): bigint | null {
  const [first] = code.args;
  if (code.callee.kind === 'member' && code.args.length === 0 && /^(?:len|size|length|count)$/.test(code.callee.name)) return lengthOf(code.callee.object, env);
  const name = segments(code.callee)?.at(-1)?.toLowerCase() ?? '';
  if (!first || code.args.length !== 1) return null;
  if (/^(?:len|length|numel|size|ssize|lastindex|ubound)$/.test(name)) return lengthOf(first, env);
  return /^(?:int|i32|i64|usize|u32|isize|integer)$/.test(name) ? inner(first) : null;
}

/** first, first + step, ... up to `last`, that one included; null where it is too long. */
export function counted(first: bigint | null, last: bigint | null, step: bigint | null): readonly bigint[] | null {
  if (first === null || last === null || step === null || step === 0n) return null;
  const rounds = (last - first) / step + 1n;
  if ((step > 0n ? first > last : first < last)) return [];
  return rounds > BigInt(MOST_ROUNDS) ? null : Array.from({ length: Number(rounds) }, (_, k) => first + BigInt(k) * step);
}

const KEEPS: ReadonlySet<string> = new Set(['iter', 'into_iter', 'copied', 'cloned', 'values', 'toList', 'asSequence', 'asIterable', 'AsEnumerable', 'ToArray', 'list', 'tuple', 'collect']);
const REVERSES: ReadonlySet<string> = new Set(['rev', 'reversed', 'asReversed', 'toReversed', 'reverse', 'Reverse', 'flip', 'fliplr', 'flipud']);
const NUMBERS: ReadonlySet<string> = new Set(['enumerate', 'withIndex', 'entries']);

/** What a loop meets, in order; null where that is not known. */
export function sequence(code: Code, env: Environment, depth = 0): readonly Item[] | null {
  if (depth > DEEPEST) return null;
  const number = (c: Code | undefined): bigint | null => (c ? wholeNumber(c, env) : null);
  const inner = (c: Code): readonly Item[] | null => sequence(c, env, depth + 1);
  const list = listAt(code, env);
  const [spread] = list?.items ?? [];
  // JavaScript's `[...c]`.
  if (list?.items.length === 1 && spread?.kind === 'opaque' && /^spread/.test(spread.what) && spread.parts[0]) return inner(spread.parts[0]);
  if (list) return list.items.length > MOST_ROUNDS || list.items.some((item) => item.kind === 'opaque' || item.kind === 'list') ? null : list.items.map((item) => ({ kind: 'entry', code: item }));
  switch (code.kind) {
    case 'group':
      return inner(code.inner);
    case 'binary':
      return range(code.operator, code.left, code.right, env);
    case 'opaque':
      return code.loop ? null : (rangeOf(code, env) ?? sliced(code, env));
    case 'index':
      return sliced(code, env);
    case 'member':
      return code.name === 'indices' ? indices(lengthOf(code.object, env), env) : null;
    case 'call':
      return sequenceCall(code, env, inner, number);
    default:
      return null;
  }
}

const wholes = (values: readonly bigint[] | null): readonly Item[] | null => values?.map(whole) ?? null;
const indices = (length: bigint | null, env: Environment): readonly Item[] | null => wholes(counted(firstIndex(env), length === null ? null : firstIndex(env) + length - 1n, 1n));

/** `a:b`, `a:s:b`, `a..b`, `a..<b`, `a until b`, `a downTo b`, `... step s`. */
function range(operator: string, left: Code, right: Code, env: Environment): readonly Item[] | null {
  const { family } = env.language;
  const last = wholeNumber(right, env);
  switch (operator) {
    case ':': {
      if (left.kind === 'binary' && left.operator === ':' && family !== 'r') return wholes(counted(wholeNumber(left.left, env), last, wholeNumber(left.right, env)));
      const first = wholeNumber(left, env);
      const falls = family === 'r' && first !== null && last !== null && last < first;
      return wholes(counted(first, last, falls ? -1n : 1n));
    }
    case '..':
      return family === 'kotlin' ? wholes(counted(wholeNumber(left, env), last, 1n)) : null;
    case '...':
    case '..=':
      return wholes(counted(wholeNumber(left, env), last, 1n));
    case '..<':
    case 'until':
      return wholes(counted(wholeNumber(left, env), less(last), 1n));
    case 'downTo':
      return wholes(counted(wholeNumber(left, env), last, -1n));
    case 'step': {
      const whole = sequence(left, env);
      return whole && last !== null && last > 0n ? whole.filter((_, k) => BigInt(k) % last === 0n) : null;
    }
    default:
      return null;
  }
}

/** Rust's `a..b` and `a..=b`. */
function rangeOf(code: OpaqueCode, env: Environment): readonly Item[] | null {
  const [a, b] = code.parts;
  if (!/range/.test(code.what) || !a || !b || code.parts.length !== 2) return null;
  const operator = env.text.slice(a.end, b.start).trim();
  return operator === '..=' || operator === '..' ? range(operator === '..' ? '..<' : '..=', a, b, env) : null;
}

/** `c[::-1]`, `c[1:]`, `c[1..]`. */
function sliced(code: Code, env: Environment): readonly Item[] | null {
  const text = spelled(code, env).replace(/^&/, '');
  const colon = /^(\w+)\[(\d*):(\d*)(?::(-?\d+)?)?\]$/.exec(text);
  const dots = colon ? null : /^(\w+)\[(\d*)\.\.(\d*)\]$/.exec(text);
  const [, name = '', from = '', to = '', step = '1'] = colon ?? dots ?? [];
  if (!(env.language.family === 'python' || (env.language.family === 'go' && colon) || (env.language.family === 'rust' && dots))) return null;
  const list = name === '' ? null : env.listOf(name);
  if (!list || list.items.length > MOST_ROUNDS) return null;
  if (step === '-1' && from === '' && to === '') return [...list.items].reverse().map((item) => ({ kind: 'entry', code: item }));
  if (step !== '1') return null;
  return list.items.slice(from === '' ? 0 : Number(from), to === '' ? undefined : Number(to)).map((item) => ({ kind: 'entry', code: item }));
}

function sequenceCall(code: CallCode, env: Environment, inner: (code: Code) => readonly Item[] | null, number: (code: Code | undefined) => bigint | null): readonly Item[] | null {
  const { callee, args } = code;
  const [a, b, c] = args;
  const path = segments(callee);
  // A method of a sequence: the object comes first.
  if (callee.kind === 'member' && (args.length === 0 || a?.kind !== 'named')) {
    const base = inner(callee.object);
    if (base) {
      if (args.length === 0 && (KEEPS.has(callee.name) || callee.name === 'slice')) return base;
      if (args.length === 0 && REVERSES.has(callee.name)) return [...base].reverse();
      if (args.length === 0 && NUMBERS.has(callee.name)) return numbered(base, 0n);
      const count = args.length === 1 ? number(a) : null;
      if (count !== null && count >= 0n && /^(?:skip|drop|dropFirst|slice|Skip)$/.test(callee.name)) return base.slice(Number(count));
      if (count !== null && count >= 0n && /^(?:take|Take|prefix)$/.test(callee.name)) return base.slice(0, Number(count));
      return null;
    }
  }
  const name = path?.at(-1) ?? '';
  if (env.isLocalFunction(name)) return null;
  const { family } = env.language;
  if (family === 'python' && name === 'range') {
    const [first, stop, step] = args.length === 1 ? [0n, number(a), 1n] : [number(a), number(b), c ? number(c) : 1n];
    return first === null || stop === null || step === null || step === 0n ? null : wholes(counted(first, step > 0n ? stop - 1n : stop + 1n, step));
  }
  if (family === 'swift' && name === 'stride') {
    const named = (label: string): bigint | null => number(args.flatMap((x) => (x.kind === 'named' && x.name === label ? [x.value] : []))[0]);
    const [first, step, through, to] = [named('from'), named('by'), named('through'), named('to')];
    return wholes(counted(first, through ?? (to === null || step === null ? null : step > 0n ? to - 1n : to + 1n), step));
  }
  if (family === 'r' && name === 'seq_len' && args.length === 1) return indices(number(a), env);
  if (family === 'r' && name === 'seq' && args.every((x) => x.kind !== 'named')) return args.length === 3 ? wholes(counted(number(a), number(b), number(c))) : a && b && args.length === 2 ? range(':', a, b, env) : null;
  if (a && args.length === 1) {
    if (name === 'eachindex' || name === 'seq_along') return indices(lengthOf(a, env), env);
    if (KEEPS.has(name)) return inner(a);
    if (REVERSES.has(name)) return reversedOf(inner(a));
    if (name === 'enumerate') return numberedOf(inner(a), firstIndex(env));
  }
  if (a && b && args.length === 2 && name === 'enumerate' && family === 'python') {
    const start = b.kind === 'named' && b.name === 'start' ? number(b.value) : number(b);
    return start === null ? null : numberedOf(inner(a), start);
  }
  return null;
}

const numbered = (items: readonly Item[], first: bigint): readonly Item[] => items.map((item, k) => ({ kind: 'pair', items: [whole(first + BigInt(k)), item] }));
const numberedOf = (items: readonly Item[] | null, first: bigint): readonly Item[] | null => items && numbered(items, first);
const reversedOf = (items: readonly Item[] | null): readonly Item[] | null => items && [...items].reverse();

/** The rounds of `for (i = a; i < b; i += s)`; null where they are not known. */
export function roundsOfSteps(first: Code, condition: Code, step: Code | null, env: Environment): { readonly name: string; readonly values: readonly bigint[] } | null {
  const start = startOf(first);
  if (!start) return null;
  const { name } = start;
  const from = wholeNumber(start.value, env);
  const isCounter = (code: Code): boolean => (code.kind === 'group' ? isCounter(code.inner) : code.kind === 'name' && code.text === name);
  const bare = condition.kind === 'block' && condition.body.length === 1 && condition.body[0] ? condition.body[0] : condition.kind === 'group' ? condition.inner : condition;
  const falls = (code: Code): boolean => stepOf(code, name, env) === -1n && /^\w+--$/.test(spelled(code, env));
  // `for (i = n; i-- > 0;)` and `for (i = n; i--;)` meet n - 1, ..., 0.
  if (!step && (falls(bare) || (bare.kind === 'binary' && (bare.operator === '>' || bare.operator === '!=') && falls(bare.left) && wholeNumber(bare.right, env) === 0n))) {
    const values = counted(less(from), 0n, -1n);
    return values && from !== null && from >= 0n ? { name, values } : null;
  }
  const by = step ? stepOf(step, name, env) : null;
  if (bare.kind !== 'binary' || by === null || by === 0n) return null;
  const turned = isCounter(bare.right);
  if (!turned && !isCounter(bare.left)) return null;
  const bound = wholeNumber(turned ? bare.left : bare.right, env);
  const operator = turned ? bare.operator.replace(/[<>]/, (sign) => (sign === '<' ? '>' : '<')) : bare.operator;
  if (bound === null) return null;
  const last = operator === '<' && by > 0n ? bound - 1n : operator === '<=' && by > 0n ? bound : operator === '>' && by < 0n ? bound + 1n : operator === '>=' && by < 0n ? bound : /^!==?$/.test(operator) && (by === 1n || by === -1n) && from !== null && (bound - from) * by >= 0n ? bound - by : null;
  const values = counted(from, last, by);
  return values && { name, values };
}

function startOf(first: Code): { readonly name: string; readonly value: Code } | null {
  if (first.kind === 'block' && first.body.length === 1 && first.body[0]) return startOf(first.body[0]);
  if (first.kind === 'declare' && first.value) return { name: first.name, value: first.value };
  return first.kind === 'assign' && first.target.kind === 'name' && /^:?=$/.test(first.operator) ? { name: first.target.text, value: first.value } : null;
}

/** How much a statement adds to the counter. */
function stepOf(code: Code, name: string, env: Environment): bigint | null {
  if (code.kind === 'block') return code.body.length === 1 && code.body[0] ? stepOf(code.body[0], name, env) : null;
  const text = spelled(code, env);
  if (text === `${name}++` || text === `++${name}`) return 1n;
  if (text === `${name}--` || text === `--${name}`) return -1n;
  if (code.kind !== 'assign' || code.target.kind !== 'name' || code.target.text !== name) return null;
  if (code.operator === '+=') return wholeNumber(code.value, env);
  if (code.operator === '-=') {
    const by = wholeNumber(code.value, env);
    return by === null ? null : -by;
  }
  const { value } = code;
  if (code.operator !== '=' || value.kind !== 'binary' || value.left.kind !== 'name' || value.left.text !== name || !/^[-+]$/.test(value.operator)) return null;
  const by = wholeNumber(value.right, env);
  return by === null ? null : value.operator === '-' ? -by : by;
}
