/** Files of 5 000 lines. The aim after loading is 100 ms for the expression at a cursor; five times that is asserted on processor time, median of 3. */
import { beforeAll, describe, expect, it } from 'vitest';
import { PROGRAMS } from './programs.ts';
import { reader } from './reader.ts';

const LINES = 5_000;

function long(language: string): string {
  const unit = PROGRAMS[language] ?? '';
  const copies = Math.ceil(LINES / unit.split('\n').length);
  return Array.from({ length: copies }, () => unit).join('\n');
}

describe.each(['c', 'python', 'rust', 'java', 'julia', 'fortran', 'glsl'])('%s', (language) => {
  beforeAll(() => reader.prepare(language));
  it('answers at a cursor in the middle', () => {
    const text = long(language);
    const place = text.indexOf('sin', text.length >> 1);
    const times = Array.from({ length: 3 }, (_, i) => {
      const own = text + ' '.repeat(i);
      const before = process.cpuUsage();
      reader.readCodeAt(own, language, { start: place, end: place });
      const { user, system } = process.cpuUsage(before);
      return (user + system) / 1000;
    }).sort((a, b) => a - b);
    console.info(`${language}: ${Math.round(times[1] ?? 0)} ms`);
    expect(times[1]).toBeLessThan(500);
  });
});
