/**
 * Notes to the tool: comments that start with `leading-order:` and speak in plain words,
 * `leading-order: small x, on |x| <= 0.5, within 1e-6, assume a > 0`.
 * A note serves the next formula; at the head of a file it serves the file.
 */
import type { Failure } from '../protocol.ts';
import { type Comment, findComments, readDocument } from './document/index.ts';
import { languageOf } from './languages.ts';
import { readWords, type Settings } from './noteWords.ts';

export type { Settings } from './noteWords.ts';

export interface Note {
  /** The comment. */
  readonly start: number;
  readonly end: number;
  /** The words behind `leading-order:`. */
  readonly contentStart: number;
  readonly contentEnd: number;
  readonly settings: Settings;
  /** Words that could not be read, with their places in the document. */
  readonly errors: readonly (Failure & { readonly start: number; readonly end: number })[];
  /** `file`: at the head, in force until the next of its kind; `next`: for the next formula. */
  readonly scope: 'file' | 'next';
  /** Where a `next` note stops being in force: the end of the formula or statement that follows it. */
  readonly until: number;
}

const KEY = /leading-order\s*:/i;

/** All notes of a document, in order. */
export function readNotes(text: string, language: string, fileName?: string): readonly Note[] {
  if (!KEY.test(text)) return [];
  const entry = languageOf(language, fileName);
  const content = entry.reader === 'code' ? null : readDocument(text, language, fileName === undefined ? {} : { fileName });
  const comments: readonly Comment[] = content ? content.comments : findComments(text, entry);
  const places = content ? content.regions.map((r) => ({ start: r.start, end: r.end })) : null;
  const out: Note[] = [];
  for (const comment of comments) {
    const inside = text.slice(comment.contentStart, comment.contentEnd);
    const key = KEY.exec(inside);
    if (!key || inside.slice(0, key.index).replace(/[\s*!#/%-]/g, '') !== '') continue;
    const contentStart = comment.contentStart + key.index + key[0].length;
    const last = out[out.length - 1];
    const { settings, errors } = readWords(text, contentStart, comment.contentEnd);
    const head = isHead(text, comment, comments, places, last);
    const until = head ? text.length : endOfNext(text, comment.end, places);
    out.push({ start: comment.start, end: comment.end, contentStart, contentEnd: comment.contentEnd, settings, errors, scope: head ? 'file' : 'next', until });
  }
  return out;
}

/** A note stands at the head if only comments, blank lines, and the first lines that every file has (preamble, front matter, a shebang) come before it and a blank line or another head note follows. */
function isHead(text: string, comment: Comment, comments: readonly Comment[], places: readonly { readonly start: number; readonly end: number }[] | null, previous: Note | undefined): boolean {
  if (previous?.scope === 'next') return false;
  const before = blanked(text, 0, comment.start, comments);
  const lead = before.replace(/^\s*---\n[\s\S]*?\n---\s*\n/, '').replace(/^\s*(?:#!.*\n|#.*coding.*\n)/, '');
  const preamble = places !== null && /\\documentclass/.test(lead) && !/\\begin\s*\{document\}/.test(lead);
  if (lead.trim() !== '' && !preamble) return false;
  if (preamble) return true;
  const behind = text.slice(comment.end);
  return /^[ \t]*\r?\n[ \t]*(?:\r?\n|$)/.test(behind) || /^\s*$/.test(behind) || /^\s*(?:[/%#!*<\-{}=]+\s*)leading-order\s*:/i.test(behind) || /^\s*(?:\\documentclass|\\usepackage|\\begin\s*\{document\}|#include|import |from |package |using |use )/.test(behind);
}

/** The text before `to` with comments taken out. */
function blanked(text: string, from: number, to: number, comments: readonly Comment[]): string {
  let out = '';
  let at = from;
  for (const c of comments) {
    if (c.start >= to) break;
    out += text.slice(at, c.start);
    at = c.end;
  }
  return out + text.slice(at, Math.max(at, to));
}

/** End of the first formula behind the note, or in code of the statement behind it (the next line that is not blank, up to a blank line). */
function endOfNext(text: string, from: number, places: readonly { readonly start: number; readonly end: number }[] | null): number {
  if (places) return places.find((p) => p.start >= from)?.end ?? text.length;
  const lines = /^[^\n]*\n?\s*/.exec(text.slice(from))?.[0].length ?? 0;
  const blank = /\n[ \t]*\r?\n/.exec(text.slice(from + lines));
  return blank ? from + lines + blank.index : text.length;
}

/** What is in force at an offset: the note directly above (or around), over the last note at the head of the file. Its own fields win one by one. */
export function settingsAt(notes: readonly Note[], offset: number): Settings {
  let settings: Settings = {};
  for (const note of notes) if (note.scope === 'file' && note.start <= offset) settings = { ...settings, ...note.settings };
  const head = notes.find((n) => n.scope === 'file');
  // A note at the head serves the whole file, also what stands before it.
  if (head && head.start > offset) settings = { ...head.settings };
  for (const note of notes) if (note.scope === 'next' && note.start <= offset && offset <= note.until && !laterStart(notes, note, offset)) settings = { ...settings, ...note.settings };
  return settings;
}
/** Notes on neighbouring lines add up; a note whose formula lies before a later note's is over. */
const laterStart = (notes: readonly Note[], note: Note, offset: number): boolean => notes.some((n) => n.scope === 'next' && n.start > note.start && n.start <= offset && n.until !== note.until);
