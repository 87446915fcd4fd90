/** The last expansions of a page, each with the words that it was about. */
import type * as vscode from 'vscode';
import type { HistoryEntry } from '../webview/messages.ts';
import type { Place, Question } from '../worker/desk/types.ts';
import { shorten } from './words.ts';

const LENGTH = 12;

/** A place in a document and the words that stood there. */
export interface Focus {
  readonly uri: vscode.Uri;
  readonly place: Place;
  readonly text: string;
}
export interface Remembered extends HistoryEntry {
  readonly focus: Focus;
  readonly chosen: Question;
}

/** The present expansion first; one that is asked for again moves to the front. */
export function withRemembered(history: readonly Remembered[], focus: Focus, result: string, chosen: Question): readonly Remembered[] {
  if (focus.text === '') return history;
  const entry: Remembered = { label: shorten(focus.text.replace(/\s+/g, ' '), 80), detail: shorten(result, 120), focus, chosen };
  return [entry, ...history.filter((old) => old.label !== entry.label || old.focus.uri.toString() !== focus.uri.toString())].slice(0, LENGTH);
}

/** The text may have moved: the same words nearest to the old place are meant. Null where they are gone. */
export function placeAgain(text: string, { text: wanted, place }: Focus): Place | null {
  let best: number | null = null;
  for (let at = text.indexOf(wanted); at >= 0; at = text.indexOf(wanted, at + 1)) if (best === null || Math.abs(at - place.start) < Math.abs(best - place.start)) best = at;
  return best === null ? null : { start: best, end: best + wanted.length };
}

/** Where the words stand after the changes; null where a change touched them. */
export function movedAlong(place: Place, changes: readonly vscode.TextDocumentContentChangeEvent[]): Place | null {
  let { start, end } = place;
  for (const { rangeOffset, rangeLength, text } of changes) {
    if (rangeOffset + rangeLength <= start) {
      start += text.length - rangeLength;
      end += text.length - rangeLength;
    } else if (rangeOffset < end) return null;
  }
  return { start, end };
}
