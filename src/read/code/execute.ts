/** Straight-line code carried out with expressions: locals are replaced by what was put into them, choices become piecewise. */
import { type Expression, mapChildren } from '../../expression/index.ts';
import { attempt, Declined, type Outcome } from '../../outcome.ts';
import { choose } from './conditions.ts';
import type { Environment, Meaning } from './environment.ts';
import { readMeaning } from './meaning.ts';
import { roundsOf } from './loops.ts';
import { operatorMeaning } from './operators.ts';
import type { AssignCode, Code, FunctionCode, IfCode, LambdaCode, Loop } from './syntax.ts';
import { partsOf, walkWithin } from './syntax.ts';

/** Expressions that would have more nodes written out are not built. */
export const MOST_NODES = 20_000;

/** What the variables hold; null: something that cannot be read (changed in a loop, by a call). */
export type Bindings = ReadonlyMap<string, Bound | null>;
export interface Bound {
  readonly meaning: Meaning;
  /** Names of locals that went into it. */
  readonly through: ReadonlySet<string>;
  /** Number of nodes written out. */
  readonly size: number;
}

/** Called with every statement before it takes effect; the environment knows the counters of the loops around it. */
export interface Watcher {
  readonly statement?: (code: Code, bindings: Bindings, env: Environment) => void;
  /** An if whose branches end in values, with what follows it where it has no other branch. */
  readonly choice?: (code: IfCode, then: Meaning, otherwise: Meaning, bindings: Bindings, env: Environment) => void;
}

/** The expression with locals replaced by their values, the locals that went in, and its size; Declined where one cannot be read. */
export function inlined(expression: Expression, bindings: Bindings): Inlined {
  const through = new Set<string>();
  let size = 0;
  const visit = (e: Expression): Expression => {
    const bound = e.kind === 'symbol' ? bindings.get(e.name) : undefined;
    if (bound === undefined) {
      size += 1;
      return mapChildren(e, visit);
    }
    if (bound === null) throw new Declined('unreadable', `The value of ${e.kind === 'symbol' ? e.name : 'a variable'} depends on statements that cannot be followed.`, e.span);
    through.add(e.kind === 'symbol' ? e.name : '');
    for (const name of bound.through) through.add(name);
    size += bound.size;
    return bound.meaning.expression;
  };
  const result = visit(expression);
  if (size > MOST_NODES) throw new Declined('unreadable', 'The expression grows too long when its variables are filled in.', expression.span);
  return { expression: result, through, size };
}

interface Inlined {
  readonly expression: Expression;
  readonly through: ReadonlySet<string>;
  /** Number of nodes written out. */
  readonly size: number;
}

function changedIn(code: Code): readonly string[] {
  const names: string[] = [];
  for (const inner of walkWithin(code)) {
    if (inner.kind === 'assign' && inner.target.kind === 'name') names.push(inner.target.text);
    else if (inner.kind === 'assign' && inner.target.kind === 'index' && inner.target.object.kind === 'name') names.push(inner.target.object.text);
    else if (inner.kind === 'declare') names.push(inner.name);
    else if (inner.kind === 'unary' && inner.operator === '&' && inner.operand.kind === 'name') names.push(inner.operand.text);
  }
  return names;
}

const returnsSomething = (code: Code): boolean => {
  for (const inner of walkWithin(code)) if (inner.kind === 'return') return true;
  return false;
};

/** The statements of a body; a body that is one expression is that. */
const statementsOf = (code: Code): readonly Code[] => (code.kind === 'block' ? code.body : [code]);

/** Languages in which the last expression of a body is its value. */
const LAST_IS_VALUE: ReadonlySet<string> = new Set(['rust', 'julia', 'r', 'kotlin']);

/** Statements carried out in one run, copies of a rest after branches included. */
const MOST_STEPS = 20_000;
const DEEPEST = 60;

const STATEMENT_KINDS: ReadonlySet<Code['kind']> = new Set(['block', 'return', 'declare', 'assign', 'if', 'opaque', 'function', 'import']);

interface Run {
  readonly env: Environment;
  readonly watcher: Watcher;
  steps: number;
  /** A return stood where it cannot be followed (in a loop): the value of the body is not known. */
  lost: boolean;
}

/** Runs a body; the value it gives back, or null where it gives none. Throws Declined where the value cannot be followed. */
export function execute(body: Code, env: Environment, watcher: Watcher = {}): Meaning | null {
  const isExpression = !STATEMENT_KINDS.has(body.kind);
  if (isExpression) watcher.statement?.(body, new Map(), env);
  return isExpression ? valueNow(body, env, new Map()).meaning : finish({ env, watcher, steps: 0, lost: false }, (context) => run(statementsOf(body), 0, context, new Map(), 0), body);
}

