/** Rules for loops: heads that may be followed are kept; every loop is opaque to whoever does not follow it. */
import type { Code, LoopHead } from '../syntax.ts';
import { child, childrenOf, isComment, type Lowering, opaque, place, type Rule } from './rules.ts';
import type { Raw } from './raw.ts';

function looped(raw: Raw, at: Lowering, head: LoopHead, body: Raw): Code {
  const lowered = at.lower(body);
  const inHead = head.kind === 'steps' ? [head.first, head.condition, ...(head.step ? [head.step] : [])] : head.kind === 'each' ? [head.over] : [];
  return { kind: 'opaque', what: raw.type.replaceAll('_', ' '), parts: [...inHead, lowered], loop: { head, body: lowered }, ...place(raw) };
}

/** The names that a loop sets, `i, c` or `(i, &c)`; empty where it is no plain list of names. */
function namesIn(text: string): readonly string[] {
  const bare = text.replace(/^\(|\)$/g, '').replace(/^(?:const|let|var|auto|final|mut)\s+/, '').replace(/^\[|\]$/g, '');
  const names = bare.split(',').map((part) => part.trim().replace(/^(?:&|mut\s+|\*)+/, ''));
  return names.every((name) => /^[A-Za-z_]\w*$/.test(name)) ? names : [];
}

/** `for (...; ...; ...)`, Go's clauses, and names that run over something. */
export const forLoop: Rule = (raw, at) => {
  const body = child(raw, 'body');
  const clause = raw.children.find((c) => c.type === 'for_clause' || c.type === 'range_clause') ?? raw;
  if (!body || childrenOf(raw, 'alternative').length > 0) return opaque(raw, at);
  const [left, right] = [child(clause, 'left') ?? child(clause, 'pattern') ?? child(clause, 'declarator') ?? child(clause, 'name'), child(clause, 'right') ?? child(clause, 'value')];
  if (left && right) {
    // JavaScript's `for (k in list)` meets names of properties.
    if (raw.children.some((c) => c.field === 'operator' && at.textOf(c) === 'in')) return opaque(raw, at);
    const over = at.lower(right);
    if (clause.type !== 'range_clause') return looped(raw, at, { kind: 'each', names: namesIn(at.textOf(left)), over }, body);
    // Go: the first name is the index.
    const names = namesIn(at.textOf(left));
    const pairs: Code = { kind: 'call', callee: { kind: 'name', text: 'enumerate', ...place(right) }, args: [over], ...place(right) };
    return looped(raw, at, { kind: 'each', names: names.length === 1 ? [...names, '_'] : names, over: pairs }, body);
  }
  const first = child(clause, 'initializer') ?? child(clause, 'init');
  const condition = child(clause, 'condition');
  const step = child(clause, 'update') ?? child(clause, 'increment');
  return first && condition && !isComment(first.type) ? looped(raw, at, { kind: 'steps', first: at.lower(first), condition: at.lower(condition), step: step ? at.lower(step) : null }, body) : opaque(raw, at);
};

