/** A place in a list of tokens, with what a reader asks there: what comes next, and whether it is a certain sign or word. */
import type { CodeLanguage } from '../languages/index.ts';
import type { Token } from './tokens.ts';

const END: Token = { kind: 'end', text: '', start: 0, end: 0, spaced: false };

export class Cursor {
  readonly language: CodeLanguage;
  readonly #tokens: readonly Token[];
  #at = 0;
  /** Open round and square brackets: inside them line ends are white space. */
  #brackets = 0;

  constructor(tokens: readonly Token[], language: CodeLanguage) {
    this.#tokens = tokens;
    this.language = language;
  }

  /** The index of the current token. */
  get position(): number {
    return this.#at;
  }
  set position(value: number) {
    this.#at = value;
  }

  /** The token that many places on. Cost: linear in the offset. */
  peek(offset = 0): Token {
    let i = this.#at;
    let left = offset;
    for (;;) {
      const token = this.#tokens[Math.min(i, this.#tokens.length - 1)] ?? END;
      if (token.kind === 'end') return token;
      if (token.kind === 'newline' && this.#brackets > 0) {
        i += 1;
        continue;
      }
      if (left === 0) return token;
      left -= 1;
      i += 1;
    }
  }
  /** The current token, and one on. */
  next(): Token {
    while (this.#brackets > 0 && this.#tokens[this.#at]?.kind === 'newline') this.#at += 1;
    const token = this.#tokens[Math.min(this.#at, this.#tokens.length - 1)] ?? END;
    if (token.kind !== 'end') this.#at += 1;
    return token;
  }
  skipNewlines(): void {
    while (this.#tokens[this.#at]?.kind === 'newline') this.#at += 1;
  }
  /** Whether the current token is this sign or word, not a string. */
  is(text: string): boolean {
    const token = this.peek();
    return token.text === text && token.kind !== 'text';
  }
  /** Whether the current token is this word, given in lower case where the language does not tell cases apart. */
  isWord(word: string): boolean {
    const token = this.peek();
    return token.kind === 'name' && (this.language.foldCase ? token.text.toLowerCase() : token.text) === word;
  }
  /** One on if the current token is this sign. */
  take(text: string): boolean {
    if (!this.is(text)) return false;
    this.next();
    return true;
  }
  /** The end of the token before this one. */
  get lastEnd(): number {
    for (let i = this.#at - 1; i >= 0; i -= 1) {
      const token = this.#tokens[i];
      if (token && token.kind !== 'newline') return token.end;
    }
    return this.#tokens[0]?.start ?? 0;
  }

  /** The tokens between two offsets at or before the current one, without white space. */
  textBetween(start: number, end: number): string {
    let i = this.#at;
    while (i > 0 && (this.#tokens[i - 1]?.start ?? -1) >= start) i -= 1;
    let whole = '';
    for (let token = this.#tokens[i]; token && token.kind !== 'end' && token.end <= end; token = this.#tokens[i]) {
      if (token.kind !== 'newline') whole += token.text;
      i += 1;
    }
    return whole;
  }

  /** The first two tokens at or after the current one that are no line ends, whether brackets are open or not; undefined past the list. */
  beyondLineEnds(): readonly [Token | undefined, Token | undefined] {
    let i = this.#at;
    while (this.#tokens[i]?.kind === 'newline') i += 1;
    return [this.#tokens[i], this.#tokens[i + 1]];
  }

  /** Runs `body` with line ends as white space. */
  acrossLines<T>(body: () => T): T {
    this.#brackets += 1;
    const value = body();
    this.#brackets -= 1;
    return value;
  }

  /** Runs `body` with line ends as tokens, however many brackets are open around it. */
  lineByLine<T>(body: () => T): T {
    const saved = this.#brackets;
    this.#brackets = 0;
    const value = body();
    this.#brackets = saved;
    return value;
  }
}
