/** Derivatives, differential equations and exact values, each against the enclosure of the function. */
import { describe, expect, it } from 'vitest';
import { build, type Expression } from '../../src/expression/index.ts';
import { acceptsArity, allFunctions, describe as description } from '../../src/functions/index.ts';
import { type Ball, real } from '../../src/rigorous/index.ts';
import { complexValueOf, rational, tree, valueOf } from './support.ts';

const PRECISION = 200;
/** Points where the usual one is outside the domain, or an argument is an integer. All dyadic, so that they stay exact. */
const POINTS: Readonly<Record<string, readonly string[]>> = {
  acosh: ['9/4'], acoth: ['9/4'], asec: ['9/4'], acsc: ['9/4'], asech: ['1/4'], polygamma: ['2', '9/4'], zetaDerivative: ['1', '9/4'], zeta: ['9/4'], logIntegral: ['9/4'], offsetLogIntegral: ['9/4'],
  erfcinv: ['5/8'], lambertW: ['-1', '-1/4'], bernoulliPolynomial: ['4', '1/4'], debye: ['3', '5/4'], kelvinBer: ['1', '5/4'], kelvinBei: ['1', '5/4'], kelvinKer: ['1', '5/4'], kelvinKei: ['1', '5/4'],
  hurwitzZeta: ['9/4', '5/4'], hypergeometric: ['2', '1', '1/4', '3/4', '5/4', '3/8'], ellipticPiParameter: ['1/4', '3/8'], log1mexp: ['-1/4'], floor: ['5/4'], ceil: ['5/4'], trunc: ['5/4'], boseEinstein: ['1/2', '-1/4'],
  hyperfactorial: ['5/4'], superfactorial: ['3'], legendreP: ['5/2', '1/4'], wrightOmega: ['1/4'], kummerU: ['1/4', '3/4', '5/4'], normalQuantile: ['1/4'], logit: ['1/4'], hypot: ['5/4', '1/4'], agm: ['5/4', '1/4'],
};
const pointFor = (id: string, arity: number | readonly [number, number]): readonly string[] => {
  const count = typeof arity === 'number' ? arity : arity[0];
  return POINTS[id] ?? Array.from({ length: count }, (_, i) => (i === count - 1 ? '1/4' : '5/4'));
};

const close = (a: Ball, b: Ball, bits: number): boolean => {
  const error = real.exponentOf(real.subtract(a, b, PRECISION));
  return error < Math.max(real.exponentOf(a), real.exponentOf(b), 0) - bits;
};
const at = (e: Expression): Ball | null => {
  const direct = valueOf(e, PRECISION);
  if (direct) return direct;
  const value = complexValueOf(e, PRECISION);
  return value && real.containsZero(value.im) ? value.re : null;
};

