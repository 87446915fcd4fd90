/** How the writers find the name of a function: from its one description. A function that nobody described is written by its id. */
import type { FunctionDescription } from '../functions/description.ts';

const KNOWN: ReadonlyMap<string, FunctionDescription> = new Map();

export function describe(id: string): FunctionDescription | undefined {
  return KNOWN.get(id);
}
