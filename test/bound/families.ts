/** Functions of the registry that the shapes of sampling.ts do not name: the arguments that stay constant, where to expand, and the range that intervals stay in. */
import { build, type Expression, Q } from '../../src/expression/index.ts';

export interface Family {
  readonly make: (random: () => number) => Expression;
  readonly points: readonly (number | 'inf')[];
  readonly low: number;
  readonly high: number;
}

const x = build.symbol('x');
const number = (text: string): Expression => {
  const value = Q.fromDecimal(text);
  if (!value) throw new Error(text);
  return build.number(value);
};
/** `args` are decimals, and x where the variable stands. */
const family = (id: string, args: readonly string[], points: readonly (number | 'inf')[], low: number, high: number): Family => ({ make: () => build.call(id, ...args.map((arg) => (arg === 'x' ? x : number(arg)))), points, low, high });
const each = (ids: readonly string[], args: readonly string[], points: readonly (number | 'inf')[], low: number, high: number): readonly Family[] => ids.map((id) => family(id, args, points, low, high));

export const rareFamilies: readonly Family[] = [
  ...each(['normalizedSinc', 'versin', 'cospi', 'exp10', 'inverseTangentIntegral', 'inverseGudermannian', 'tanpi', 'erfinv'], ['x'], [0], -0.4, 0.4),
  ...each(['erfcx', 'complementarySinIntegral'], ['x'], [0, 1, 'inf'], 0, 3),
  ...each(['log10', 'log2', 'inverseSqrt', 'abs', 'sign', 'acot', 'acsch', 'barnesG', 'logBarnesG', 'hyperfactorial', 'superfactorial', 'doubleFactorial', 'spence', 'clausen', 'erfcinv'], ['x'], [1], 0.6, 1.5),
  ...each(['logit', 'normalQuantile', 'asech', 'ellipticKComplementary', 'ellipticEComplementary', 'ellipticNome', 'ellipticKParameter', 'ellipticEParameter'], ['x'], [0.5], 0.25, 0.75),
  ...each(['asec', 'acsc', 'acosh', 'acoth', 'logIntegral', 'offsetLogIntegral', 'dirichletEta', 'dirichletBeta', 'zeta'], ['x'], [2], 1.5, 3),
  ...each(['wrightOmega'], ['x'], [0, 1], -1, 2),
  family('zeta', ['x'], [1], 0.5, 1.5),
  family('log1mexp', ['x'], [-1], -2, -0.5),
  family('zetaDerivative', ['1', 'x'], [2], 1.5, 3),
  family('lambertW', ['-1', 'x'], [-0.25], -0.34, -0.1),
  ...each(['hypot', 'atan2', 'min', 'max', 'agm'], ['x', '2'], [1], 0.5, 1.5),
  ...each(['kummerM', 'kummerU'], ['0.5', '1.5', 'x'], [0, 1, 'inf'], 0, 3),
  ...each(['parabolicD', 'parabolicU', 'legendreP'], ['0.5', 'x'], [0], -0.75, 0.75),
  ...each(['chebyshevT', 'chebyshevU', 'hermiteH', 'laguerreL', 'bernoulliPolynomial'], ['3', 'x'], [0, 1], -1, 1),
  ...each(['sphericalY', 'sphericalI', 'sphericalK'], ['1', 'x'], [0, 1], 0, 2),
  ...each(['kelvinKer', 'kelvinKei'], ['0', 'x'], [0, 1], 0, 2),
  family('struveL', ['0', 'x'], [0, 1], 0, 2),
  family('hurwitzZeta', ['1.5', 'x'], [1], 0.5, 2),
  ...each(['legendreChi', 'polylog'], ['2', 'x'], [0], -0.75, 0.75),
  ...each(['debye', 'brillouin'], ['3', 'x'], [0, 1], -1, 2),
  family('fermiDirac', ['1', 'x'], [0], -1, 1),
  family('boseEinstein', ['1', 'x'], [-1], -2, -0.5),
  ...each(['binomial', 'pochhammer', 'fallingFactorial'], ['x', '2'], [0, 1], -1, 2),
  ...each(['beta', 'logBeta'], ['0.5', 'x'], [1], 0.5, 2),
  ...each(['upperGamma', 'lowerGamma', 'regularizedUpperGamma', 'regularizedLowerGamma'], ['0.5', 'x'], [0, 1], 0, 2),
  ...each(['upperGamma', 'lowerGamma'], ['0.5', 'x'], ['inf'], 3, 30),
  ...each(['incompleteBeta', 'regularizedBeta'], ['x', '0.5', '2'], [0, 0.5], 0, 0.75),
  family('generalizedHarmonic', ['x', '2'], [1], 0.5, 2),
  ...each(['ellipticF', 'ellipticEIncomplete', 'ellipticFParameter', 'ellipticEIncompleteParameter', 'ellipticPi', 'ellipticPiParameter', 'jacobiSn', 'jacobiCn', 'jacobiDn', 'jacobiAm'], ['x', '0.5'], [0], -0.5, 0.5),
  ...each(['jacobiNs', 'jacobiNc', 'jacobiNd', 'jacobiSc', 'jacobiSd', 'jacobiCs', 'jacobiCd', 'jacobiDs', 'jacobiDc'], ['x', '0.5'], [0, 0.5], 0, 1),
];

/** No function of one real variable with values on the real line: numbers with an index, steps, complex values, roots by their index. */
export const WITHOUT_BOUND: readonly string[] = ['polynomialRoot', 'fma', 'floor', 'ceil', 'trunc', 'bernoulliNumber', 'eulerNumber', 'stieltjes', 'hankel1', 'hankel2'];
