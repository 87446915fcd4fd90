/** Bounds of expansions of integrals over a parameter. True errors by the integrals' closed forms: Maclaurin series (alternating or geometric) or tabled values; the source stands beside each. */
import { describe, expect, test } from 'vitest';
import { build, Q } from '../../src/expression/index.ts';
import { boundRemainder, valueAt } from '../../src/bound/index.ts';
import { gaussLegendre } from '../../src/bound/gaussLegendre.ts';
import { expand, type Expansion } from '../../src/expand/index.ts';
import { budget } from '../../src/outcome.ts';
import { readExact } from '../../src/read/index.ts';
import { real } from '../../src/rigorous/index.ts';

const x = build.symbol('x');
const t = build.symbol('t');
const exact = (text: string) => {
  const read = readExact(text);
  if (!read.ok) throw new Error(`${text}: ${read.error.message}`);
  return read.value;
};
function expansionOf(body: string, lower: string, upper: string, terms: number): Expansion {
  const found = expand({ function: { kind: 'integral', body: exact(body), variable: t, lower: exact(lower), upper: exact(upper) }, variable: x, point: exact('0'), side: 'both', terms, assumptions: [] }, budget(20_000));
  if (!found.ok) throw new Error(found.error.message);
  return found.value;
}

interface Row {
  readonly body: string;
  readonly lower?: string;
  readonly upper: string;
  readonly terms: number;
  readonly ends: readonly [string, string];
  readonly error: number;
  readonly source: string;
}
const rows: readonly Row[] = [
  { body: 'exp(-x*t^2)', upper: '1', terms: 3, ends: ['0', '1/2'], error: 0.00270894144118453, source: 'erf(1/sqrt 2) = 0.682689492137086 (A&S table 26.1): 1 - 1/6 + 1/40 - sqrt(pi/2) erf(1/sqrt 2)' },
  { body: 'cos(x*sin(t))', upper: 'pi', terms: 4, ends: ['-1', '1'], error: 0.0000210939, source: 'DLMF 10.9.1; J_0(1) = 0.765197686557967 (A&S table 9.1)' },
  { body: '1/sqrt(1-x*sin(t)^2)', upper: 'pi/2', terms: 4, ends: ['0', '1/2'], error: 0.0125307414446596, source: 'DLMF 19.2.8, 19.5.1; K(m = 1/2) = 1.854074677301372 (A&S table 17.1)' },
  { body: 'sqrt(t)*exp(x*t)', upper: '1', terms: 3, ends: ['-1', '1'], error: 0.0461062718, source: 'sum over k >= 3 of 1/(k! (k + 3/2)), term by term' },
  { body: '1/(1+x*t^3)', upper: '1', terms: 4, ends: ['0', '1'], error: 0.0427917, source: 'sum of (-1)^k/(3k+1) = (log 2 + pi/sqrt 3)/3 = 0.835648848264721 (A&S 23.2, from memory) against 1 - 1/4 + 1/7 - 1/10' },
  { body: 'sin(t)/t', upper: 'x', terms: 3, ends: ['0', '1'], error: 0.0000280407, source: 'Si(1) = 0.946083070367183 (A&S table 5.1) against 1 - 1/18 + 1/600' },
  { body: 'exp(-t^2)*cos(t)', upper: 'x', terms: 1, ends: ['-1/2', '1/2'], error: 0.0564722782, source: 'the product of both series, x^3/2 - 5 x^5/24 + 331 x^7/5040 - ..., added up to x^25 (mpmath 1.3.0 agrees)' },
];

describe('bounds of integrals over a parameter', () => {
  test.each(rows)('$body from 0 to $upper, $terms terms ($source)', ({ body, lower = '0', upper, terms, ends, error }) => {
    const bound = boundRemainder({ expansion: expansionOf(body, lower, upper, terms), interval: { lower: exact(ends[0]), upper: exact(ends[1]) }, measure: 'absolute', assumptions: [], budget: budget(20_000) });
    if (!bound.ok) throw new Error(bound.error.message);
    const [above, below] = [Q.toDouble(bound.value.upperRational ?? Q.ZERO), Q.toDouble(bound.value.lowerRational ?? Q.ZERO)];
    expect(below).toBeLessThanOrEqual(above);
    expect(above / below).toBeLessThan(1.001);
    expect(Math.abs(above / error - 1)).toBeLessThan(2e-3);
  });

  test('the value of f where f is an integral: sqrt(pi/2) erf(1/sqrt 2) = 0.855624391892149 (A&S table 26.1)', () => {
    const found = valueAt(expansionOf('exp(-x*t^2)', '0', '1', 3), exact('1/2'), [], budget(20_000));
    if (!found.ok) throw new Error(found.error.message);
    expect(Number(found.value.value.low)).toBeCloseTo(0.855624391892149, 11);
    expect(Number(found.value.error.high)).toBeCloseTo(-0.00270894144118, 10);
  });

  test('an integrand with a singularity between the limits is declined', () => {
    const bound = boundRemainder({ expansion: expansionOf('1/(1+x*t)', '0', '1', 3), interval: { lower: exact('-3/2'), upper: exact('0') }, measure: 'absolute', assumptions: [], budget: budget(20_000) });
    expect(bound.ok && bound.value.upperRational !== null).toBe(false);
  });
});

/** A&S table 25.4, n = 5; the weights of every rule have the sum 2, and it is exact for x^(2n-2). */
describe("Gauss's rule", () => {
  test('nodes and weights of five points', () => {
    const rule = gaussLegendre(5, 80);
    if (!rule) throw new Error('no rule');
    expect(rule.nodes.map((node) => Number(real.toDouble(node).toFixed(15)))).toEqual([0.906179845938664, 0.538469310105683, expect.closeTo(0, 15), -0.538469310105683, -0.906179845938664]);
    expect(rule.weights.map((weight) => Number(real.toDouble(weight).toFixed(15)))).toEqual([0.236926885056189, 0.478628670499366, 0.568888888888889, 0.478628670499366, 0.236926885056189]);
  });
  test.each([2, 9, 34, 72])('%i points integrate the even power 2n - 2 exactly', (n) => {
    const rule = gaussLegendre(n, 120);
    if (!rule) throw new Error('no rule');
    let [weights, moment] = [real.ZERO, real.ZERO];
    for (const [k, node] of rule.nodes.entries()) {
      const weight = rule.weights[k] ?? real.ZERO;
      weights = real.add(weights, weight, 140);
      moment = real.add(moment, real.multiply(weight, real.powerInteger(node, 2 * n - 2, 140) ?? real.ZERO, 140), 140);
    }
    for (const [sum, want] of [[weights, Q.rational(2)], [moment, Q.rational(2, 2 * n - 1)]] as const) {
      expect(real.containsZero(real.subtract(sum, real.fromRational(want, 200), 200))).toBe(true);
      expect(real.exponentOf(real.radius(sum))).toBeLessThan(-90);
    }
  });
});
