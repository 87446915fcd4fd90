/** Trees are walked recursively behind the door, so their depth is bounded here. */
import { children, type Expression } from '../expression/index.ts';
import { Declined } from '../outcome.ts';

export const DEEPEST = 600;

/** Throws Declined('bad-request') for a tree nested more deeply than can be expanded. */
export function requireShallow(root: Expression): void {
  let level: readonly Expression[] = [root];
  for (let depth = 0; level.length > 0; depth += 1) {
    if (depth > DEEPEST) throw new Declined('bad-request', 'The formula is nested too deeply to be expanded; split it into parts.');
    level = level.flatMap((e) => children(e));
  }
}
