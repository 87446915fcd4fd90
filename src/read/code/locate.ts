/** Which expression is meant: exactly the selection, or the largest arithmetic one around the cursor that is worth expanding. */
import { type Expression, Q, walk } from '../../expression/index.ts';
import { attempt, failure, type Outcome, success } from '../../outcome.ts';
import { isChoiceCall, isLibraryCall } from './calls.ts';
import type { Environment, Meaning } from './environment.ts';
import { readMeaning } from './meaning.ts';
import { isComparison, operatorMeaning } from './operators.ts';
import { type Code, pathTo } from './syntax.ts';

export interface Located {
  readonly code: Code;
  readonly meaning: Meaning;
}

/** A call that is no polynomial, a root, a power that is none, or a quotient by something that varies. */
export function isWorthExpanding(expression: Expression): boolean {
  for (const e of walk(expression)) {
    if (e.kind === 'root') return true;
    if (e.kind === 'call' && e.function !== 'abs' && e.function !== 'sign' && e.function !== 'floor') return true;
    if (e.kind === 'power' && !(e.exponent.kind === 'number' && Q.isInteger(e.exponent.value) && e.exponent.value.num >= 0n)) return true;
    if (e.kind === 'quotient' && varies(e.denominator)) return true;
  }
  return false;
}

function varies(e: Expression): boolean {
  for (const inner of walk(e)) if (inner.kind === 'symbol' || inner.kind === 'apply') return true;
  return false;
}

/** The value that a statement is about: what is returned, assigned, declared. */
export function valueOf(code: Code): Code | null {
  switch (code.kind) {
    case 'return':
    case 'declare':
      return code.value ? valueOf(code.value) : null;
    case 'assign':
      return /^:?=$/.test(code.operator) ? valueOf(code.value) : null;
    case 'block': {
      const [only] = code.body;
      return only && code.body.length === 1 ? valueOf(only) : null;
    }
    case 'function':
      return code.body ? valueOf(code.body) : null;
    case 'lambda':
      return valueOf(code.body);
    case 'import':
      return null;
    default:
      return code;
  }
}

/** The node whose text is exactly the range (white space and a closing semicolon aside); null where none is. */
export function nodeExactly(root: Code, start: number, end: number): Code | null {
  return pathTo(root, start, end).find((code) => code.start === start && code.end === end) ?? null;
}

function isArithmetic(code: Code, env: Environment): boolean {
  switch (code.kind) {
    case 'binary': {
      const meaning = operatorMeaning(code.operator, env.language);
      return !isComparison(meaning) && meaning !== 'and' && meaning !== 'or' && meaning !== 'bits' && meaning !== 'other' && meaning !== 'remainder';
    }
    case 'unary':
      return operatorMeaning(code.operator, env.language) !== 'not';
    case 'literal':
    case 'name':
    case 'group':
    case 'cast':
    case 'member':
    case 'index':
    case 'call':
    case 'named':
      return true;
    default:
      return false;
  }
}

/** True where the parent only goes on with a chain of one precedence that the child begins. */
function sameChain(parent: Code, child: Code, env: Environment): boolean {
  if (parent.kind !== 'binary' || child.kind !== 'binary' || parent.left !== child) return false;
  const additive = (operator: string): boolean => {
    const meaning = operatorMeaning(operator, env.language);
    return meaning === 'add' || meaning === 'subtract';
  };
  return additive(parent.operator) === additive(child.operator) && operatorMeaning(parent.operator, env.language) !== 'power' && operatorMeaning(child.operator, env.language) !== 'power';
}

/** At a cursor: the largest arithmetic expression around it that is worth expanding; with `plain` any that reads. */
export function expressionAtCursor(root: Code, offset: number, env: Environment, plain: boolean): Outcome<Located> {
  const path = pathTo(root, offset, offset);
  const candidates: Code[] = [];
  for (let i = path.length - 1; i >= 0; i -= 1) {
    const code = path[i];
    if (!code || !isArithmetic(code, env)) break;
    const child = path[i + 1];
    // An argument of an unknown function, or a branch of a choice, ends the climb; a callee does not.
    if (code.kind === 'call' && child && child !== code.callee && (!isLibraryCall(code, env) || isChoiceCall(code, env))) break;
    if (code.kind === 'index' && child && child !== code.object) break;
    const inside = candidates[candidates.length - 1];
    if (inside && sameChain(code, inside, env)) candidates.pop();
    candidates.push(code);
  }
  for (let i = candidates.length - 1; i >= 0; i -= 1) {
    let code = candidates[i];
    while (code?.kind === 'named' || code?.kind === 'group') code = code.kind === 'named' ? code.value : code.inner;
    if (!code) continue;
    const here = code;
    const read = attempt(() => readMeaning(here, env));
    if (read.ok && (plain || isWorthExpanding(read.value.expression))) return success({ code: here, meaning: read.value });
  }
  const outermost = candidates[candidates.length - 1];
  const why = outermost ? attempt(() => readMeaning(outermost, env)) : null;
  if (why && !why.ok && (why.error.code === 'bad-request' || why.error.code === 'unknown-function')) return why;
  return failure('unreadable', 'There is no expression with a function or a quotient at the cursor; select one.', { start: offset, end: offset });
}
