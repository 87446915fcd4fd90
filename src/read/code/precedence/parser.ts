/** Expressions by operator precedence. Every loop moves forward, nesting is capped, and nothing throws: what cannot be read is opaque. */
import type { Code } from '../syntax.ts';
import { skipNested } from './brackets.ts';
import { Cursor } from './cursor.ts';
import { binaryLevel, isPower, LEVEL, notLevel, signLevel } from './levels.ts';
import { readPostfix } from './postfix.ts';
import { isOperandName } from './tokens.ts';

/** Brackets, signs and exponents inside one another beyond this are skipped as opaque. */
const MAX_NESTING = 250;

/** Expressions at the current place. Cost: linear in the tokens. */
export class Parser extends Cursor {
  #depth = 0;
  /** Inside `a ? b : c` a colon ends b. */
  #colonEnds = 0;
  /** Inside MATLAB's square brackets white space separates entries. */
  #spaceSeparates = false;
  /** Statements up to one of the stops; lent by the reader of statements, null where there are only expressions. */
  statements: ((stops: readonly string[]) => readonly Code[]) | null = null;

  /** Nothing may be opened here. */
  get tooDeep(): boolean {
    return this.#depth >= MAX_NESTING;
  }
  get spaceSeparates(): boolean {
    return this.#spaceSeparates;
  }

