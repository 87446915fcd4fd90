/** Bounds of special functions: asymptotic series with the theorems of DLMF, series at poles and logarithmic points, regular points. Truth: f - sum in 200-bit balls at the end where it is largest. */
import { describe, expect, test } from 'vitest';
import { build, type Expression } from '../../src/expression/index.ts';
import { boundRemainder } from '../../src/bound/index.ts';
import { expand, partialSum } from '../../src/expand/index.ts';
import { describe as describeFunction } from '../../src/functions/index.ts';
import { budget } from '../../src/outcome.ts';
import { readExact } from '../../src/read/index.ts';
import { encloseReal, real } from '../../src/rigorous/index.ts';

const x = build.symbol('x');
const call = (id: string, ...args: readonly (Expression | number)[]): Expression => build.call(id, ...args.map((a) => (typeof a === 'number' ? build.number(a) : a)));
function exact(text: string): Expression {
  const read = readExact(text);
  if (!read.ok) throw new Error(read.error.message);
  return read.value;
}

interface Row {
  readonly name: string;
  readonly f: Expression;
  readonly point: string;
  readonly terms: number;
  readonly interval: readonly [string, string];
  /** Where the remainder is largest, by its known monotony. */
  readonly worst: string;
  readonly ratio: number;
  readonly source: string;
}
const atInfinity: readonly Row[] = [
  { name: 'log Gamma', f: call('logGamma', x), point: 'inf', terms: 5, interval: ['5', 'inf'], worst: '5', ratio: 1.5, source: 'DLMF 5.11(ii)' },
  { name: 'psi', f: call('digamma', x), point: 'inf', terms: 4, interval: ['5', 'inf'], worst: '5', ratio: 1.5, source: 'DLMF 5.11(ii)' },
  { name: 'erfc', f: call('erfc', x), point: 'inf', terms: 4, interval: ['3', 'inf'], worst: '3', ratio: 1.5, source: 'DLMF 7.12(i)' },
  { name: 'exp(x^2) erfc x', f: build.product(call('exp', build.power(x, 2)), call('erfc', x)), point: 'inf', terms: 3, interval: ['3', 'inf'], worst: '3', ratio: 1.5, source: 'DLMF 7.12(i)' },
  { name: 'E_1', f: call('expIntegralE', 1, x), point: 'inf', terms: 4, interval: ['5', 'inf'], worst: '5', ratio: 1.5, source: 'DLMF 6.12(i)' },
  { name: 'Dawson', f: call('dawson', x), point: 'inf', terms: 3, interval: ['5', 'inf'], worst: '5', ratio: 1.5, source: 'DLMF 7.2.5 by parts' },
  { name: 'log G', f: call('logBarnesG', build.sum(build.number(1), x)), point: 'inf', terms: 8, interval: ['6', 'inf'], worst: '6', ratio: 1.5, source: 'DLMF 5.17.5' },
];
const elsewhere: readonly Row[] = [
  { name: 'Gamma at its pole', f: call('gamma', x), point: '0', terms: 4, interval: ['0', '1/2'], worst: '1/2', ratio: 1.02, source: 'DLMF 5.7.1' },
  { name: 'psi at its pole', f: call('digamma', x), point: '0', terms: 4, interval: ['0', '1/2'], worst: '1/2', ratio: 1.02, source: 'DLMF 5.7.4 with 5.5.2' },
  { name: 'J_0', f: call('besselJ', 0, x), point: '0', terms: 4, interval: ['-1', '1'], worst: '1', ratio: 1.02, source: 'DLMF 10.2.2' },
  { name: 'K_0', f: call('besselK', 0, x), point: '0', terms: 4, interval: ['0', '1'], worst: '1', ratio: 1.02, source: 'DLMF 10.31.2' },
  { name: 'E_1 at zero', f: call('expIntegralE', 1, x), point: '0', terms: 4, interval: ['0', '1'], worst: '1', ratio: 1.02, source: 'DLMF 6.6.2' },
  { name: 'Ci', f: call('cosIntegral', x), point: '0', terms: 4, interval: ['0', '2'], worst: '2', ratio: 1.02, source: 'DLMF 6.6.6' },
  { name: 'Si', f: call('sinIntegral', x), point: '0', terms: 4, interval: ['0', '2'], worst: '2', ratio: 1.02, source: 'DLMF 6.6.5' },
  { name: 'erf', f: call('erf', x), point: '0', terms: 4, interval: ['-1', '1'], worst: '1', ratio: 1.02, source: 'DLMF 7.6.1' },
  { name: 'Gamma(1/3, x)', f: exact('upperGamma(1/3,x)'), point: '0', terms: 3, interval: ['0', '1/2'], worst: '1/2', ratio: 1.02, source: 'DLMF 8.7.1, 8.2.3' },
  { name: 'Gamma(-2, x)', f: exact('upperGamma(-2,x)'), point: '0', terms: 4, interval: ['0', '1/2'], worst: '1/2', ratio: 1.02, source: 'DLMF 8.4.13, 8.19.12' },
  { name: 'G at zero', f: call('barnesG', x), point: '0', terms: 3, interval: ['-1/4', '1/4'], worst: '-1/4', ratio: 1.02, source: 'DLMF 5.17.1, 5.17.3' },
  { name: 'superfactorial', f: call('superfactorial', x), point: '0', terms: 3, interval: ['-1/4', '1/4'], worst: '-1/4', ratio: 1.02, source: 'DLMF 5.17.3' },
  { name: 'ber', f: call('kelvinBer', 0, x), point: '0', terms: 3, interval: ['-1', '1'], worst: '1', ratio: 1.02, source: 'DLMF 10.65.1' },
  { name: 'ker', f: call('kelvinKer', 0, x), point: '0', terms: 3, interval: ['0', '1'], worst: '1', ratio: 1.02, source: 'DLMF 10.65.3' },
  { name: 'kei_1', f: call('kelvinKei', 1, x), point: '0', terms: 4, interval: ['0', '1'], worst: '1', ratio: 1.02, source: 'DLMF 10.65.4' },
  { name: 'ker_(1/2)', f: exact('kelvinKer(1/2,x)'), point: '0', terms: 4, interval: ['0', '1'], worst: '1', ratio: 1.02, source: 'DLMF 10.61.2, 10.27.4' },
  { name: 'Ti_2', f: call('inverseTangentIntegral', x), point: '0', terms: 3, interval: ['-1/2', '1/2'], worst: '1/2', ratio: 1.02, source: 'sum (-1)^k x^(2k+1)/(2k+1)^2' },
  { name: 'D_(1/3)', f: exact('parabolicD(1/3,x)'), point: '0', terms: 3, interval: ['0', '1'], worst: '1', ratio: 1.02, source: 'DLMF 12.4.1, 12.2.6' },
  { name: 'U(1/3, x)', f: exact('parabolicU(1/3,x)'), point: '0', terms: 3, interval: ['0', '1'], worst: '1', ratio: 1.02, source: 'DLMF 12.2.1' },
  { name: 'B_3(x) at 1', f: exact('bernoulliPolynomial(3,x)'), point: '1', terms: 2, interval: ['1/2', '3/2'], worst: '3/2', ratio: 1.02, source: 'DLMF 24.2.5' },
  { name: 'Ein', f: call('ein', x), point: '0', terms: 3, interval: ['-1', '1'], worst: '-1', ratio: 1.02, source: 'DLMF 6.6.4' },
  { name: 'Cin', f: call('cin', x), point: '0', terms: 3, interval: ['-1', '1'], worst: '1', ratio: 1.02, source: 'DLMF 6.6.6' },
  { name: 'Shi', f: call('sinhIntegral', x), point: '0', terms: 3, interval: ['-1', '1'], worst: '1', ratio: 1.02, source: 'DLMF 6.6.5' },
  { name: 'sn', f: exact('jacobiSn(x,1/2)'), point: '0', terms: 3, interval: ['-1', '1'], worst: '1', ratio: 1.02, source: 'DLMF 22.10.1' },
  { name: 'dn at 1', f: exact('jacobiDn(x,1/2)'), point: '1', terms: 3, interval: ['0', '2'], worst: '0', ratio: 1.02, source: 'DLMF 22.13.3' },
  { name: 'Pi(1/3, k)', f: exact('ellipticPi(1/3,x)'), point: '0', terms: 3, interval: ['-1/2', '1/2'], worst: '1/2', ratio: 1.02, source: 'DLMF 19.4.4, 19.5.4' },
  { name: 'W_0 at -1/e', f: exact('lambertW(0,x)'), point: '-exp(-1)', terms: 4, interval: ['-exp(-1)', '-1/5'], worst: '-1/5', ratio: 1.02, source: 'DLMF 4.13.6' },
  { name: 'W_(-1) at -1/e', f: exact('lambertW(-1,x)'), point: '-exp(-1)', terms: 3, interval: ['-exp(-1)', '-7/20'], worst: '-7/20', ratio: 1.02, source: 'DLMF 4.13.6' },
];
describe.each([...atInfinity, ...elsewhere])('$name ($source)', ({ f, point, terms, interval, worst, ratio }) => {
  test('is bounded, and tightly', () => {
    const expanded = expand({ function: f, variable: x, point: point === 'inf' ? 'inf' : exact(point), side: 'both', terms, assumptions: [] }, budget(10_000));
    if (!expanded.ok) throw new Error(expanded.error.message);
    const bound = boundRemainder({ expansion: expanded.value, interval: { lower: exact(interval[0]), upper: exact(interval[1]) }, measure: 'absolute', assumptions: [], budget: budget(20_000) });
    if (!bound.ok) throw new Error(bound.error.message);
    const environment = new Map([['x', encloseReal(exact(worst), new Map(), 240) ?? real.ONE]]);
    const [value, sum] = [encloseReal(f, environment, 220, describeFunction), encloseReal(partialSum(expanded.value), environment, 220, describeFunction)];
    if (!value || !sum || !bound.value.upperRational || !bound.value.lowerRational) throw new Error('no value');
    const truth = real.absolute(real.subtract(value, sum, 220));
    expect(real.compare(real.fromRational(bound.value.upperRational, 220), truth)).not.toBe(-1);
    const over = real.divide(real.fromRational(bound.value.upperRational, 220), truth, 60);
    expect(over && real.toDouble(over)).toBeLessThan(ratio);
    const under = real.divide(real.fromRational(bound.value.lowerRational, 220), truth, 60);
    expect(under && real.toDouble(under)).toBeLessThan(1.0001);
  });
});

