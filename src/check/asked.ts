/** What a request or a note asks for, read: variable, point, function. */
import { build, type Expression } from '../expression/index.ts';
import { type Budget, Declined, type Outcome } from '../outcome.ts';
import { readExact, readExpression, readVariable, type settingsAt } from '../read/index.ts';
import type { CheckParts } from './index.ts';
import type { Asked } from './setting.ts';

export function readAsked(parts: CheckParts, budget: Budget): Asked {
  const variable = parts.variable === undefined ? null : need(readVariable(parts.variable), 'variable');
  return { variable, point: parts.point === undefined ? null : readPoint(parts.point), side: parts.side ?? 'both', assumptions: parts.assumptions ?? [], budget };
}

function readPoint(text: string): Expression | 'inf' | '-inf' {
  const plain = text.replace(/\s/g, '');
  if (/^\+?(?:inf|infinity|∞|\\infty)$/.test(plain)) return 'inf';
  if (/^[-−](?:inf|infinity|∞|\\infty)$/.test(plain)) return '-inf';
  return need(readExact(text), 'point');
}

function need<T>(outcome: Outcome<T>, what: string): T {
  if (!outcome.ok) throw new Declined('bad-request', `The ${what} cannot be read: ${outcome.error.message}`);
  return outcome.value;
}

const PHRASE = /^\s*(?:the\s+)?(first|second|third)?\s*(derivative|integral|antiderivative)\s+of\s+/i;

/** A formula, the right side of an equation, or a derivative or integral in words. */
export function readGiven(text: string, variable: Expression | null): Expression {
  const phrase = PHRASE.exec(text);
  const rest = phrase ? text.slice(phrase[0].length) : text;
  const read = need(readExpression(rest, rest.includes('\\') ? 'latex' : 'plain'), 'function');
  const value = read.kind === 'relation' ? (read.sides.at(-1) ?? read) : read;
  if (!phrase) return value;
  const symbols = symbolsOf(value);
  const by = variable?.kind === 'symbol' ? variable : build.symbol(symbols[0] ?? 'x');
  if (/integral|antiderivative/i.test(phrase[2] ?? '')) return { kind: 'integral', body: value, variable: by };
  const times = phrase[1] === undefined ? 1 : ['first', 'second', 'third'].indexOf(phrase[1].toLowerCase()) + 1;
  return { kind: 'derivative', body: value, variable: by, times };
}

export function withNote(asked: Asked, note: ReturnType<typeof settingsAt>, parts: CheckParts): Asked {
  const variable = asked.variable ?? (note.variable === undefined ? null : valueOf(readVariable(note.variable)));
  const point = asked.point ?? (parts.variable === undefined && note.point !== undefined ? readPoint(note.point) : null);
  return { ...asked, variable, point, side: parts.side ?? note.side ?? 'both' };
}
const valueOf = <T>(outcome: Outcome<T>): T | null => (outcome.ok ? outcome.value : null);

/** Symbols outside of the arguments of unspecified functions. */
export function symbolsOf(e: Expression): readonly string[] {
  const names = new Set<string>();
  const visit = (node: Expression): void => {
    if (node.kind === 'symbol') names.add(node.name);
    else if (node.kind === 'sum') node.terms.forEach(visit);
    else if (node.kind === 'product') node.factors.forEach(visit);
    else if (node.kind === 'quotient') [node.numerator, node.denominator].forEach(visit);
    else if (node.kind === 'negation') visit(node.operand);
    else if (node.kind === 'power') [node.base, node.exponent].forEach(visit);
    else if (node.kind === 'call') node.args.forEach(visit);
    else if (node.kind === 'order') visit(node.argument);
  };
  visit(e);
  return [...names];
}
