/** Expressions by operator precedence. Every loop moves forward, nesting is capped, and nothing throws: what cannot be read is opaque. */
import type { CodeLanguage } from '../languages/index.ts';
import type { Code, ParameterCode } from '../syntax.ts';
import { binaryLevel, isPower, LEVEL, notLevel, signLevel } from './levels.ts';
import type { Token } from './tokens.ts';

/** Brackets, signs and exponents inside one another beyond this are skipped as opaque. */
const MAX_NESTING = 250;
const CLOSERS: Readonly<Record<string, string>> = { '(': ')', '[': ']', '{': '}', '(/': '/)' };
const END: Token = { kind: 'end', text: '', start: 0, end: 0, spaced: false };
const NO_OPERAND: ReadonlySet<string> = new Set(['then', 'else', 'elseif', 'end', 'endif', 'do', 'return', 'elsif', 'in', 'to', 'otherwise']);

export class Parser {
  readonly language: CodeLanguage;
  readonly #tokens: readonly Token[];
  #at = 0;
  /** Open round and square brackets: inside them line ends are white space. */
  #brackets = 0;
  #depth = 0;
  /** Inside `a ? b : c` a colon ends b. */
  #colonEnds = 0;
  /** Inside MATLAB's square brackets white space separates entries. */
  #entries = 0;

  constructor(tokens: readonly Token[], language: CodeLanguage) {
    this.#tokens = tokens;
    this.language = language;
  }

