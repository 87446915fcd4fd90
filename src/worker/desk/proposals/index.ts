/** Edits that put an expansion into a document: after the formula, as the next aligned row, in its place; in code in its place or as a comment. */
import type { ExpandAnswer } from '../../../protocol.ts';
import type { OrderStyle, Place, Proposal, ProposalsRequest } from '../types.ts';
import { displayAround } from './display.ts';
import { importEdits } from './imports.ts';

const COMMENTS: Readonly<Record<string, string>> = { python: '# ', julia: '# ', r: '# ', fortran: '! ', matlab: '% ' };

export function proposals(request: ProposalsRequest): readonly Proposal[] {
  const { text, language, place, answer } = request;
  if (!answer.insertion) return [];
  if (language === 'latex' || language === 'markdown') return inProse(text, place, answer, request.orderStyle);
  return answer.insertion.code ? inCode(text, place, answer, answer.insertion.code.text, language) : [];
}

function inProse(text: string, place: Place, answer: ExpandAnswer, orderStyle: OrderStyle): readonly Proposal[] {
  const continuation = restyled(answer.insertion?.continuation ?? `= ${answer.latex}`, answer, orderStyle);
  const expansion = restyled(answer.insertion?.expansion ?? answer.latex, answer, orderStyle);
  const relation = continuation.startsWith('=') ? '=' : '≈';
  const found: Proposal[] = [];
  const inside = text.slice(place.start, place.end);
  const space = /\s$/.test(inside) ? '' : ' ';
  const after = place.end - (/\s*$/.exec(inside)?.[0].length ?? 0);
  found.push({ kind: 'after', preview: `${relation} ${answer.text}`, edits: [{ start: after, end: after, text: `${space}${continuation}` }] });
  const display = displayAround(text, place.start);
  if (display?.aligned) {
    const rowEnd = display.rowEnd(place.end);
    const relationAt = /^(=|\\approx|\\simeq|\\sim)/.exec(continuation)?.[0] ?? '=';
    const row = `\\\\${display.newline}${display.indent}&${relationAt}${continuation.slice(relationAt.length)}`;
    found.push({ kind: 'row', preview: `${relation} ${answer.text}`, edits: [{ start: rowEnd, end: rowEnd, text: ` ${row}` }] });
  }
  found.push({ kind: 'replace', preview: answer.text, edits: [{ start: place.start, end: after, text: expansion }] });
  return found;
}

/** The remainder as a setting wants it, where it does not follow the document. */
function restyled(latex: string, answer: ExpandAnswer, style: OrderStyle): string {
  const remainder = answer.remainder?.latex;
  if (style === 'auto' || !remainder) return latex;
  const argument = /^[^({]*?(?:\\left)?[({]([^]*?)(?:\\right)?[)}]$/.exec(remainder)?.[1];
  const printed = /\s*\+\s*(?:O|\\mathcal\s*\{?\s*O\s*\}?|\\order|\\bigO|\\Order)\s*(?:\\!|\\,)?\s*(?:\\left\s*)?[({][^]*$/;
  if (argument === undefined || !printed.test(latex)) return latex;
  if (style === 'about') return latex.replace(printed, '').replace(/^=/, '\\approx');
  const term = style === '\\order' ? `\\order{${argument}}` : `${style}(${argument})`;
  return latex.replace(printed, ` + ${term}`);
}

function inCode(text: string, place: Place, answer: ExpandAnswer, code: string, language: string): readonly Proposal[] {
  const needsBrackets = standsInProduct(text, place) && /[+\-*/]/.test(code.slice(1));
  const lineStart = text.lastIndexOf('\n', place.start - 1) + 1;
  const indent = /^[ \t]*/.exec(text.slice(lineStart))?.[0] ?? '';
  const newline = text.includes('\r\n') ? '\r\n' : '\n';
  const comment = `${indent}${COMMENTS[language] ?? '// '}${text.slice(place.start, place.end).replace(/\s+/g, ' ')} = ${answer.text}${newline}`;
  const imports = importEdits(text, answer.insertion?.code?.imports ?? []);
  return [
    { kind: 'polynomial', preview: code, edits: [...imports, { start: place.start, end: place.end, text: needsBrackets ? `(${code})` : code }] },
    { kind: 'comment', preview: answer.text, edits: [{ start: lineStart, end: lineStart, text: comment }] },
  ];
}

/** An operator that binds at least as tightly as plus stands beside the place, so that a sum put there would fall apart. */
function standsInProduct(text: string, { start, end }: Place): boolean {
  const before = /(\S)\s*$/.exec(text.slice(Math.max(0, start - 40), start))?.[1] ?? '';
  const after = /^\s*(\S)/.exec(text.slice(end, end + 40))?.[1] ?? '';
  return '*/-^%.'.includes(before || ' ') || '*/^%.'.includes(after || ' ');
}