function finish(context: Run, body: (context: Run) => Meaning | null, code: Code): Meaning | null {
  const value = body(context);
  if (context.lost) throw new Declined('unreadable', 'This code returns from inside a loop or another statement that cannot be followed; select an expression.', { start: code.start, end: code.end });
  return value;
}

/** The value of a function: what it returns, or what its result variable holds in the end (Fortran, MATLAB). */
export function functionValue(code: FunctionCode | LambdaCode, env: Environment, watcher: Watcher = {}): Meaning | null {
  const { body } = code;
  if (!body) return null;
  const { family } = env.language;
  const result = code.kind !== 'function' ? null : family === 'fortran' ? (/=(\w+)$/.exec(code.returns)?.[1] ?? null) : family === 'matlab' && code.returns !== '' ? code.returns : null;
  if (result === null) return execute(body, env, watcher);
  const bindings: Live = new Map();
  return finish(
    { env, watcher, steps: 0, lost: false },
    (context) => {
      run(statementsOf(body), 0, context, bindings, 0);
      return bindings.get(env.spell(result))?.meaning ?? null;
    },
    code,
  );
}

type Live = Map<string, Bound | null>;

function run(statements: readonly Code[], from: number, context: Run, bindings: Live, depth: number): Meaning | null {
  const { env, watcher } = context;
  const lastIsValue = LAST_IS_VALUE.has(env.language.family);
  for (let i = from; i < statements.length; i += 1) {
    const code = statements[i];
    if (!code) continue;
    context.steps += 1;
    if (context.steps > MOST_STEPS) throw new Declined('over-budget', 'This code has too many branches to be followed; select an expression.', { start: code.start, end: code.end });
    watcher.statement?.(code, bindings, env);
    const last = i === statements.length - 1;
    switch (code.kind) {
      case 'return':
        return code.value ? valueNow(code.value, env, bindings).meaning : null;
      case 'declare':
        if (code.value) bind(env.spell(code.name), code.value, env, bindings);
        else bindings.delete(env.spell(code.name));
        break;
      case 'assign':
        assign(code, env, bindings);
        break;
      case 'block': {
        const inner = run(code.body, 0, context, bindings, depth + 1);
        if (inner) return inner;
        break;
      }
      case 'if':
        if (returnsSomething(code) || (last && lastIsValue)) return choice(code, statements, i, context, bindings, depth);
        rebind(code, context, bindings, depth);
        break;
      case 'function':
      case 'lambda':
      case 'import':
        break;
      case 'opaque': {
        const before: Live = new Map(bindings);
        passOver(code, context, bindings, depth);
        if (code.loop && depth < DEEPEST) for (const [name, bound] of followed(code.loop, context, before, depth)) bindings.set(name, bound);
        break;
      }
      default:
        for (const name of changedIn(code)) bindings.set(env.spell(name), null);
        if (last && lastIsValue) return valueNow(code, env, bindings).meaning;
    }
  }
  return null;
}

export function valueNow(code: Code, env: Environment, bindings: Bindings): Bound {
  const read = readMeaning(code, env);
  const { expression, through, size } = inlined(read.expression, bindings);
  return { meaning: { expression: { ...expression, span: { start: code.start, end: code.end } }, type: read.type }, through, size };
}

function bind(name: string, value: Code, env: Environment, bindings: Live): void {
  if (value.kind === 'list' || value.kind === 'lambda') {
    bindings.delete(name);
    return;
  }
  const now = attempt(() => valueNow(value, env, bindings));
  bindings.set(name, now.ok ? { ...now.value, through: new Set([...now.value.through, name]) } : null);
}

function assign(code: AssignCode, env: Environment, bindings: Live): void {
  if (code.target.kind !== 'name') {
    for (const name of changedIn(code)) bindings.set(env.spell(name), null);
    return;
  }
  const name = env.spell(code.target.text);
  if (/^:?=$/.test(code.operator)) bind(name, code.value, env, bindings);
  else {
    const whole = compoundValue(code, env);
    if (whole) bind(name, whole, env, bindings);
    else bindings.set(name, null);
  }
}

/** `p *= x` as `p * (x)`; null for other changing operators. */
export function compoundValue(code: AssignCode, env: Environment): Code | null {
  const operator = code.operator.slice(0, -1);
  if (code.operator.length < 2 || !code.operator.endsWith('=') || operatorMeaning(operator, env.language) === 'other') return null;
  const { start, end } = code;
  return { kind: 'binary', operator, operatorStart: code.target.end, left: code.target, right: { kind: 'group', inner: code.value, start: code.value.start, end: code.value.end }, start, end };
}

