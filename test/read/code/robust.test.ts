/** Reading is total: half-typed, cut, damaged, huge or deeply nested code gives an answer or a failure with one sentence, never an exception. */
import fc from 'fast-check';
import { beforeAll, describe, expect, it } from 'vitest';
import { CodeReader } from '../../../src/read/code/index.ts';
import { PROGRAMS } from './programs.ts';
import { reader } from './reader.ts';

const languages = Object.keys(PROGRAMS);
const fallback = new CodeReader(null);

/** Every question about one text, at one place. */
function ask(own: CodeReader, text: string, language: string, at: number): void {
  const place = Math.min(at, text.length);
  for (const selection of [
    { start: place, end: place },
    { start: Math.max(0, place - 9), end: place },
  ]) {
    const read = own.readCodeAt(text, language, selection);
    if (read.ok) {
      expect(read.value.span.start).toBeGreaterThanOrEqual(0);
      expect(read.value.span.end).toBeLessThanOrEqual(text.length);
    } else expect(read.error.message).toMatch(/^[A-Z].*\.$/s);
  }
  own.readCode(text, language);
}
function askAll(own: CodeReader, text: string, language: string): void {
  for (const comment of own.readComments(text, language)) expect(comment.pieces.every((p) => p.from >= 0 && p.from + p.length <= text.length)).toBe(true);
  for (const branch of own.readBranches(text, language)) expect(branch.span.end).toBeLessThanOrEqual(text.length);
  for (const polynomial of own.readPolynomials(text, language)) expect(polynomial.span.end).toBeLessThanOrEqual(text.length);
}

beforeAll(async () => {
  for (const language of languages) await reader.prepare(language);
});

describe.each(languages)('%s', (language) => {
  const program = PROGRAMS[language] ?? '';
  it('cut at every offset', () => {
    for (let end = 0; end <= program.length; end += 1) {
      const text = program.slice(0, end);
      ask(end % 3 === 0 ? fallback : reader, text, language, end);
      if (end % 17 === 0) askAll(reader, text, language);
    }
  });
  it('with pieces cut out, doubled or replaced', () => {
    const junk = fc.oneof(fc.constantFrom('(', ')', '{', '}', '[', '"', "'", '/*', '*/', '#', '\\', '?', ':', '^', '**', '..', '\n', 'if', 'else', 'end', '&', '%', '<', '1.', '1e', '0x', '𝑥', '√', '\u0000', 'é'), fc.string({ maxLength: 6 }));
    fc.assert(
      fc.property(fc.nat(program.length), fc.nat(12), junk, (start, length, put) => {
        const text = program.slice(0, start) + put + program.slice(start + length);
        ask(reader, text, language, start + put.length);
        askAll(fallback, text, language);
        askAll(reader, text, language);
      }),
      { numRuns: 15, seed: 20261 },
    );
  });
  it('nested 100 000 deep, and very long', () => {
    const thorough = language === 'c' || language === 'julia' || language === 'matlab';
    const deep = ['('.repeat(100_000), `${'('.repeat(100_000)}x${')'.repeat(100_000)}`, 'x^'.repeat(5_000) + 'x'];
    const long = ['-'.repeat(5_000) + 'x', 'x+'.repeat(3_000) + 'x', '{'.repeat(5_000), 'f('.repeat(5_000), '['.repeat(5_000), 'a?'.repeat(2_000), '9'.repeat(30_000), 'if (x) '.repeat(1_000)];
    for (const own of thorough ? [reader, fallback] : [reader]) {
      for (const text of thorough ? [...deep, ...long] : deep) {
        const read = own.readCode(text, language);
        if (!read.ok) expect(read.error.message).toMatch(/^[A-Z].*\.$/s);
      }
    }
  });
});

describe('odd requests', () => {
  it('are failures with a reason', () => {
    expect(reader.readCode('', 'c')).toMatchObject({ ok: false, error: { code: 'unreadable' } });
    expect(reader.readCode('   \n', 'python')).toMatchObject({ ok: false, error: { code: 'unreadable' } });
    expect(reader.readCode('x', 'cobol')).toMatchObject({ ok: false, error: { code: 'bad-request' } });
    expect(reader.readCodeAt('sin(x)', 'c', { start: 99, end: 120 })).toMatchObject({ ok: false });
    expect(reader.readCodeAt('sin(x)', 'c', { start: -5, end: 100 })).toMatchObject({ ok: true });
    expect(reader.readComments('x', 'cobol')).toEqual([]);
  });
});
