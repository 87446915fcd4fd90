/** Where the parser stands: tokens, position, nesting, and what is known of the names in the text. */
import { type Expression, children, type Span } from '../../expression/index.ts';
import { MAX_DEPTH, TOO_DEEP, type Token, Unreadable } from './tokens.ts';
import type { NameFacts } from './facts.ts';

export interface MathOptions {
  readonly notation: 'latex' | 'plain';
  /** Canonical names that are quantities, whatever stands behind them: variable and parameters of a request, names defined beside the formula. */
  readonly symbols: ReadonlySet<string>;
  /** Canonical names that are functions of their own: `f`, `E_n`. */
  readonly functions: ReadonlySet<string>;
  /** An exact value (a point, an end of an interval): e is Euler's number, I the imaginary unit. */
  readonly exact: boolean;
}

/** The rules of the grammar, so that each file of rules can use the others. */
export interface Grammar {
  relation(p: State): Expression;
  sum(p: State): Expression;
  term(p: State): Expression;
  /** The product that follows an operator such as \sum or d/dx: everything up to the next sign. */
  factorRun(p: State): Expression;
  factor(p: State): Expression;
  atom(p: State): Expression;
  /** A braced group, one command with its arguments, or one character: what TeX takes as an argument. */
  texArgument(p: State): Expression;
  startsFactor(p: State): boolean;
}

export interface State {
  readonly text: string;
  readonly tokens: readonly Token[];
  /** For each opening bracket or brace its closing token, and back; -1 elsewhere. */
  readonly match: Int32Array;
  readonly options: MathOptions;
  readonly facts: NameFacts;
  readonly grammar: Grammar;
  at: number;
  /** Position where reading stops for now, as at the end of the text. */
  end: number;
  depth: number;
  /** Open `|` bars: a further `|` where a factor could stand closes. */
  bars: number;
  /** Names bound by sums and integrals around here. */
  readonly bound: string[];
  /** Token positions of differentials that belong to an integral being read. */
  readonly differentials: Set<number>;
}

export function peek(p: State, ahead = 0): Token {
  const index = p.at + ahead;
  if (index < p.end) return p.tokens[index] as Token;
  const { start, end } = p.tokens[p.end] as Token;
  return { kind: 'end', text: '', start, end, spaced: false };
}
/** Runs a rule that sees nothing from token `end` on. */
export function within<T>(p: State, end: number, rule: () => T): T {
  const before = p.end;
  p.end = Math.min(end, before);
  const value = rule();
  p.end = before;
  return value;
}
export const isMark = (t: Token | undefined, ...marks: readonly string[]): boolean => t?.kind === 'mark' && marks.includes(t.text);
export const isCommand = (t: Token | undefined, ...names: readonly string[]): boolean => t?.kind === 'command' && names.includes(t.text);

export function next(p: State): Token {
  const token = peek(p);
  if (token.kind !== 'end') p.at += 1;
  return token;
}

/** Runs one rule a level deeper; beyond the cap the formula is refused in one sentence. */
export function deeper<T>(p: State, rule: () => T): T {
  p.depth += 1;
  if (p.depth > MAX_DEPTH) throw new Unreadable(TOO_DEEP, peek(p));
  const value = rule();
  p.depth -= 1;
  return value;
}

/** Span from token `from` to the last one consumed, widened to hold all children (tokens of a macro body carry the whole use). */
export function spanFrom(p: State, from: number, below: readonly Expression[] = []): Span {
  const first = p.tokens[from] as Token;
  const last = p.tokens[Math.max(from, p.at - 1)] as Token;
  let start = Math.min(first.start, last.start);
  let end = Math.max(first.end, last.end);
  for (const child of below) {
    if (!child.span) continue;
    start = Math.min(start, child.span.start);
    end = Math.max(end, child.span.end);
  }
  return { start, end };
}

/** Gives a node its span: token `from` to the last one consumed. */
export function node<T extends Expression>(p: State, from: number, bare: T): T {
  return { ...bare, span: spanFrom(p, from, children(bare)) };
}

export function fail(p: State, message: string, token: Token = peek(p)): never {
  const size = p.text.length;
  const start = Math.min(token.start, size);
  throw new Unreadable(message, { start, end: Math.max(start, Math.min(token.end, size)) });
}

/** How a token is named in a message. */
export function named(t: Token): string {
  if (t.kind === 'end') return 'the end of the formula';
  if (t.kind === 'command' || t.kind === 'space') return `\\${t.text}`;
  return `“${t.text.length > 20 ? `${t.text.slice(0, 20)}…` : t.text}”`;
}