test('a free scale becomes a factor', () => {
  const c = { kind: 'relation', left: build.symbol('c'), relation: '>', right: build.number(0) } as const;
  const f = exact('sqrt(c^2+x^2)');
  const expanded = expand({ function: f, variable: x, point: build.number(0), side: 'both', terms: 3, assumptions: [c] }, budget(5000));
  if (!expanded.ok) throw new Error(expanded.error.message);
  const bound = boundRemainder({ expansion: expanded.value, interval: { lower: build.number(0), upper: exact('c/10') }, measure: 'absolute', assumptions: [c], budget: budget(5000) });
  if (!bound.ok) throw new Error(bound.error.message);
  // With x = c u: c (sqrt(1 + u^2) - 1 - u^2/2 + u^4/8) at u = 1/10, which is 6.2112e-8.
  expect(bound.value.value?.startsWith('6.21120')).toBe(true);
  expect(bound.value.factor).toEqual(build.symbol('c'));
});

describe('where a growing prefactor multiplies what the sum leaves out', () => {
  test.each(['expIntegralEi(x)', 'erfi(x)', 'besselI(0,x)'])('%s has no bound at infinity, and that is said (DLMF 6.12.2, 7.12.1, 10.40.1)', (text) => {
    const expanded = expand({ function: exact(text), variable: x, point: 'inf', side: 'both', terms: 3, assumptions: [] }, budget(20_000));
    if (!expanded.ok) throw new Error(expanded.error.message);
    const interval = { lower: build.number(5), upper: build.constant('infinity') };
    const bound = boundRemainder({ expansion: expanded.value, interval, measure: 'absolute', assumptions: [], budget: budget(20_000) });
    expect(bound.ok && bound.value.value).toBeNull();
    expect(bound.ok && bound.value.place).toEqual(build.constant('infinity'));
  });
});
