import fc from 'fast-check';
import katex from 'katex';
import { describe, expect, it } from 'vitest';
import { build, PLAIN_STYLE, type DocumentStyle, type Expression } from '../../src/expression/index.ts';
import { allFunctions } from '../../src/functions/index.ts';
import { readExpression } from '../../src/read/index.ts';
import { toLatex, toPlain } from '../../src/write/index.ts';
import { canonicalKey } from './canonical.ts';
import { expressions } from './trees.ts';

const STYLES: readonly DocumentStyle[] = [
  PLAIN_STYLE,
  { ...PLAIN_STYLE, fraction: 'slash', logarithm: '\\log', coefficient: 'outside' },
  { ...PLAIN_STYLE, fraction: '\\tfrac', exponential: '\\exp', parentheses: 'plain' },
];
const renders = (latex: string): void => void katex.renderToString(latex, { throwOnError: true, strict: 'error' });

describe('LaTeX', () => {
  it('every tree renders, in every style', () => {
    fc.assert(
      fc.property(expressions(), fc.constantFrom(...STYLES), (tree, style) => {
        renders(toLatex(tree, style));
      }),
      { numRuns: 400 },
    );
  });
  it('every described function renders, alone and squared inside a product', () => {
    for (const d of allFunctions()) {
      const count = typeof d.arity === 'number' ? d.arity : d.arity[0];
      const args = ['a', 'b', 'c', 'd', 'p', 'q'].slice(0, count).map(build.symbol);
      const call = build.call(d.id, ...args);
      renders(toLatex(call));
      renders(toLatex(build.product(build.number(2), build.power(build.call(d.id, ...args.map((a) => build.sum(a, build.quotient(build.number(1), build.symbol('y'))))), 2), build.symbol('z'))));
    }
  });
  it('what is written is read back', () => {
    fc.assert(
      fc.property(expressions(), fc.constantFrom(...STYLES), (tree, style) => {
        expectSame(toLatex(tree, style), tree, 'latex');
      }),
      { numRuns: 1000 },
    );
  });
});

describe('exact strings', () => {
  it('what is written is read back', () => {
    fc.assert(
      fc.property(expressions(), (tree) => {
        expectSame(toPlain(tree), tree, 'plain');
      }),
      { numRuns: 1000 },
    );
  });
});

function expectSame(text: string, tree: Expression, language: 'latex' | 'plain'): void {
  const read = readExpression(text, language, { exact: true, symbols: ['x', 'a', 'b', 'm'] });
  if (!read.ok) throw new Error(`${text}: ${read.error.message}`);
  expect(canonicalKey(read.value), text).toBe(canonicalKey(tree));
}