describe('descriptions agree with themselves', () => {
  it('has derivatives equal to symmetric difference quotients', () => {
    let compared = 0;
    const h = real.scaleByPowerOfTwo(real.ONE, -60);
    for (const d of allFunctions()) {
      const texts = pointFor(d.id, d.arity);
      const args = texts.map(tree);
      for (let index = 0; index < args.length; index += 1) {
        const slope = d.derivative?.(args, index);
        const exact = slope && at(slope);
        if (!exact) continue;
        const shifted = (sign: 1 | -1): Ball | null => {
          const x = build.symbol('x');
          const centre = real.fromRational(rational(texts[index] ?? '0'), PRECISION);
          const environment = new Map([['x', real.add(centre, sign === 1 ? h : real.negate(h), PRECISION)]]);
          return valueOf(build.call(d.id, ...args.map((a, k) => (k === index ? x : a))), PRECISION, environment);
        };
        const [up, down] = [shifted(1), shifted(-1)];
        if (!up || !down) continue;
        const quotient = real.divide(real.subtract(up, down, PRECISION), real.scaleByPowerOfTwo(h, 1), PRECISION);
        compared += 1;
        // The quotient is off by h^2 f'''/6.
        expect(quotient !== null && close(quotient, exact, 90), `${d.id}, argument ${index}`).toBe(true);
      }
    }
    expect(compared).toBeGreaterThan(85);
  });

  it('satisfies its differential equation', () => {
    let compared = 0;
    for (const d of allFunctions()) {
      const texts = pointFor(d.id, d.arity);
      const args = texts.map(tree);
      const index = args.length - 1;
      const equation = d.equation?.(args, index);
      if (!equation) continue;
      // p_0 f + ... + p_n f^(n) = 0 with f^(n) of the initial values: the last derivative from the one before, by a difference quotient.
      const point = args[index] ?? build.number(0);
      const derivatives = equation.initial.map((rule) => at(rule(point)));
      const last = equation.initial[equation.initial.length - 1];
      const h = build.power(build.number(2), -40);
      const [up, down] = last ? [at(last(build.sum(point, h))), at(last(build.difference(point, h)))] : [null, null];
      if (!up || !down || derivatives.some((v) => v === null)) continue;
      const top = real.divide(real.subtract(up, down, PRECISION), real.scaleByPowerOfTwo(real.ONE, -39), PRECISION);
      let defect: Ball = real.ZERO;
      let size = -100;
      [...derivatives, top].forEach((value, j) => {
        const polynomial = build.sum(...(equation.polynomials[j] ?? []).map((c, i) => build.product(c, build.power(point, i))));
        const p = at(polynomial);
        if (!p || !value) throw new Error(`equation of ${d.id}`);
        const term = real.multiply(p, value, PRECISION);
        size = Math.max(size, real.exponentOf(term));
        defect = real.add(defect, term, PRECISION);
      });
      compared += 1;
      expect(real.exponentOf(defect), d.id).toBeLessThan(size - 60);
      expect(equation.polynomials.length, d.id).toBe(equation.initial.length + 1);
    }
    expect(compared).toBeGreaterThanOrEqual(15);
  });
});

