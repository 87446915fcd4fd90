/** Loops of the languages that are read by operator precedence. What is not followed stays opaque, so that nothing in it is taken for straight-line code. */
import type { CodeLanguage } from '../languages/index.ts';
import type { Code, LoopHead } from '../syntax.ts';
import { isCKind } from './families.ts';
import { readOperand } from './operands.ts';
import type { Parser } from './parser.ts';
import type { StatementSource } from './source.ts';
import type { Token } from './tokens.ts';

const LOOPS: Readonly<Record<string, readonly string[]>> = {
  julia: ['for', 'while'],
  matlab: ['for', 'parfor', 'while'],
  r: ['for', 'while', 'repeat'],
  kotlin: ['for', 'while', 'do', 'repeat'],
  swift: ['for', 'while', 'repeat'],
  fortran: ['do'],
};
const C_LOOPS: readonly string[] = ['for', 'while', 'do'];

export const opensLoop = (word: string, language: CodeLanguage): boolean => {
  const words = Object.hasOwn(LOOPS, language.family) ? LOOPS[language.family] : isCKind(language) ? C_LOOPS : [];
  return words?.includes(word) ?? false;
};

/** The loop that `word` opens, at the current place. */
export function readLoop(source: StatementSource, word: string, token: Token): Code {
  const p = source.parser;
  const { family } = p.language;
  const keyword = p.next();
  const made = (head: LoopHead | null, parts: readonly Code[], body: Code): Code => ({ kind: 'opaque', what: `${keyword.text} loop`, parts: [...parts, body], ...(head ? { loop: { head, body } } : {}), start: token.start, end: Math.max(token.end, p.lastEnd) });
  /** Up to the closing `end`. */
  const endBlock = (): Code => {
    const { start } = p.peek();
    const body = source.list(['end']);
    const end = Math.max(start, p.lastEnd);
    if (family === 'fortran') source.skipLine();
    else if (p.isWord('end')) p.next();
    return { kind: 'block', body, start, end };
  };
  if (family === 'fortran') return fortranDo(p, source, endBlock, made);
  const body = family === 'julia' || family === 'matlab' ? endBlock : () => source.arm();
  if (word === 'while') {
    const condition = p.expression();
    return made(null, [condition], body());
  }
  if (word === 'do' || word === 'repeat') {
    // Kotlin's `repeat(n) { ... }`.
    const count = p.is('(') ? [readOperand(p)] : [];
    const inside = source.arm();
    p.skipNewlines();
    if (p.isWord('while')) {
      p.next();
      count.push(p.expression());
    }
    return made(null, count, inside);
  }
  if (isCKind(p.language)) return stepLoop(p, source, made);
  const head = eachHead(p);
  return made(head, head ? [head.over] : [], body());
}

/** `i in a:b`, `(i, c) in enumerate(list)`, `i = a:b`, with or without brackets around the whole. */
function eachHead(p: Parser): (LoopHead & { readonly kind: 'each' }) | null {
  const round = (p.language.family === 'kotlin' || p.language.family === 'r' || (p.language.family === 'matlab' && p.is('('))) && p.take('(');
  const names: string[] = [];
  const pair = p.take('(');
  while (p.peek().kind === 'name' && !p.isWord('in')) {
    names.push(p.next().text);
    if (!pair || p.peek().kind !== 'separator') break;
    p.next();
  }
  if (pair) p.take(')');
  const found = p.isWord('in') || p.is('=') || p.is('∈');
  if (found) p.next();
  let over = p.expression();
  // Kotlin joins ranges by words.
  while (p.isWord('downTo') || p.isWord('until') || p.isWord('step')) {
    const operator = p.next();
    const right = p.expression();
    over = { kind: 'binary', operator: operator.text, operatorStart: operator.start, left: over, right, start: over.start, end: right.end };
  }
  if (round) p.take(')');
  return found && names.length > 0 ? { kind: 'each', names, over } : null;
}

type Made = (head: LoopHead | null, parts: readonly Code[], body: Code) => Code;

/** `for (first; condition; step)`. */
function stepLoop(p: Parser, source: StatementSource, made: Made): Code {
  if (!p.take('(')) return made(null, [], source.arm());
  const first = source.statement();
  p.take(';');
  const condition = p.is(';') ? null : p.expression();
  p.take(';');
  const step = p.is(')') ? null : source.simple();
  const closed = p.take(')');
  const head: LoopHead | null = first && condition && closed ? { kind: 'steps', first, condition, step } : null;
  while (!closed && p.peek().kind !== 'end' && !p.take(')')) p.next();
  return made(head, [first, condition, step].flatMap((part) => (part ? [part] : [])), source.arm());
}

/** `do i = first, last, step`; also `do while (...)`, `do`, `do concurrent (...)`, which are not followed. */
function fortranDo(p: Parser, source: StatementSource, block: () => Code, made: Made): Code {
  const name = p.peek();
  if (name.kind !== 'name' || p.peek(1).text !== '=') {
    source.skipLine();
    return made(null, [], block());
  }
  p.next();
  p.next();
  const first = p.expression();
  const entry = (): Code | null => {
    if (!p.is(',')) return null;
    p.next();
    return p.expression();
  };
  const last = entry();
  const step = entry();
  source.skipLine();
  return made(last ? { kind: 'range', name: name.text, first, last, step } : null, [first, last, step].flatMap((part) => (part ? [part] : [])), block());
}
