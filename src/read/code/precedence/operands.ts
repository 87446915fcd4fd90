/** Operands: literals, names, brackets, casts, choices and functions without name. */
import type { Code } from '../syntax.ts';
import { readEntries, readParameters, skipNested } from './brackets.ts';
import { hasValuedChoices, isCKind } from './families.ts';
import { LEVEL } from './levels.ts';
import type { Parser } from './parser.ts';
import { isOperandName, type Token } from './tokens.ts';

/** An operand without what follows it; an opaque node of no width where none stands. */
export function readOperand(p: Parser): Code {
  const token = p.peek();
  switch (token.kind) {
    case 'number':
      p.next();
      return { kind: 'literal', text: token.text, start: token.start, end: token.end };
    case 'text':
      p.next();
      return { kind: 'opaque', what: 'text', parts: [], start: token.start, end: token.end };
    case 'name':
      return readWord(p, token);
    case 'open':
      return readBracketed(p, token);
    case 'operator':
      return readSign(p, token);
    default:
      return missing(token);
  }
}

/** A name, or what a word opens: a choice or a function without name. */
function readWord(p: Parser, token: Token): Code {
  const word = p.language.foldCase ? token.text.toLowerCase() : token.text;
  if (!isOperandName(word) && p.language.family !== 'fortran') return missing(token);
  if (word === 'if' && hasValuedChoices(p.language)) return readChoice(p, token);
  if (word === 'function' && p.language.family === 'r') {
    p.next();
    const parameters = readParameters(p);
    p.skipNewlines();
    const body = readBlock(p) ?? p.expression();
    return { kind: 'lambda', parameters, body, start: token.start, end: body.end };
  }
  p.next();
  if (p.language.juxtaposition && p.is('->')) {
    p.next();
    const body = p.expression();
    return { kind: 'lambda', parameters: [{ name: token.text, type: '', start: token.start, end: token.end }], body, start: token.start, end: body.end };
  }
  return { kind: 'name', text: token.text.replace(/^`|`$/g, ''), start: token.start, end: token.end };
}

/** `if condition value else value` as an expression, where the language has it. */
function readChoice(p: Parser, token: Token): Code {
  p.next();
  const round = p.language.family === 'kotlin' || p.language.family === 'r';
  const condition = round && p.is('(') ? readBracketed(p, p.peek()) : p.expression();
  p.skipNewlines();
  const then = readArm(p, ['else', 'elseif', 'end']);
  const before = p.position;
  p.skipNewlines();
  if (p.isWord('elseif')) {
    const otherwise = readChoice(p, p.peek());
    return { kind: 'if', condition, then, otherwise, start: token.start, end: p.lastEnd };
  }
  if (p.isWord('else')) {
    p.next();
    p.skipNewlines();
    const otherwise = readArm(p, ['end']);
    if (p.language.family === 'julia' && p.isWord('end')) p.next();
    return { kind: 'if', condition, then, otherwise, start: token.start, end: p.lastEnd };
  }
  if (p.language.family === 'julia' && p.isWord('end')) p.next();
  else p.position = before;
  return { kind: 'if', condition, then, otherwise: null, start: token.start, end: p.lastEnd };
}

/** A block in braces read as statements, or null. */
export function readBlock(p: Parser): Code | null {
  if (!p.is('{') || !p.statements) return null;
  const { statements } = p;
  const { start } = p.next();
  const body = p.lineByLine(() => statements(['}']));
  p.take('}');
  return { kind: 'block', body, start, end: p.lastEnd };
}

/** One side of a choice. */
function readArm(p: Parser, stops: readonly string[]): Code {
  const block = readBlock(p);
  if (block) return block;
  if (p.language.family !== 'julia' || !p.statements) return p.expression();
  const start = p.peek().start;
  const body = p.statements(stops);
  return { kind: 'block', body, start, end: Math.max(start, p.lastEnd) };
}

/** A block, a cast, a list or a group. */
function readBracketed(p: Parser, token: Token): Code {
  if (token.text === '{') return readBlock(p) ?? skipNested(p);
  const cast = readCast(p, token);
  if (cast) return cast;
  const square = token.text === '[' || token.text === '(/';
  const items = readEntries(p);
  const [only] = items;
  if (square || !only || items.length !== 1 || only.kind === 'named') return { kind: 'list', items, start: token.start, end: p.lastEnd };
  return { kind: 'group', inner: only, start: token.start, end: p.lastEnd };
}

/** `(float)x` in languages of the C kind. */
function readCast(p: Parser, token: Token): Code | null {
  const { floatTypes, integerTypes } = p.language;
  if (token.text !== '(' || !isCKind(p.language)) return null;
  const [type, close, after] = [p.peek(1), p.peek(2), p.peek(3)];
  if (type.kind !== 'name' || close.text !== ')' || !(Object.hasOwn(floatTypes, type.text) || integerTypes.includes(type.text))) return null;
  if (!(after.kind === 'name' || after.kind === 'number' || after.text === '(' || (after.kind === 'operator' && /^[-+]$/.test(after.text)))) return null;
  p.next();
  p.next();
  p.next();
  const operand = after.kind === 'operator' ? p.prefix(LEVEL.unary) : p.postfix();
  return { kind: 'cast', type: type.text, operand, start: token.start, end: operand.end };
}

/** What a sign opens: a logical constant, a root sign, an implicit member, a function without name. */
function readSign(p: Parser, token: Token): Code {
  if (/^\.(?:true|false)\.$/i.test(token.text)) {
    p.next();
    return { kind: 'name', text: token.text, start: token.start, end: token.end };
  }
  if (/^[√∛]$/.test(token.text)) {
    p.next();
    const operand = p.postfix();
    return { kind: 'unary', operator: token.text, operand, start: token.start, end: operand.end };
  }
  if (token.text === '.' && p.peek(1).kind === 'name') {
    p.next();
    const name = p.next();
    return { kind: 'name', text: `.${name.text}`, start: token.start, end: name.end };
  }
  if ((token.text === '@' && p.language.family === 'matlab') || (token.text === '\\' && p.language.family === 'r')) {
    p.next();
    if (!p.is('(')) {
      const inner = p.postfix();
      return p.opaque(token.start, 'function handle', [inner]);
    }
    const parameters = readParameters(p);
    const body = p.expression();
    return { kind: 'lambda', parameters, body, start: token.start, end: body.end };
  }
  return missing(token);
}

const missing = (token: Token): Code => ({ kind: 'opaque', what: 'missing operand', parts: [], start: token.start, end: token.start });