  get position(): number {
    return this.#at;
  }
  set position(value: number) {
    this.#at = value;
  }

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
  next(): Token {
    while (this.#brackets > 0 && this.#tokens[this.#at]?.kind === 'newline') this.#at += 1;
    const token = this.#tokens[Math.min(this.#at, this.#tokens.length - 1)] ?? END;
    if (token.kind !== 'end') this.#at += 1;
    return token;
  }
  skipNewlines(): void {
    while (this.#tokens[this.#at]?.kind === 'newline') this.#at += 1;
  }
  is(text: string): boolean {
    const token = this.peek();
    return token.text === text && token.kind !== 'text';
  }
  isWord(word: string): boolean {
    const token = this.peek();
    return token.kind === 'name' && (this.language.foldCase ? token.text.toLowerCase() : token.text) === word;
  }
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

  /** An expression; where none can start, an opaque node of no width. */
  expression(): Code {
    return this.binary(LEVEL.choice);
  }

  #opaque(start: number, what: string, parts: readonly Code[] = []): Code {
    return { kind: 'opaque', what, parts, start, end: Math.max(start, this.lastEnd) };
  }

  /** Operators at `level` and tighter. */
  binary(level: number): Code {
    if (this.#depth >= MAX_NESTING) return this.#skipNested();
    this.#depth += 1;
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
      if (this.#entries > 0 && token.spaced && (token.text === '-' || token.text === '+') && !this.peek(1).spaced) break;
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
    this.#depth -= 1;
    return left;
  }

  /** Swift goes on with an operator that opens the next line; the others with a member. */
  #continues(): boolean {
    let i = this.#at;
    while (this.#tokens[i]?.kind === 'newline') i += 1;
    const token = this.#tokens[i];
    if (token?.kind !== 'operator' || this.language.family !== 'swift') return false;
    return binaryLevel(token.text, this.language) !== null && (this.#tokens[i + 1]?.spaced ?? false);
  }

  #ternary(condition: Code): Code {
    this.next();
    this.skipNewlines();
    this.#colonEnds += 1;
    const then = this.binary(LEVEL.choice);
    this.#colonEnds -= 1;
    this.skipNewlines();
    if (!this.take(':')) return this.#opaque(condition.start, 'unfinished choice', [condition, then]);
    this.skipNewlines();
    const otherwise = this.binary(LEVEL.choice);
    return { kind: 'conditional', condition, then, otherwise, start: condition.start, end: otherwise.end };
  }

  /** Python: `value if condition else value`. */
  #trailingChoice(then: Code): Code {
    this.next();
    const condition = this.binary(LEVEL.or);
    if (!this.isWord('else')) return this.#opaque(then.start, 'unfinished choice', [then, condition]);
    this.next();
    const otherwise = this.binary(LEVEL.choice);
    return { kind: 'conditional', condition, then, otherwise, start: then.start, end: otherwise.end };
  }

  prefix(level: number): Code {
    const token = this.peek();
    if (token.kind === 'name' && token.text === 'not' && this.language.family === 'python' && this.#depth < MAX_NESTING) {
      this.#depth += 1;
      this.next();
      const operand = this.binary(LEVEL.not);
      this.#depth -= 1;
      return { kind: 'unary', operator: 'not', operand, start: token.start, end: operand.end };
    }
    if (token.kind === 'operator' && /^(?:[-+−!~&*]|\.not\.|\.-|\+\+|--)$/i.test(token.text) && this.#depth < MAX_NESTING) {
      this.#depth += 1;
      this.next();
      const sign = signLevel(this.language);
      const operand = /^(?:!|~|\.not\.)$/i.test(token.text) ? this.binary(notLevel(token.text, this.language)) : this.binary(level > LEVEL.sum ? LEVEL.coefficient : sign);
      this.#depth -= 1;
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
    const open = (token.kind === 'name' && !NO_OPERAND.has(token.text)) || (number && token.text === '(' && token.kind === 'open') || (number && /^[√∛]$/.test(token.text));
    if (token.spaced || !open || !(number || first.kind === 'group')) return first;
    const right = this.coefficient();
    return { kind: 'binary', operator: 'juxtaposed', operatorStart: token.start, left: first, right, start: first.start, end: right.end };
  }

  power(): Code {
    let base = this.postfix();
    const left = this.language.family === 'matlab';
    for (;;) {
      const token = this.peek();
      if (token.kind !== 'operator' || !isPower(token.text, this.language) || this.#depth >= MAX_NESTING) return base;
      this.next();
      this.skipNewlines();
      this.#depth += 1;
      const exponent = left ? this.#signed() : this.prefix(LEVEL.power);
      this.#depth -= 1;
      base = { kind: 'binary', operator: token.text, operatorStart: token.start, left: base, right: exponent, start: base.start, end: exponent.end };
      if (!left) return base;
    }
  }

  /** MATLAB: an exponent is a signed operand without further powers. */
  #signed(): Code {
    const token = this.peek();
    if (token.kind === 'operator' && /^[-+~]$/.test(token.text) && this.#depth < MAX_NESTING) {
      this.#depth += 1;
      this.next();
      const operand = this.#signed();
      this.#depth -= 1;
      return { kind: 'unary', operator: token.text, operand, start: token.start, end: operand.end };
    }
    return this.postfix();
  }

  postfix(): Code {
    let code = this.primary();
    for (;;) {
      const token = this.peek();
      if (token.kind === 'newline' && this.#memberFollows()) {
        this.skipNewlines();
        continue;
      }
      if (token.kind === 'open' && token.text === '(' && code.kind !== 'literal' && !(code.kind === 'opaque' && code.start === code.end)) {
        if (token.spaced && (this.language.family === 'julia' || this.#entries > 0)) return code;
        const args = this.list();
        code = { kind: 'call', callee: code, args, start: code.start, end: this.lastEnd };
        continue;
      }
      if (token.kind === 'open' && token.text === '[' && !token.spaced && code.kind !== 'literal') {
        const args = this.list();
        code = { kind: 'index', object: code, args, start: code.start, end: this.lastEnd };
        continue;
      }
      const following = this.peek(1);
      const typed = token.text === '<' && (code.kind === 'name' || code.kind === 'member') ? this.#typeArguments() : null;
      if (typed) {
        const cast = code.kind === 'name' && /_cast$/.test(code.text);
        const [operand, ...more] = cast ? this.list() : [];
        if (cast) code = operand && more.length === 0 ? { kind: 'cast', type: typed.text, operand, start: code.start, end: this.lastEnd } : this.#opaque(code.start, 'cast');
        else code = { ...code, end: typed.end };
        continue;
      }
      if (token.kind === 'operator' && /^(?:\.|::|\?\.|->|%|\$)$/.test(token.text) && following.kind === 'name' && this.#selects(token)) {
        this.next();
        const name = this.next();
        code = { kind: 'member', object: code, name: name.text, separator: token.text, start: code.start, end: name.end };
        continue;
      }
      if (token.kind === 'operator' && !token.spaced && (token.text === "'" || token.text === ".'")) {
        this.next();
        code = this.#opaque(code.start, 'transpose', [code]);
        continue;
      }
      if (token.kind === 'operator' && !token.spaced && (token.text === '!!' || token.text === '++' || token.text === '--' || (token.text === '!' && this.language.family === 'swift'))) {
        this.next();
        code = token.text.startsWith('!') ? { ...code, end: token.end } : this.#opaque(code.start, 'changing operator', [code]);
        continue;
      }
      if (token.kind === 'name' && token.text === 'as' && (this.language.family === 'kotlin' || this.language.family === 'swift' || this.language.family === 'rust') && following.kind === 'name') {
        this.next();
        const type = this.next();
        code = { kind: 'cast', type: type.text, operand: code, start: code.start, end: type.end };
        continue;
      }
      return code;
    }
  }

  /** `<double>` between a name and a bracket, in the languages that have it; taken only where it is there. */
  #typeArguments(): { readonly text: string; readonly end: number } | null {
    if (!['cpp', 'csharp', 'java', 'rust'].includes(this.language.family)) return null;
    let text = '';
    for (let i = 1; i < 12; i += 1) {
      const token = this.peek(i);
      if (token.text === '>' && text !== '' && this.peek(i + 1).text === '(') {
        for (let k = 0; k <= i; k += 1) this.next();
        return { text, end: token.end };
      }
      if (token.kind !== 'name' && !/^(?:::|,|\*|&|\.)$/.test(token.text)) return null;
      text += `${text === '' ? '' : ' '}${token.text}`;
    }
    return null;
  }

  #memberFollows(): boolean {
    let i = this.#at;
    while (this.#tokens[i]?.kind === 'newline') i += 1;
    return (this.language.family === 'kotlin' || this.language.family === 'swift') && /^\??\.$/.test(this.#tokens[i]?.text ?? '') && this.#tokens[i]?.kind === 'operator' && this.#tokens[i + 1]?.kind === 'name';
  }

  #selects(token: Token): boolean {
    switch (token.text) {
      case '%':
        return this.language.family === 'fortran';
      case '$':
        return this.language.family === 'r';
      case '->':
        return this.language.family === 'c' || this.language.family === 'cpp';
      default:
        return true;
    }
  }

  primary(): Code {
    const token = this.peek();
    switch (token.kind) {
      case 'number':
        this.next();
        return { kind: 'literal', text: token.text, start: token.start, end: token.end };
      case 'text':
        this.next();
        return { kind: 'opaque', what: 'text', parts: [], start: token.start, end: token.end };
      case 'name':
        return this.#word(token);
      case 'open':
        return this.#bracket(token);
      case 'operator':
        return this.#symbol(token);
      default:
        return { kind: 'opaque', what: 'missing operand', parts: [], start: token.start, end: token.start };
    }
  }

  #word(token: Token): Code {
    const word = this.language.foldCase ? token.text.toLowerCase() : token.text;
    if (NO_OPERAND.has(word) && this.language.family !== 'fortran') return { kind: 'opaque', what: 'missing operand', parts: [], start: token.start, end: token.start };
    if (word === 'if' && (this.language.family === 'kotlin' || this.language.family === 'r' || this.language.family === 'julia' || this.language.family === 'swift' || this.language.family === 'rust')) return this.#choice(token);
    if (word === 'function' && this.language.family === 'r') {
      this.next();
      const parameters = this.parameters();
      this.skipNewlines();
      const body = this.#braced() ?? this.expression();
      return { kind: 'lambda', parameters, body, start: token.start, end: body.end };
    }
    this.next();
    if (this.language.juxtaposition && this.is('->')) {
      this.next();
      const body = this.expression();
      return { kind: 'lambda', parameters: [{ name: token.text, type: '', start: token.start, end: token.end }], body, start: token.start, end: body.end };
    }
    return { kind: 'name', text: token.text.replace(/^`|`$/g, ''), start: token.start, end: token.end };
  }

  #choice(token: Token): Code {
    this.next();
    const round = this.language.family === 'kotlin' || this.language.family === 'r';
    const condition = round && this.is('(') ? this.primary() : this.expression();
    this.skipNewlines();
    const then = this.#arm(['else', 'elseif', 'end']);
    const before = this.#at;
    this.skipNewlines();
    if (this.isWord('elseif')) {
      const otherwise = this.#choice(this.peek());
      return { kind: 'if', condition, then, otherwise, start: token.start, end: this.lastEnd };
    }
    if (this.isWord('else')) {
      this.next();
      this.skipNewlines();
      const otherwise = this.#arm(['end']);
      if (this.language.family === 'julia' && this.isWord('end')) this.next();
      return { kind: 'if', condition, then, otherwise, start: token.start, end: this.lastEnd };
    }
    if (this.language.family === 'julia' && this.isWord('end')) this.next();
    else this.#at = before;
    return { kind: 'if', condition, then, otherwise: null, start: token.start, end: this.lastEnd };
  }

  /** Statements are read by the caller that owns them; set by the statement reader. */
  statements: ((stops: readonly string[]) => readonly Code[]) | null = null;

  #braced(): Code | null {
    if (!this.is('{') || !this.statements) return null;
    const { start } = this.next();
    const saved = this.#brackets;
    this.#brackets = 0;
    const body = this.statements(['}']);
    this.#brackets = saved;
    this.take('}');
    return { kind: 'block', body, start, end: this.lastEnd };
  }

  #arm(stops: readonly string[]): Code {
    const braced = this.#braced();
    if (braced) return braced;
    if (this.language.family !== 'julia' || !this.statements) return this.expression();
    const start = this.peek().start;
    const body = this.statements(stops);
    return { kind: 'block', body, start, end: Math.max(start, this.lastEnd) };
  }

