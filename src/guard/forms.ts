/** Exact forms of an expression: the expression as it stands and those that identities make of it, each proved equal by the normal form of the difference. */
import { type Assumption, children, type Expression, mapChildren, rationalOf, structureKey, walk } from '../expression/index.ts';
import { describe } from '../functions/index.ts';
import type { Budget } from '../outcome.ts';
import { codeWriting } from '../functions/index.ts';
import type { LanguageRow } from '../write/index.ts';
import type { Rewritten } from './differences.ts';
import { costOf, Normal } from './patterns.ts';
import { rewritesAt } from './rules.ts';

export interface ExactForm {
  readonly tree: Expression;
  /** In words, the identities that made it; empty for the expression itself. */
  readonly identities: readonly string[];
  readonly cost: number;
  /** Equal to the expression by its identities alone, wherever it is real. */
  readonly certain: boolean;
}

const MOST_TREES = 90;
const DEEPEST = 5;

/** Every tree that one identity at one node makes. */
function* neighbours(e: Expression, normal: Normal): Generator<Rewritten> {
  yield* rewritesAt(e, normal);
  const parts = children(e);
  for (let k = 0; k < parts.length; k += 1) {
    const part = parts[k];
    if (!part || rationalOf(part)) continue;
    for (const { tree, identity, everywhere } of neighbours(part, normal)) {
      let at = -1;
      yield {
        ...(everywhere ? { everywhere } : {}),
        tree: mapChildren(e, (child) => {
          at += 1;
          return at === k ? tree : child;
        }),
        identity,
      };
    }
  }
}

/** Calls that the language has no library function for, by their definitions. */
export function withoutMissingCalls(e: Expression, row: LanguageRow): Expression {
  const inner = mapChildren(e, (child) => withoutMissingCalls(child, row));
  if (inner.kind !== 'call' || inner.function === 'abs' || codeWriting(row.family, inner.function, inner.args)) return inner;
  const definition = describe(inner.function)?.definition;
  return definition ? withoutMissingCalls(definition(inner.args), row) : inner;
}

const writable = (e: Expression, row: LanguageRow): boolean => [...walk(e)].every((node) => node.kind !== 'call' || codeWriting(row.family, node.function, node.args) !== null);

/** The expression itself first; then forms in order of cost. Rewriting goes breadth first, at most five identities deep. */
export function exactForms(f: Expression, assumptions: readonly Assumption[], row: LanguageRow, budget: Budget): readonly ExactForm[] {
  const normal = new Normal(assumptions, budget);
  const original = withoutMissingCalls(f, row);
  const seen = new Set([structureKey(original)]);
  const found: ExactForm[] = [];
  let frontier: ExactForm[] = [{ tree: original, identities: [], cost: costOf(original), certain: true }];
  for (let depth = 0; depth < DEEPEST && frontier.length > 0 && seen.size < MOST_TREES; depth += 1) {
    const next: ExactForm[] = [];
    for (const form of frontier) {
      for (const { tree, identity, everywhere } of neighbours(form.tree, normal)) {
        budget.check();
        const key = structureKey(tree);
        if (seen.has(key) || seen.size >= MOST_TREES) continue;
        seen.add(key);
        if (costOf(tree) > 3 * costOf(original) + 20) continue;
        next.push({ tree, identities: form.identities.includes(identity) ? form.identities : [...form.identities, identity], cost: costOf(tree), certain: form.certain && everywhere === true });
      }
    }
    found.push(...next);
    frontier = next;
  }
  const proved = found.filter((form) => writable(form.tree, row) && (form.certain || normal.equal(original, form.tree)));
  return [{ tree: original, identities: [], cost: costOf(original), certain: true }, ...proved.sort((a, b) => a.cost - b.cost)];
}
