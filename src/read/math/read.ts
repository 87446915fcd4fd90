/** The door of the formula reader: text in, one formula with its trailing conditions out. */
import { type Expression, markedName, walk } from '../../expression/index.ts';
import { failure, type Outcome, success } from '../../outcome.ts';
import { atom, isTextName, startsFactor, texArgument } from './atoms.ts';
import { infix } from './brackets.ts';
import { gatherFacts, type NameFacts } from './facts.ts';
import { factor, factorRun, isCondition, relation, sum, term } from './grammar.ts';
import { lex } from './lexer.ts';
import { type MacroTable, NO_MACROS } from './macros.ts';
import { withIndexDerivatives } from './indexDerivatives.ts';
import { withoutSystemBraces } from './systems.ts';
import { fail, type Grammar, isCommand, isMark, named, next, peek, type State } from './state.ts';
import { MAX_DEPTH, type Token, TOO_DEEP, Unreadable } from './tokens.ts';

export interface ReadOptions {
  readonly macros?: MacroTable;
  /** Canonical names that are quantities: the variable, parameters, names defined nearby. */
  readonly symbols?: readonly string[];
  /** Canonical names that are unspecified functions. */
  readonly functions?: readonly string[];
  /** An exact value: e is Euler's number, `I` the imaginary unit. */
  readonly exact?: boolean;
  /** The stretch of the text to read, in UTF-16 offsets; spans stay offsets of the whole text. */
  readonly start?: number;
  readonly end?: number;
  /** Row ends (`\\\\`) are read past: the rows are one formula. */
  readonly joinRows?: boolean;
  /** The formula around the stretch: what e, i and f(...) mean is decided there. */
  readonly around?: { readonly start: number; readonly end: number };
}

/** What one stretch of mathematics says. */
export interface Formula {
  readonly expression: Expression;
  /** Further formulas behind a comma, a gap, words or brackets: `|x| < 1`, `x \to 0`. */
  readonly conditions: readonly Expression[];
  /** Words that stand beside the formula. */
  readonly remarks: readonly string[];
  /** The symbol before a colon (`y:\ y^3 + y = x`): what the equation is to be solved for. */
  readonly unknown?: string;
}

const grammar: Grammar = { relation, sum, term, factorRun, factor, atom, texArgument, startsFactor };
const CLOSER: Readonly<Record<string, string>> = { 'begin{cases}': 'end{cases}', 'begin{table}': 'end{table}', '(': ')', '[': ']', '{': '}', '\\{': '\\}', 'l|': 'r|', 'left.': 'right.' };
const MAX_LENGTH = 200_000;

/** Partner of each bracket; -1 where it has none. Brackets may be mixed as in half-open intervals. Fails where nesting is too deep. */
function pair(tokens: readonly Token[]): Int32Array {
  const match = new Int32Array(tokens.length).fill(-1);
  const open: number[] = [];
  for (let i = 0; i < tokens.length; i += 1) {
    const t = tokens[i] as Token;
    if (t.kind === 'open' || (t.kind === 'mark' && CLOSER[t.text] !== undefined)) {
      open.push(i);
      if (open.length > MAX_DEPTH) throw new Unreadable(TOO_DEEP, t);
    } else if (t.kind === 'close' || (t.kind === 'mark' && (t.text === ')' || t.text === ']' || t.text === '\\}' || t.text === 'r|' || t.text === 'right.' || t.text === 'end{cases}' || t.text === 'end{table}'))) {
      const start = open.pop();
      if (start === undefined) throw new Unreadable(`${t.kind === 'close' ? 'A closing brace' : 'A closing bracket'} stands here without an opening one; remove it or add the opening one.`, t);
      const begin = tokens[start] as Token;
      const brace = (begin.kind === 'open') !== (t.kind === 'close');
      if (brace) throw new Unreadable(begin.kind === 'open' ? 'The brace opened here is never closed; close it with }.' : `The bracket opened here is never closed; close it with ${CLOSER[begin.text] ?? ')'}.`, begin);
      match[start] = i;
      match[i] = start;
    }
  }
  const left = open.pop();
  if (left !== undefined) {
    const t = tokens[left] as Token;
    throw new Unreadable(t.kind === 'open' ? 'The brace opened here is never closed; close it with }.' : `The bracket opened here is never closed; close it with ${CLOSER[t.text] ?? ')'}.`, t);
  }
  return match;
}

function factsAround(text: string, notation: 'latex' | 'plain', options: ReadOptions): NameFacts | null {
  const { around } = options;
  if (!around || around.end - around.start > MAX_LENGTH) return null;
  try {
    const tokens = lex(text, { notation, macros: options.macros ?? NO_MACROS, from: around.start, to: around.end, joinRows: true });
    return gatherFacts(tokens, pair(tokens));
  } catch (error) {
    // What stands around is half-typed: the stretch speaks for itself.
    if (error instanceof Unreadable) return null;
    throw error;
  }
}

