/**
 * Every local form against the enclosure of the function itself, which is computed by other means: the form with its series cut after n coefficients must approach the function,
 * and faster by the right power, as the offset shrinks. Sources of the forms stand beside them in src/functions.
 */
import { describe, expect, it } from 'vitest';
import { build, type Expression } from '../../src/expression/index.ts';
import { describe as description, type Place } from '../../src/functions/index.ts';
import { type ComplexBall, complex, real } from '../../src/rigorous/index.ts';
import { rational, tree, truncated, complexValueOf } from './support.ts';

interface Case {
  readonly id: string;
  /** `*` marks the argument that varies. */
  readonly args: readonly string[];
  /** A rational, `inf`, `-inf`, or an exact tree. */
  readonly at: string | Expression;
  readonly sides?: readonly (1 | -1)[];
  /** Offsets, or sizes of the argument at infinity: two of them, the second nearer to the place. */
  readonly sizes?: readonly [string, string];
  readonly bits?: number;
}
const PRECISION = 150;
const TERMS = 9;
const u = build.symbol('u');
const z = build.symbol('z');

/** -log2 of the relative error of the truncated form at the two sizes. */
function errors(c: Case, side: 1 | -1): readonly [number, number] {
  const d = description(c.id);
  const index = c.args.indexOf('*');
  const atInfinity = c.at === 'inf' || c.at === '-inf';
  const center = typeof c.at === 'string' ? (atInfinity ? build.number(0) : tree(c.at)) : c.at;
  const place: Place = atInfinity ? { kind: 'infinite', argument: z, direction: c.at === 'inf' ? 1 : -1 } : { kind: 'finite', center, offset: u, side: side === 1 ? 'right' : 'left' };
  const trees = c.args.map((a) => (a === '*' ? (atInfinity ? z : build.sum(center, u)) : tree(a)));
  const form = d?.local?.(trees, index, place);
  if (!form) throw new Error(`no form of ${c.id} at ${JSON.stringify(c.at)}`);
  const [far, near] = (c.sizes ?? (atInfinity ? ['40', '160'] : ['1/50', '1/200'])).map((size) => {
    const s = rational(size);
    const signed = side * (atInfinity && c.at === '-inf' ? -1 : 1);
    const value: ComplexBall = complex.fromReal(real.fromRational({ num: s.num * BigInt(signed), den: s.den }, PRECISION));
    const environment = new Map([[atInfinity ? 'z' : 'u', value]]);
    const truth = complexValueOf(build.call(c.id, ...trees), PRECISION, environment);
    const approximation = truncated(form, TERMS, environment, PRECISION);
    if (!truth || !approximation) throw new Error(`no value of ${c.id} at ${size}: ${truth ? 'form' : 'function'}`);
    const error = complex.absolute(complex.subtract(truth, approximation, PRECISION), 40);
    return real.exponentOf(complex.absolute(truth, 40)) - real.exponentOf(error);
  });
  return [far ?? 0, near ?? 0];
}

