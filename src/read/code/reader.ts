/** Reading of expressions from source code: one object that owns the loaded grammars. */
import type { Expression, Span } from '../../expression/index.ts';
import { attempt, Declined, failure, type Outcome, success } from '../../outcome.ts';
import { parseFragment, parseProgram } from './document.ts';
import type { Environment, Meaning, Remark } from './environment.ts';
import { type GrammarHost, GrammarStore } from './grammar/loader.ts';
import { commentTexts, type CommentText } from './comments.ts';
import { execute, functionValue } from './execute.ts';
import { type PolynomialCode, polynomialCode, type SeriesBranch, seriesBranches } from './series-code.ts';
import { type CodeLanguage, codeLanguage, type CommentStyle, type FloatFormat } from './languages/index.ts';
import { expressionAtCursor, nodeExactly, valueOf } from './locate.ts';
import { readMeaning } from './meaning.ts';
import { constantsOf, declarationsOf, environmentAt, type NearbyConstant, type Scope, scopeAt } from './scope.ts';
import { type Code, partsOf, pathTo, type Program, walkCode, walkWithin } from './syntax.ts';
import type { FormatEvidence, ValueType } from './types.ts';

export interface FoundFormat {
  readonly format: FloatFormat;
  /** What showed it: a literal's suffix, a declared type, a library name, an unsuffixed literal, or only the language's default. */
  readonly evidence: FormatEvidence;
}

export interface EnclosingFunction {
  /** Empty for a function without a name. */
  readonly name: string;
  readonly span: Span;
  readonly parameters: readonly string[];
}

export interface CodeReading {
  readonly expression: Expression;
  /** What a replacement would replace, in UTF-16 code units of the document. */
  readonly span: Span;
  /** False where the selected text is no whole operand of the program, so that replacing it may change what surrounds it. */
  readonly replaceable: boolean;
  /** Family of library names. */
  readonly family: string;
  readonly format: FoundFormat;
  readonly enclosing: EnclosingFunction | null;
  readonly statement: Span | null;
  /** The variable that the value of the statement goes to. */
  readonly target: string | null;
  /** Names declared where the expression stands, innermost last. */
  readonly names: readonly string[];
  /** Names with a constant value in the same file. */
  readonly constants: readonly NearbyConstant[];
  /** Names of functions that the document declares itself: a library function of the same name is hidden there. */
  readonly localFunctions: readonly string[];
  /** White space in front of the line of the statement. */
  readonly indentation: string;
  readonly comments: CommentStyle;
  readonly imports: readonly { readonly path: string; readonly span: Span }[];
  readonly remarks: readonly Remark[];
}

export interface ReadOptions {
  /** At a cursor, take any arithmetic expression, also a polynomial one. */
  readonly plain?: boolean;
}

/** Longer texts are refused: 4 million code units. */
const LONGEST_TEXT = 4_000_000;

export class CodeReader {
  readonly #store: GrammarStore | null;
  /** The last whole program, for the next question about the same text. */
  #last: { readonly text: string; readonly table: CodeLanguage; readonly prepared: boolean; readonly program: Program } | null = null;

  /** Without a host every language is read by operator precedence. */
  constructor(host: GrammarHost | null) {
    this.#store = host ? new GrammarStore(host) : null;
  }