  #deeper<T>(body: () => T): T {
    this.#depth += 1;
    const value = body();
    this.#depth -= 1;
    return value;
  }

  /** Runs `body` as between the brackets of a list: line ends are white space, a colon belongs to the entries; `spaces`: white space separates them. */
  insideEntries<T>(spaces: boolean, body: () => T): T {
    const [colonEnds, spaceSeparates] = [this.#colonEnds, this.#spaceSeparates];
    this.#colonEnds = 0;
    this.#spaceSeparates = spaces;
    const value = this.#deeper(() => this.acrossLines(body));
    this.#colonEnds = colonEnds;
    this.#spaceSeparates = spaceSeparates;
    return value;
  }

  /** An expression; where none can start, an opaque node of no width. */
  expression(): Code {
    return this.binary(LEVEL.choice);
  }

  /** From `start` to the end of what was read last. */
  opaque(start: number, what: string, parts: readonly Code[] = []): Code {
    return { kind: 'opaque', what, parts, start, end: Math.max(start, this.lastEnd) };
  }

  /** Operators at `level` and tighter. */
  binary(level: number): Code {
    return this.tooDeep ? skipNested(this) : this.#deeper(() => this.#operators(level));
  }

  #operators(level: number): Code {
    let left = this.prefix(level);
    for (;;) {
      const token = this.peek();
      if (token.kind === 'newline' && this.#continues()) {
        this.skipNewlines();
        continue;
      }
      if (level <= LEVEL.choice && token.text === '?' && token.kind === 'operator' && token.spaced) {
        left = this.#ternary(left);
        continue;
      }
      if (level <= LEVEL.choice && token.kind === 'name' && token.text === 'if' && this.language.family === 'python') {
        left = this.#trailingChoice(left);
        continue;
      }
      if (token.kind !== 'operator' && !(token.kind === 'name' && (token.text === 'and' || token.text === 'or'))) break;
      if (token.text === ':' && this.#colonEnds > 0) break;
      const own = binaryLevel(token.text, this.language);
      if (own === null || own < level) break;
      if (this.spaceSeparates && token.spaced && (token.text === '-' || token.text === '+') && !this.peek(1).spaced) break;
      this.next();
      this.skipNewlines();
      const right = this.binary(own + 1);
      const end = Math.max(right.end, token.end);
      const chained = own === LEVEL.comparison && this.language.family === 'python' ? lastOperand(left) : null;
      // In Python a < b < c is (a < b) and (b < c).
      left = chained
        ? { kind: 'binary', operator: 'and', operatorStart: token.start, left, right: { kind: 'binary', operator: token.text, operatorStart: token.start, left: chained, right, start: chained.start, end }, start: left.start, end }
        : { kind: 'binary', operator: token.text, operatorStart: token.start, left, right, start: left.start, end };
    }
    return left;
  }

  /** Swift goes on with an operator that opens the next line; the others with a member. */
  #continues(): boolean {
    const [token, following] = this.beyondLineEnds();
    if (token?.kind !== 'operator' || this.language.family !== 'swift') return false;
    return binaryLevel(token.text, this.language) !== null && (following?.spaced ?? false);
  }

  #ternary(condition: Code): Code {
    this.next();
    this.skipNewlines();
    this.#colonEnds += 1;
    const then = this.binary(LEVEL.choice);
    this.#colonEnds -= 1;
    this.skipNewlines();
    if (!this.take(':')) return this.opaque(condition.start, 'unfinished choice', [condition, then]);
    this.skipNewlines();
    const otherwise = this.binary(LEVEL.choice);
    return { kind: 'conditional', condition, then, otherwise, start: condition.start, end: otherwise.end };
  }

  /** Python: `value if condition else value`. */
  #trailingChoice(then: Code): Code {
    this.next();
    const condition = this.binary(LEVEL.or);
    if (!this.isWord('else')) return this.opaque(then.start, 'unfinished choice', [then, condition]);
    this.next();
    const otherwise = this.binary(LEVEL.choice);
    return { kind: 'conditional', condition, then, otherwise, start: then.start, end: otherwise.end };
  }

  /** Signs in front, then an operand; `level` is that of the operator before it. */
  prefix(level: number): Code {
    const token = this.peek();
    if (token.kind === 'name' && token.text === 'not' && this.language.family === 'python' && !this.tooDeep) {
      this.next();
      const operand = this.#deeper(() => this.binary(LEVEL.not));
      return { kind: 'unary', operator: 'not', operand, start: token.start, end: operand.end };
    }
    if (token.kind === 'operator' && /^(?:[-+−!~&*]|\.not\.|\.-|\+\+|--)$/i.test(token.text) && !this.tooDeep) {
      this.next();
      const inner = /^(?:!|~|\.not\.)$/i.test(token.text) ? notLevel(token.text, this.language) : level > LEVEL.sum ? LEVEL.coefficient : signLevel(this.language);
      const operand = this.#deeper(() => this.binary(inner));
      return { kind: 'unary', operator: token.text, operand, start: token.start, end: operand.end };
    }
    return this.coefficient();
  }

  /** Julia: a number (or a bracket) beside what follows, tighter than `*`, looser than `^`. */
  coefficient(): Code {
    const first = this.power();
    if (!this.language.juxtaposition) return first;
    const token = this.peek();
    const number = first.kind === 'literal';
    const open = (token.kind === 'name' && isOperandName(token.text)) || (number && token.text === '(' && token.kind === 'open') || (number && /^[√∛]$/.test(token.text));
    if (token.spaced || !open || !(number || first.kind === 'group')) return first;
    const right = this.coefficient();
    return { kind: 'binary', operator: 'juxtaposed', operatorStart: token.start, left: first, right, start: first.start, end: right.end };
  }

  /** From right to left, in MATLAB from left to right. */
  power(): Code {
    let base = this.postfix();
    const left = this.language.family === 'matlab';
    for (;;) {
      const token = this.peek();
      if (token.kind !== 'operator' || !isPower(token.text, this.language) || this.tooDeep) return base;
      this.next();
      this.skipNewlines();
      const exponent = this.#deeper(() => (left ? this.#signed() : this.prefix(LEVEL.power)));
      base = { kind: 'binary', operator: token.text, operatorStart: token.start, left: base, right: exponent, start: base.start, end: exponent.end };
      if (!left) return base;
    }
  }

  /** MATLAB: an exponent is a signed operand without further powers. */
  #signed(): Code {
    const token = this.peek();
    if (token.kind === 'operator' && /^[-+~]$/.test(token.text) && !this.tooDeep) {
      this.next();
      const operand = this.#deeper(() => this.#signed());
      return { kind: 'unary', operator: token.text, operand, start: token.start, end: operand.end };
    }
    return this.postfix();
  }

  /** An operand with its calls, indices and members. */
  postfix(): Code {
    return readPostfix(this);
  }
}

/** The right side of a comparison, or of the last one of a chain; null for anything else. */
function lastOperand(code: Code): Code | null {
  if (code.kind !== 'binary') return null;
  if (code.operator === 'and' && code.right.kind === 'binary' && code.right.operatorStart === code.operatorStart) return code.right.right;
  return /^(?:[<>]=?|==|!=)$/.test(code.operator) ? code.right : null;
}
