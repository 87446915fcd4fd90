/** Definite integrals against tabulated values; the source stands beside each. */
import { describe, expect, test } from 'vitest';
import { definiteIntegral } from '../../src/bound/index.ts';
import { Q, type Rational } from '../../src/expression/index.ts';
import { budget } from '../../src/outcome.ts';
import { readLatex } from '../../src/read/index.ts';

const rational = (text: string): Rational => Q.fromDecimal(text) ?? Q.ZERO;
function enclosure(latex: string, tolerance: string): { readonly low: Rational; readonly high: Rational } {
  const read = readLatex(latex);
  if (!read.ok) throw new Error(read.error.message);
  const value = definiteIntegral(read.value, rational(tolerance), [], budget(10_000));
  if (!value.ok) throw new Error(value.error.message);
  return { low: rational(value.value.low), high: rational(value.value.high) };
}

const tabulated: readonly (readonly [string, string, string])[] = [
  ["\\frac{2}{\\sqrt\\pi}\\int_0^{1}e^{-t^2}dt", "0.8427007929497148693412206350826092592960", "A&S Table 7.1; printed page not opened, value recomputed to 50 digits"],
  ["e^{-1}\\int_0^1 e^{t^2}dt", "0.5380795069127684191363874204075567547919", "A&S Table 7.5; printed page not opened, value recomputed to 50 digits"],
  ["\\int_0^1\\frac{1-\\cos t}{t}dt", "0.2398117420005647259438658861932516610445", "A&S 5.2.2 with Table 5.1; printed page not opened, value recomputed to 50 digits"],
  ["\\int_0^1\\cos(\\pi t^2/2)dt", "0.7798934003768228294742064136526901366306", "A&S Table 7.7; printed page not opened, value recomputed to 50 digits"],
  ["\\int_0^1\\sin(\\pi t^2/2)dt", "0.4382591473903547660767566966251526374937", "A&S Table 7.7; printed page not opened, value recomputed to 50 digits"],
  ["\\int_0^{\\pi/2}\\frac{d\\theta}{\\sqrt{1-\\frac12\\sin^2\\theta}}", "1.8540746773013719184338503471952600462175", "A&S Table 17.1; lemniscate Gamma(1/4)^2/(4 sqrt(pi)); printed page not opened, value recomputed to 50 digits"],
  ["\\int_0^1\\frac{dt}{\\sqrt{1-t^4}}", "1.3110287771460599052324197949455597068413", "Gauss lemniscate constant; OEIS A085565; printed page not opened, value recomputed to 50 digits"],
  ["\\int_0^1\\frac{t}{e^t-1}dt", "0.7775046341122482764175865454257105071924", "A&S Table 27.1 (D1(1)); printed page not opened, value recomputed to 50 digits"],
  ["\\int_0^\\infty\\frac{t^3}{e^t-1}dt", "6.4939394022668291490960221792470074166485", "Stefan-Boltzmann; A&S 27.1.3; printed page not opened, value recomputed to 50 digits"],
  ["\\int_0^1\\frac{\\arctan t}{t}dt", "0.9159655941772190150546035149323841107741", "OEIS A006752; DLMF 4.24.3 integrated; printed page not opened, value recomputed to 50 digits"],
  ["\\int_0^1 x^{x}dx", "0.7834305107121344070592643865269754694076", "Bernoulli 1697; OEIS A083648; printed page not opened, value recomputed to 50 digits"],
  ["-\\int_0^1\\frac{\\ln(1-t)}{t}dt", "1.6449340668482264364724151666460251892189", "DLMF 25.12.1 at 1; printed page not opened, value recomputed to 50 digits"],
  ["\\int_0^1\\frac{\\ln t}{t-1}dt", "1.6449340668482264364724151666460251892189", "Gradshteyn-Ryzhik 4.231.2; printed page not opened, value recomputed to 50 digits"],
  ["\\int_0^\\infty\\frac{e^{-t}}{1+t}dt", "0.5963473623231940743410784993692793760741", "Euler-Gompertz constant OEIS A073003; printed page not opened, value recomputed to 50 digits"],
  ["\\frac{2}{\\pi}\\int_0^{\\pi/2}\\sin(\\sin\\theta)d\\theta", "0.5686566270482879509864228863223532743026", "A&S Table 12.1 (H0(1)); printed page not opened, value recomputed to 50 digits"],
  ["\\int_0^{\\pi/4}\\ln\\tan t\\,dt", "-0.915965594177219015054603514932384110774", "Gradshteyn-Ryzhik 4.227.2; printed page not opened, value recomputed to 50 digits"],
  ["\\int_0^1\\frac{e^{-t}}{\\sqrt t}dt", "1.4936482656248540507989348722637060107089", "A&S 7.1.1 substitution; printed page not opened, value recomputed to 50 digits"],
  ["\\int_0^\\infty \\frac{x}{\\sinh x}dx", "2.46740110027233965470862274996903778382842", "pi^2/4; common practice"],
  ["\\int_{-\\infty}^\\infty e^{-x^2}dx", "1.77245385090551602729816748334114518279754", "sqrt(pi); common practice"],
  ["\\int_{-1}^1 \\frac{1}{\\sqrt{|x|}}dx", "4.0", "elementary: a branch point inside the interval"],
  ["\\int_0^{1}\\ln(x)^2 dx", "2.0", "elementary: (-1)^2 2!"],
];
describe.each(['1e-10', '1e-30'])('to %s', (tolerance) => {
  test.each(tabulated)('%s = %s (%s)', (latex, value) => {
    const { low, high } = enclosure(latex, tolerance);
    const printed = rational(value);
    // The printed value is cut after its last digit.
    const unit = Q.multiply(Q.rational(value.startsWith('-') ? -1 : 1), rational('1e-40'));
    const [a, b] = Q.compare(printed, Q.add(printed, unit)) < 0 ? [printed, Q.add(printed, unit)] : [Q.add(printed, unit), printed];
    expect(Q.compare(low, b) <= 0 && Q.compare(a, high) <= 0).toBe(true);
    expect(Q.compare(Q.subtract(high, low), Q.multiply(Q.rational(1), rational(tolerance)))).toBeLessThanOrEqual(0);
  });
});

test.each(['\\int_0^1 \\frac{1}{x}dx', '\\int_0^1 \\frac{1}{x\\sqrt{1-x}}dx'])('%s diverges, and is refused', (latex) => {
  const read = readLatex(latex);
  if (!read.ok) throw new Error(read.error.message);
  const value = definiteIntegral(read.value, rational('1e-6'), [], budget(5000));
  expect(value.ok ? '' : value.error.code).toBe('bad-request');
});
