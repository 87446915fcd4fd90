/** Statements as far as names, constants, functions, branches and returns need them; everything else is passed over token by token. */
import type { CodeLanguage } from '../languages/index.ts';
import type { Code, ParameterCode } from '../syntax.ts';
import { opensLoop, readLoop } from './loops.ts';
import { Parser } from './parser.ts';
import type { Token } from './tokens.ts';

const MAX_BLOCKS = 120;

/** Statement lists of the whole token stream. */
export function parseTokens(tokens: readonly Token[], language: CodeLanguage): readonly Code[] {
  const parser = new Parser(tokens, language);
  const reader = new StatementReader(parser, language);
  return reader.all();
}

class StatementReader {
  readonly #parser: Parser;
  readonly #language: CodeLanguage;
  #depth = 0;

  constructor(parser: Parser, language: CodeLanguage) {
    this.#parser = parser;
    this.#language = language;
    parser.statements = (stops) => this.#list(stops);
  }

  all(): readonly Code[] {
    const body: Code[] = [];
    while (this.#parser.peek().kind !== 'end') {
      body.push(...this.#list([]));
      // A closer that nothing opened.
      if (this.#parser.peek().kind !== 'end') this.#parser.next();
    }
    return body;
  }

  /** Statements up to one of the stops (left in place), an unmatched closer or the end. */
  #list(stops: readonly string[]): readonly Code[] {
    const body: Code[] = [];
    const p = this.#parser;
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
        const one = this.#statement();
        if (one) body.push(one);
      }
      if (p.position === before) p.next();
    }
    this.#depth -= 1;
    return body;
  }

  #stops(token: Token, stops: readonly string[]): boolean {
    if (token.kind !== 'name' && token.kind !== 'close') return false;
    const word = this.#word(token);
    return stops.some((stop) => word === stop || (stop === 'end' && /^end(?:if|do|function|subroutine|module|program|while|for)?$/.test(word) && this.#language.family !== 'julia' && word !== 'end' ? true : word === stop));
  }

  #word(token: Token): string {
    return this.#language.foldCase ? token.text.toLowerCase() : token.text;
  }

  #statement(): Code | null {
    const p = this.#parser;
    const token = p.peek();
    if (token.kind === 'directive') {
      p.next();
      return directive(token);
    }
    if (token.kind === 'name') {
      const special = this.#keyword(token, this.#word(token));
      if (special !== undefined) return special;
    }
    return this.#simple();
  }

  /** Undefined where the word opens no statement of its own. */
  #keyword(token: Token, word: string): Code | null | undefined {
    const p = this.#parser;
    if (opensLoop(word, this.#language) && p.peek(1).text !== '=') return this.#loop(token, word);
    const { family } = this.#language;
    switch (word) {
      case 'return': {
        p.next();
        const value = this.#endOfStatement() ? null : p.expression();
        return { kind: 'return', value, start: token.start, end: p.lastEnd };
      }
      case 'if':
        return family === 'fortran' ? this.#fortranIf(token) : family === 'matlab' ? this.#matlabIf(token) : family === 'kotlin' || family === 'r' || family === 'julia' || family === 'swift' || family === 'rust' ? undefined : this.#cIf(token);
      case 'function':
        if (family === 'fortran') return this.#fortranFunction(token, '');
        if (family === 'matlab') return this.#matlabFunction(token);
        if (family === 'julia') return this.#juliaFunction(token);
        return undefined;
      case 'subroutine':
        return family === 'fortran' ? this.#fortranFunction(token, '') : undefined;
      case 'fun':
      case 'func':
        return (family === 'kotlin' && word === 'fun') || (family === 'swift' && word === 'func') ? this.#modernFunction(token) : undefined;
      case 'val':
      case 'var':
      case 'let':
        return family === 'kotlin' || family === 'swift' ? this.#modernDeclaration(token) : undefined;
      case 'const':
        if (family === 'julia') {
          p.next();
          const inner = this.#simple();
          return inner?.kind === 'assign' && inner.target.kind === 'name' ? { kind: 'declare', name: inner.target.text, type: inner.type, value: inner.value, constant: true, start: token.start, end: inner.end } : inner;
        }
        return undefined;
      case 'import':
      case 'using':
      case 'use':
      case 'library':
        if (word === 'library' && family !== 'r') return undefined;
        return this.#import(token);
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
        return this.#typed(token, word);
    }
  }

  #loop(token: Token, word: string): Code {
    const p = this.#parser;
    this.#depth += 1;
    const loop = readLoop(p, word, token, {
      list: (stops) => this.#list(stops),
      arm: () => this.#arm(),
      simple: () => this.#simple(),
      declared: () => this.#statement(),
      skipLine: () => this.#skipLine(),
    });
    this.#depth -= 1;
    return loop;
  }

  #endOfStatement(): boolean {
    const token = this.#parser.peek();
    return token.kind === 'newline' || token.kind === 'end' || token.kind === 'separator' || token.kind === 'close';
  }

  #skipLine(): void {
    const p = this.#parser;
    while (!this.#endOfStatement()) {
      if (p.peek().kind === 'open') p.primary();
      else p.next();
    }
  }

  #container(word: string): null {
    const p = this.#parser;
    p.next();
    // The braces or the `end` of a container are passed over; what is inside is read as if it stood outside.
    while (!this.#endOfStatement() && !p.is('{') && !p.is('(')) p.next();
    if (p.is('(')) p.list();
    while (!this.#endOfStatement() && !p.is('{') && word !== 'contains') p.next();
    if (p.is('{')) p.next();
    return null;
  }

  #import(token: Token): Code {
    const p = this.#parser;
    p.next();
    const words: string[] = [];
    while (!this.#endOfStatement()) words.push(p.next().text);
    while (p.is(',')) {
      while (p.peek().kind !== 'newline' && p.peek().kind !== 'end') words.push(p.next().text);
    }
    const whole = words.join('').replace(/[()]/g, '');
    const [path = '', listed] = whole.split(/:(?!:)/);
    const last = /^(.*)[.]([\w*]+)$/.exec(path);
    const names = listed !== undefined ? listed.split(',').map((n) => [n, n] as const) : last && this.#language.family === 'kotlin' ? [[last[2] ?? '', last[2] ?? ''] as const] : [['*', '*'] as const];
    return { kind: 'import', path: last && this.#language.family === 'kotlin' ? (last[1] ?? '') : path, alias: null, names, start: token.start, end: p.lastEnd };
  }

  /** An expression, an assignment, or a short function definition (`f(x) = ...` in Julia, `f <- function(x) ...` in R). */
  #simple(): Code | null {
    const p = this.#parser;
    const left = p.expression();
    const token = p.peek();
    const type = token.text === '::' || (token.text === ':' && this.#language.family !== 'julia') ? this.#annotation() : '';
    const sign = p.peek();
    if (sign.kind === 'operator' && /^(?:=|<-|<<-|:=|[-+*/]=)$/.test(sign.text)) {
      p.next();
      p.skipNewlines();
      const value = p.expression();
      if (left.kind === 'call' && left.callee.kind === 'name' && this.#language.family === 'julia' && sign.text === '=') {
        return { kind: 'function', name: left.callee.text, parameters: namesOf(left.args), returns: '', body: value, start: left.start, end: value.end };
      }
      if (value.kind === 'lambda' && left.kind === 'name') return { kind: 'function', name: left.text, parameters: value.parameters, returns: '', body: value.body, start: left.start, end: value.end };
      return { kind: 'assign', target: left, operator: /^(?:<-|<<-|:=)$/.test(sign.text) ? '=' : sign.text, value, type, start: left.start, end: value.end };
    }
    if (sign.kind === 'operator' && (sign.text === '->' || sign.text === '->>') && this.#language.family === 'r') {
      p.next();
      const target = p.expression();
      return { kind: 'assign', target, operator: '=', value: left, type: '', start: left.start, end: target.end };
    }
    return left.kind === 'opaque' && left.start === left.end ? null : left;
  }

  #annotation(): string {
    const p = this.#parser;
    p.next();
    const words: string[] = [];
    while (!this.#endOfStatement() && !/^(?:=|{)$/.test(p.peek().text)) words.push(p.next().text);
    return words.join('');
  }

  // Languages of the C kind, and Fortran: declarations that begin with a type.
  #typed(token: Token, word: string): Code | null | undefined {
    const { family } = this.#language;
    if (family === 'fortran') return this.#fortranDeclaration(token, word);
    if (!['glsl', 'hlsl', 'c', 'cpp', 'csharp', 'java'].includes(family)) return undefined;
    const p = this.#parser;
    let words = 0;
    while (p.peek(words).kind === 'name' && words < 8) words += 1;
    if (words < 2) return undefined;
    const after = p.peek(words);
    if (!/^(?:=|;|,|\(|\[|\{)$/.test(after.text)) return undefined;
    const type = Array.from({ length: words - 1 }, (_, i) => p.peek(i).text).join(' ');
    if (/\b(?:return|else|struct|typedef|using)\b/.test(type)) return undefined;
    for (let i = 0; i < words - 1; i += 1) p.next();
    const name = p.next();
    if (after.text === '(') {
      const parameters = p.parameters();
      const body = p.block();
      return { kind: 'function', name: name.text, parameters, returns: type, body, start: token.start, end: p.lastEnd };
    }
    return this.#declared(token, type, name);
  }

  #declared(token: Token, type: string, first: Token): Code {
    const p = this.#parser;
    const constant = /\b(?:const|constexpr|final|uniform)\b/.test(type);
    const found: Code[] = [];
    let name = first;
    for (;;) {
      let value: Code | null = null;
      let bounds = type;
      if (p.is('[') || (p.is('(') && this.#language.family === 'fortran')) {
        const from = p.peek().start;
        p.list();
        bounds = this.#sliceFrom(from);
      }
      if (p.take('=')) value = p.is('{') ? bracedList(p) : p.expression();
      // Fortran: `c(0:5)`, `dimension(0:5)`.
      const lower = this.#language.family === 'fortran' && value?.kind === 'list' ? /^(?:.*dimension)?\((-?\d+):/i.exec(bounds)?.[1] : undefined;
      if (value?.kind === 'list' && lower !== undefined) value = { ...value, first: BigInt(lower) };
      found.push({ kind: 'declare', name: name.text, type, value, constant, start: found.length === 0 ? token.start : name.start, end: p.lastEnd });
      if (!p.is(',') || p.peek(1).kind !== 'name') break;
      p.next();
      name = p.next();
    }
    const [only] = found;
    return only && found.length === 1 ? only : { kind: 'block', body: found, start: token.start, end: p.lastEnd };
  }

  #cIf(token: Token): Code {
    const p = this.#parser;
    p.next();
    const condition = p.is('(') ? p.primary() : p.expression();
    const then = this.#arm();
    let otherwise: Code | null = null;
    const before = p.position;
    while (p.is(';')) p.next();
    if (p.isWord('else')) {
      p.next();
      otherwise = this.#arm();
    } else p.position = before;
    return { kind: 'if', condition, then, otherwise, start: token.start, end: p.lastEnd };
  }

  #arm(): Code {
    const p = this.#parser;
    p.skipNewlines();
    const start = p.peek().start;
    const braced = p.block();
    if (braced) return braced;
    if (this.#depth > MAX_BLOCKS) return p.primary();
    this.#depth += 1;
    const one = this.#statement();
    this.#depth -= 1;
    return one ?? { kind: 'block', body: [], start, end: start };
  }

  // Kotlin and Swift.
  #modernFunction(token: Token): Code | null {
    const p = this.#parser;
    p.next();
    let name = p.next();
    while (p.is('.') && p.peek(1).kind === 'name') {
      p.next();
      name = p.next();
    }
    const parameters = p.parameters();
    const words: string[] = [];
    while (!this.#endOfStatement() && !p.is('{') && !p.is('=')) words.push(p.next().text);
    let body: Code | null;
    if (p.take('=')) {
      p.skipNewlines();
      body = p.expression();
    } else {
      body = p.block();
    }
    return { kind: 'function', name: name.text, parameters, returns: words.join('').replace(/^(?::|->)/, ''), body, start: token.start, end: p.lastEnd };
  }

  #modernDeclaration(token: Token): Code {
    const p = this.#parser;
    const keyword = p.next();
    const name = p.next();
    const type = p.is(':') ? this.#annotation() : '';
    let value: Code | null = null;
    if (p.take('=')) {
      p.skipNewlines();
      value = p.expression();
    }
    return { kind: 'declare', name: name.text, type, value, constant: keyword.text !== 'var', start: token.start, end: p.lastEnd };
  }

  // Julia and MATLAB.
  #juliaFunction(token: Token): Code {
    const p = this.#parser;
    p.next();
    const name = p.next();
    const parameters = p.parameters();
    this.#skipLine();
    const start = p.peek().start;
    const body = this.#list(['end']);
    const stop = p.lastEnd;
    if (p.isWord('end')) p.next();
    return { kind: 'function', name: name.text, parameters, returns: '', body: { kind: 'block', body, start, end: Math.max(start, stop) }, start: token.start, end: p.lastEnd };
  }

  #matlabFunction(token: Token): Code {
    const p = this.#parser;
    p.next();
    const head: Token[] = [];
    while (!this.#endOfStatement() && !p.is('(')) head.push(p.next());
    const equals = head.findIndex((t) => t.text === '=');
    const name = head.slice(equals + 1).filter((t) => t.kind === 'name').at(-1);
    const result = equals > 0 ? head.slice(0, equals).filter((t) => t.kind === 'name') : [];
    const parameters = p.parameters();
    const start = p.peek().start;
    const body = this.#list(['end', 'function']);
    if (p.isWord('end')) p.next();
    return { kind: 'function', name: name?.text ?? '', parameters, returns: result.length === 1 ? (result[0]?.text ?? '') : '', body: { kind: 'block', body, start, end: p.lastEnd }, start: token.start, end: p.lastEnd };
  }

  #matlabIf(token: Token): Code {
    const p = this.#parser;
    p.next();
    const condition = p.expression();
    const stops = ['else', 'elseif', 'end'];
    const start = p.peek().start;
    const then: Code = { kind: 'block', body: this.#list(stops), start, end: p.lastEnd };
    let otherwise: Code | null = null;
    if (p.isWord('elseif')) otherwise = this.#matlabIf(p.peek());
    else if (p.isWord('else')) {
      p.next();
      const from = p.peek().start;
      otherwise = { kind: 'block', body: this.#list(['end']), start: from, end: p.lastEnd };
      if (p.isWord('end')) p.next();
    } else if (p.isWord('end')) p.next();
    return { kind: 'if', condition, then, otherwise, start: token.start, end: p.lastEnd };
  }

  // Fortran.
  #fortranIf(token: Token): Code {
    const p = this.#parser;
    p.next();
    const condition = p.is('(') ? p.primary() : p.expression();
    if (!p.isWord('then')) {
      const then = this.#arm();
      return { kind: 'if', condition, then, otherwise: null, start: token.start, end: p.lastEnd };
    }
    p.next();
    const stops = ['else', 'elseif', 'end'];
    const start = p.peek().start;
    const then: Code = { kind: 'block', body: this.#list(stops), start, end: p.lastEnd };
    let otherwise: Code | null = null;
    if (p.isWord('elseif')) otherwise = this.#fortranIf(p.peek());
    else if (p.isWord('else')) {
      p.next();
      if (p.isWord('if')) otherwise = this.#fortranIf(p.peek());
      else {
        const from = p.peek().start;
        otherwise = { kind: 'block', body: this.#list(['end']), start: from, end: p.lastEnd };
        this.#skipLine();
      }
    } else this.#skipLine();
    return { kind: 'if', condition, then, otherwise, start: token.start, end: p.lastEnd };
  }

  #fortranFunction(token: Token, returns: string): Code {
    const p = this.#parser;
    p.next();
    const name = p.next();
    const parameters = p.parameters();
    let result = name.text;
    if (p.isWord('result') && p.peek(1).text === '(') {
      p.next();
      const [inner] = p.list();
      if (inner?.kind === 'name') result = inner.text;
    }
    const start = p.peek().start;
    const body = this.#list(['end']);
    this.#skipLine();
    return { kind: 'function', name: name.text, parameters, returns: returns === '' ? `=${result}` : `${returns}=${result}`, body: { kind: 'block', body, start, end: p.lastEnd }, start: token.start, end: p.lastEnd };
  }

  #fortranDeclaration(token: Token, word: string): Code | null | undefined {
    if (!/^(?:real|integer|double|complex|logical|character|type|parameter)$/.test(word)) return undefined;
    const p = this.#parser;
    const start = p.position;
    if (p.peek(1).text === '=' || (word === 'real' && p.peek(1).text === '(' && !this.#lineHas('::') && !this.#lineHas('function'))) return undefined;
    const words: string[] = [];
    const hasColons = this.#lineHas('::');
    while (!this.#endOfStatement() || p.is(',')) {
      const here = p.peek();
      if (here.text === '::') {
        p.next();
        break;
      }
      if (this.#word(here) === 'function') return this.#fortranFunction(here, words.join(' ').replace(/ (?=[(,])/g, ''));
      if (!hasColons && here.kind === 'name' && words.length > 0 && !/^(?:precision|\*|\()$/.test(this.#word(here))) break;
      if (here.kind === 'open') {
        const from = here.start;
        p.list();
        words.push(this.#sliceFrom(from));
      } else words.push(p.next().text);
    }
    const type = words.join(' ').replace(/ (?=[(,])/g, '');
    const first = p.peek();
    if (first.kind !== 'name') {
      p.position = start;
      this.#skipLine();
      return null;
    }
    p.next();
    return this.#declared(token, /parameter/i.test(type) ? `const ${type}` : type, first);
  }

  #lineHas(text: string): boolean {
    const p = this.#parser;
    for (let i = 0; i < 60; i += 1) {
      const token = p.peek(i);
      if (token.kind === 'newline' || token.kind === 'end') return false;
      if (this.#word(token) === text) return true;
    }
    return false;
  }

  /** The text of the bracket that was just read, without white space. */
  #sliceFrom(start: number): string {
    return this.#parser.textBetween(start, this.#parser.lastEnd);
  }
}

function bracedList(p: Parser): Code {
  const start = p.peek().start;
  const items = p.list();
  return { kind: 'list', items, start, end: p.lastEnd };
}

function namesOf(args: readonly Code[]): readonly ParameterCode[] {
  return args.flatMap((a) => {
    const inner = a.kind === 'named' ? null : a.kind === 'member' && a.separator === '::' ? a.object : a;
    return inner?.kind === 'name' ? [{ name: inner.text, type: a.kind === 'member' ? a.name : '', start: a.start, end: a.end }] : a.kind === 'named' ? [{ name: a.name, type: '', start: a.start, end: a.end }] : [];
  });
}

/** `#define G 9.81` and `#define SQ(x) ...`; other directives say nothing. */
function directive(token: Token): Code | null {
  const define = /^#\s*define\s+(\w+)(\([^)]*\))?[ \t]*/.exec(token.text);
  if (!define) return null;
  const [head, name = '', parameters] = define;
  const { start, end } = token;
  if (parameters !== undefined) return { kind: 'function', name, parameters: [], returns: '#define', body: null, start, end };
  const from = start + head.length;
  const value: Code | null = from < end ? { kind: 'opaque', what: 'macro', parts: [], start: from, end } : null;
  return { kind: 'declare', name, type: '#define', value, constant: true, start, end };
}
