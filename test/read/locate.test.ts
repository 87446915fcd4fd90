/** The expression at a cursor or selection, its candidates, and notes. `‸` marks the cursor, two of them a selection. The rules are this project's own. */
import { describe, expect, it } from 'vitest';
import { candidates, locate, ratiosOf, readLatex, readNotes, settingsAt } from '../../src/read/index.ts';
import { shown } from './shown.ts';

function at(marked: string, language = 'latex') {
  const first = marked.indexOf('‸');
  const second = marked.indexOf('‸', first + 1);
  const text = marked.replaceAll('‸', '');
  const found = locate(text, language, { start: first, end: second < 0 ? first : second - 1 });
  return { text, found };
}
const located = (marked: string, language?: string): string => {
  const { text, found } = at(marked, language);
  return found.ok ? text.slice(found.value.start, found.value.end) : `${found.error.code}: ${found.error.message}`;
};
const variable = (marked: string, language?: string): string => {
  const { found } = at(marked, language);
  if (!found.ok) return found.error.message;
  const { expression, context } = found.value;
  const expansions = context.formula.kind === 'relation' ? context.formula.sides.filter((s) => s !== expression) : [];
  const result = candidates(expression, { orders: context.orders, conditions: context.conditions, before: context.before, after: context.after, expansions });
  return result.found ? `${result.found.variable.name} -> ${shown(result.found.point)}` : `? ${result.list.map((c) => c.name).join(', ')}`;
};

describe('locate', () => {
  it.each([
    ['$\\frac{\\sin ‸x}{x}$', '\\frac{\\sin x}{x}'],
    ['$\\tan x - \\sin ‸x$', '\\tan x - \\sin x'],
    ['$\\cos x = 1 - \\frac{x^2}{2} + O(x‸^4)$', '\\cos x'],
    ['$E_0 = \\frac12\\hbar\\omega\\sqrt{1+‸\\epsilon}$', '\\frac12\\hbar\\omega\\sqrt{1+\\epsilon}'],
    ['$‸f(x) = e^x$', 'e^x'],
    ['$E = \\frac{p^2}{2m} + U\\left(\\frac{1}{\\sqrt{1-v^2‸/c^2}} - 1\\right)$', 'U\\left(\\frac{1}{\\sqrt{1-v^2/c^2}} - 1\\right)'],
    ['$a ‸\\sin x‸ + \\cos y$', '\\sin x'],
    ['‸$\\sin x$‸', '\\sin x'],
    ['‸\\frac{1}{x}', '\\frac{1}{x}'],
    ['\\begin{align} f &= \\ln(1+x) \\\\ g &= \\sqrt{1+x}‸ \\end{align}', '\\sqrt{1+x}'],
    ['\\begin{align} f &= ‸\\ln(1+x) \\\\ g &= \\sqrt{1+x} \\end{align}', '\\ln(1+x)'],
    ['$t^5 - \\epsilon t^3 + \\epsilon^3 =‸ 0$', 't^5 - \\epsilon t^3 + \\epsilon^3 = 0'],
    ['words ‸ and $x$', 'bad-request: There is no formula at the cursor; put it into a formula or select one.'],
    ['$x‸$', 'bad-request: There is nothing to expand at the cursor; select a function or a quotient.'],
    ['$\\frac{1}{‸$', 'unreadable: The brace opened here is never closed; close it with }.'],
  ])('%s', (marked, expected) => {
    expect(located(marked)).toBe(expected);
  });
  it('delegates code, also in fenced blocks', () => {
    expect(located('double y = (1.0 - cos(‸x)) / (x*x);', 'c')).toBe('(1.0 - cos(x)) / (x*x)');
    expect(located('# T\n\n```python\ny = np.sqrt(1 + ‸x)*np.exp(-x)\n```\n', 'markdown')).toBe('np.sqrt(1 + x)*np.exp(-x)');
    expect(located('see $\\sin ‸x/x$', 'markdown')).toBe('\\sin x/x');
    expect(located('sin(x‸)/x', 'plain')).toBe('sin(x)/x');
  });
  it('gives the side, the orders and the O of the document', () => {
    const { found } = at('\\newcommand{\\ord}[1]{\\mathcal{O}(#1)} $\\cos‸ x = 1 + \\ord{x^2}$');
    expect(found.ok && [found.value.context.side, found.value.context.orders.map(shown), found.value.context.orderMacro]).toEqual([0, ['O(x^2)'], '\\ord']);
  });
  it('decides what e means by the formula around a selection', () => {
    const { found } = at('$1 + e\\cos\\theta + ‸e^2‸$');
    expect(found.ok && shown(found.value.expression)).toBe('e^2');
  });
});

