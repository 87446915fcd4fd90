/** Statements as far as names, constants, functions, branches and returns need them; everything else is passed over token by token. */
import type { CodeLanguage } from '../languages/index.ts';
import type { Code, ParameterCode } from '../syntax.ts';
import { readEntries } from './brackets.ts';
import { readCChoice, readTyped } from './cKind.ts';
import { readJuliaFunction, readMatlabChoice, readMatlabFunction } from './endBlocks.ts';
import { hasValuedChoices } from './families.ts';
import { readFortranChoice, readFortranDeclaration, readFortranFunction } from './fortran.ts';
import { readDirective, readImport } from './imports.ts';
import { opensLoop, readLoop } from './loops.ts';
import { readModernDeclaration, readModernFunction } from './modern.ts';
import { readBlock, readOperand } from './operands.ts';
import { Parser } from './parser.ts';
import type { StatementSource } from './source.ts';
import type { Token } from './tokens.ts';

/** Blocks inside one another beyond this are passed over. */
const MAX_BLOCKS = 120;

/** Statement lists of the whole token stream. */
export function parseTokens(tokens: readonly Token[], language: CodeLanguage): readonly Code[] {
  return new StatementReader(new Parser(tokens, language)).all();
}

class StatementReader implements StatementSource {
  readonly parser: Parser;
  readonly language: CodeLanguage;
  #depth = 0;

  constructor(parser: Parser) {
    this.parser = parser;
    this.language = parser.language;
    parser.statements = (stops) => this.list(stops);
  }

  all(): readonly Code[] {
    const body: Code[] = [];
    while (this.parser.peek().kind !== 'end') {
      body.push(...this.list([]));
      // A closer that nothing opened.
      if (this.parser.peek().kind !== 'end') this.parser.next();
    }
    return body;
  }

  /** Statements up to one of the stops (left in place), an unmatched closer or the end. */
  list(stops: readonly string[]): readonly Code[] {
    const body: Code[] = [];
    const p = this.parser;
    this.#depth += 1;
    for (;;) {
      p.skipNewlines();
      const token = p.peek();
      if (token.kind === 'end' || token.kind === 'close') break;
      if (this.#stops(token, stops)) break;
      if (token.kind === 'separator') {
        p.next();
        continue;
      }
      const before = p.position;
      if (this.#depth > MAX_BLOCKS) p.next();
      else {
        const one = this.statement();
        if (one) body.push(one);
      }
      if (p.position === before) p.next();
    }
    this.#depth -= 1;
    return body;
  }

  #stops(token: Token, stops: readonly string[]): boolean {
    if (token.kind !== 'name' && token.kind !== 'close') return false;
    const word = this.word(token);
    return stops.some((stop) => word === stop || (stop === 'end' && this.language.family !== 'julia' && /^end(?:if|do|function|subroutine|module|program|while|for)$/.test(word)));
  }

  word(token: Token): string {
    return this.language.foldCase ? token.text.toLowerCase() : token.text;
  }

  statement(): Code | null {
    const p = this.parser;
    const token = p.peek();
    if (token.kind === 'directive') {
      p.next();
      return readDirective(token);
    }
    if (token.kind === 'name') {
      const special = this.#keyword(token, this.word(token));
      if (special !== undefined) return special;
    }
    return this.simple();
  }

  /** Undefined where the word opens no statement of its own. */
  #keyword(token: Token, word: string): Code | null | undefined {
    const p = this.parser;
    if (opensLoop(word, this.language) && p.peek(1).text !== '=') return this.#loop(token, word);
    const { family } = this.language;
    switch (word) {
      case 'return': {
        p.next();
        const value = this.endOfStatement() ? null : p.expression();
        return { kind: 'return', value, start: token.start, end: p.lastEnd };
      }
      case 'if':
        return family === 'fortran' ? readFortranChoice(this, token) : family === 'matlab' ? readMatlabChoice(this, token) : hasValuedChoices(this.language) ? undefined : readCChoice(this, token);
      case 'function':
        if (family === 'fortran') return readFortranFunction(this, token, '');
        if (family === 'matlab') return readMatlabFunction(this, token);
        if (family === 'julia') return readJuliaFunction(this, token);
        return undefined;
      case 'subroutine':
        return family === 'fortran' ? readFortranFunction(this, token, '') : undefined;
      case 'fun':
      case 'func':
        return (family === 'kotlin' && word === 'fun') || (family === 'swift' && word === 'func') ? readModernFunction(this, token) : undefined;
      case 'val':
      case 'var':
      case 'let':
        return family === 'kotlin' || family === 'swift' ? readModernDeclaration(this, token) : undefined;
      case 'const':
        if (family === 'julia') {
          p.next();
          const inner = this.simple();
          return inner?.kind === 'assign' && inner.target.kind === 'name' ? { kind: 'declare', name: inner.target.text, type: inner.type, value: inner.value, constant: true, start: token.start, end: inner.end } : inner;
        }
        return undefined;
      case 'import':
      case 'using':
      case 'use':
      case 'library':
        if (word === 'library' && family !== 'r') return undefined;
        return readImport(this, token);
      case 'class':
      case 'struct':
      case 'object':
      case 'module':
      case 'program':
      case 'extension':
      case 'enum':
      case 'contains':
      case 'implicit':
      case 'namespace':
        return this.#container(word);
      case 'end':
      case 'endif':
      case 'enddo':
      case 'for':
      case 'while':
      case 'do':
      case 'else':
      case 'elseif':
      case 'then':
      case 'begin':
      case 'private':
      case 'public':
      case 'internal':
      case 'static':
      case 'override':
      case 'open':
      case 'mutating':
      case 'pure':
      case 'elemental':
      case 'recursive':
      case 'inline':
      case 'call':
      case 'result':
        if (p.peek(1).text === '=' || p.peek(1).text === '(' ? !/^(?:for|while|if|else|elseif|call|result)$/.test(word) : false) return undefined;
        p.next();
        return null;
      default:
        return family === 'fortran' ? readFortranDeclaration(this, token, word) : readTyped(this, token);
    }
  }