function stateOf(text: string, notation: 'latex' | 'plain', options: ReadOptions): State {
  const from = options.start ?? 0;
  const to = options.end ?? text.length;
  if (to - from > MAX_LENGTH) throw new Unreadable('This text is too long to be one formula; select a smaller piece.', { start: from, end: to });
  const tokens = withoutSystemBraces(lex(text, { notation, macros: options.macros ?? NO_MACROS, from, to, joinRows: options.joinRows ?? false }));
  const match = pair(tokens);
  const facts = factsAround(text, notation, options) ?? gatherFacts(tokens, match);
  const symbols = new Set(options.symbols ?? []);
  return {
    text,
    tokens,
    match,
    options: { notation, symbols, functions: new Set(options.functions ?? []), exact: options.exact ?? false },
    facts,
    grammar,
    at: 0,
    end: tokens.length - 1,
    depth: 0,
    bars: 0,
    bound: [],
    differentials: new Set(),
  };
}

const isSeparator = (t: Token): boolean =>
  t.kind === 'space' || t.kind === 'text' || isMark(t, ',', ';', '.', ':', '\\\\', '=>', '!', '?', '"', '\\}', '，', '。', '；', '、', '：') || isCommand(t, 'implies', 'iff', 'Rightarrow', 'Leftrightarrow', 'Longrightarrow', 'therefore', 'because', 'quad', 'qquad', 'hline', 'newline', 'cr', 'forall', 'colon', 'semicolon', 'qedhere', 'square', 'Leftarrow', 'where');

/** `.5` at the start is a number, not punctuation. */
const startsNumber = (p: State): boolean => isMark(peek(p), '.') && peek(p, 1).kind === 'digit' && !peek(p, 1).spaced;

export function readFormula(text: string, notation: 'latex' | 'plain', options: ReadOptions = {}): Outcome<Formula> {
  try {
    const p = stateOf(text, notation, options);
    let main: Expression | null = null;
    let unknown: string | undefined;
    const conditions: Expression[] = [];
    const remarks: string[] = [];
    for (;;) {
      while (isSeparator(peek(p)) && !startsNumber(p) && !(main === null && isTextName(p))) {
        const t = next(p);
        if (t.kind === 'text') remarks.push(t.text.trim());
        if (isMark(t, ':') && main?.kind === 'symbol' && unknown === undefined && conditions.length === 0) {
          unknown = main.name;
          main = null;
        }
      }
      if (peek(p).kind === 'end') break;
      if (main === null) {
        main = piece(p);
        continue;
      }
      const from = p.at;
      try {
        p.depth = 0;
        p.bars = 0;
        conditions.push(piece(p));
      } catch (error) {
        if (!(error instanceof Unreadable)) throw error;
        // A condition that cannot be read is kept as words; the formula stands without it.
        p.at = from;
        let end = from;
        while (!(isSeparator(p.tokens[end] as Token) && end > from) && p.tokens[end]?.kind !== 'end') end = Math.max(end + 1, (p.match[end] ?? -1) + 1);
        const remark = text.slice(p.tokens[from]?.start ?? 0, p.tokens[end - 1]?.end ?? text.length);
        // A value that is still being typed, `y' = y, y(0) =`, would be taken as not given.
        if (/\)\s*=\s*$/.test(remark) && isDifferential(main)) throw error;
        remarks.push(remark);
        p.at = end;
      }
    }
    if (!main) return failure('unreadable', 'Nothing to read here yet; select or write a formula.', { start: options.start ?? 0, end: options.end ?? text.length });
    return success({ expression: withIndexDerivatives(main), conditions, remarks, ...(unknown === undefined ? {} : { unknown }) });
  } catch (error) {
    if (error instanceof Unreadable) return { ok: false, error: error.failure };
    throw error;
  }
}

const isDifferential = (e: Expression): boolean => [...walk(e)].some((n) => n.kind === 'derivative' || (n.kind === 'apply' && n.derivatives.some((d) => d > 0)) || (n.kind === 'symbol' && markedName(n.name) !== null));

/** One formula up to a separator. */
function piece(p: State): Expression {
  const start = p.at;
  const value = (p.facts.infix ? infix(p, start - 1, p.end) : null) ?? relation(p);
  if (p.at === start) fail(p, `${named(peek(p))} is not understood here.`);
  const t = peek(p);
  if (t.kind !== 'end' && !isSeparator(t) && !isCondition(p)) {
    fail(p, `${named(t).replace(/^./, (c) => c.toUpperCase())} is not understood here; remove it or add an operator before it.`);
  }
  return value;
}

/** The formula alone; conditions and words beside it are read past. */
export function readExpression(text: string, notation: 'latex' | 'plain', options: ReadOptions = {}): Outcome<Expression> {
  const formula = readFormula(text, notation, options);
  return formula.ok ? success(formula.value.expression) : formula;
}
