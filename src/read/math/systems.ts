/** Systems of equations behind one brace: `\begin{cases} x' = y \\ y' = -x \end{cases}`, `\left\{ ... \right.`. */
import { relationOf } from './grammar.ts';
import type { Token } from './tokens.ts';

const isMarked = (t: Token | undefined, text: string): boolean => t?.kind === 'mark' && t.text === text;

const CLOSERS = [
  ['begin{cases}', 'end{cases}'],
  ['begin{table}', 'end{table}'],
  ['\\{', 'right.'],
] as const;

/** The tokens without the brace around a system: its rows are formulas of their own. Lists of values with conditions stay as they are. */
export function withoutSystemBraces(tokens: readonly Token[]): Token[] {
  let current = [...tokens];
  for (let k = 0; k < current.length; k += 1) {
    const opens = CLOSERS.find(([open]) => isMarked(current[k], open))?.[1];
    if (opens === undefined) continue;
    const close = closing(current, k, opens);
    if (close < 0 || (opens !== 'right.' && !isSystem(current, k, close))) continue;
    const inner = current.slice(k + 1, close).flatMap((t, i, all) => {
      if (!isMarked(t, '&')) return [t];
      const after = all[i + 1];
      return after && relationOf(after) !== null ? [] : [{ ...t, text: ',' }];
    });
    current = [...current.slice(0, k), ...inner, ...current.slice(close + 1)];
  }
  return current;
}

function closing(tokens: readonly Token[], open: number, text: string): number {
  const opener = tokens[open];
  let depth = 0;
  for (let k = open + 1; k < tokens.length; k += 1) {
    const t = tokens[k];
    if (t?.kind === 'mark' && t.text === opener?.text) depth += 1;
    else if (isMarked(t, '\\}') && text === 'right.') depth -= 1;
    else if (isMarked(t, text)) {
      if (depth <= 0) return depth < 0 ? -1 : k;
      depth -= 1;
    }
    if (depth < 0) return -1;
  }
  return -1;
}

/** Whether a relation sign stands in the first cell of the first row, or right behind its first mark: `x' = y`, `x' &= y`. */
function isSystem(tokens: readonly Token[], open: number, close: number): boolean {
  for (let k = open + 1; k < close; k += 1) {
    const t = tokens[k];
    if (!t || isMarked(t, '\\\\')) return false;
    if (relationOf(t) !== null) return true;
    if (isMarked(t, '&')) {
      const after = tokens[k + 1];
      return after !== undefined && relationOf(after) !== null;
    }
  }
  return false;
}