  #loop(token: Token, word: string): Code {
    this.#depth += 1;
    const loop = readLoop(this, word, token);
    this.#depth -= 1;
    return loop;
  }

  endOfStatement(): boolean {
    const token = this.parser.peek();
    return token.kind === 'newline' || token.kind === 'end' || token.kind === 'separator' || token.kind === 'close';
  }

  skipLine(): void {
    const p = this.parser;
    while (!this.endOfStatement()) {
      if (p.peek().kind === 'open') readOperand(p);
      else p.next();
    }
  }

  /** The head of a class, module or namespace. */
  #container(word: string): null {
    const p = this.parser;
    p.next();
    // The braces or the `end` of a container are passed over; what is inside is read as if it stood outside.
    while (!this.endOfStatement() && !p.is('{') && !p.is('(')) p.next();
    if (p.is('(')) readEntries(p);
    while (!this.endOfStatement() && !p.is('{') && word !== 'contains') p.next();
    if (p.is('{')) p.next();
    return null;
  }

  /** An expression, an assignment, or a short function definition (`f(x) = ...` in Julia, `f <- function(x) ...` in R). */
  simple(): Code | null {
    const p = this.parser;
    const left = p.expression();
    const token = p.peek();
    const type = token.text === '::' || (token.text === ':' && this.language.family !== 'julia') ? this.annotation() : '';
    const sign = p.peek();
    if (sign.kind === 'operator' && /^(?:=|<-|<<-|:=|[-+*/]=)$/.test(sign.text)) {
      p.next();
      p.skipNewlines();
      const value = p.expression();
      if (left.kind === 'call' && left.callee.kind === 'name' && this.language.family === 'julia' && sign.text === '=') {
        return { kind: 'function', name: left.callee.text, parameters: namesOf(left.args), returns: '', body: value, start: left.start, end: value.end };
      }
      if (value.kind === 'lambda' && left.kind === 'name') return { kind: 'function', name: left.text, parameters: value.parameters, returns: '', body: value.body, start: left.start, end: value.end };
      return { kind: 'assign', target: left, operator: /^(?:<-|<<-|:=)$/.test(sign.text) ? '=' : sign.text, value, type, start: left.start, end: value.end };
    }
    if (sign.kind === 'operator' && (sign.text === '->' || sign.text === '->>') && this.language.family === 'r') {
      p.next();
      const target = p.expression();
      return { kind: 'assign', target, operator: '=', value: left, type: '', start: left.start, end: target.end };
    }
    return left.kind === 'opaque' && left.start === left.end ? null : left;
  }

  annotation(): string {
    const p = this.parser;
    p.next();
    const words: string[] = [];
    while (!this.endOfStatement() && !/^(?:=|{)$/.test(p.peek().text)) words.push(p.next().text);
    return words.join('');
  }

  arm(): Code {
    const p = this.parser;
    p.skipNewlines();
    const start = p.peek().start;
    const braced = readBlock(p);
    if (braced) return braced;
    if (this.#depth > MAX_BLOCKS) return readOperand(p);
    this.#depth += 1;
    const one = this.statement();
    this.#depth -= 1;
    return one ?? { kind: 'block', body: [], start, end: start };
  }
}

/** Arguments of a call as the parameters of a definition. */
function namesOf(args: readonly Code[]): readonly ParameterCode[] {
  return args.flatMap((a) => {
    const inner = a.kind === 'named' ? null : a.kind === 'member' && a.separator === '::' ? a.object : a;
    return inner?.kind === 'name' ? [{ name: inner.text, type: a.kind === 'member' ? a.name : '', start: a.start, end: a.end }] : a.kind === 'named' ? [{ name: a.name, type: '', start: a.start, end: a.end }] : [];
  });
}
