/** Notes: the forms that the design names, and what cannot be read. */
import { describe, expect, it } from 'vitest';
import { readNote, readNotes } from '../../src/worker/desk/notes.ts';

describe('clauses of a note', () => {
  it('reads the note of the documentation', () => {
    expect(readNote(' small x, on |x| <= 0.5, within 1e-6, assume a > 0')).toEqual({
      question: { variable: 'x', point: '0', interval: ['-0.5', '0.5'], tolerance: '1e-6', assume: ['a > 0'] },
      skip: false,
      problem: null,
    });
  });
  it.each([
    ['large n', { variable: 'n', point: 'inf' }],
    ['near x = 1', { variable: 'x', point: '1' }],
    ['near x = \\pi/2 from below', { variable: 'x', point: '\\pi/2', side: 'left' }],
    ['small \\epsilon ~ \\theta^2', { small: ['\\epsilon ~ \\theta^2'] }],
    ['small x and y', { small: ['x', 'y'] }],
    ['small x, on 0 <= x <= 1', { variable: 'x', point: '0', interval: ['0', '1'] }],
    ['small x, on [-1/2, 1/2]', { variable: 'x', point: '0', interval: ['-1/2', '1/2'] }],
    ['large x, on x >= 10', { variable: 'x', point: 'inf', interval: ['10', 'inf'] }],
    ['small \\theta, within 2 %', { variable: '\\theta', point: '0', tolerance: '0.02', measure: 'relative' }],
    ['small x, 3 terms', { variable: 'x', point: '0', terms: 3 }],
    ['small x, to order 7/2', { variable: 'x', point: '0', order: '7/2' }],
    ['small x, assume a > 0, n integer', { variable: 'x', point: '0', assume: ['a > 0', 'n integer'] }],
  ])('%s', (body, question) => {
    const read = readNote(body);
    expect(read.problem).toBeNull();
    expect(read.question).toEqual(question);
  });
  it.each(['', 'small', 'near x', 'on wide', 'within -1', 'within soon', 'small x, small y', 'please expand', 'implements'])('says what is wrong with "%s"', (body) => {
    const read = readNote(body);
    expect(read.problem).toMatch(/\S.*\.$/);
    expect(read.question).toEqual({});
  });
  it('names the equation that code implements', () => expect(readNote('implements eq:sag').implements).toBe('eq:sag'));
  it('skips', () => expect(readNote('skip').skip).toBe(true));
});

describe('where a note may stand', () => {
  it.each([
    ['latex', '% leading-order: small x\n'],
    ['markdown', '<!-- leading-order: small x -->\n'],
    ['python', 'y = 1  # leading-order: small x\n'],
    ['c', '/* leading-order: small x */\n'],
    ['rust', '// leading-order: small x\n'],
    ['fortran', '! leading-order: small x\n'],
    ['matlab', '% leading-order: small x\n'],
  ])('in a comment of %s', (language, text) => {
    const [note, ...more] = readNotes(text, language);
    expect(more).toEqual([]);
    expect(note?.question).toEqual({ variable: 'x', point: '0' });
    expect(text.slice(note?.start, note?.end)).toBe('leading-order: small x');
  });
  it('not outside a comment', () => expect(readNotes('the words leading-order: small x', 'latex')).toEqual([]));
});
