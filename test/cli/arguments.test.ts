import { describe, expect, it } from 'vitest';
import { readArguments, requestOf, splitInterval, splitIntervals } from '../../src/cli/arguments.ts';
import { validateRequest } from '../../src/engine/validate.ts';

/** The request of a command line with one text, as the engine takes it. */
function requestFrom(...argv: readonly string[]): Readonly<Record<string, unknown>> {
  const line = readArguments(argv);
  if (!line.ok || line.value.command !== 'fit') throw new Error('no fit');
  return requestOf('fit', line.value.operands[0] ?? '', line.value.values);
}

describe('options of fit', () => {
  it('are those of the protocol', () => {
    const request = requestFrom('fit', 'atan2(y, x)', '-l', 'plain', '--intervals', 'y: 0, 1; x: max(1, 2), 3', '--tolerance', '1e-6', '--reduction', 'always', '--words', '2', '--exact', '1', '--assertion');
    expect(request).toMatchObject({ ask: 'fit', intervals: { y: ['0', '1'], x: ['max(1, 2)', '3'] }, reduction: 'always', words: 2, exact: 1, assertion: true });
    expect(request).not.toHaveProperty('interval');
    expect(validateRequest(request).ok).toBe(true);
  });
  it.each([
    [['--words', 'two'], /words/],
    [['--words', '3'], /words/],
    [['--exact', '99'], /exact/],
    [['--reduction', 'maybe'], /reduction/],
    [['--intervals', 'x: 1'], /intervals/],
    [['--intervals', ''], /intervals/],
    [['--intervals', 'x: 0, 1; y: 0, 1; z: 0, 1'], /intervals/],
  ] as const)('%j is refused with the name of the option', (more, says) => {
    const request = requestFrom('fit', 'sin(x)', '-l', 'plain', '--interval', '0, 1', '--degree', '5', ...more);
    const found = validateRequest(request);
    expect(found.ok ? '' : found.error.message).toMatch(says);
  });
  it('an option that does not exist is named', () => {
    const line = readArguments(['fit', 'sin(x)', '--word', '2']);
    expect(line.ok ? '' : line.error.message).toMatch(/--word/);
  });
});

describe('intervals', () => {
  it('are parted at commas outside parentheses, with or without brackets', () => {
    expect(splitInterval('[-1/2, f(1, 2)]')).toEqual(['-1/2', 'f(1, 2)']);
    expect(splitIntervals(' a: [0, 1] ;')).toEqual({ a: ['0', '1'] });
  });
});
