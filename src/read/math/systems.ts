/** Systems of equations behind one brace: `\begin{cases} x' = y \\ y' = -x \end{cases}`, `\left\{ ... \right.`. */
import { relationOf } from './grammar.ts';
import type { Token } from './tokens.ts';

const isMarked = (t: Token | undefined, text: string): boolean => t?.kind === 'mark' && t.text === text;

const CLOSERS: Readonly<Record<string, string>> = { 'begin{cases}': 'end{cases}', 'begin{table}': 'end{table}', '\\{': 'right.', 'left.': 'right.', 'l|': 'r|' };
const ENDS = new Set(['end{cases}', 'end{table}', 'right.', '\\}', 'r|']);

/** The tokens without the brace around a system: its rows are formulas of their own. Lists of values with conditions stay as they are. One pass. */
export function withoutSystemBraces(tokens: readonly Token[]): readonly Token[] {
  const open: number[] = [];
  const dropped = new Set<number>();
  const ranges: (readonly [number, number])[] = [];
  tokens.forEach((t, k) => {
    if (t.kind !== 'mark') return;
    if (CLOSERS[t.text] !== undefined) open.push(k);
    else if (ENDS.has(t.text)) {
      const start = open.pop();
      const opener = start === undefined ? undefined : tokens[start];
      if (start === undefined || !opener || opener.text === 'left.' || CLOSERS[opener.text] !== t.text) return;
      if (opener.text !== '\\{' && !isSystem(tokens, start, k)) return;
      dropped.add(start).add(k);
      ranges.push([start, k]);
    }
  });
  if (ranges.length === 0) return tokens;
  const inside = new Int32Array(tokens.length + 1);
  for (const [start, end] of ranges) {
    inside[start] = (inside[start] ?? 0) + 1;
    inside[end] = (inside[end] ?? 0) - 1;
  }
  const result: Token[] = [];
  let depth = 0;
  tokens.forEach((t, k) => {
    depth += inside[k] ?? 0;
    if (dropped.has(k)) return;
    if (depth === 0 || !isMarked(t, '&')) result.push(t);
    else {
      const after = tokens[k + 1];
      if (!after || relationOf(after) === null) result.push({ ...t, text: ',' });
    }
  });
  return result;
}

/** Whether a relation sign stands in the first cell of the first row, or right behind its first mark: `x' = y`, `x' &= y`. */
function isSystem(tokens: readonly Token[], open: number, close: number): boolean {
  for (let k = open + 1; k < close; k += 1) {
    const t = tokens[k];
    if (!t || isMarked(t, '\\\\') || isMarked(t, 'begin{cases}') || isMarked(t, 'begin{table}')) return false;
    if (relationOf(t) !== null) return true;
    if (isMarked(t, '&')) {
      const after = tokens[k + 1];
      return after !== undefined && relationOf(after) !== null;
    }
  }
  return false;
}
