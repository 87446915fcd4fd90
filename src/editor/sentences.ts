/**
 * The engine's sentences that users meet most, as they stand in its source with {0}, {1} for what is filled in. The engine speaks English, as the command line does;
 * the editor says these in the user's language. A sentence that is not here is shown as it is.
 */
export const SENTENCES = [
  // Requests.
  'This request was cancelled.',
  'This took longer than {0} ms; ask for fewer terms or allow more time.',
  'The engine stopped during this request and has been restarted; try again.',
  'The engine could not be started: {0}.',
  // Reading.
  'There is no expression with a function or a quotient at the cursor; select one.',
  'The selected code is no expression; select one.',
  'The selection ends inside a name or number; select all of it.',
  'Nothing is selected; select an expression.',
  'The text is empty; write an expression.',
  'Nothing to read here yet; select or write a formula.',
  'There is nothing to read; select an expression.',
  'The function {0} is not known; write it with known functions.',
  'The call {0} is not known; put its value into a variable first.',
  'This code is no single expression; select one.',
  'This expression is nested too deeply; select a smaller one.',
  'A note above says to skip this formula.',
  'Nothing could be asked about this place; select an expression.',
  // Expanding and bounding.
  'A bound needs a range for {0}.',
  'The sign of {0} could not be decided; give it as a decimal or simplify it.',
  'Whether {0} is zero could not be decided; simplify it by hand.',
  'The first {0} terms of a difference cancel and it could not be decided whether it is zero; simplify the formula by hand.',
  'No bound could be proved on this interval; try a smaller one.',
  'The interval needs two different ends, the smaller one first.',
  'The interval must run from its smaller end to its larger one.',
  'The point is an essential singularity and the function behaves differently on its two sides; ask for the right or the left side.',
  'An O-term that is not small stands inside a function; write more terms before it.',
  'The tolerance "{0}" must be a positive number such as 1e-6.',
  // Polynomials and guards.
  'The interval of a fit needs two different ends, the smaller one first.',
  'No polynomial of degree up to 160 keeps this tolerance; take a smaller interval or a larger tolerance.',
  'The function is zero where no relative error can be kept; ask for the absolute measure or another interval.',
  'No best polynomial of this degree was found on this interval; take a smaller interval or another degree.',
  'The rounding error could not be bounded on this interval; take a smaller one.',
  // Checking.
  'Holds: every printed term agrees with the expansion.',
  'Holds: every printed term agrees with the expansion (taken as {0}).',
  'Holds: the general term is proved for every index.',
  'Holds: the error on this interval is proved to be at most {0}.',
  'Holds. {0}',
  'The sign must be {0}.',
  'The number must be {0}.',
  'The exponent must be {0}.',
  'The number is printed as {0}; {1} is right.',
  'The exponent is printed as {0}; {1} is right.',
  'A term is missing: {0}.',
  'The difference is smaller than stated: it is of order {0}.',
  'This term is not larger than the stated remainder, which absorbs it.',
  'The two sides are not equal; an approximation sign or a remainder is meant.',
  'The error on this interval reaches {0}.',
  'The stated tolerance is too close to the largest error to be decided.',
  'What {0} stands for is not said in this document.',
  'In which quantity this is an expansion is not plain; say so with a note such as leading-order: small h.',
  'It is not plain in which quantity, and where, this is an expansion; say so with a note such as leading-order: small x.',
  'The definition of the left side that stands in this document does not belong to this claim, or the claim is wrong from its first term.',
  'Whether a letter here is the imaginary unit is not plain.',
  'The general term is not that of the function.',
] as const;

export interface Recognised {
  readonly sentence: string;
  readonly values: readonly string[];
}

const patterns: readonly { readonly sentence: string; readonly pattern: RegExp }[] = SENTENCES.map((sentence) => ({
  sentence,
  pattern: new RegExp(`^${sentence.replace(/[.*+?^$()|[\]\\]/g, '\\$&').replace(/\{\d\}/g, '([^]+?)')}$`),
}));

/** Which sentence a message is, and what is filled in; the one with the most words of its own where several fit. */
export function recognise(message: string): Recognised | null {
  let best: Recognised | null = null;
  for (const { sentence, pattern } of patterns) {
    const match = pattern.exec(message);
    if (match && (!best || sentence.length > best.sentence.length)) best = { sentence, values: match.slice(1) };
  }
  return best;
}
