/** `leading-order:` notes as the editor needs them: the question they settle, the place, and one sentence where one cannot be read. */
import { type Note, readNotes, type Settings } from '../../read/index.ts';
import type { NoteReading, Question } from './types.ts';

export function noteReadings(text: string, language: string): readonly NoteReading[] {
  return readNotes(text, language).map((note) => {
    const [error] = note.errors;
    const place = error ? { start: error.start, end: Math.max(error.end, error.start + 1) } : { start: note.start, end: note.end };
    const { implements: label, skip } = note.settings;
    return { ...place, question: questionOf(note.settings), skip: skip === true, problem: error?.message ?? null, ...(label === undefined ? {} : { implements: label }) };
  });
}

export const notesOf = (text: string, language: string): readonly Note[] => readNotes(text, language);

export function questionOf(settings: Settings): Question {
  const { variable, small, point, side, interval, tolerance, measure, terms, order, assume } = settings;
  const several = small !== undefined && variable === undefined;
  const question = { ...(several ? { small } : { variable, point }), side, interval, tolerance, measure: measure === 'ulp' ? undefined : measure, terms, order, assume };
  return Object.fromEntries(Object.entries(question).filter(([, value]) => value !== undefined));
}
