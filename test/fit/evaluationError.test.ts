import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { build, type Expression, Q, type Rational } from '../../src/expression/index.ts';
import { ERROR_BITS, evaluationError } from '../../src/fit/evaluationError.ts';
import { type FloatFormat, formatByName, roundTo } from '../../src/fit/format.ts';
import { polynomialTree } from '../../src/write/index.ts';

/** Exact emulation of IEEE 754 round-to-nearest evaluation; `fuse(k)` decides for the k-th sum whether a product in it is contracted. */
function emulate(e: Expression, x: Rational, format: FloatFormat, fuse: () => boolean): Rational {
  const round = (q: Rational): Rational => {
    const r = roundTo(q, format);
    if (!r) throw new Error('overflow');
    return r;
  };
  const exactProduct = (node: Expression): Rational | null => {
    if (node.kind !== 'product') return null;
    const [first, ...rest] = node.factors.map((f) => emulate(f, x, format, fuse));
    const last = rest.pop();
    if (!first || !last) return null;
    return Q.multiply(rest.reduce((a, b) => round(Q.multiply(a, b)), first), last);
  };
  const value = (node: Expression): Rational => {
    switch (node.kind) {
      case 'symbol':
        return x;
      case 'number':
        return node.value;
      case 'negation':
        return Q.negate(value(node.operand));
      case 'product':
        return node.factors.map(value).reduce((a, b) => round(Q.multiply(a, b)));
      case 'sum':
        return node.terms.slice(1).reduce((a, term) => round(Q.add(a, (fuse() ? exactProduct(term) : null) ?? value(term))), value(node.terms[0] as Expression));
      case 'call': {
        const [a, b, c] = node.args.map(value);
        if (a && b && c) return round(Q.add(Q.multiply(a, b), c));
        throw new Error('arguments');
      }
      default:
        throw new Error(node.kind);
    }
  };
  return value(e);
}

const exactValue = (e: Expression, x: Rational): Rational => {
  switch (e.kind) {
    case 'symbol':
      return x;
    case 'number':
      return e.value;
    case 'negation':
      return Q.negate(exactValue(e.operand, x));
    case 'product':
      return e.factors.map((f) => exactValue(f, x)).reduce(Q.multiply);
    case 'sum':
      return e.terms.map((f) => exactValue(f, x)).reduce(Q.add);
    case 'call': {
      const [a, b, c] = e.args.map((f) => exactValue(f, x));
      if (a && b && c) return Q.add(Q.multiply(a, b), c);
      throw new Error('arguments');
    }
    default:
      throw new Error(e.kind);
  }
};

describe('rounding of an evaluation', () => {
  const coefficient = fc.double({ min: -4, max: 4, noNaN: true });
  it.each(['binary16', 'bfloat16', 'binary32', 'binary64'])('stays within its bound in %s, contracted or not, Horner and Estrin', (name) => {
    const format = formatByName(name) as FloatFormat;
    const floats = (v: number): Rational => roundTo(Q.fromDouble(v), format) ?? Q.ZERO;
    fc.assert(
      fc.property(
        fc.array(coefficient, { minLength: 2, maxLength: 7 }),
        fc.constantFrom('horner' as const, 'estrin' as const),
        fc.boolean(),
        fc.boolean(),
        fc.double({ min: -2, max: 2, noNaN: true }),
        fc.double({ min: 0, max: 0.5, noNaN: true }),
        fc.infiniteStream(fc.boolean()),
        fc.array(fc.double({ min: 0, max: 1, noNaN: true }), { minLength: 5, maxLength: 5 }),
        (list, form, fma, odd, start, length, fused, samples) => {
          const terms = list.map((c, k) => ({ power: odd ? 2 * k + 1 : k, value: floats(c) })).filter((t) => !Q.isZero(t.value));
          if (terms.length === 0) return;
          const tree = polynomialTree(terms, build.symbol('x'), { form, fma });
          const bound = evaluationError({ steps: [], result: tree }, 'x', { lo: start, hi: start + length }, { operations: format, result: format });
          const limit = Q.divide(Q.fromDouble(bound.absolute), Q.rational(1n << BigInt(ERROR_BITS)));
          for (const s of samples) {
            const x = floats(start + s * length);
            if (Q.toDouble(x) < start || Q.toDouble(x) > start + length) continue;
            const exact = exactValue(tree, x);
            const error = Q.absolute(Q.subtract(emulate(tree, x, format, () => fused.next().value === true), exact));
            expect(Q.compare(error, limit) <= 0).toBe(true);
            expect(Q.compare(Q.fromDouble(bound.exact.lo), exact) <= 0 && Q.compare(exact, Q.fromDouble(bound.exact.hi)) <= 0).toBe(true);
          }
        },
      ),
      { numRuns: 300 },
    );
  });
  it('is not far above what happens: a cubic in binary32 on [1/2, 1]', () => {
    const format = formatByName('binary32') as FloatFormat;
    const terms = [1, -0.5, 0.25, -0.125].map((c, power) => ({ power, value: Q.fromDouble(Math.fround(c / 3)) }));
    const tree = polynomialTree(terms, build.symbol('x'), { form: 'horner', fma: false });
    let worst = 0;
    for (let k = 0; k < 4000; k += 1) {
      const x = Q.fromDouble(Math.fround(0.5 + k / 8000));
      worst = Math.max(worst, Q.toDouble(Q.absolute(Q.subtract(emulate(tree, x, format, () => false), exactValue(tree, x)))));
    }
    let bound = 0;
    for (let k = 0; k < 64; k += 1) bound = Math.max(bound, evaluationError({ steps: [], result: tree }, 'x', { lo: 0.5 + k / 128, hi: 0.5 + (k + 1) / 128 }, { operations: format, result: format }).absolute / 2 ** ERROR_BITS);
    expect(bound).toBeGreaterThanOrEqual(worst);
    expect(bound / worst).toBeLessThan(2.5);
  });
});
