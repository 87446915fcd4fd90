/** The three-valued zero test, signs under assumptions, and what is declined. */
import { describe, expect, it } from 'vitest';
import { createField } from '../../src/algebra/index.ts';
import { build as b, Q, type Assumption, type Expression } from '../../src/expression/index.ts';
import { attempt, budget } from '../../src/outcome.ts';

const n = b.number;
const s = b.symbol;
const a = s('a');
const c = s('c');
const call = b.call;
const relation = (left: Expression, r: '<' | '<=' | '>' | '>=' | '!=', right: Expression): Assumption => ({ kind: 'relation', left, relation: r, right });
const ask = (e: Expression, assume: Assumption[] = []) => {
  const f = createField(assume, budget(5000));
  const x = f.fromExpression(e);
  return { zero: f.isZero(x), sign: f.sign(x), real: f.isReal(x), needed: [...f.needed], parameters: f.parameters(x) };
};

describe('zero', () => {
  // Identities: DLMF 4.21, 4.35, 4.38; each left side minus its right side.
  it.each([
    b.sum(b.power(call('sin', a), 2), b.power(call('cos', a), 2), n(-1)),
    b.difference(call('sin', b.product(n(2), a)), b.product(n(2), call('sin', a), call('cos', a))),
    b.difference(call('cos', b.sum(a, c)), b.difference(b.product(call('cos', a), call('cos', c)), b.product(call('sin', a), call('sin', c)))),
    b.difference(call('sin', b.product(n(3), a)), b.difference(b.product(n(3), call('sin', a)), b.product(n(4), b.power(call('sin', a), 3)))),
    b.difference(call('tan', b.product(n(2), a)), b.quotient(b.product(n(2), call('tan', a)), b.difference(n(1), b.power(call('tan', a), 2)))),
    b.difference(b.power(call('cosh', a), 2), b.sum(n(1), b.power(call('sinh', a), 2))),
    b.difference(call('exp', a), b.sum(call('cosh', a), call('sinh', a))),
    b.difference(call('exp', b.sum(a, c)), b.product(call('exp', a), call('exp', c))),
    b.difference(call('log', n(6)), b.sum(call('log', n(2)), call('log', n(3)))),
    b.difference(b.power(b.constant('e'), b.product(b.constant('i'), a)), b.sum(call('cos', a), b.product(b.constant('i'), call('sin', a)))),
    b.difference(b.squareRoot(b.sum(n(5), b.product(n(2), b.squareRoot(n(6))))), b.sum(b.squareRoot(n(2)), b.squareRoot(n(3)))),
    b.difference(b.product(b.power(a, s('alpha')), a), b.power(a, b.sum(s('alpha'), n(1)))),
    b.difference(b.power(b.power(a, s('alpha')), 2), b.power(a, b.product(n(2), s('alpha')))),
    // Machin's formula (1706), with the inverse tangents under a sine.
    b.difference(call('sin', b.difference(b.product(n(4), call('atan', b.quotient(n(1), n(5)))), call('atan', b.quotient(n(1), n(239))))), b.quotient(b.squareRoot(n(2)), n(2))),
  ])('%#', (e) => expect(ask(e).zero).toBe('yes'));

  it.each([
    // Near misses: e^(pi sqrt 163) is within 1e-12 of an integer (Hermite), 22/7 and 355/113 of pi.
    b.difference(call('exp', b.product(b.constant('pi'), b.squareRoot(n(163)))), n(262537412640768744n)),
    b.difference(b.constant('pi'), b.quotient(n(355), n(113))),
    b.difference(b.power(b.constant('e'), b.constant('pi')), b.sum(b.constant('pi'), n(20))),
    b.difference(call('sin', b.product(n(2), a)), b.product(n(2), call('sin', a))),
    b.difference(a, c),
    b.difference(call('log', n(3)), b.quotient(b.product(n(8), call('log', n(4))), n(10))),
    b.sum(b.squareRoot(n(2)), b.squareRoot(n(3)), b.negation(b.squareRoot(n(10)))),
    // 1 + W_1(1), since W = -1 only at -1/e (DLMF 4.13); a function of a parameter without an enclosure.
    b.sum(call('lambertW', n(1), n(1)), n(1)),
    b.difference(call('gamma', a), b.power(a, 2)),
    call('besselJ', n(0), a),
  ])('not %#', (e) => expect(ask(e).zero).toBe('no'));

  it('says undecided where neither form nor ball decides', () => {
    // sqrt(1+a) sqrt(1-a) = sqrt(1-a^2) for |a| <= 1 only in this form; no normal form of the field says so.
    const product = b.product(b.squareRoot(b.sum(n(1), b.power(c, 2), a)), n(1));
    expect(ask(b.difference(product, product)).zero).toBe('yes');
    const f = createField([], budget(5000));
    const unknown = f.fromExpression({ kind: 'call', function: 'someUnknownFunction', args: [n(1)] });
    expect(f.isZero(unknown)).toBe('undecided');
  });
});

