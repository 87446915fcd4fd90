/** Solutions in a small parameter: published corrections, secular terms, and the expansion put back. */
import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { createField } from '../../src/algebra/index.ts';
import { expand, expandPerturbation, type Expansion, partialSum } from '../../src/expand/index.ts';
import { build, type Expression, mapChildren, substitute } from '../../src/expression/index.ts';
import { describe as describeFunction, differentiate } from '../../src/functions/index.ts';
import { budget, type Outcome } from '../../src/outcome.ts';
import { residuals, statementOf } from './differential-tools.ts';
import { plain, positive, same } from './tools.ts';

function perturb(text: string, terms = 2, names: readonly string[] = []): Outcome<Expansion> {
  return expandPerturbation({ statement: statementOf(text, { variable: 'q' }), variable: build.symbol('q'), assumptions: positive(...names), terms }, budget(20000));
}
function perturbed(text: string, terms = 2, names: readonly string[] = []): Expansion {
  const found = perturb(text, terms, names);
  if (!found.ok) throw new Error(`${text}: ${found.error.message}`);
  return found.value;
}
const secular = (found: Expansion): boolean => found.assumptions.some((a) => a.includes('secular'));

describe('published corrections', () => {
  test('Duffing: cos t + q ((cos 3t - cos t)/32 - 3 t sin(t)/8) (Bender & Orszag, 11.1, from memory)', () => {
    const found = perturbed('\\ddot x + x + q x^3 = 0, x(0)=1, \\dot x(0)=0');
    expect(same(partialSum(found), plain('cos(t) + q*((cos(3*t) - cos(t))/32 - 3*t*sin(t)/8)'))).toBe(true);
    expect(found.assumptions).toContain('the term in q grows like t (secular): valid while q*t is small');
  });
  test('weak damping: the expansion of exp(-q t) (cos(t sqrt(1-q^2)) + q sin(t sqrt(1-q^2))/sqrt(1-q^2))', () => {
    const exact = expand({ function: plain('exp(-q*t)*(cos(t*sqrt(1-q^2)) + q*sin(t*sqrt(1-q^2))/sqrt(1-q^2))'), variable: build.symbol('q'), point: build.number(0), side: 'both', terms: 4, assumptions: [] }, budget(20000));
    const found = perturbed('\\ddot x + 2q\\dot x + x = 0, x(0)=1, \\dot x(0)=0', 4);
    expect(exact.ok && same(partialSum(found), partialSum(exact.value))).toBe(true);
  });
  test('van der Pol has no secular term on its limit cycle of amplitude 2, and one elsewhere', () => {
    expect(secular(perturbed('\\ddot x - q(1-x^2)\\dot x + x = 0, x(0)=2, \\dot x(0)=0'))).toBe(false);
    expect(secular(perturbed('\\ddot x - q(1-x^2)\\dot x + x = 0, x(0)=1, \\dot x(0)=0'))).toBe(true);
  });
  test('y\' + y + q y^2 = 0: the expansion of the exact solution e^-x/(1 + q (1 - e^-x))', () => {
    const exact = expand({ function: plain('exp(-x)/(1 + q*(1 - exp(-x)))'), variable: build.symbol('q'), point: build.number(0), side: 'both', terms: 4, assumptions: [] }, budget(20000));
    expect(exact.ok && same(partialSum(perturbed("y' + y + q y^2 = 0, y(0)=1", 4)), partialSum(exact.value))).toBe(true);
  });
  test('pendulum of small amplitude: the linear problem starts from a constant solution', () => {
    const found = perturbed('\\ddot y + \\sin y = 0, y(0)=q, \\dot y(0)=0');
    expect(same(partialSum(found), plain('q*cos(t) + q^3*((cos(t) - cos(3*t))/192 + t*sin(t)/16)'))).toBe(true);
    expect(found.assumptions.some((a) => a.includes('q^2*t is small'))).toBe(true);
  });
  test('projectile in a field that weakens with height (Lin & Segel, ch. 7, from memory)', () => {
    expect(same(partialSum(perturbed("y'' = -\\frac{1}{(1+q y)^2}, y(0)=0, y'(0)=1")), plain('x - x^2/2 + q*(x^3/3 - x^4/12)'))).toBe(true);
  });
});

