/** Ring axioms, inverse functions and derivations on random multiseries; lazy terms and zero tests. */
import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { createField } from '../../src/algebra/index.ts';
import { build, Q, type Rational } from '../../src/expression/index.ts';
import { describe as describeFunction } from '../../src/functions/index.ts';
import { budget, Declined } from '../../src/outcome.ts';
import {
  add, type Context, createScale, exponential, finiteStream, growth, integrate, isZero, logarithm, logarithmOf, monomial, type Multi, multiply, nextTerm, power, reciprocal, Series, sineCosine, subtract, theta,
} from '../../src/series/index.ts';

function context(): Context {
  const t = build.symbol('t');
  return {
    field: createField([{ kind: 'relation', left: t, relation: '>', right: build.number(0) }], budget(20000), describeFunction),
    budget: budget(20000),
    scale: createScale(t, build.negation(build.call('log', t))),
    local: 't',
    oscillation: false,
    notes: { sided: false, onReal: false, divergent: false, complex: false, assumptions: new Set() },
    patience: { value: 16 },
  };
}

interface Sketch {
  readonly start: Rational;
  readonly coefficients: readonly Rational[];
}
const rationals = fc.tuple(fc.integer({ min: -4, max: 4 }), fc.integer({ min: 1, max: 3 })).map(([n, d]) => Q.rational(n, d));
const sketch = (lowest: number): fc.Arbitrary<Sketch> =>
  fc.tuple(fc.integer({ min: lowest, max: lowest + 3 }), fc.array(rationals, { minLength: 1, maxLength: 5 })).map(([n, coefficients]) => ({ start: Q.rational(n, 2), coefficients }));

function seriesOf(c: Context, s: Sketch): Multi {
  const terms = s.coefficients.map((coefficient, k) => ({ exponent: Q.add(s.start, Q.rational(k, 2)), coefficient }));
  const exact = () => build.sum(...terms.map((t) => build.product(build.number(t.coefficient), build.power(build.symbol('t'), t.exponent))));
  return new Series(c.scale.local, finiteStream(terms), exact);
}
/** Equal up to the first 12 terms. */
function agree(a: Multi, b: Multi, c: Context): boolean {
  const d = subtract(c, a, b);
  if (!(d instanceof Series)) return isZero(c, d);
  for (let k = 0; k < 12; k += 1) {
    const term = d.stream.at(k);
    if (!term) return true;
    if (!isZero(c, term.coefficient)) return false;
  }
  return true;
}
const runs = { numRuns: 150, seed: 7 };

describe('arithmetic in powers of t^(1/2)', () => {
  test('sums and products form a ring', () => {
    fc.assert(
      fc.property(sketch(-3), sketch(-2), sketch(0), (p, q, r) => {
        const c = context();
        const [a, b, d] = [p, q, r].map((s) => seriesOf(c, s)) as [Multi, Multi, Multi];
        expect(agree(multiply(c, a, b), multiply(c, b, a), c)).toBe(true);
        expect(agree(multiply(c, a, add(c, b, d)), add(c, multiply(c, a, b), multiply(c, a, d)), c)).toBe(true);
        expect(agree(multiply(c, multiply(c, a, b), d), multiply(c, a, multiply(c, b, d)), c)).toBe(true);
      }),
      runs,
    );
  });
  test('1/f, powers, exp and log undo each other; sin^2 + cos^2 = 1', () => {
    fc.assert(
      fc.property(sketch(1), (p) => {
        const c = context();
        const e = seriesOf(c, p);
        const f = add(c, Q.ONE, e);
        expect(agree(multiply(c, f, reciprocal(c, f)), Q.ONE, c)).toBe(true);
        expect(agree(power(c, power(c, f, Q.rational(2, 3)), Q.rational(3, 2)), f, c)).toBe(true);
        expect(agree(logarithm(c, exponential(c, e)), e, c)).toBe(true);
        expect(agree(exponential(c, logarithm(c, f)), f, c)).toBe(true);
        const { sine, cosine } = sineCosine(c, e);
        expect(agree(add(c, multiply(c, sine, sine), multiply(c, cosine, cosine)), Q.ONE, c)).toBe(true);
      }),
      runs,
    );
  });
  test('t d/dt is a derivation, and integration undoes it', () => {
    fc.assert(
      fc.property(sketch(1), sketch(1), (p, q) => {
        const c = context();
        const a = seriesOf(c, p);
        const b = multiply(c, seriesOf(c, q), logarithmOf(c, c.scale.local));
        expect(agree(theta(c, multiply(c, a, b)), add(c, multiply(c, theta(c, a), b), multiply(c, a, theta(c, b))), c)).toBe(true);
        expect(agree(integrate(c, theta(c, b)), b, c)).toBe(true);
      }),
      runs,
    );
  });
});

describe('scales', () => {
  test('e^(1/t) e^(-1/t) = 1, and log of e^(1/t) is 1/t', () => {
    const c = context();
    const large = monomial(c, c.scale.local, Q.MINUS_ONE);
    const e = exponential(c, large);
    expect(growth(c, e)).toBe('large');
    expect(growth(c, subtract(c, multiply(c, e, reciprocal(c, e)), Q.ONE))).toBe('zero');
    expect(agree(logarithm(c, e), large, c)).toBe(true);
    expect(c.scale.elements.map((s) => s.kind)).toEqual(['local', 'exponential']);
  });
  test('comparable exponentials share one element, others are ordered by speed', () => {
    const c = context();
    const large = monomial(c, c.scale.local, Q.MINUS_ONE);
    exponential(c, large);
    exponential(c, add(c, large, large));
    expect(c.scale.elements).toHaveLength(2);
    exponential(c, multiply(c, large, large));
    exponential(c, power(c, large, Q.HALF));
    expect(c.scale.elements).toHaveLength(4);
    const speeds = c.scale.elements.map((s) => s.rank);
    expect(speeds).toEqual([0, 1, 2, 3]);
  });
  test('a function that is zero without showing it is recognised', () => {
    const c = context();
    const t = monomial(c, c.scale.local, Q.ONE);
    const { sine, cosine } = sineCosine(c, t);
    const zero = subtract(c, add(c, multiply(c, sine, sine), multiply(c, cosine, cosine)), Q.ONE);
    expect(zero instanceof Series && nextTerm(c, zero, 0)).toBeNull();
  });
  test('an O-term hides what lies behind it', () => {
    const c = context();
    const order = new Series(c.scale.local, finiteStream([{ exponent: Q.ONE, coefficient: Q.ONE, order: true }]), () => ({ kind: 'dots' }));
    expect(() => reciprocal(c, order)).toThrow(Declined);
  });
});
