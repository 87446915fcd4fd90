/** Whether a sum that equals its function near the point equals it on the whole side that it serves: proved where the function is real-analytic all along that side. */
import type { Expansion } from '../expand/index.ts';
import { build, type CallNode, children, dependsOn, type Expression, isFieldOperation, linearIn, Q } from '../expression/index.ts';
import { describe } from '../functions/index.ts';
import { encloseReal, real } from '../rigorous/index.ts';
import { isOnePiece } from './exactSum.ts';

/** Real-analytic on the whole real line, or (poles) on each piece of it with one formula for all. */
const ANALYTIC = new Set(['exp', 'sin', 'cos', 'tan', 'cot', 'sec', 'csc', 'sinh', 'cosh', 'tanh', 'coth', 'sech', 'csch', 'atan', 'asinh', 'gamma', 'erf', 'erfc', 'expm1', 'factorial', 'airyAi', 'airyBi', 'dawson', 'sinIntegral', 'gudermannian']);
/** Analytic while the argument keeps away from zero. */
const BROKEN_AT_ZERO = new Set(['log', 'sqrt', 'abs', 'sign', 'heaviside', 'cbrt']);
const POSITIVE = new Set(['exp', 'cosh', 'sech']);
const BITS = 64;

interface Side {
  readonly variable: string;
  readonly point: Expression;
  readonly direction: 'both' | 'right' | 'left';
}

/**
 * At a finite point: on all of the side (both, right or left) where the function is defined. At infinity: for all large |x|, which a finite sum always is.
 * False means not proved. Costs a walk of the tree and enclosures of 64 bits.
 */
export function isExactOnSide(expansion: Expansion): boolean {
  if (!expansion.exact) return false;
  const { point, variable } = expansion;
  if (point === 'inf' || point === '-inf' || variable.kind !== 'symbol') return true;
  return isOnePiece(expansion.function, variable.name) || isAnalyticAlong(expansion.function, { variable: variable.name, point, direction: expansion.side });
}

function isAnalyticAlong(e: Expression, side: Side): boolean {
  if (!dependsOn(e, side.variable)) return true;
  const inner = (part: Expression): boolean => isAnalyticAlong(part, side);
  if (isFieldOperation(e)) return children(e).every(inner);
  switch (e.kind) {
    case 'symbol':
      return true;
    case 'power': {
      const whole = e.exponent.kind === 'negation' ? e.exponent.operand : e.exponent;
      if (whole.kind === 'number' && whole.value.den === 1n) return inner(e.base);
      return inner(e.base) && inner(e.exponent) && (!dependsOn(e.base, side.variable) || keepsFromZero(e.base, side));
    }
    case 'root':
      return inner(e.radicand) && !dependsOn(e.degree, side.variable) && keepsFromZero(e.radicand, side);
    case 'call':
      return isAnalyticCall(e, side);
    case 'indexedSum':
    case 'indexedProduct':
      return [e.body, e.lower, e.upper].every((part) => inner(part)) && !dependsOn(e.lower, side.variable) && !dependsOn(e.upper, side.variable);
    case 'derivative':
      return inner(e.body);
    case 'integral':
      return isPolynomial(e.body) && [e.lower, e.upper].every((end) => !end || (end.kind === 'constant' ? end.name !== 'infinity' : inner(end)));
    default:
      return false;
  }
}

function isAnalyticCall(e: CallNode, side: Side): boolean {
  const { args } = e;
  const [first, second] = args;
  if (!first || !args.every((a) => isAnalyticAlong(a, side))) return false;
  if ((e.function === 'max' || e.function === 'min') && second && args.length === 2) return keepsFromZero(build.difference(first, second), side);
  if (args.length === 1 && ANALYTIC.has(e.function)) return isReal(first);
  if (args.length === 1 && BROKEN_AT_ZERO.has(e.function)) return keepsFromZero(first, side);
  const known = describe(e.function);
  const written = known?.value?.(args) ?? known?.definition?.(args);
  return written !== undefined && written !== null && isAnalyticAlong(written, side);
}

