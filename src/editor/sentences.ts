/**
 * The engine speaks English, as the command line does; the editor says its sentences in the user's language. The sentences are the keys of the translations, as they
 * stand in the engine's source with {0}, {1} for what is filled in; a test keeps the two together. A sentence that is not among them is shown as it is.
 */

/** Sentences that the engine puts together, so that its source holds them in pieces. */
export const COMPOSED = [
  'Holds. {0}',
  'Holds: every printed term agrees with the expansion.',
  'Holds: every printed term agrees with the expansion (taken as {0}).',
  'The number must be {0}.',
  'The exponent must be {0}.',
  'The number is printed as {0}; {1} is right.',
  'The exponent is printed as {0}; {1} is right.',
  'This could be fitted in {0}; say in which one.',
  'This expression contains no symbol to fit in; choose one that does.',
] as const;

export interface Recognised {
  readonly sentence: string;
  readonly values: readonly string[];
}

interface Pattern {
  readonly sentence: string;
  readonly pattern: RegExp;
  /** Characters of its own words. */
  readonly own: number;
}

const PLACE = /\{(\d)\}/g;

/** Labels and menu titles are no sentences. */
const isSentence = (key: string): boolean => key.includes(' ') && /\.(?: \{\d\})?$/.test(key);

/** Tells which of the sentences a message is, and what is filled in; the one with the most words of its own where several fit. */
export function recogniser(keys: readonly string[]): (message: string) => Recognised | null {
  const patterns: readonly Pattern[] = keys.filter(isSentence).map((sentence) => {
    const words = sentence.split(PLACE).filter((_piece, i) => i % 2 === 0);
    return { sentence, own: words.join('').length, pattern: new RegExp(`^${words.map((piece) => piece.replace(/[.*+?^$()|[\]{}\\]/g, '\\$&')).join('([^]*?)')}$`) };
  });
  return (message) => {
    let best: (Recognised & { readonly own: number }) | null = null;
    for (const { sentence, pattern, own } of patterns) {
      if (best && own <= best.own) continue;
      const match = pattern.exec(message);
      if (match) best = { sentence, values: inOrder(sentence, match.slice(1)), own };
    }
    return best && { sentence: best.sentence, values: best.values };
  };
}

/** Values by their numbers, which need not stand in order. */
function inOrder(sentence: string, found: readonly string[]): readonly string[] {
  const values: string[] = [];
  for (const [i, place] of [...sentence.matchAll(PLACE)].entries()) values[Number(place[1])] = found[i] ?? '';
  return values;
}

/** Puts the values in their places; braces that belong to a formula stay. */
export const filled = (sentence: string, values: readonly string[]): string => sentence.replace(PLACE, (place, index: string) => values[Number(index)] ?? place);