describe('kinds of problems', () => {
  test('a correction that ends is exact', () => {
    const found = perturbed('\\ddot x + x = q, x(0)=1, \\dot x(0)=0', 4);
    expect(found.exact).toBe(true);
    expect(same(partialSum(found), plain('cos(t) + q*(1 - cos(t))'))).toBe(true);
  });
  test('initial values may hold the parameter; a driving at another frequency needs it to differ', () => {
    const found = perturbed('\\ddot x + x = q\\cos(w t), x(0)=1+q, \\dot x(0)=0');
    expect(found.assumptions.some((a) => a.includes('!= 0'))).toBe(true);
    expect(same(partialSum(found), plain('cos(t) + q*(cos(t) + (cos(w*t) - cos(t))/(1 - w^2))'))).toBe(true);
  });
  test('driven at resonance: t sin(t)/2 is secular', () => {
    expect(secular(perturbed('\\ddot x + x = q\\cos t, x(0)=1, \\dot x(0)=0'))).toBe(true);
  });
  test.each([
    ["q y'' + y' + y = 0, y(0)=0, y'(0)=1", 'singular perturbation'],
    ["y' = y^2 + q, y(0)=1", 'closed form'],
    ['\\ddot x + x + q|\\dot x|\\dot x = 0, x(0)=1, \\dot x(0)=0', 'not analytic'],
    ['\\ddot x + x + q\\cos x = 0, x(0)=1, \\dot x(0)=0', 'closed form'],
  ])('%s is declined: %s', (text, reason) => {
    const found = perturb(text);
    expect(found.ok ? '' : found.error.message).toContain(reason);
  });
});

test('put back, the first n powers of the parameter vanish identically in t', () => {
  const forces = ['x^2', 'x^3', 'x\\dot x', '\\dot x^2', 'x^2\\dot x', '\\cos t', 't x', 'e^{-t}'];
  const linear = ['\\ddot x + x', '\\ddot x + 4x', '\\ddot x + 3\\dot x + 2x', '\\ddot x + 2\\dot x + x', '\\ddot x', '\\ddot x - x', '\\ddot x + 2\\dot x + 2x'];
  fc.assert(
    fc.property(fc.constantFrom(...linear), fc.subarray(forces, { minLength: 1, maxLength: 2 }), fc.integer({ min: -2, max: 2 }), fc.integer({ min: -2, max: 2 }), (left, right, a, b) => {
      const text = `${left} = q(${right.join(' + ')}), x(0)=${a}, \\dot x(0)=${b}`;
      const found = perturbed(text, 2);
      const statement = statementOf(text, { variable: 'q' });
      const solution = partialSum(found);
      const [residual] = residuals(statement, new Map([['x', solution]]));
      const field = createField([], budget(20000), describeFunction);
      const power = found.remainder?.power;
      const order = power?.kind === 'number' ? Number(power.value.num) : 1;
      // Carry the derivatives in t out, then look at powers of q.
      const carried = carriedOut(residual ?? build.number(1));
      for (let k = 0; k < order; k += 1) {
        const coefficient = coefficientAtZero(carried, k);
        expect(field.isZero(field.fromExpression(coefficient)), `${text}: power ${k}`).toBe('yes');
      }
    }),
    { numRuns: 12 },
  );
});

function carriedOut(e: Expression): Expression {
  const inner = mapChildren(e, carriedOut);
  if (inner.kind !== 'derivative' || inner.variable.kind !== 'symbol') return inner;
  let value: Expression = inner.body;
  for (let k = 0; k < inner.times; k += 1) value = differentiate(value, inner.variable.name) ?? value;
  return value;
}
function coefficientAtZero(e: Expression, k: number): Expression {
  let value = e;
  for (let j = 0; j < k; j += 1) value = differentiate(value, 'q') ?? value;
  return substitute(value, 'q', build.number(0));
}
