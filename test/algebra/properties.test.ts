/** Field axioms, agreement with an independent library, and bounded size, on random elements. */
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { createField, type Element, type Field } from '../../src/algebra/index.ts';
import { build as b, Q, walk, type Assumption, type Expression } from '../../src/expression/index.ts';
import { attempt, budget } from '../../src/outcome.ts';
import { close, isFinite, value } from './oracle.ts';
import { trees, type Vocabulary } from './trees.ts';
import { text } from './write.ts';

const field = (assume: readonly Assumption[] = []): Field => createField(assume, budget(20000));
const positive = (names: readonly string[]): Assumption[] => names.map((x) => ({ kind: 'relation', left: b.symbol(x), relation: '>', right: b.number(0) }));

const algebraic: Vocabulary = { symbols: ['a', 'c'], functions: [], imaginary: true };
const numbers: Vocabulary = { symbols: [], functions: ['exp', 'log', 'sin', 'cos'], constants: true, imaginary: true };
const reals: Vocabulary = { symbols: ['a', 'c'], functions: ['sin', 'cos', 'exp', 'log', 'sinh', 'tan', 'atan', 'abs'], constants: true };

/** Elements of the trees that have a value in the field. */
const read = (f: Field, ...list: Expression[]): Element[] | null => {
  const outcome = attempt(() => list.map((e) => f.fromExpression(e)));
  return outcome.ok ? outcome.value : null;
};

describe('field axioms', () => {
  const three = fc.tuple(trees(algebraic, 2), trees(algebraic, 2), trees(algebraic, 2));
  it('sums and products commute, associate and distribute', () => {
    fc.assert(
      fc.property(three, ([x, y, z]) => {
        const f = field(positive(['a', 'c']));
        const elements = read(f, x, y, z);
        if (!elements) return;
        const [p, q, r] = elements as [Element, Element, Element];
        for (const [left, right] of [
          [f.add(p, q), f.add(q, p)],
          [f.multiply(p, q), f.multiply(q, p)],
          [f.add(f.add(p, q), r), f.add(p, f.add(q, r))],
          [f.multiply(f.multiply(p, q), r), f.multiply(p, f.multiply(q, r))],
          [f.multiply(p, f.add(q, r)), f.add(f.multiply(p, q), f.multiply(p, r))],
        ] as const) {
          expect(f.equal(left, right)).toBe('yes');
        }
      }),
      { numRuns: 300 },
    );
  });
  it('division undoes multiplication, and powers add', () => {
    fc.assert(
      fc.property(fc.tuple(trees(algebraic, 2), trees(algebraic, 2)), ([x, y]) => {
        const f = field(positive(['a', 'c']));
        const elements = read(f, x, y);
        if (!elements) return;
        const [p, q] = elements as [Element, Element];
        if (f.isZero(q) !== 'no') return;
        expect(f.equal(f.multiply(f.divide(p, q), q), p)).toBe('yes');
        expect(f.equal(f.power(q, Q.rational(-3)), f.divide(f.power(q, Q.rational(2)), f.power(q, Q.rational(5))))).toBe('yes');
        const root = attempt(() => f.power(q, Q.HALF));
        if (root.ok) expect(f.equal(f.multiply(root.value, root.value), q)).toBe('yes');
      }),
      { numRuns: 300 },
    );
  });
  it('exp and log undo each other where they do', () => {
    fc.assert(
      fc.property(trees({ symbols: ['a'], functions: [] }, 2), (x) => {
        const f = field(positive(['a']));
        const [p] = read(f, x) ?? [];
        if (p === undefined) return;
        if (f.isReal(p) === 'yes') expect(f.equal(f.log(f.exp(p)), p)).toBe('yes');
        if (f.isZero(p) === 'no') expect(f.equal(f.exp(f.log(p)), p)).toBe('yes');
      }),
      { numRuns: 200 },
    );
  });
  it('equal keys mean equal values, and toExpression reads back', () => {
    fc.assert(
      fc.property(trees(reals, 2), (x) => {
        const f = field(positive(['a', 'c']));
        const [p] = read(f, x) ?? [];
        if (p === undefined) return;
        const again = f.fromExpression(f.toExpression(p));
        expect(f.equal(p, again), text(x)).not.toBe('no');
        if (f.key(p) === f.key(again)) expect(f.isZero(f.subtract(p, again))).toBe('yes');
      }),
      { numRuns: 300 },
    );
  });
});