describe('candidates', () => {
  it.each([
    ['$\\frac{\\sin ‸x}{x}$', 'x -> 0'],
    ['$\\sin(a‸x) = ax + O(x^3)$', 'x -> 0'],
    ['$\\ln(n‸+a) = \\ln n + O(1/n)$', 'n -> #infinity'],
    ['$\\arcsin ‸x = \\frac{\\pi}{2} + O((x-1)^{1/2})$', 'x -> 1'],
    ['$\\frac{1}{\\sqrt{1-v^2‸/c^2}}$', 'v/c -> 0'],
    ['$m c^2\\left(‸\\frac{1}{\\sqrt{1-v^2/c^2}} - 1\\right)$', 'v/c -> 0'],
    ['$\\exp\\left(\\frac{\\hbar\\omega}{k_B T}\\right) ‸- 1$', '\\frac{\\hbar\\omega}{k_B T} -> 0'],
    ['$L\\sqrt{1 + (r_n/L)^2}‸$', 'r_n/L -> 0'],
    ['$\\frac12\\hbar\\omega\\sqrt{1+‸\\epsilon}$', '\\epsilon -> 0'],
    ['$\\sqrt{\\frac{1+v^2}{1+‸u^2}}$', '? v, u'],
    ['$\\sin(a‸x)$ for small $x$', 'x -> 0'],
    ['For large $n$: $\\ln(n + ‸a)$', 'n -> #infinity'],
    ['$\\sqrt{x^2+a^2}‸$ where $a \\ll x$', 'a -> 0'],
    ['$\\sin(a‸x), \\quad a \\to 0$', 'a -> 0'],
    ['$\\ln ‸n! = n\\ln n - n + \\dots$', 'n -> #infinity'],
    ['$\\sqrt{x^2+x}‸ = x + \\frac12 - \\frac{1}{8x} + \\dots$', 'x -> #infinity'],
  ])('%s', (marked, expected) => {
    expect(variable(marked)).toBe(expected);
  });
  it('keeps the side that a condition states', () => {
    const { found } = at('$\\sqrt{‸x + a}, \\quad x \\to 0^+$');
    const result = found.ok ? candidates(found.value.expression, { conditions: found.value.context.conditions }).found : null;
    expect(result && [result.variable.name, shown(result.point), result.side]).toEqual(['x', '0', 'right']);
  });
  it('finds ratios only where a symbol occurs in no other way', () => {
    const ratios = (text: string): string[] => {
      const read = readLatex(text);
      return read.ok ? ratiosOf(read.value).map((r) => r.name) : [];
    };
    expect(ratios('\\sqrt{1-\\frac{2GM}{rc^2}}')).toEqual(['\\frac{GM}{rc^2}']);
    expect(ratios('\\frac{g}{(1+h/R)^2}')).toEqual(['h/R']);
    expect(ratios('v + c + \\sqrt{1+v/c}')).toEqual([]);
  });
});

describe('notes', () => {
  const settings = (text: string, language: string) => readNotes(text, language).map((n) => [n.scope, Object.fromEntries(Object.entries(n.settings).filter(([key]) => !/Expression$|^assumptions$|^quantities$/.test(key))), n.errors.map((e) => text.slice(e.start, e.end))]);
  it.each([
    ['% leading-order: small x, on |x| <= 0.5, within 1e-6, assume a > 0\n$\\sin x$', 'latex', { small: ['x'], variable: 'x', point: '0', interval: ['-0.5', '0.5'], tolerance: '1e-6', assume: ['a > 0'] }],
    ['text\n\n<!-- leading-order: large n, terms 4 -->\n$n!$', 'markdown', { variable: 'n', point: 'inf', terms: 4 }],
    ['x = 1\n# leading-order: near x = 1, from the right, to order 6\ny = log(x)', 'python', { variable: 'x', point: '1', side: 'right', order: '6' }],
    ['int a;\n/* leading-order: small \\epsilon ~ \\theta^2 */\ny;', 'c', { small: ['\\epsilon ~ \\theta^2'] }],
    ['int a;\n// leading-order: implements eq:sag\ny;', 'cpp', { implements: 'eq:sag' }],
    ['a\n! leading-order: on [0, pi/4], within 2 ulp, binary32\ny', 'fortran', { interval: ['0', 'pi/4'], tolerance: '2', measure: 'ulp', format: 'binary32' }],
    ['a\n% leading-order: skip\n$x$', 'latex', { skip: true }],
    ['a;\n// leading-order: small x, y, within 0.1 %\nb;', 'javascript', { small: ['x', 'y'], point: '0', tolerance: '1/1000', measure: 'relative' }],
    ['a;\n// leading-order: on 0 <= x <= \\pi/4, assume n integer, m real\nb;', 'java', { interval: ['0', '\\pi/4'], assume: ['n integer', 'm real'] }],
    ['a;\n// leading-order: on x >= 10, order 7/2\nb;', 'go', { interval: ['10', 'inf'], order: '7/2' }],
  ] as const)('%s', (text, language, expected) => {
    expect(settings(text, language)).toEqual([['next', expected, []]]);
  });
  it('marks the words that cannot be read and keeps the others', () => {
    const text = '// leading-order: smal x, on x, within foo, terms zero, small y\nz;';
    expect(settings(text, 'c')).toEqual([['next', { small: ['y'], variable: 'y', point: '0' }, ['smal', 'x', 'foo', 'zero']]]);
    for (const note of readNotes(text, 'c')) for (const error of note.errors) expect(error.message).toMatch(/^[^\n]{20,200}\.$/);
  });
  it('is not fooled by strings, and asks for words where there are none', () => {
    expect(readNotes('s = "// leading-order: skip";', 'javascript')).toEqual([]);
    expect(readNotes('// leading-order:\n', 'c')[0]?.errors.length).toBe(1);
  });
  it('lets the note above win over the head of the file', () => {
    const text = '% leading-order: small x, within 1e-3\n\n\\section{A}\n$\\sin x$\n\n% leading-order: within 1e-6\n$\\cos x$\n\n$\\tan x$\n';
    const notes = readNotes(text, 'latex');
    expect(notes.map((n) => n.scope)).toEqual(['file', 'next']);
    expect(settingsAt(notes, text.indexOf('\\sin'))).toMatchObject({ variable: 'x', tolerance: '1e-3' });
    expect(settingsAt(notes, text.indexOf('\\cos'))).toMatchObject({ variable: 'x', tolerance: '1e-6' });
    expect(settingsAt(notes, text.indexOf('\\tan'))).toMatchObject({ variable: 'x', tolerance: '1e-3' });
  });
});