  /** A bracketed block read as statements, or null. */
  block(): Code | null {
    return this.#braced();
  }

  #bracket(token: Token): Code {
    if (token.text === '{') {
      return this.#braced() ?? this.#skipNested();
    }
    const cast = this.#cast(token);
    if (cast) return cast;
    const square = token.text === '[' || token.text === '(/';
    const items = this.list();
    const [only] = items;
    if (square || !only || items.length !== 1 || only.kind === 'named') return { kind: 'list', items, start: token.start, end: this.lastEnd };
    return { kind: 'group', inner: only, start: token.start, end: this.lastEnd };
  }

  /** `(float)x` in languages of the C kind. */
  #cast(token: Token): Code | null {
    const { family, floatTypes, integerTypes } = this.language;
    if (token.text !== '(' || !['hlsl', 'glsl', 'c', 'cpp', 'csharp', 'java'].includes(family)) return null;
    const [type, close, after] = [this.peek(1), this.peek(2), this.peek(3)];
    if (type.kind !== 'name' || close.text !== ')' || !(Object.hasOwn(floatTypes, type.text) || integerTypes.includes(type.text))) return null;
    if (!(after.kind === 'name' || after.kind === 'number' || after.text === '(' || (after.kind === 'operator' && /^[-+]$/.test(after.text)))) return null;
    this.next();
    this.next();
    this.next();
    const operand = after.kind === 'operator' ? this.prefix(LEVEL.unary) : this.postfix();
    return { kind: 'cast', type: type.text, operand, start: token.start, end: operand.end };
  }

  #symbol(token: Token): Code {
    if (/^\.(?:true|false)\.$/i.test(token.text)) {
      this.next();
      return { kind: 'name', text: token.text, start: token.start, end: token.end };
    }
    if (/^[√∛]$/.test(token.text)) {
      this.next();
      const operand = this.postfix();
      return { kind: 'unary', operator: token.text, operand, start: token.start, end: operand.end };
    }
    if (token.text === '.' && this.peek(1).kind === 'name') {
      this.next();
      const name = this.next();
      return { kind: 'name', text: `.${name.text}`, start: token.start, end: name.end };
    }
    if ((token.text === '@' && this.language.family === 'matlab') || (token.text === '\\' && this.language.family === 'r')) {
      this.next();
      if (!this.is('(')) {
        const inner = this.postfix();
        return this.#opaque(token.start, 'function handle', [inner]);
      }
      const parameters = this.parameters();
      const body = this.expression();
      return { kind: 'lambda', parameters, body, start: token.start, end: body.end };
    }
    return { kind: 'opaque', what: 'missing operand', parts: [], start: token.start, end: token.start };
  }

  /** Entries between brackets, the brackets taken. */
  list(): readonly Code[] {
    const open = this.next();
    const close = CLOSERS[open.text] ?? ')';
    if (this.#depth >= MAX_NESTING) return [this.#skipTo(open)];
    this.#depth += 1;
    const spaces = open.text === '[' && this.language.family === 'matlab';
    const [colons, entries] = [this.#colonEnds, this.#entries];
    this.#colonEnds = 0;
    this.#entries = spaces ? 1 : 0;
    this.#brackets += 1;
    const items: Code[] = [];
    for (;;) {
      const token = this.peek();
      if (token.kind === 'end' || token.kind === 'close') break;
      if (token.kind === 'separator') {
        this.next();
        continue;
      }
      const before = this.#at;
      items.push(this.#argument());
      if (this.#at === before) this.next();
    }
    if (this.is(close)) this.next();
    this.#brackets -= 1;
    this.#colonEnds = colons;
    this.#entries = entries;
    this.#depth -= 1;
    return items;
  }

  #argument(): Code {
    const [name, sign] = [this.peek(), this.peek(1)];
    const label = this.language.family === 'swift' ? ':' : '=';
    if (name.kind === 'name' && sign.kind === 'operator' && sign.text === label) {
      this.next();
      this.next();
      const value = this.expression();
      return { kind: 'named', name: name.text, value, start: name.start, end: value.end };
    }
    return this.expression();
  }

  /** Parameter list of a function head: names with the words around them as types. */
  parameters(): readonly ParameterCode[] {
    if (!this.is('(')) return [];
    this.next();
    const found: ParameterCode[] = [];
    let words: Token[] = [];
    let depth = 1;
    const flush = (): void => {
      const names = words.filter((w) => w.kind === 'name');
      const colon = words.findIndex((w) => w.text === ':' || w.text === '::');
      const equals = words.findIndex((w) => w.text === '=');
      const named = colon > 0 ? words.slice(0, colon).filter((w) => w.kind === 'name').at(-1) : equals > 0 ? words.slice(0, equals).filter((w) => w.kind === 'name').at(-1) : names.at(-1);
      if (named) {
        const type = colon > 0 ? words.slice(colon + 1, equals > colon ? equals : undefined) : names.filter((w) => w !== named && w.start < named.start);
        found.push({ name: named.text, type: type.map((w) => w.text).join(' '), start: words[0]?.start ?? named.start, end: words.at(-1)?.end ?? named.end });
      }
      words = [];
    };
    for (;;) {
      const token = this.next();
      if (token.kind === 'end') break;
      if (token.kind === 'newline') continue;
      if (token.kind === 'open') depth += 1;
      if (token.kind === 'close') depth -= 1;
      if (depth === 0) break;
      if (token.kind === 'separator' && depth === 1) flush();
      else words.push(token);
    }
    flush();
    return found;
  }

  /** Skips one bracketed piece, or one token, as opaque. */
  #skipNested(): Code {
    const token = this.peek();
    if (token.kind !== 'open') {
      if (token.kind !== 'end' && token.kind !== 'close' && token.kind !== 'separator') this.next();
      return { kind: 'opaque', what: 'expression nested too deeply', parts: [], start: token.start, end: Math.max(token.start, this.lastEnd) };
    }
    this.next();
    return this.#skipTo(token);
  }

  #skipTo(open: Token): Code {
    let depth = 1;
    for (;;) {
      const token = this.peek();
      if (token.kind === 'end') break;
      this.next();
      if (token.kind === 'open') depth += 1;
      if (token.kind === 'close') depth -= 1;
      if (depth === 0) break;
    }
    return { kind: 'opaque', what: 'expression nested too deeply', parts: [], start: open.start, end: this.lastEnd };
  }
}

/** The right side of a comparison, or of the last one of a chain; null for anything else. */
function lastOperand(code: Code): Code | null {
  if (code.kind !== 'binary') return null;
  if (code.operator === 'and' && code.right.kind === 'binary' && code.right.operatorStart === code.operatorStart) return code.right.right;
  return /^(?:[<>]=?|==|!=)$/.test(code.operator) ? code.right : null;
}
