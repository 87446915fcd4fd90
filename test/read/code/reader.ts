/** What the tests of this folder share: one reader with its grammars, and trees from it. */
import { type Expression, structureKey } from '../../../src/expression/index.ts';
import { CodeReader, type CodeReading } from '../../../src/read/code/index.ts';
import { nodeGrammars } from './grammars.ts';

export const reader = new CodeReader(nodeGrammars(import.meta.url));

/** The reading of a text that is one expression; a failure fails the test with its message. */
export function readAll(text: string, language: string): CodeReading {
  const result = reader.readCode(text, language);
  if (!result.ok) throw new Error(`${language}: ${text}: ${result.error.message}`);
  return result.value;
}
export const keyOf = (text: string, language: string): string => structureKey(readAll(text, language).expression);
export const key = (e: Expression): string => structureKey(e);

/** The failure of a text that must be declined. */
export function declined(text: string, language: string): { readonly code: string; readonly message: string } {
  const result = reader.readCode(text, language);
  if (result.ok) throw new Error(`${language}: ${text} was read as ${structureKey(result.value.expression)}`);
  return result.error;
}