  /** Loads what the language needs; afterwards reading is synchronous. Rejects where a grammar cannot be loaded: reading then goes by operator precedence. */
  async prepare(language: string): Promise<void> {
    const grammar = codeLanguage(language)?.grammar;
    if (grammar && this.#store) await this.#store.prepare(grammar);
  }

  isPrepared(language: string): boolean {
    const table = codeLanguage(language);
    return table !== null && (table.grammar === null || (this.#store?.ready(table.grammar) ?? false));
  }

  /**
   * The expression at a selection, in a document. An empty selection is a cursor: the largest arithmetic expression around it that has a function or a quotient.
   * A selection that is not empty is read as it stands. Fails with `unreadable`, `unknown-function` or `bad-request` and a place.
   */
  readCodeAt(text: string, language: string, selection: Span, options: ReadOptions = {}): Outcome<CodeReading> {
    const table = this.#table(text, language);
    if (!table.ok) return table;
    const { start, end } = trimmed(text, selection);
    const program = parseProgram(text, table.value, this.#store, { start, end });
    const context = this.#context(program, text, table.value, start, end);
    if (selection.start >= selection.end) {
      const found = expressionAtCursor(program.root, selection.start, context.environment, options.plain ?? false);
      if (!found.ok) return found;
      return success(this.#reading(found.value.code, found.value.meaning, true, text, table.value, context));
    }
    if (start >= end) return failure('unreadable', 'Nothing is selected; select an expression.', selection);
    const selected = text.slice(start, end);
    if (cutsWord(text, start) || cutsWord(text, end)) return failure('unreadable', 'The selection ends inside a name or number; select all of it.', { start, end });
    if (!/[\p{L}\p{N}_$]/u.test(selected)) return failure('unreadable', 'The selected code is no expression; select one.', { start, end });
    const node = nodeExactly(program.root, start, end);
    const value = node ? valueOf(node) : null;
    if (value) {
      const read = attempt(() => readWhole(value, context));
      if (read.ok) return success(this.#reading(value, read.value, true, text, table.value, context));
      return read;
    }
    const fragment = parseFragment(text, start, end, table.value, this.#store);
    const alone = fragment ? valueOf(fragment.root) : null;
    if (!alone) return failure('unreadable', 'The selected code is no expression; select one.', { start, end });
    const read = attempt(() => readWhole(alone, context));
    return read.ok ? success(this.#reading(alone, read.value, isRun(program.root, start, end), text, table.value, context)) : read;
  }

  /** A text that is an expression, or one statement or function whose value is meant. */
  readCode(text: string, language: string): Outcome<CodeReading> {
    const table = this.#table(text, language);
    if (!table.ok) return table;
    if (text.trim() === '') return failure('unreadable', 'The text is empty; write an expression.', { start: 0, end: text.length });
    const { start, end } = trimmed(text, { start: 0, end: text.length });
    const program = parseProgram(text, table.value, this.#store, null);
    const whole = valueOf(program.root);
    const value = whole?.kind === 'opaque' && [...walkCode(whole)].some((code) => code.kind === 'function' || code.kind === 'return') ? null : whole;
    const context = this.#context(program, text, table.value, value?.start ?? start, value?.end ?? end);
    if (!value) return this.#followed(program, text, table.value, start, end);
    const read = attempt(() => readWhole(value, context));
    return read.ok ? success(this.#reading(value, read.value, true, text, table.value, context)) : read;
  }

  /** All comments of a document, delimiters off. */
  readComments(text: string, language: string): readonly CommentText[] {
    return this.#whole(text, language, (program, table) => commentTexts(program.comments, text, table)) ?? [];
  }

  /** Choices between a series and a direct form. */
  readBranches(text: string, language: string): readonly SeriesBranch[] {
    return this.#whole(text, language, (program, table) => seriesBranches(program, text, table)) ?? [];
  }

  /** Polynomials in one variable that the program evaluates. */
  readPolynomials(text: string, language: string): readonly PolynomialCode[] {
    return this.#whole(text, language, (program, table) => polynomialCode(program, text, table)) ?? [];
  }

  #whole<T>(text: string, language: string, use: (program: Program, table: CodeLanguage) => T): T | null {
    const table = this.#table(text, language);
    if (!table.ok) return null;
    const prepared = this.isPrepared(language);
    const last = this.#last;
    const program = last?.text === text && last.table === table.value && last.prepared === prepared ? last.program : parseProgram(text, table.value, this.#store, null);
    this.#last = { text, table: table.value, prepared, program };
    return use(program, table.value);
  }

  #table(text: string, language: string): Outcome<CodeLanguage> {
    const table = codeLanguage(language);
    if (!table) return failure('bad-request', `Code in the language ${language.slice(0, 40)} cannot be read; name one of the supported languages.`);
    if (text.length > LONGEST_TEXT) return failure('bad-request', 'The text is too long; give only the part that holds the expression.');
    return success(table);
  }

  /** Several statements: the value of the one function there, or of the statements themselves, locals filled in. */
  #followed(program: Program, text: string, language: CodeLanguage, start: number, end: number): Outcome<CodeReading> {
    const functions: Code[] = [];
    for (const code of walkWithin(program.root.kind === 'function' ? { kind: 'block', body: [program.root], start, end } : program.root)) {
      for (const part of partsOf(code)) if (part.kind === 'function' && part.body) functions.push(part);
    }
    const [only] = functions;
    const body = only && functions.length === 1 ? only : program.root;
    const inner = body.kind === 'function' && body.body ? body.body : body;
    const context = this.#context(program, text, language, inner.start, inner.end);
    const read = attempt(() => (body.kind === 'function' ? functionValue(body, context.environment) : execute(body, context.environment)));
    if (!read.ok) return read;
    if (!read.value) return failure('unreadable', 'This code is no single expression; select one.', { start, end });
    return success(this.#reading(body, read.value, false, text, language, context));
  }

  #context(program: Program, text: string, language: CodeLanguage, start: number, end: number): Context {
    const scope = scopeAt(program.root, start, end);
    const remarks: Remark[] = [];
    return { scope, remarks, environment: environmentAt(scope, text, language, remarks) };
  }

  #reading(code: Code, meaning: Meaning, replaceable: boolean, text: string, language: CodeLanguage, context: Context): CodeReading {
    const { scope, environment, remarks } = context;
    const macro = (start: number, end: number): Code | null => parseFragment(text, start, end, language, this.#store)?.root ?? null;
    const { enclosing, statement } = scope;
    const declarations = declarationsOf(scope);
    return {
      expression: meaning.expression,
      span: { start: code.start, end: code.end },
      replaceable,
      family: language.family,
      format: formatOf(meaning.type, language, scope, environment),
      enclosing: enclosing ? { name: enclosing.kind === 'function' ? enclosing.name : '', span: { start: enclosing.start, end: enclosing.end }, parameters: enclosing.parameters.map((p) => p.name) } : null,
      statement,
      target: scope.target,
      names: [...new Set(declarations.map((d) => d.name))],
      constants: constantsOf(scope, environment, macro),
      localFunctions: [...new Set(declarations.filter((d) => d.kind === 'function').map((d) => d.name))],
      indentation: indentationAt(text, statement?.start ?? code.start),
      comments: language.comments,
      imports: scope.importNodes,
      remarks,
    };
  }
}

interface Context {
  readonly scope: Scope;
  readonly environment: Environment;
  readonly remarks: Remark[];
}

/** An expression of integer literals alone whose quotient the surroundings would decide has no value of its own, unless it goes to a declared float. */
function readWhole(code: Code, { environment, scope }: Context): Meaning {
  const meaning = readMeaning(code, environment);
  const goal = scope.target === null ? null : environment.typeOf(scope.target);
  if (meaning.type.pending && goal?.kind !== 'float') throw new Declined('bad-request', 'Only integer literals are divided here, and the type around them decides whether the fraction is dropped; make one of them a floating-point number.', { start: code.start, end: code.end });
  return meaning;
}

/** Whether the place lies between two characters of one name or number. */
const cutsWord = (text: string, place: number): boolean => /^[\p{L}\p{N}_$]{2}$/u.test(text.slice(place - 1, place + 1)) && place > 0;

/** The selection without white space around it, and without a closing semicolon. */
function trimmed(text: string, selection: Span): Span {
  let start = Math.max(0, Math.min(selection.start, text.length));
  let end = Math.max(start, Math.min(selection.end, text.length));
  while (start < end && /\s/.test(text[start] ?? '')) start += 1;
  while (end > start && /[\s;]/.test(text[end - 1] ?? '')) end -= 1;
  return { start, end };
}

function indentationAt(text: string, offset: number): string {
  const line = text.lastIndexOf('\n', offset - 1) + 1;
  return /^[ \t]*/.exec(text.slice(line, offset))?.[0] ?? '';
}

/** The format of the value; where the expression does not show it, that of the variable it goes to. */
function formatOf(type: ValueType, language: CodeLanguage, scope: Scope, environment: Environment): FoundFormat {
  if (type.format && !type.weak && type.evidence) return { format: type.format, evidence: type.evidence };
  const goal = scope.target === null ? null : environment.typeOf(scope.target);
  if (goal?.format && goal.kind === 'float') return { format: goal.format, evidence: 'declared' };
  if (type.format && type.evidence) return { format: type.format, evidence: type.evidence };
  return { format: language.literalFormat, evidence: 'language' };
}

/** True where the range is a run of whole terms of one sum that follows a plus sign: only then may it be replaced without brackets of its own. */
function isRun(root: Code, start: number, end: number): boolean {
  const found = pathTo(root, start, end).at(-1);
  let spine: Code | undefined = found;
  let ends = false;
  while (spine?.kind === 'binary' && /^[-+]$/.test(spine.operator)) {
    if (spine.end === end) ends = true;
    if (spine.right.start === start) return ends && spine.operator === '+';
    spine = spine.left;
  }
  return false;
}
