/** Names of symbols in one line of Unicode text. The characters are those of the Unicode code charts. */
import { describe, expect, it } from 'vitest';
import { build } from '../../src/expression/index.ts';
import { toUnicode } from '../../src/write/index.ts';

describe('letters with marks', () => {
  const rows: readonly (readonly [string, string])[] = [
    [String.raw`\dot{x}`, '\u1e8b'],
    [String.raw`\ddot{\theta}`, '\u03b8\u0308'],
    [String.raw`\ddot{x}_1`, '\u1e8d\u2081'],
    [String.raw`\bar{x}`, 'x\u0304'],
    [String.raw`\hat{n}`, 'n\u0302'],
    ["y''", 'y\u2033'],
    ["y'''", 'y\u2034'],
    [String.raw`\mathbf{r}'`, '\u{1d42b}\u2032'],
    [String.raw`\hat{\mathbf{n}}`, '\u{1d427}\u0302'],
    [String.raw`\boldsymbol{\xi}`, '\u{1d6cf}'],
    [String.raw`\mathrm{Re}`, 'Re'],
  ];
  for (const [name, wanted] of rows) it(name, () => expect(toUnicode(build.symbol(name))).toBe(wanted));
  it('y″(x)', () => expect(toUnicode({ kind: 'apply', name: 'y', args: [build.symbol('x')], derivatives: [2] })).toBe('y\u2033(x)'));
});