const both = [1, -1] as const;
// Parameters whose sums must be seen to be integers are dyadic: they stay exact as balls.
const forms: readonly Case[] = [
  // elementary
  { id: 'asin', args: ['*'], at: '1', sides: [-1] },
  { id: 'acos', args: ['*'], at: '-1' },
  { id: 'atan', args: ['*'], at: 'inf' },
  { id: 'asinh', args: ['*'], at: '-inf' },
  { id: 'acosh', args: ['*'], at: '1' },
  { id: 'acosh', args: ['*'], at: 'inf' },
  { id: 'atanh', args: ['*'], at: '1', sides: [-1] },
  // gamma family
  { id: 'gamma', args: ['*'], at: '-3', sides: both },
  { id: 'gamma', args: ['*'], at: '0', sides: both },
  { id: 'gamma', args: ['*'], at: '5/2' },
  { id: 'gamma', args: ['*'], at: 'inf' },
  { id: 'logGamma', args: ['*'], at: 'inf' },
  { id: 'logGamma', args: ['*'], at: '0' },
  { id: 'digamma', args: ['*'], at: '-2', sides: both },
  { id: 'digamma', args: ['*'], at: '1/3' },
  { id: 'digamma', args: ['*'], at: 'inf' },
  { id: 'polygamma', args: ['2', '*'], at: '-1', sides: both },
  { id: 'polygamma', args: ['3', '*'], at: 'inf' },
  { id: 'polygamma', args: ['1', '*'], at: '1/2' },
  { id: 'upperGamma', args: ['1/3', '*'], at: '0' },
  { id: 'upperGamma', args: ['-2', '*'], at: '0' },
  { id: 'upperGamma', args: ['1/3', '*'], at: 'inf' },
  { id: 'lowerGamma', args: ['7/3', '*'], at: '0' },
  { id: 'logBarnesG', args: ['*'], at: 'inf', sizes: ['15', '30'] },
  { id: 'logBarnesG', args: ['*'], at: '3', sizes: ['1/20', '1/80'] },
  { id: 'barnesG', args: ['*'], at: '-1', sides: both },
  // integrals
  { id: 'erf', args: ['*'], at: '0', sides: both },
  { id: 'erfc', args: ['*'], at: 'inf', sizes: ['8', '16'] },
  { id: 'erfc', args: ['*'], at: '-inf', sizes: ['4', '8'] },
  { id: 'erfi', args: ['*'], at: 'inf', sizes: ['8', '16'] },
  { id: 'dawson', args: ['*'], at: 'inf', sizes: ['8', '16'] },
  { id: 'dawson', args: ['*'], at: '0' },
  { id: 'erfinv', args: ['*'], at: '0' },
  { id: 'fresnelS', args: ['*'], at: 'inf', sizes: ['6', '9'] },
  { id: 'fresnelC', args: ['*'], at: '-inf', sizes: ['6', '9'] },
  { id: 'expIntegralEi', args: ['*'], at: '0', sides: both },
  { id: 'expIntegralEi', args: ['*'], at: 'inf' },
  { id: 'expIntegralEi', args: ['*'], at: '-inf' },
  { id: 'expIntegralE', args: ['3', '*'], at: '0' },
  { id: 'expIntegralE', args: ['1/3', '*'], at: '0' },
  { id: 'expIntegralE', args: ['1/3', '*'], at: 'inf' },
  { id: 'sinIntegral', args: ['*'], at: 'inf' },
  { id: 'cosIntegral', args: ['*'], at: 'inf' },
  { id: 'cosIntegral', args: ['*'], at: '0' },
  { id: 'sinhIntegral', args: ['*'], at: 'inf' },
  { id: 'coshIntegral', args: ['*'], at: '0' },
  // Bessel family
  ...(['besselJ', 'besselY', 'besselI', 'besselK'] as const).flatMap((id): Case[] => [
    { id, args: ['2', '*'], at: '0' },
    { id, args: ['1/3', '*'], at: '0' },
    { id, args: ['1/3', '*'], at: 'inf' },
    { id, args: ['2', '*'], at: 'inf' },
  ]),
  { id: 'besselJ', args: ['3', '*'], at: '-inf' },
  ...(['airyAi', 'airyBi', 'airyAiPrime', 'airyBiPrime'] as const).flatMap((id): Case[] => [
    { id, args: ['*'], at: '0', sizes: ['1', '1/4'] },
    { id, args: ['*'], at: 'inf', sizes: ['12', '30'] },
    { id, args: ['*'], at: '-inf', sizes: ['12', '30'] },
  ]),
  { id: 'struveH', args: ['1', '*'], at: 'inf' },
  { id: 'struveL', args: ['1/3', '*'], at: 'inf' },
  { id: 'struveH', args: ['1/3', '*'], at: '0' },
  ...(['kelvinBer', 'kelvinBei', 'kelvinKer', 'kelvinKei'] as const).flatMap((id): Case[] => [
    { id, args: ['0', '*'], at: '0', sizes: ['1', '1/4'] },
    { id, args: ['1', '*'], at: 'inf', sizes: ['30', '90'] },
  ]),
  { id: 'kelvinKer', args: ['1/3', '*'], at: '0', sizes: ['1', '1/4'] },
  // elliptic
  { id: 'ellipticKParameter', args: ['*'], at: '1', sides: [-1] },
  { id: 'ellipticKParameter', args: ['*'], at: '-inf', sizes: ['1000', '4000'] },
  { id: 'ellipticEParameter', args: ['*'], at: '1', sides: [-1] },
  { id: 'ellipticEParameter', args: ['*'], at: '0' },
  { id: 'ellipticFParameter', args: ['4/5', '*'], at: '0' },
  { id: 'ellipticPiParameter', args: ['1/5', '*'], at: '0' },
  { id: 'ellipticPiParameter', args: ['*', '1/5'], at: '0' },
  { id: 'jacobiSn', args: ['*', '1/3'], at: '1' },
  { id: 'jacobiDn', args: ['*', '4/5'], at: '0' },
  // Lambert W
  { id: 'lambertW', args: ['0', '*'], at: '0', sides: both },
  { id: 'lambertW', args: ['0', '*'], at: '2' },
  { id: 'lambertW', args: ['-1', '*'], at: '-1/10', sizes: ['1/1000', '1/4000'] },
  { id: 'lambertW', args: ['0', '*'], at: build.negation(build.call('exp', build.number(-1))), sizes: ['1/1000', '1/16000'] },
  { id: 'lambertW', args: ['-1', '*'], at: build.negation(build.call('exp', build.number(-1))), sizes: ['1/1000', '1/16000'] },
  { id: 'wrightOmega', args: ['*'], at: 'inf', sizes: ['500', '4000'] },
  { id: 'wrightOmega', args: ['*'], at: '1' },
  // zeta and polylogarithms
  { id: 'zeta', args: ['*'], at: '1', sides: both },
  { id: 'zeta', args: ['*'], at: '0', sides: both },
  { id: 'zeta', args: ['*'], at: '3' },
  { id: 'zeta', args: ['*'], at: 'inf', sizes: ['20', '30'] },
  { id: 'hurwitzZeta', args: ['7/3', '*'], at: 'inf' },
  { id: 'polylog', args: ['2', '*'], at: '1', sides: [-1] },
  { id: 'polylog', args: ['3', '*'], at: '-inf' },
  { id: 'polylog', args: ['3/2', '*'], at: '1', sides: [-1] },
  { id: 'clausen', args: ['*'], at: '0', sides: both },
  { id: 'inverseTangentIntegral', args: ['*'], at: 'inf' },
  { id: 'debye', args: ['3', '*'], at: '0' },
  { id: 'debye', args: ['2', '*'], at: 'inf', sizes: ['6', '12'] },
  // hypergeometric
  { id: 'hypergeometric', args: ['2', '1', '1/3', '3/4', '5/3', '*'], at: '1', sides: [-1] },
  { id: 'hypergeometric', args: ['2', '1', '1/4', '3/4', '3', '*'], at: '1', sides: [-1] },
  { id: 'hypergeometric', args: ['2', '1', '9/4', '3/4', '1', '*'], at: '1', sides: [-1] },
  { id: 'hypergeometric', args: ['2', '1', '1/3', '3/4', '5/3', '*'], at: '-inf' },
  { id: 'hypergeometric', args: ['2', '1', '1/4', '9/4', '7/8', '*'], at: '-inf' },
  { id: 'hypergeometric', args: ['1', '1', '1/3', '3/4', '*'], at: 'inf' },
  { id: 'hypergeometric', args: ['0', '1', '3/4', '*'], at: '-inf', sizes: ['800', '6400'] },
  { id: 'kummerU', args: ['1/3', '3', '*'], at: '0' },
  { id: 'kummerU', args: ['1/3', '3/4', '*'], at: '0' },
  { id: 'kummerU', args: ['1/4', '3/8', '*'], at: 'inf' },
  { id: 'parabolicD', args: ['1/4', '*'], at: 'inf', sizes: ['8', '16'] },
  { id: 'parabolicD', args: ['1/4', '*'], at: '-inf', sizes: ['8', '16'] },
];

describe('local forms', () => {
  it.each(forms.map((c) => [`${c.id}(${c.args.join(', ')}) at ${typeof c.at === 'string' ? c.at : 'an exact point'}`, c] as const))('%s', (_label, c) => {
    for (const side of c.sides ?? [1]) {
      const [far, near] = errors(c, side);
      expect(near, `side ${side}: bits of agreement near the place`).toBeGreaterThan(c.bits ?? 30);
      expect(near - far, `side ${side}: gain towards the place`).toBeGreaterThan(far > 120 ? -20 : 3);
    }
  });
});