// Reference: complex double arithmetic of mathjs 15.
describe('agreement with mathjs', () => {
  const points = { positive: [{ a: 0.731, c: 1.377 }], any: [{ a: 0.731, c: -1.377 }, { a: -0.61, c: 0.55 }] };
  it.each([
    ['numbers', numbers, false, 3],
    ['real parameters', reals, false, 2],
    ['positive parameters', reals, true, 3],
  ] as const)('%s', (_, words, isPositive, depth) => {
    fc.assert(
      fc.property(trees(words, depth), (e) => {
        const f = field(isPositive ? positive(words.symbols) : []);
        const [x] = read(f, e) ?? [];
        if (x === undefined) return;
        const back = f.toExpression(x);
        const zero = f.isZero(x);
        const sign = f.sign(x);
        const real = f.isReal(x);
        for (const at of isPositive ? points.positive : points.any) {
          const v = value(e, at);
          if (!isFinite(v) || isIllConditioned(e, at)) continue;
          const size = Math.hypot(v.re, v.im);
          expect(close(v, value(back, at), 1e-7), `${text(e)} became ${text(back)}`).toBe(true);
          if (zero === 'yes') expect(size, text(e)).toBeLessThan(1e-6);
          if (sign === 1 || sign === -1) expect(v.re * sign, text(e)).toBeGreaterThan(-1e-7);
          if (real === 'yes') expect(Math.abs(v.im), text(e)).toBeLessThanOrEqual(1e-7 * Math.max(1, size));
        }
      }),
      { numRuns: 400 },
    );
  });
});

/** Where doubles lose the answer: large arguments of functions, rounding noise under a root or a logarithm. */
function isIllConditioned(root: Expression, at: Readonly<Record<string, number>>): boolean {
  for (const e of walk(root)) {
    const watched = e.kind === 'call' ? e.args : e.kind === 'power' ? [e.base] : [];
    for (const x of watched) {
      const v = value(x, at);
      const size = Math.hypot(v.re, v.im);
      if ((e.kind === 'call' && size > 1e4) || (size > 0 && size < 1e-9)) return true;
    }
  }
  return false;
}

describe('size', () => {
  it('stays bounded over 200 operations whose value does', () => {
    const f = field(positive(['a', 'c']));
    const start = f.fromExpression(b.quotient(b.sum(b.symbol('a'), b.squareRoot(b.number(2))), b.sum(b.symbol('c'), b.number(1))));
    const steps = ['a', 'c', 'a + 1', 'c - a', 'sqrt 3', 'pi'].map((word): Element => {
      switch (word) {
        case 'a + 1':
          return f.fromExpression(b.sum(b.symbol('a'), b.number(1)));
        case 'c - a':
          return f.fromExpression(b.difference(b.symbol('c'), b.symbol('a')));
        case 'sqrt 3':
          return f.power(f.rational(3), Q.HALF);
        case 'pi':
          return f.fromExpression(b.constant('pi'));
        default:
          return f.fromExpression(b.symbol(word));
      }
    });
    fc.assert(
      fc.property(fc.array(fc.tuple(fc.nat({ max: steps.length - 1 }), fc.boolean()), { minLength: 50, maxLength: 50 }), (path) => {
        // Forward and back again: 100 operations there, 100 back, in groups that leave the value unchanged.
        let x = start;
        for (const [index, multiply] of path) {
          const s = steps[index] as Element;
          x = multiply ? f.multiply(x, s) : f.add(x, s);
          x = multiply ? f.divide(x, s) : f.subtract(x, s);
        }
        const done: [number, boolean][] = path.slice(0, 6);
        for (const [index, multiply] of done) x = multiply ? f.multiply(x, steps[index] as Element) : f.add(x, steps[index] as Element);
        for (const [index, multiply] of [...done].reverse()) x = multiply ? f.divide(x, steps[index] as Element) : f.subtract(x, steps[index] as Element);
        expect(f.key(x)).toBe(f.key(start));
      }),
      { numRuns: 40 },
    );
  });
});
