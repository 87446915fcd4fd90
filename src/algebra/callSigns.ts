/** Signs, realness and growth of named functions, as far as short classical arguments give them; everything else is left to balls. */
import { Q } from '../expression/index.ts';
import { rationalOf } from './context.ts';
import { ANY, isNonNegative, isPositive, isRealSet, NEGATIVE, NIL, POSITIVE, REAL, type SignRules, type SignSet } from './signs.ts';
import type { Element } from './types.ts';

/** Real for every real argument (poles aside). */
const REAL_EVERYWHERE: ReadonlySet<string> = new Set([
  'sin', 'cos', 'sinh', 'cosh', 'asinh', 'atan', 'gamma', 'digamma', 'erf', 'erfc', 'erfi', 'erfcx', 'dawson', 'sinIntegral', 'sinhIntegral', 'fresnelS', 'fresnelC', 'cin', 'ein', 'expIntegralEi',
  'airyAi', 'airyBi', 'airyAiPrime', 'airyBiPrime', 'zeta', 'barnesG', 'clausen', 'inverseTangentIntegral', 'wrightOmega', 'floor', 'ceil', 'trunc', 'min', 'max', 'sign', 'abs', 'atan2',
]);
/** Real where the last argument is positive and the others are real. */
const REAL_FOR_POSITIVE: ReadonlySet<string> = new Set([
  'logGamma', 'logBarnesG', 'cosIntegral', 'coshIntegral', 'expIntegralE', 'upperGamma', 'lowerGamma', 'besselJ', 'besselY', 'besselI', 'besselK', 'struveH', 'struveL', 'kelvinBer', 'kelvinBei', 'kelvinKer', 'kelvinKei',
  'hurwitzZeta', 'polygamma', 'kummerU', 'parabolicD',
]);
/** Odd, and positive for positive arguments: integrals from 0 of a function that is positive, or whose successive half waves shrink (sin t/t, sin t^2, cos t^2). */
const SIGN_OF_ARGUMENT: ReadonlySet<string> = new Set(['sinh', 'asinh', 'atan', 'erf', 'erfi', 'dawson', 'sinIntegral', 'sinhIntegral', 'fresnelS', 'fresnelC', 'inverseTangentIntegral']);
const POSITIVE_EVERYWHERE: ReadonlySet<string> = new Set(['cosh', 'erfc', 'erfcx', 'wrightOmega']);
/** Positive where every argument is (DLMF 5.2.1, 10.25.2, 10.32.9, 6.2.1, 8.2.1, 9.2.2 with monotony, 25.11.25). */
const POSITIVE_FOR_POSITIVE: ReadonlySet<string> = new Set(['gamma', 'besselI', 'besselK', 'expIntegralE', 'airyAi', 'airyBi', 'upperGamma', 'lowerGamma', 'kummerU']);

/** The sign of f(args) from the signs of the arguments. */
export function signOfCall(id: string, args: readonly Element[], rules: SignRules): SignSet {
  const signs = args.map((a) => rules.of(a));
  const [first] = signs;
  const last = args[args.length - 1];
  if (first === undefined || last === undefined || !signs.every(isRealSet)) return ANY;
  if (POSITIVE_EVERYWHERE.has(id)) return POSITIVE;
  if (SIGN_OF_ARGUMENT.has(id)) return first;
  if (POSITIVE_FOR_POSITIVE.has(id) && signs.every(isPositive)) return POSITIVE;
  if ((id === 'airyAi' || id === 'airyBi') && isNonNegative(first)) return POSITIVE;
  if (id === 'besselI' && isNonNegative(first) && signs[1] === POSITIVE) return POSITIVE;
  if (id === 'besselK' && signs[1] === POSITIVE) return POSITIVE;
  if (id === 'upperGamma' && signs[1] === POSITIVE) return POSITIVE;
  const firstArgument = args[0];
  if (id === 'zeta' && firstArgument !== undefined && exceeds(firstArgument, 1)) return POSITIVE;
  if (id === 'hurwitzZeta' && firstArgument !== undefined && exceeds(firstArgument, 1) && signs[1] === POSITIVE) return POSITIVE;
  if (id === 'lambertW' && firstArgument !== undefined && rationalOf(firstArgument)?.num === 0n && isNonNegative(signs[1] ?? ANY)) return signs[1] ?? ANY;
  if (id === 'asin' || id === 'acos') {
    const r = rationalOf(last);
    if (r && Q.compare(Q.absolute(r), Q.ONE) <= 0) return id === 'asin' ? first : first === POSITIVE || first === NIL || first === NEGATIVE ? POSITIVE : REAL;
  }
  if (REAL_EVERYWHERE.has(id)) return REAL;
  if (REAL_FOR_POSITIVE.has(id) && signs[signs.length - 1] === POSITIVE) return REAL;
  return ANY;
}

const exceeds = (a: Element, n: number): boolean => {
  const r = rationalOf(a);
  return r !== null && Q.compare(r, Q.rational(n)) > 0;
};

/** No zeros at all in the complex plane, wherever there is a value (DLMF 5.2(i): 1/Gamma is entire). */
export const NEVER_ZERO: ReadonlySet<string> = new Set(['gamma', 'wrightOmega']);

/** Piecewise constant or glued functions: not analytic, so that varying arguments say nothing. */
export const NOT_ANALYTIC: ReadonlySet<string> = new Set(['floor', 'ceil', 'trunc', 'round', 'min', 'max', 'sign', 'abs', 'atan2', 'heaviside', 'mod', 'fmod', 'clamp', 'step', 'fract']);

/** Functions of one argument that satisfy no polynomial equation over the rational functions: they have infinitely many poles, zeros or sheets, or grow like an exponential. */
export const TRANSCENDENTAL: ReadonlySet<string> = new Set([
  'sin', 'cos', 'sinh', 'cosh', 'asin', 'acos', 'atan', 'asinh', 'acosh', 'atanh', 'gamma', 'logGamma', 'digamma', 'erf', 'erfc', 'erfi', 'erfcx', 'dawson', 'sinIntegral', 'cosIntegral', 'sinhIntegral', 'coshIntegral', 'expIntegralEi',
  'fresnelS', 'fresnelC', 'cin', 'ein', 'airyAi', 'airyBi', 'airyAiPrime', 'airyBiPrime', 'zeta', 'barnesG', 'logBarnesG', 'clausen', 'inverseTangentIntegral', 'ellipticKParameter', 'ellipticEParameter', 'wrightOmega',
]);
