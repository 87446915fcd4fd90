/** The page's words in the user's language, handed over by the host. */
import { WORDS, type Word } from './words.ts';

let words: Readonly<Record<string, string>> = WORDS;

export function useWords(json: string | undefined): void {
  if (json) words = { ...WORDS, ...(JSON.parse(json) as Record<string, string>) };
}
export function t(key: Word, ...values: readonly (string | number)[]): string {
  return (words[key] ?? WORDS[key]).replace(/\{(\d+)\}/g, (_whole, index: string) => String(values[Number(index)] ?? ''));
}
