/** Loops whose rounds are known before anything runs: counted ones, and those over a list that the file holds. */
import type { Environment } from './environment.ts';
import { counted, type Item, roundsOfSteps, sequence, wholeNumber } from './lists.ts';
import { type Code, type Loop, walkCode } from './syntax.ts';

/** What the names of the loop stand for in one round. */
export type Round = ReadonlyMap<string, Item>;

/** The rounds of a loop in order; null where head or body cannot be followed. */
export function roundsOf(loop: Loop, env: Environment): readonly Round[] | null {
  if (!isPlain(loop.body)) return null;
  const { head } = loop;
  switch (head.kind) {
    case 'steps': {
      const found = roundsOfSteps(head.first, head.condition, head.step, env);
      return found && found.values.map((value) => new Map([[found.name, { kind: 'whole', value }]]));
    }
    case 'range': {
      const values = counted(wholeNumber(head.first, env), wholeNumber(head.last, env), head.step ? wholeNumber(head.step, env) : 1n);
      return values && values.map((value) => new Map([[head.name, { kind: 'whole', value }]]));
    }
    case 'each': {
      const items = sequence(head.over, env);
      if (!items) return null;
      const rounds = items.map((item) => named(head.names, item, env));
      return rounds.every((round): round is Round => round !== null) ? rounds : null;
    }
  }
}

/** Several names take a pair apart. In Go the first of `range` is the index. */
function named(names: readonly string[], item: Item, env: Environment): Round | null {
  const [first, second] = names;
  if (first === undefined || names.length > 2) return null;
  if (second === undefined) return item.kind === 'pair' ? null : new Map([[first, item]]);
  const [a, b] = item.kind === 'pair' ? item.items : [];
  return a && b && env.language.family !== 'c' ? new Map([[first, a], [second, b]]) : null;
}

/** Statements that only set variables and choose: nothing leaves a round early, and no call may change a list. */
function isPlain(body: Code): boolean {
  for (const code of walkCode(body)) {
    switch (code.kind) {
      case 'opaque':
        if (!code.loop) return false;
        break;
      case 'return':
      case 'function':
      case 'lambda':
      case 'import':
        return false;
      case 'name':
        if (/^(?:break|continue|exit|cycle|next|goto|yield)$/i.test(code.text)) return false;
        break;
      case 'block':
        // A call that stands alone is there for what it changes.
        if (code.body.some((inner) => inner.kind === 'call')) return false;
        break;
      default:
    }
  }
  return body.kind !== 'call';
}
