import { describe, expect, it } from 'vitest';
import { check, CheckMemory, type CheckParts } from '../../src/check/index.ts';
import { budget } from '../../src/outcome.ts';
import type { Finding } from '../../src/protocol.ts';

function findings(text: string, parts: Partial<CheckParts> = {}): readonly Finding[] {
  const outcome = check({ text, language: 'latex', ...parts }, budget(60_000));
  if (!outcome.ok) throw new Error(outcome.error.message);
  return outcome.value.findings;
}
const failures = (text: string): readonly { readonly under: string; readonly fixed: string | null }[] =>
  findings(text)
    .filter((f) => f.verdict === 'fails')
    .map((f) => ({ under: text.slice(f.start, f.end), fixed: f.fix && text.slice(0, f.fix.start) + f.fix.text + text.slice(f.fix.end) }));

describe('a stated tolerance', () => {
  it('belongs to the nearest claim before it', () => {
    const text = 'We use $\\tanh x = x - x^3/3 + 2x^5/15 + O(x^6)$ and $e^{-x} \\approx 1 - x$ (within 1% for $|x|<0.5$).';
    const stated = findings(text).filter((f) => text.slice(f.start, f.end) === '1%');
    expect(stated).toHaveLength(1);
    expect(stated[0]?.verdict).toBe('fails');
    expect(text.slice(stated[0]?.claim.start, stated[0]?.claim.end)).toBe('e^{-x} \\approx 1 - x');
  });

  it('in a sentence about something else is left alone', () => {
    const text = 'We use $e^{-x} \\approx 1 - x$ here. Our instrument is accurate within 1% for $|x|<0.5$.';
    expect(findings(text).map((f) => f.verdict)).toEqual(['holds']);
  });

  it('in a sentence about the error is judged', () => {
    const text = 'We use $e^{-x} \\approx 1 - x$ here. The relative error is below 1% for $|x|<0.5$.';
    expect(findings(text).map((f) => f.verdict)).toEqual(['holds', 'fails']);
  });
});

/** DLMF 5.11.3: 1 + 1/(12 z) + 1/(288 z^2) - 139/(51840 z^3). */
describe("Stirling's series with words behind it", () => {
  const series = (coefficient: string): string => `\\Gamma(x) \\sim \\sqrt{2\\pi} x^{x-1/2} e^{-x}\\left(1+\\frac{1}{12x}+\\frac{1}{${coefficient}x^2}\\right)`;
  it('holds', () => {
    expect(findings(`${series('288')} as x \\to \\infty`).map((f) => f.verdict)).toEqual(['holds']);
  });
  it.each([[(s: string) => `${s} as x \\to \\infty`], [(s: string) => `$${s}$ as $x \\to \\infty$`], [(s: string) => `\\[${s}\\]`]])('fails at a wrong coefficient', (wrap) => {
    expect(failures(wrap(series('188')))).toEqual([{ under: '188', fixed: wrap(series('288')) }]);
  });
});

describe('a missing term', () => {
  it.each([
    ['$\\sin x = x + \\frac{x^5}{120} + O(x^7)$', '$\\sin x = x - \\frac{x^3}{6} + \\frac{x^5}{120} + O(x^7)$'],
    ['$\\cos x = 1 - x^2/2 - x^6/720 + O(x^8)$', '$\\cos x = 1 - x^2/2 + x^4/24 - x^6/720 + O(x^8)$'],
    ['$e^x = x + \\frac{x^2}{2} + O(x^3)$', '$e^x = 1 + x + \\frac{x^2}{2} + O(x^3)$'],
  ])('%s', (text, fixed) => {
    expect(failures(text)[0]?.fixed).toBe(fixed);
    expect(failures(fixed)).toEqual([]);
  });
});

/** The radius is the distance to the nearest singularity: -1 for log(1 + x), +-i for 1/(1 + x^2), +-2i for 1/(4 + x^2). */
describe('a region of convergence', () => {
  it.each([
    ['\\[\\ln(1+x) = x - x^2/2 + x^3/3 - \\cdots \\quad (|x|<2)\\]', '|x|<2'],
    ['\\[\\ln(1+x) = \\sum_{n=1}^\\infty (-1)^{n+1} x^n/n, \\quad R = 2\\]', 'R = 2'],
    ['$\\frac{1}{1+x^2} = 1 - x^2 + x^4 - \\dots$ for $|x| < 3/2$.', '|x| < 3/2'],
    ['$\\frac{1}{4+x^2} = \\frac14 - \\frac{x^2}{16} + \\dots$ valid for $-3<x<3$.', '-3<x<3'],
  ])('larger than the disc fails: %s', (text, under) => {
    expect(failures(text).map((f) => f.under)).toEqual([under]);
  });
  it.each([
    '\\[\\ln(1+x) = x - x^2/2 + x^3/3 - \\cdots \\quad (|x|<1)\\]',
    '\\[\\ln(1+x) = \\sum_{n=1}^\\infty (-1)^{n+1} x^n/n, \\quad -1 < x \\le 1\\]',
    '\\[\\ln(1+x) = \\sum_{n=1}^\\infty (-1)^{n+1} x^n/n, \\quad R = 1\\]',
    '$\\frac{1}{4+x^2} = \\frac14 - \\frac{x^2}{16} + \\dots$ for $|x| < 3/2$.',
    '$e^x = 1 + x + x^2/2 + \\cdots$ for $|x| < 100$',
  ])('within the disc holds: %s', (text) => {
    expect(findings(text).map((f) => f.verdict)).toEqual(['holds']);
  });
});

describe('memory', () => {
  const lines = [
    '$f(x) = \\sin x$',
    '$f(x) = x - \\frac{x^3}{6} + O(x^5)$',
    '$e^x \\approx 1 + x$ (within 1% for $|x|<0.5$)',
    '$\\cos x = 1 - x^2/3 + O(x^4)$',
    '\\newcommand{\\half}{\\frac12}',
    '$\\cosh x = 1 + \\half x^2 + O(x^4)$',
  ];
  /** Edits at every place, of definitions, of macros, of the words around. */
  const edits: readonly ((all: readonly string[]) => readonly string[])[] = [
    (all) => all,
    (all) => ['A new first line.', ...all],
    (all) => all.map((line) => line.replace('\\sin x', '\\tan x')),
    (all) => all.map((line) => line.replace('{\\frac12}', '{\\frac13}')),
    (all) => all.map((line) => line.replace('1%', '30%')),
    (all) => all.map((line) => line.replace('x^2/3', 'x^2/2')),
    (all) => all.filter((_, i) => i !== 0),
    (all) => all,
  ];
  it('never changes a finding', () => {
    const memory = new CheckMemory();
    for (const edit of edits) {
      const text = edit(lines).join('\n\n');
      expect(findings(text, { memory })).toEqual(findings(text));
    }
  });

  it('judges only what an edit touches', () => {
    const memory = new CheckMemory();
    const document = (end: string): string => `${Array.from({ length: 60 }, (_, i) => `Part ${i} of the text speaks of this: $\\sin(${i + 1}x) = ${i + 1}x - \\frac{${(i + 1) ** 3}x^3}{6} + O(x^5)$`).join('\n\n')}\n\n${end}`;
    const time = (text: string): number => {
      const before = process.cpuUsage();
      findings(text, { memory });
      const { user, system } = process.cpuUsage(before);
      return user + system;
    };
    const cold = time(document('End.'));
    expect(time(document('The end.'))).toBeLessThan(cold / 2);
  });
});