const pi = build.constant('pi');
const q = (text: string): Expression => tree(text);
const over = (k: number, n: number): Expression => build.quotient(build.product(build.number(k), pi), build.number(n));
/** Arguments at which an exact value is known, by id. */
const EXACT: readonly (readonly [id: string, args: readonly Expression[]])[] = [
  ...['sin', 'cos', 'tan'].flatMap((id) => [...Array.from({ length: 25 }, (_, k) => [id, [over(k - 12, 12)]] as const), ...Array.from({ length: 9 }, (_, k) => [id, [over(k, 10)]] as const), ...Array.from({ length: 9 }, (_, k) => [id, [over(k, 8)]] as const)]),
  ...['asin', 'acos', 'atan'].flatMap((id) => [q('1/2'), q('-1/2'), q('1'), q('0'), build.quotient(build.squareRoot(q('2')), q('2')), build.negation(build.quotient(build.squareRoot(q('3')), q('2'))), build.squareRoot(q('3'))].map((a) => [id, [a]] as const)),
  ...['1/2', '-3/2', '7/2', '5', '9/2'].map((x) => ['gamma', [q(x)]] as const),
  ...['1', '2', '7', '1/2', '1/3', '2/3', '1/4', '3/4', '1/6', '5/6', '-1/2', '10/3', '-7/4'].map((x) => ['digamma', [q(x)]] as const),
  ...['1', '5', '1/2', '-3/2'].flatMap((x) => ['1', '2', '5'].map((n) => ['polygamma', [q(n), q(x)]] as const)),
  ...['2', '4', '12', '0', '-1', '-7', '-2'].map((x) => ['zeta', [q(x)]] as const),
  ...['0', '-1', '-2', '-4', '2'].map((x) => ['zetaDerivative', [q('1'), q(x)]] as const),
  ...[['3', '1/3'], ['2', '5/2'], ['-2', '7/4'], ['3/2', '1/2'], ['5/2', '1']].map(([s = '', a = '']) => ['hurwitzZeta', [q(s), q(a)]] as const),
  ...[['2', '1/2'], ['3', '1/2'], ['2', '-1'], ['3', '-1'], ['2', '1'], ['1', '1/3'], ['0', '1/3'], ['-3', '2/5']].map(([s = '', x = '']) => ['polylog', [q(s), q(x)]] as const),
  ...['1/2', '-1', '0'].flatMap((m) => ['ellipticKParameter', 'ellipticEParameter'].map((id) => [id, [q(m)]] as const)),
  ['ellipticFParameter', [over(3, 2), q('1/3')]],
  ['ellipticPiParameter', [q('1/3'), q('0')]],
  ['jacobiSn', [q('2/3'), q('1')]],
  ...['J', 'Y', 'I', 'K'].flatMap((kind) => ['1/2', '-1/2', '5/2', '-7/2', '9/2'].map((n) => [`bessel${kind}`, [q(n), q('3/2')]] as const)),
  ...['J', 'Y', 'I', 'K'].map((kind) => [`bessel${kind}`, [q('-3'), q('3/2')]] as const),
  ...['airyAi', 'airyBi', 'airyAiPrime', 'airyBiPrime', 'erf', 'erfc', 'sinIntegral'].map((id) => [id, [q('0')]] as const),
  ['lambertW', [q('0'), build.constant('e')]],
  ['lambertW', [q('0'), q('0')]],
  ...['1', '3/2', '1/2', '-1/2'].map((x) => ['clausen', [build.product(q(x), pi)]] as const),
  ['inverseTangentIntegral', [q('-1')]],
  ...['0', '-3', '4'].map((n) => ['expIntegralE', [q(n), q('3/2')]] as const),
  ...['1', '4'].flatMap((n) => ['upperGamma', 'lowerGamma'].map((id) => [id, [q(n), q('3/2')]] as const)),
  ['parabolicD', [q('3'), q('3/2')]],
  ['parabolicD', [q('1/2'), q('0')]],
  ...['legendreP', 'chebyshevT', 'chebyshevU', 'hermiteH', 'laguerreL'].flatMap((id) => ['0', '1', '4', '7'].map((n) => [id, [q(n), q('3/8')]] as const)),
  ['hypergeometric', ['2', '1', '1/4', '1/2', '5/4', '1'].map(q)],
  ['hypergeometric', ['2', '1', '-3', '1/2', '5/4', '3/8'].map(q)],
  ['hypergeometric', ['2', '1', '1', '1', '2', '3/8'].map(q)],
  ['hypergeometric', ['1', '0', '5/4', '3/8'].map(q)],
  ...['2', '3', '7', '-1'].map((x) => ['barnesG', [q(x)]] as const),
  ['logBarnesG', [q('6')]],
];

describe('exact values', () => {
  it('equals the function', () => {
    const seen = new Set<string>();
    for (const [id, args] of EXACT) {
      const d = description(id);
      const value = d?.value?.(args) ?? null;
      const label = `${id}(${args.map((a) => (a.kind === 'number' ? `${a.value.num}/${a.value.den}` : a.kind)).join(', ')})`;
      if (!d) throw new Error(id);
      expect(acceptsArity(d, args.length), label).toBe(true);
      if (!value) continue;
      const [exact, computed] = [at(value), at(build.call(id, ...args))];
      if (!exact || !computed) {
        if (id !== 'hypergeometric') expect(exact, `${label} as a tree`).not.toBeNull();
        continue;
      }
      seen.add(id);
      expect(close(exact, computed, 100), label).toBe(true);
    }
    expect(seen.size).toBeGreaterThan(38);
  });

  // DLMF 5.4.19 with 5.4.14; 25.6.1; 5.4.6.
  it('is written as handbooks write it', () => {
    const value = (id: string, ...args: readonly string[]): Expression | null => description(id)?.value?.(args.map(q)) ?? null;
    expect(value('gamma', '1/2')).toEqual(build.squareRoot(pi));
    expect(value('zeta', '2')).toEqual(build.product(q('1/6'), build.power(pi, 2)));
    expect(value('digamma', '1')).toEqual(build.negation(build.constant('eulerGamma')));
    expect(value('gamma', '-2')).toBeNull();
    expect(value('gamma', '1/3')).toBeNull();
    expect(value('zeta', '3')).toBeNull();
  });
});
