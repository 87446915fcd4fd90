import { describe, expect, it } from 'vitest';
// @ts-expect-error a plain script without types, shared by `npm start` and `npm test`
import { nodeIsSupported } from '../../src/start/requireNode.mjs';

describe('supported Node versions', () => {
  it.each([
    ['20.19.0', true],
    ['20.18.9', false],
    ['20.20.2', true],
    ['21.5.0', false],
    ['22.12.0', false],
    ['22.13.0', true],
    ['23.1.0', false],
    ['24.0.0', true],
    ['26.1.0', true],
    ['18.20.0', false],
  ])('%s: %s', (version, expected) => {
    expect(nodeIsSupported(version)).toBe(expected);
  });
});