describe('sign', () => {
  it.each([
    [b.sum(b.power(a, 2), b.power(c, 2)), [], 1],
    [b.sum(b.power(a, 2), n(1)), [], 1],
    [b.negation(b.sum(b.power(a, 4), n(1))), [], -1],
    [call('exp', a), [], 1],
    [b.product(a, c), [relation(a, '>', n(0)), relation(c, '<', n(0))], -1],
    [b.difference(a, c), [relation(a, '>', c)], 1],
    [b.difference(c, a), [relation(a, '>', c)], -1],
    [b.difference(b.product(n(2), a), b.product(n(2), c)), [relation(c, '<', a)], 1],
    [b.difference(n(1), b.power(c, 2)), [relation(c, '>=', n(0)), relation(c, '<=', n(Q.rational(9, 10)))], 1],
    [b.difference(c, n(Q.rational(4, 5))), [relation(c, '>=', n(Q.rational(9, 10))), relation(c, '<=', n(Q.rational(11, 10)))], 1],
    [b.difference(c, n(1)), [relation(c, '>=', n(Q.rational(9, 10))), relation(c, '<=', n(Q.rational(11, 10)))], 'undecided'],
    [b.difference(b.constant('pi'), n(3)), [], 1],
    [b.difference(call('log', n(2)), n(Q.rational(7, 10))), [], -1],
    [b.squareRoot(n(-2)), [], 'complex'],
    [a, [], 'undecided'],
    [call('log', a), [relation(a, '>', n(1))], 1],
    [call('log', a), [relation(a, '>', n(0)), relation(a, '<', n(1))], -1],
    [call('cosh', a), [], 1],
    [b.power(n(2), a), [], 1],
  ] as [Expression, Assumption[], unknown][])('%#', (e, assume, sign) => expect(ask(e, assume).sign).toBe(sign));

  it('records what a strict sign rests on', () => {
    expect(ask(b.power(a, 2))).toMatchObject({ sign: 1, needed: ['a != 0'] });
    expect(ask(b.power(a, 2), [relation(a, '!=', n(0))])).toMatchObject({ sign: 1, needed: [] });
  });
  it('knows which values are real', () => {
    expect(ask(b.squareRoot(b.difference(n(1), b.power(a, 2)))).real).toBe('undecided');
    expect(ask(b.sum(a, b.product(b.constant('i'), c))).real).toBe('no');
    expect(ask(b.product(b.sum(a, b.constant('i')), b.difference(a, b.constant('i')))).real).toBe('yes');
    expect(ask(b.power(b.sum(a, b.constant('i')), Q.rational(2)), [{ kind: 'domain', symbol: 'a', domain: 'complex' }]).real).toBe('undecided');
  });
  it('lists parameters in the order first seen, also inside functions', () => {
    expect(ask(b.sum(call('gamma', s('z')), b.power(s('b'), s('y')))).parameters).toEqual(['z', 'b', 'y']);
  });
});

describe('declined', () => {
  const f = createField([], budget(600_000));
  const failure = (body: () => unknown) => {
    const o = attempt(body);
    return o.ok ? null : o.error;
  };
  it('division by zero, also a hidden one', () => {
    expect(failure(() => f.divide(f.rational(1), f.rational(0)))?.code).toBe('no-expansion');
    const hidden = f.fromExpression(b.difference(call('sin', b.product(n(2), a)), b.product(n(2), call('sin', a), call('cos', a))));
    expect(failure(() => f.divide(f.rational(1), hidden))?.code).toBe('no-expansion');
    expect(failure(() => f.log(f.rational(0)))?.code).toBe('no-expansion');
    expect(failure(() => f.call('atan', [f.i]))?.code).toBe('no-expansion');
    expect(failure(() => f.call('atanh', [f.rational(1)]))?.code).toBe('no-expansion');
  });
  it('infinity, order terms and deep nesting', () => {
    expect(failure(() => f.fromExpression(b.constant('infinity')))?.code).toBe('bad-request');
    expect(failure(() => f.fromExpression({ kind: 'order', little: false, argument: a }))?.code).toBe('undecided');
    let deep: Expression = a;
    for (let i = 0; i < 100000; i += 1) deep = b.negation(deep);
    expect(failure(() => f.fromExpression(deep))?.code).toBe('unreadable');
  });
  it('powers too large to be worked out, in time', () => {
    const start = performance.now();
    expect(failure(() => f.power(f.fromExpression(b.sum(a, c, n(1))), f.rational(10n ** 9n)))?.code).toBe('undecided');
    expect(failure(() => f.power(f.rational(2), f.rational(10n ** 30n)))?.code).toBe('undecided');
    expect(performance.now() - start).toBeLessThan(3000);
  });
});
