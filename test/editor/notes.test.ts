/** Notes as the editor side uses them. The words themselves are tested with the reader. */
import { describe, expect, it } from 'vitest';
import { noteReadings } from '../../src/worker/desk/notes.ts';

describe('notes for the editor', () => {
  it('turns a note into a question', () => {
    const text = '% leading-order: small x, on |x| <= 0.5, within 1e-6, assume a > 0\n\\[ \\sin x \\]\n';
    const [note, ...more] = noteReadings(text, 'latex');
    expect(more).toEqual([]);
    expect(note?.problem).toBeNull();
    expect(note?.question).toMatchObject({ variable: 'x', point: '0', interval: ['-0.5', '0.5'], tolerance: '1e-6', assume: ['a > 0'] });
  });
  it.each([
    ['markdown', '<!-- leading-order: large n -->\n\n$n$\n', { variable: 'n', point: 'inf' }],
    ['python', '# leading-order: near x = 1\ny = x\n', { variable: 'x', point: '1' }],
    ['c', '/* leading-order: small x */\ny = x;\n', { variable: 'x', point: '0' }],
    ['latex', '% leading-order: small \\epsilon ~ \\theta^2\n\\[ \\epsilon + \\theta \\]\n', { small: ['\\epsilon ~ \\theta^2'] }],
  ])('in %s', (language, text, question) => expect(noteReadings(text, language)[0]?.question).toMatchObject(question));
  it('places the words that cannot be read', () => {
    const text = '% leading-order: smll x\n\\[ \\sin x \\]\n';
    const [note] = noteReadings(text, 'latex');
    expect(note?.problem).toMatch(/\S.*\.$/);
    expect(text.slice(note?.start, note?.end)).toContain('smll');
  });
  it('says nothing outside comments', () => expect(noteReadings('the words leading-order: small x', 'latex')).toEqual([]));
});