/** A loop or another statement: what it changes is unknown afterwards; inside, the watcher sees its statements with those names standing for themselves. */
function passOver(code: Code, context: Run, bindings: Live, depth: number): void {
  const changed = changedIn(code).map((name) => context.env.spell(name));
  if (returnsSomething(code)) context.lost = true;
  const inside: Live = new Map(bindings);
  for (const name of changed) {
    inside.delete(name);
    bindings.set(name, null);
  }
  if (depth >= DEEPEST) return;
  for (const part of partsOf(code)) {
    if (part.kind === 'opaque') passOver(part, context, new Map(inside), depth + 1);
    else attempt(() => run(statementsOf(part), 0, context, new Map(inside), depth + 1));
  }
}

/** What the variables hold after a loop whose rounds are known; nothing where they are not. The watcher sees the last round. */
function followed(loop: Loop, context: Run, before: Live, depth: number): ReadonlyMap<string, Bound | null> {
  const { env } = context;
  const rounds = roundsOf(loop, env);
  const changed = new Set(changedIn(loop.body).map((name) => env.spell(name)));
  if (!rounds || rounds.some((round) => [...round.keys()].some((name) => changed.has(env.spell(name))))) return new Map();
  const bindings: Live = new Map(before);
  const outcome = attempt(() => {
    rounds.forEach((round, k) => {
      const counters = new Map(env.counters);
      for (const [name, item] of round) {
        const local = env.spell(name);
        counters.delete(local);
        bindings.delete(local);
        if (item.kind === 'whole') counters.set(local, item.value);
        else if (item.kind === 'entry') bind(local, item.code, env, bindings);
      }
      const inside: Run = { ...context, env: { ...env, counters }, watcher: k === rounds.length - 1 ? context.watcher : {} };
      run(statementsOf(loop.body), 0, inside, bindings, depth + 1);
      context.steps = inside.steps;
      context.lost ||= inside.lost;
    });
  });
  if (!outcome.ok) {
    if (outcome.error.code === 'over-budget') throw new Declined('over-budget', outcome.error.message, { start: loop.body.start, end: loop.body.end });
    return new Map();
  }
  return new Map([...changed].map((name) => [name, bindings.get(name) ?? null]));
}

/** An if with returns is a choice between its value and that of what follows. */
function choice(code: IfCode, statements: readonly Code[], i: number, context: Run, bindings: Live, depth: number): Meaning {
  const place = { start: code.start, end: code.end };
  if (depth > DEEPEST) throw new Declined('unreadable', 'These branches are nested too deeply to be followed.', place);
  const arm = (part: Code | null): Outcome<Meaning | null> =>
    attempt(() => {
      const own: Live = new Map(bindings);
      const value = part ? run(statementsOf(part), 0, context, own, depth + 1) : null;
      return value ?? run(statements, i + 1, context, own, depth + 1);
    });
  const [then, rest] = [arm(code.then), arm(code.otherwise)];
  if (!then.ok || !rest.ok) throw new Declined('unreadable', 'One of these branches cannot be followed; select an expression inside it.', place);
  if (!then.value || !rest.value) throw new Declined('unreadable', 'One of these branches gives no value.', place);
  context.watcher.choice?.(code, then.value, rest.value, bindings, context.env);
  return chosen(code, then.value, rest.value, context.env, bindings);
}

/** An if that only assigns gives what it sets a piecewise value. */
function rebind(code: IfCode, context: Run, bindings: Live, depth: number): void {
  const [a, b]: readonly [Live, Live] = [new Map(bindings), new Map(bindings)];
  if (depth <= DEEPEST) {
    run(statementsOf(code.then), 0, context, a, depth + 1);
    if (code.otherwise) run(statementsOf(code.otherwise), 0, context, b, depth + 1);
  }
  for (const name of new Set(changedIn(code).map((n) => context.env.spell(n)))) {
    const [yes, no] = [a.get(name), b.get(name)];
    if (!yes || !no || depth > DEEPEST) {
      bindings.set(name, null);
      continue;
    }
    const both = attempt(() => {
      context.watcher.choice?.(code, yes.meaning, no.meaning, bindings, context.env);
      return chosen(code, yes.meaning, no.meaning, context.env, bindings);
    });
    bindings.set(name, both.ok && yes.size + no.size < MOST_NODES ? { meaning: both.value, through: new Set([...yes.through, ...no.through, name]), size: yes.size + no.size + 1 } : null);
  }
}

function chosen(code: IfCode, then: Meaning, otherwise: Meaning, env: Environment, bindings: Bindings): Meaning {
  const read = (inner: Code): Meaning => {
    const meaning = readMeaning(inner, env);
    return { expression: inlined(meaning.expression, bindings).expression, type: meaning.type };
  };
  return choose(code.condition, then, otherwise, { start: code.start, end: code.end }, env, read);
}
