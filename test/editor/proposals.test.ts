/** Edits that put a result into a document. */
import { describe, expect, it } from 'vitest';
import type { ExpandAnswer } from '../../src/protocol.ts';
import { proposals } from '../../src/worker/desk/proposals/index.ts';
import type { OrderStyle, TextEdit } from '../../src/worker/desk/types.ts';

const apply = (text: string, edits: readonly TextEdit[]): string => [...edits].sort((a, b) => b.start - a.start).reduce((t, e) => t.slice(0, e.start) + e.text + t.slice(e.end), text);

/** sin x at 0: the series of any handbook. */
const SINE: ExpandAnswer = {
  ok: true,
  terms: [
    { coefficient: '1', power: '1', log: 0 },
    { coefficient: '-1/6', power: '3', log: 0 },
  ],
  remainder: { latex: 'O(x^5)', power: '5', log: 0 },
  exact: false,
  latex: 'x - \\frac{x^3}{6} + O(x^5)',
  text: 'x − x³/6 + O(x⁵)',
  numeric: { syntax: 'mpmath', sum: 'x - x**3/6', scale: 'abs(x)**5', symbols: {} },
  assumptions: [],
  insertion: { continuation: '= x - \\frac{x^3}{6} + O(x^5)', expansion: 'x - \\frac{x^3}{6} + O(x^5)', code: { text: 'x*(1.0 - x*x/6.0)', imports: ['#include <math.h>'] } },
};

function propose(text: string, expression: string, language: string, orderStyle: OrderStyle = 'auto') {
  const start = text.indexOf(expression);
  return proposals({ desk: 'proposals', text, language, place: { start, end: start + expression.length }, answer: SINE, orderStyle });
}
const done = (text: string, expression: string, language: string, kind: string, style: OrderStyle = 'auto'): string => {
  const found = propose(text, expression, language, style).find((p) => p.kind === kind);
  if (!found) throw new Error(`no proposal ${kind}`);
  return apply(text, found.edits);
};

describe('prose', () => {
  it('after the formula', () => expect(done('so $\\sin x$ is', '\\sin x', 'latex', 'after')).toBe('so $\\sin x = x - \\frac{x^3}{6} + O(x^5)$ is'));
  it('in its place', () => expect(done('so $\\sin x$ is', '\\sin x', 'latex', 'replace')).toBe('so $x - \\frac{x^3}{6} + O(x^5)$ is'));
  it('as the next row, before the label', () =>
    expect(done('\\begin{align}\n  y &= \\sin x \\label{eq:y} \\\\\n  z &= 1\n\\end{align}', '\\sin x', 'latex', 'row')).toBe(
      '\\begin{align}\n  y &= \\sin x \\\\\n  &= x - \\frac{x^3}{6} + O(x^5) \\label{eq:y} \\\\\n  z &= 1\n\\end{align}',
    ));
  it('offers no row outside an aligned environment', () => expect(propose('\\[ \\sin x \\]', '\\sin x', 'latex').map((p) => p.kind)).toEqual(['after', 'replace']));
  it.each([
    ['\\mathcal{O}', '$\\sin x = x - \\frac{x^3}{6} + \\mathcal{O}(x^5)$'],
    ['\\order', '$\\sin x = x - \\frac{x^3}{6} + \\order{x^5}$'],
    ['about', '$\\sin x \\approx x - \\frac{x^3}{6}$'],
  ] as const)('writes the remainder as %s', (style, expected) => expect(done('$\\sin x$', '\\sin x', 'latex', 'after', style)).toBe(expected));
});

describe('code', () => {
  it('puts brackets where a product stands beside', () => expect(done('#include <math.h>\ny = 2 * sin(x);\n', 'sin(x)', 'c', 'polynomial')).toBe('#include <math.h>\ny = 2 * (x*(1.0 - x*x/6.0));\n'));
  it('puts none where none are needed', () => expect(done('#include <math.h>\ny = sin(x);\n', 'sin(x)', 'c', 'polynomial')).toBe('#include <math.h>\ny = x*(1.0 - x*x/6.0);\n'));
  it('adds a missing include in the same edit', () => expect(done('y = sin(x);\n', 'sin(x)', 'c', 'polynomial')).toBe('#include <math.h>\ny = x*(1.0 - x*x/6.0);\n'));
  it('comments in the language of the file', () => expect(done('    y = sin(x)\n', 'sin(x)', 'python', 'comment')).toBe('    # sin(x) = x − x³/6 + O(x⁵)\n    y = sin(x)\n'));
});
