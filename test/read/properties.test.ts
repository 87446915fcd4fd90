/** Properties of the formula reader on random text: it always ends with a tree or one sentence, spans nest, and what a span shows reads as the same tree. */
import fc from 'fast-check';
import katex from 'katex';
import { describe, expect, it } from 'vitest';
import { children, type Expression, sameExpression, walk } from '../../src/expression/index.ts';
import { candidates, locate, readDocument, readLatex, readNotes, readPlain } from '../../src/read/index.ts';
import { shown } from './shown.ts';

const PIECES = ['x', 'y', 'a', 'e', 'i', 'f', '\\alpha', '\\epsilon', '2', '10', '.5', '+', '-', '*', '/', '^', '_', '=', '(', ')', '{', '}', '[', ']', '|', ',', '.', '!', "'", '&', '\\\\', '$', '%', '~', '\\frac', '\\sqrt', '\\sin', '\\ln', '\\left(', '\\right)', '\\int', '\\sum', '_{k=1}', '^n', 'dx', '\\,', '\\quad', '\\text{as}', '\\approx', '\\cdots', 'O(x^3)', '\\mathcal{O}', 'J_0', '\\Gamma', '\\binom', '\\begin{cases}', '\\end{cases}', '\\lim', '\\partial', '\\over', 'x²', 'π', '≈', '√', '\\', '#1', '\\begin{align}', '\\end{align}', '\n', '\u{1d465}', '𝒪', '"', '<', '>', '\\to'];
const noise = fc.array(fc.constantFrom(...PIECES), { maxLength: 30 }).map((parts) => parts.join(''));

/** Well-formed formulas whose reading is not ambiguous. */
const atom = fc.constantFrom('x', 'y', '\\alpha', 'a_0', '2', '3', '10', '\\pi', '0.5');
const { formula } = fc.letrec<{ formula: string }>((tie) => ({
  formula: fc.oneof(
    { depthSize: 'small' },
    atom,
    fc.tuple(tie('formula'), fc.constantFrom('+', ' - ', ' \\cdot '), tie('formula')).map(([a, o, b]) => a + o + b),
    fc.tuple(tie('formula'), tie('formula')).map(([a, b]) => `\\frac{${a}}{${b}}`),
    tie('formula').map((a) => `\\sqrt{${a}}`),
    fc.tuple(fc.constantFrom('\\sin', '\\ln', '\\exp', '\\arctan', '\\Gamma'), tie('formula')).map(([f, a]) => `${f}\\left(${a}\\right)`),
    fc.tuple(tie('formula'), tie('formula')).map(([a, b]) => `\\left(${a}\\right)^{${b}}`),
    fc.tuple(tie('formula'), tie('formula')).map(([a, b]) => `\\left(${a}\\right)\\left(${b}\\right)`),
    tie('formula').map((a) => `\\left|${a}\\right|`),
    fc.tuple(tie('formula'), atom).map(([a, n]) => `\\left(${a}\\right)_{n}${n}`),
  ),
}));

describe('on any text', () => {
  it('the formula readers end with a tree or one sentence', () => {
    fc.assert(
      fc.property(noise, (text) => {
        for (const read of [readLatex(text), readPlain(text)]) {
          if (read.ok) spansOfRead(read.value, text.length);
          else {
            expect(read.error.message).toMatch(/^[^\n]+\.$/);
            expect(read.error.start ?? 0).toBeLessThanOrEqual(text.length);
            expect(read.error.end ?? 0).toBeLessThanOrEqual(text.length);
          }
        }
      }),
      { numRuns: 4000, seed: 1 },
    );
  });

  it('the document readers end', () => {
    fc.assert(
      fc.property(noise, fc.nat(40), fc.constantFrom('latex', 'markdown', 'plain', 'c', 'python'), (text, at, language) => {
        const content = readDocument(text, language);
        for (const region of content.regions) {
          expect(region.start <= region.contentStart && region.contentStart <= region.contentEnd && region.contentEnd <= region.end).toBe(true);
        }
        const located = locate(text, language, { start: Math.min(at, text.length), end: Math.min(at, text.length) });
        if (located.ok) candidates(located.value.expression);
        else expect(located.error.message).toMatch(/\.$/);
        readNotes(`leading-order: ${text}`, 'plain');
      }),
      { numRuns: 1500, seed: 2 },
    );
  });
});

/** Constructed parts (the base of a logarithm, branch 0) carry no span; what has one must lie inside the text. */
function spansOfRead(root: Expression, length: number): void {
  expect(root.span).toBeDefined();
  for (const e of walk(root)) {
    if (!e.span) continue;
    expect(e.span.start).toBeGreaterThanOrEqual(0);
    expect(e.span.end).toBeLessThanOrEqual(length);
  }
}

/** KaTeX's own parser; its type declarations leave it out. */
const { __parse: parseWithKatex } = katex as unknown as { readonly __parse: (tex: string) => unknown };

describe('on formulas', () => {
  it('spans nest, and the text of a span reads as the same subtree', () => {
    let compared = 0;
    fc.assert(
      fc.property(formula, (text) => {
        const read = readLatex(text);
        if (!read.ok) return;
        const squareRootExponents = new Set([...walk(read.value)].flatMap((e) => (e.kind === 'power' && e.exponent.span === undefined ? [e.exponent] : [])));
        const placed = [...walk(read.value)].filter((e) => !squareRootExponents.has(e));
        for (const e of placed) {
          expect(e.span).toBeDefined();
          if (!e.span) continue;
          const piece = text.slice(e.span.start, e.span.end);
          const again = readLatex(piece, { symbols: [] });
          expect(again.ok ? shown(again.value) : again.error.message).toBe(shown(e));
          if (again.ok) expect(sameExpression(again.value, e)).toBe(true);
          compared += 1;
        }
        for (const e of placed) for (const child of children(e)) if (child.span && e.span) expect(child.span.start >= e.span.start && child.span.end <= e.span.end).toBe(true);
      }),
      { numRuns: 1000, seed: 3 },
    );
    expect(compared).toBeGreaterThan(4000);
  });

  it('what is accepted, KaTeX accepts too', () => {
    fc.assert(
      fc.property(formula, (text) => {
        const read = readLatex(text);
        if (read.ok) expect(() => parseWithKatex(text)).not.toThrow();
      }),
      { numRuns: 1000, seed: 4 },
    );
  });
});
