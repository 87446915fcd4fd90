/** A formula said in a programming language. */
import { readLatex } from '../../../read/index.ts';
import { toCode } from '../../../write/index.ts';
import type { TranslationRequest } from '../types.ts';

export function translated({ latex, language }: TranslationRequest): string | null {
  const read = readLatex(latex);
  if (!read.ok) return null;
  const written = toCode(read.value, { language });
  return written.ok ? written.value.text : null;
}
