/** Constants that libraries of several languages name, as exact expressions. */
import { build, type Expression, Q } from '../../../expression/index.ts';

const { call, constant, number, power, product, quotient, squareRoot } = build;

export const PI = constant('pi');
export const E = constant('e');
export const I = constant('i');
export const INFINITY = constant('infinity');
export const EULER_GAMMA = constant('eulerGamma');
export const CATALAN = constant('catalan');
export const TAU = product(number(2), PI);
export const piOver = (n: number): Expression => quotient(PI, number(n));
export const INVERSE_PI = quotient(number(1), PI);
export const TWO_INVERSE_PI = quotient(number(2), PI);
export const TWO_INVERSE_ROOT_PI = quotient(number(2), squareRoot(PI));
export const INVERSE_ROOT_PI = quotient(number(1), squareRoot(PI));
export const ROOT_TWO = squareRoot(number(2));
export const INVERSE_ROOT_TWO = quotient(number(1), ROOT_TWO);
export const ROOT_THREE = squareRoot(number(3));
export const INVERSE_ROOT_THREE = quotient(number(1), ROOT_THREE);
export const LOG_TWO = call('log', number(2));
export const LOG_TEN = call('log', number(10));
export const LOG2_E = quotient(number(1), LOG_TWO);
export const LOG10_E = quotient(number(1), LOG_TEN);
export const LOG2_TEN = quotient(LOG_TEN, LOG_TWO);
export const LOG10_TWO = quotient(LOG_TWO, LOG_TEN);
export const GOLDEN_RATIO = quotient(build.sum(number(1), squareRoot(number(5))), number(2));
export const ROOT_E = power(E, Q.HALF);
export const ROOT_PI = squareRoot(PI);
export const ROOT_GOLDEN_RATIO = squareRoot(GOLDEN_RATIO);

/** POSIX <math.h> "Macros": M_E to M_SQRT1_2. */
export const POSIX: Readonly<Record<string, Expression>> = {
  M_E: E,
  M_LOG2E: LOG2_E,
  M_LOG10E: LOG10_E,
  M_LN2: LOG_TWO,
  M_LN10: LOG_TEN,
  M_PI: PI,
  M_PI_2: piOver(2),
  M_PI_4: piOver(4),
  M_1_PI: INVERSE_PI,
  M_2_PI: TWO_INVERSE_PI,
  M_2_SQRTPI: TWO_INVERSE_ROOT_PI,
  M_SQRT2: ROOT_TWO,
  M_SQRT1_2: INVERSE_ROOT_TWO,
  INFINITY,
  HUGE_VAL: INFINITY,
};
