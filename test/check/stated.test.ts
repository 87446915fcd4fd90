import { describe, expect, it } from 'vitest';
import { check } from '../../src/check/index.ts';
import { budget } from '../../src/outcome.ts';
import type { Finding } from '../../src/protocol.ts';

function findings(text: string, language = 'latex'): readonly Finding[] {
  const outcome = check({ text, language }, budget(60_000));
  if (!outcome.ok) throw new Error(outcome.error.message);
  return outcome.value.findings;
}
/** What is said about the stated accuracy: the place and the verdict. */
const judged = (text: string, language?: string): readonly (readonly [string, string])[] =>
  findings(text, language)
    .filter((f) => f.start !== f.claim.start)
    .map((f) => [text.slice(f.start, f.end), f.verdict]);

/**
 * Largest errors, by the elementary functions at the worst end: cos 0.3 with two terms behind the 1: 1.01e-6; sin 0.3: 1.52 %; sqrt 1.2: 0.415 %, sqrt 1.4: 1.42 %;
 * cos 0.4 with one: 1.06e-3, cos 0.3: 3.36e-4, cos 0.5: 0.294 %; e: 0.0516; sin 14 degrees: 1.00 %; tan 0.8: 0.0590; e^0.5: 0.0237.
 */
describe('a stated accuracy', () => {
  it.each([
    ['With error below $10^{-7}$ for $|x|\\le 0.3$ we use $\\cos x \\approx 1 - \\frac{x^2}{2} + \\frac{x^4}{24}$.', '10^{-7}', 'fails'],
    ['With error below $10^{-5}$ for $|x|\\le 0.3$ we use $\\cos x \\approx 1 - \\frac{x^2}{2} + \\frac{x^4}{24}$.', '10^{-5}', 'holds'],
    ['For $|x| < 0.3$ the approximation $\\cos x \\approx 1 - \\frac{x^2}{2} + \\frac{x^4}{24}$ is accurate to $10^{-5}$.', '10^{-5}', 'holds'],
    ['\\[ \\sin\\theta \\approx \\theta \\] to within 1\\,\\% for $\\theta < 0.3$.', '1\\,\\%', 'fails'],
    ['\\[ \\sin\\theta \\approx \\theta \\] to within 2\\,\\% for $\\theta < 0.3$.', '2\\,\\%', 'holds'],
    ['With $\\theta < 14^\\circ$, $\\sin\\theta \\approx \\theta$ to within 0.5\\,\\%.', '0.5\\,\\%', 'fails'],
    ['$\\sin\\theta \\approx \\theta$ to within 1.1\\,\\% for $\\theta < 14^\\circ$.', '1.1\\,\\%', 'holds'],
    ['The relative error of $\\sqrt{1+x} \\approx 1 + x/2$ is at most 0.1\\% for $0 \\le x \\le 0.2$.', '0.1\\%', 'fails'],
    ['The relative error of $\\sqrt{1+x} \\approx 1 + x/2$ is at most 1\\% for $x$ between 0 and 0.2.', '1\\%', 'holds'],
    ['With relative error below $10^{-3}$ on $[0, 0.4]$, $\\sqrt{1+x} \\approx 1 + x/2$.', '10^{-3}', 'fails'],
    ['On $[0, 0.2]$ the formula $\\sqrt{1+x} \\approx 1 + x/2$ is better than 1 part in 1000.', '1 part in 1000', 'fails'],
    ['On $[0, 0.2]$ the formula $\\sqrt{1+x} \\approx 1 + x/2$ is better than 1 part in 200.', '1 part in 200', 'holds'],
    ['The formula $\\cos x \\approx 1 - x^2/2$ is accurate to three decimal places for $|x| \\le 0.4$.', 'three decimal places', 'fails'],
    ['The formula $\\cos x \\approx 1 - x^2/2$ is accurate to three decimal places for $|x| \\le 0.3$.', 'three decimal places', 'holds'],
    ['For $|x|<0.3$ the formula $\\cos x \\approx 1 - x^2/2$ is correct to 3 significant digits.', '3 significant digits', 'holds'],
    ['For $|x|<0.3$ the formula $\\cos x \\approx 1 - x^2/2$ is correct to 5 significant digits.', '5 significant digits', 'fails'],
    ['For $|x| < 0.5$, $\\cos x \\approx 1 - x^2/2$ is correct to within 0.1 per cent.', '0.1 per cent', 'fails'],
    ['We take $e^x \\approx 1 + x + x^2/2 + x^3/6$, maximum error 2e-6 on [0, 1].', '2e-6', 'fails'],
    ['On $0 \\le x \\le 0.5$, the approximation \\begin{equation} e^x \\approx 1 + x + \\frac{x^2}{2} \\end{equation} has maximum error $0.03$.', '0.03', 'holds'],
    ['The error of $\\tan x \\approx x + x^3/3$ never exceeds $10^{-3}$ for $|x| < 0.8$.', '10^{-3}', 'fails'],
  ])('%s', (text, place, verdict) => {
    expect(judged(text)).toEqual([[place, verdict]]);
  });

  it('names the proven error', () => {
    const text = 'For $|x| < 0.3$ the approximation $\\cos x \\approx 1 - \\frac{x^2}{2} + \\frac{x^4}{24}$ is accurate to $10^{-5}$.';
    expect(findings(text).at(-1)?.reason).toContain('proved to be at most 1.1e-6');
  });

  it.each([
    ['markdown', '$$\\sin\\theta \\approx \\theta$$\nto within 1 % for $\\theta < 0.3$.', '1 %'],
    ['python', '# With error below 1e-7 for |x| <= 0.3: cos(x) ~= 1 - x^2/2 + x^4/24\ny = 1\n', '1e-7'],
    ['python', '# cos(x) ~= 1 - x^2/2 + x^4/24 with error below 1e-7 for |x| <= 0.3\ny = 1\n', '1e-7'],
    ['plain', 'For |x| < 0.5 the error of cos(x) ~= 1 - x^2/2 is below 1e-3', '1e-3'],
    ['c', '// The approximation cos(x) ~= 1 - x^2/2 is accurate to 1e-3 for |x| < 0.5\nint y;\n', '1e-3'],
    ['c', '// sin(x) ~= x to within 1% for |x| < 0.3\nint y = 1;\n', '1%'],
  ])('is found in %s', (language, text, place) => {
    expect(judged(text, language)).toEqual([[place, 'fails']]);
  });

  it('of another sentence, of an instrument, or in another unit is left alone', () => {
    for (const text of [
      'The measurement has an error below $10^{-7}$ for $|x|<0.3$. We use $\\cos x \\approx 1 - \\frac{x^2}{2}$.',
      'With a measurement error below 1\\% for $|x|<0.9$ we use $\\cos x \\approx 1 - x^2/2$.',
      'The error of $\\tan x \\approx x + x^3/3$ exceeds $10^{-3}$ for $|x| < 0.8$.',
      'With an error of order $x^4$ for $|x|<0.5$ we use $\\cos x \\approx 1 - x^2/2$.',
      '$\\sin x \\approx x - x^3/6$ holds with an error below 5 degrees for $|x|<0.3$.',
    ])
      expect(judged(text)).toEqual([]);
  });

  it('that may belong to either of two formulas or to something else, or is not asserted, is undecided', () => {
    for (const text of [
      'With $\\sin x \\approx x - x^3/6$ and error below $10^{-9}$ for $|x| < 0.3$ and $\\cos x \\approx 1 - x^2/2$ we get this.',
      '$\\sin x \\approx x - x^3/6$ and $\\cos x \\approx 1 - x^2/2$ are accurate to $10^{-3}$ and $10^{-5}$, respectively, for $|x| < 0.4$.',
      'The approximation $\\sin x \\approx x$ is not accurate to 1\\% for $|x| < 1$.',
      'If an error below $10^{-6}$ for $|x|<0.5$ is needed, $\\cos x \\approx 1 - x^2/2$ does not suffice.',
      'While $\\cos x \\approx 1 - x^2/2$ is crude, the next order gives an error below $10^{-4}$ for $|x| < 0.3$.',
      'Our instrument is accurate within 1\\% for $|x|<0.9$, so we use $\\cos x \\approx 1 - x^2/2$.',
    ])
      expect(judged(text).map(([, verdict]) => verdict)).toEqual(['undecided']);
  });

  it('without an interval is not judged, and the reason says so', () => {
    const found = findings('With error below $10^{-7}$ we use $\\cos x \\approx 1 - \\frac{x^2}{2}$.');
    expect(found.map((f) => f.verdict)).toEqual(['holds']);
    expect(found[0]?.reason).toContain('no interval is named');
  });
});

describe('the variable alone as an approximation', () => {
  it.each([
    ['For small angles $\\sin\\theta \\approx \\theta$.', ['holds']],
    ['We find $\\sin\\theta \\approx \\theta$.', []],
    ['The solution of $\\cos x \\approx x$ is known within 1\\%.', []],
  ])('%s', (text, verdicts) => {
    expect(findings(text).map((f) => f.verdict)).toEqual(verdicts);
  });
});