/** Sums, products and whole powers of symbols and constants. */
function isPolynomial(e: Expression): boolean {
  switch (e.kind) {
    case 'number':
    case 'symbol':
    case 'constant':
      return true;
    case 'negation':
      return isPolynomial(e.operand);
    case 'sum':
      return e.terms.every(isPolynomial);
    case 'product':
      return e.factors.every(isPolynomial);
    case 'quotient':
      return isPolynomial(e.numerator) && e.denominator.kind === 'number';
    case 'power':
      return isPolynomial(e.base) && e.exponent.kind === 'number' && e.exponent.value.den === 1n && e.exponent.value.num >= 0n;
    default:
      return false;
  }
}

/** Whether the tree is real for all real values of its symbols, by its form. */
function isReal(e: Expression): boolean {
  if (isFieldOperation(e)) return children(e).every(isReal);
  switch (e.kind) {
    case 'number':
    case 'symbol':
      return true;
    case 'constant':
      return e.name !== 'i';
    case 'power':
      return isReal(e.base) && isReal(e.exponent) && ((e.exponent.kind === 'number' && e.exponent.value.den === 1n) || isPositive(e.base));
    case 'call':
      return (ANALYTIC.has(e.function) || e.function === 'abs' || e.function === 'sign') && e.args.every(isReal);
    default:
      return false;
  }
}

/** Whether the tree is positive for all real values of its symbols, by its form. */
function isPositive(e: Expression): boolean {
  switch (e.kind) {
    case 'number':
      return Q.signOf(e.value) > 0;
    case 'constant':
      return e.name !== 'i' && e.name !== 'infinity';
    case 'sum':
      return e.terms.every((t) => isPositive(t) || isSquare(t)) && e.terms.some(isPositive);
    case 'product':
      return e.factors.every(isPositive);
    case 'quotient':
      return isPositive(e.numerator) && isPositive(e.denominator);
    case 'power':
      return isPositive(e.base) && isReal(e.exponent);
    case 'call':
      return POSITIVE.has(e.function) && e.args.every(isReal);
    default:
      return false;
  }
}

const isSquare = (e: Expression): boolean => e.kind === 'power' && e.exponent.kind === 'number' && e.exponent.value.den === 1n && e.exponent.value.num % 2n === 0n && e.exponent.value.num > 0n && isReal(e.base);

/** Whether the tree is real and not zero everywhere on the open side. */
function keepsFromZero(e: Expression, side: Side): boolean {
  if (!isReal(e)) return false;
  if (isPositive(e) || !dependsOn(e, side.variable)) return true;
  if (e.kind === 'negation') return keepsFromZero(e.operand, side);
  if (e.kind === 'product') return e.factors.every((f) => keepsFromZero(f, side));
  if (e.kind === 'quotient') return keepsFromZero(e.numerator, side) && isReal(e.denominator);
  if (e.kind === 'power') return !dependsOn(e.exponent, side.variable) && keepsFromZero(e.base, side);
  if (e.kind === 'call' && ['sinh', 'tanh', 'asinh', 'atan', 'expm1', 'abs', 'erf'].includes(e.function)) return e.args.every((a) => keepsFromZero(a, side));
  return isLinearAwayFromZero(e, side);
}

/** a x + b with numbers: its only zero lies off the open side; where both are served, at the point. */
function isLinearAwayFromZero(e: Expression, side: Side): boolean {
  const line = linearIn(e, side.variable);
  if (!line || Q.isZero(line.slope)) return false;
  const zero = Q.divide(Q.negate(line.shift), line.slope);
  if (side.point.kind === 'number') {
    const order = Q.compare(zero, side.point.value);
    return order === 0 || (order < 0 ? side.direction === 'right' : side.direction === 'left');
  }
  const point = encloseReal(side.point, new Map(), BITS, describe);
  if (!point) return false;
  return (side.direction === 'right' && Q.compare(zero, real.lower(point)) < 0) || (side.direction === 'left' && Q.compare(zero, real.upper(point)) > 0);
}
