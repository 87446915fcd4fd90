/** A function that was written for the user goes in front of the function that will call it; the expression becomes the call. One edit for all of it. */
import type { Place, Proposal, ReplacementRequest, TextEdit } from '../types.ts';
import { importEdits } from './imports.ts';

const DEFINITIONS: readonly RegExp[] = [
  /^[ \t]*(?:[\w<>&:*\s]+?\s)?(?:fn|func|fun|def)\s+(\w+)\s*[<(]/m,
  /^[ \t]*(?:export\s+)?function\s+(?:\w+\s*=\s*)?(\w+)\s*\(/m,
  /^[ \t]*(?:pure|elemental|real|double precision)[^\n!]*\bfunction\s+(\w+)\s*\(/im,
  /^[ \t]*(?:export\s+)?(?:const|let)\s+(\w+)\s*=\s*\(/m,
  /^[ \t]*(\w+)\s*<-\s*function\b/m,
  /^[ \t]*(?!\/\/|\*|#|return\b|else\b)[A-Za-z_][\w\s*&:<>,]*?\b(\w+)\s*\([^()]*\)\s*\{?[ \t]*$/m,
];
/** Members live inside a class: the helper stands beside its caller there. */
const IN_CLASS = new Set(['java', 'csharp']);
const CALLER_IN_CLASS = /^[ \t]+(?:(?:public|private|protected|internal|static|final|virtual|override|sealed|async|abstract|synchronized)\s+)+[^;={]*\([^;{]*\)?\s*\{?\s*$/;

export function replacement(request: ReplacementRequest): Proposal {
  const { text, language, place, imports } = request;
  const newline = text.includes('\r\n') ? '\r\n' : '\n';
  const body = withoutImports(request.code, imports);
  const name = DEFINITIONS.map((pattern) => pattern.exec(body)?.[1]).find((found) => found !== undefined);
  const heads = importEdits(text, imports);
  if (!name) return { kind: 'replace', preview: firstLine(body), edits: [...heads, { ...place, text: bracketed(text, place, body.trim()) }] };
  const free = freeName(name, text);
  const renamed = free === name ? body : body.replace(new RegExp(`\\b${name}\\b`, 'g'), free);
  const { at, indent } = placeAbove(text, place, language);
  const helper = renamed
    .trimEnd()
    .split('\n')
    .map((line) => (line.trim() === '' ? '' : `${indent}${line}`))
    .join(newline);
  const call = `${free}(${request.argument})`;
  return { kind: 'helper', preview: call, edits: [...heads, ...insertion(at, `${helper}${newline.repeat(language === 'python' && indent === '' ? 3 : 2)}`), { ...place, text: call }] };
}

const insertion = (at: number, text: string): readonly TextEdit[] => [{ start: at, end: at, text }];
const firstLine = (text: string): string => text.split('\n').find((line) => line.trim() !== '' && !/^\s*(\/\/|#|!|%|--)/.test(line))?.trim() ?? '';

function withoutImports(code: string, imports: readonly string[]): string {
  const lines = code.split('\n');
  const unwanted = new Set(imports.map((line) => line.trim()));
  while (lines.length > 0 && (unwanted.has((lines[0] ?? '').trim()) || (lines[0] ?? '').trim() === '')) lines.shift();
  return lines.join('\n');
}

/** An expression of several terms keeps together in its new surroundings. */
export function bracketed(text: string, { start, end }: Place, code: string): string {
  const before = /(\S)\s*$/.exec(text.slice(Math.max(0, start - 40), start))?.[1] ?? '';
  const after = /^\s*(\S)/.exec(text.slice(end, end + 40))?.[1] ?? '';
  const beside = '*/-^%.'.includes(before || ' ') || '*/^%.'.includes(after || ' ');
  return beside && /[-+*/?]/.test(code.slice(1)) ? `(${code})` : code;
}

/** A name that the file does not use yet. */
function freeName(name: string, text: string): string {
  const used = (candidate: string): boolean => new RegExp(`\\b${candidate}\\b`).test(text);
  if (!used(name)) return name;
  for (let i = 2; ; i += 1) if (!used(`${name}${i}`)) return `${name}${i}`;
}

/** Where the definition that holds the place begins, its own comments included. */
function placeAbove(text: string, place: Place, language: string): { readonly at: number; readonly indent: string } {
  const lines = text.slice(0, place.start).split('\n');
  const begins = IN_CLASS.has(language) ? (line: string): boolean => CALLER_IN_CLASS.test(line) : (line: string): boolean => /^[^\s{}#/*!%]/.test(line) || /^#\[/.test(line);
  let index = lines.length - 1;
  while (index > 0 && !begins(lines[index] ?? '')) index -= 1;
  const comment = (line: string): boolean => /^\s*(\/\/|\/\*|\*|#(?!\s*(?:include|define|if|endif|pragma))|!|%|@|--)/.test(line);
  // A head may be spread over lines (return type, attributes, decorators); its comments belong to it.
  while (index > 0 && (comment(lines[index - 1] ?? '') || (/^[^\s{}#]/.test(lines[index - 1] ?? '') && !/[;}]\s*$/.test(lines[index - 1] ?? '') && begins(lines[index - 1] ?? '') && !/^(import|from|use|using|package)\b/.test(lines[index - 1] ?? '')))) index -= 1;
  return { at: lines.slice(0, index).reduce((total, line) => total + line.length + 1, 0), indent: /^[ \t]*/.exec(lines[index] ?? '')?.[0] ?? '' };
}
