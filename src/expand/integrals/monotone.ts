/** Proofs from the form of a tree that it is positive, regular or monotone on an open interval. Null or false means "not proven". */
import { dependsOn, type Expression, Q, substitute } from '../../expression/index.ts';
import type { Field } from '../../algebra/types.ts';

/** Open interval of v; `low` and `high` are trees, null for an infinite end. */
export interface Range {
  readonly variable: string;
  readonly low: Expression | null;
  readonly high: Expression | null;
  readonly field: Field;
}

const flip = (s: 1 | -1 | null): 1 | -1 | null => (s === null ? null : s === 1 ? -1 : 1);
const isInteger = (e: Expression, parity?: 0 | 1): boolean => e.kind === 'number' && e.value.den === 1n && (parity === undefined || (e.value.num % 2n === 0n) === (parity === 0));

function signOfConstant(r: Range, e: Expression): 1 | -1 | 0 | null {
  const value = r.field.fromExpression(e);
  const sign = r.field.sign(value);
  return sign === 1 || sign === -1 || sign === 0 ? sign : null;
}

/** Whether v lies inside (a, b) for the whole range: low >= a and high <= b. */
function within(r: Range, a: Expression, b: Expression | null): boolean {
  const ge = (x: Expression | null, y: Expression): boolean => x !== null && signAtLeast(r, x, y);
  return ge(r.low, a) && (b === null || (r.high !== null && signAtLeast(r, b, r.high)));
}
function signAtLeast(r: Range, x: Expression, y: Expression): boolean {
  const s = r.field.sign(r.field.subtract(r.field.fromExpression(x), r.field.fromExpression(y)));
  return s === 1 || s === 0;
}
const zero: Expression = { kind: 'number', value: Q.ZERO };
const pi: Expression = { kind: 'constant', name: 'pi' };
const halfPi: Expression = { kind: 'quotient', numerator: pi, denominator: { kind: 'number', value: Q.rational(2) } };
const isVariable = (r: Range, e: Expression): boolean => e.kind === 'symbol' && e.name === r.variable;

/** Of a monotone function from its value at the end where it is least in size. */
function signByEnds(r: Range, e: Expression): 1 | -1 | null {
  const direction = directionOn(r, e);
  if (direction === null) return null;
  const at = (end: Expression | null): 1 | -1 | 0 | null => (end === null ? null : signOfConstant(r, substitute(e, r.variable, end)));
  const [least, greatest] = direction === 1 ? [r.low, r.high] : [r.high, r.low];
  const [below, above] = [at(least), at(greatest)];
  if (below === 1 || below === 0) return 1;
  return above === -1 || above === 0 ? -1 : null;
}

/** Sign on the open interval. */
export function signOn(r: Range, e: Expression): 1 | -1 | null {
  if (!dependsOn(e, r.variable)) {
    const s = signOfConstant(r, e);
    return s === 0 ? null : s;
  }
  switch (e.kind) {
    case 'symbol':
      if (within(r, zero, null)) return 1;
      return r.high !== null && signAtLeast(r, zero, r.high) ? -1 : null;
    case 'negation':
      return flip(signOn(r, e.operand));
    case 'sum': {
      const signs = e.terms.map((t) => signOn(r, t));
      if (signs.every((s) => s === 1)) return 1;
      if (signs.every((s) => s === -1)) return -1;
      if (signs.includes(1) && e.terms.every((t) => weakSign(r, t) === 1)) return 1;
      return signByEnds(r, e);
    }
    case 'product':
      return e.factors.reduce<1 | -1 | null>((s, f) => (s === null ? null : multiplied(s, signOn(r, f))), 1);
    case 'quotient':
      return multiplied(signOn(r, e.numerator), signOn(r, e.denominator));
    case 'power':
      if (e.base.kind === 'constant' && e.base.name === 'e') return 1;
      if (isInteger(e.exponent, 0) && signOn(r, e.base) !== null) return 1;
      return signOn(r, e.base) === 1 && !dependsOn(e.exponent, r.variable) ? 1 : isInteger(e.exponent, 1) ? signOn(r, e.base) : null;
    case 'call': {
      const [a] = e.args;
      if (!a) return null;
      if (e.function === 'exp' || e.function === 'cosh') return 1;
      if (['sinh', 'tanh', 'asinh', 'atan', 'expm1', 'log1p', 'erf'].includes(e.function)) return signOn(r, a);
      if (e.function === 'sin' && isVariable(r, a) && within(r, zero, pi)) return 1;
      if ((e.function === 'cos' || e.function === 'tan') && isVariable(r, a) && within(r, zero, halfPi)) return 1;
      if (e.function === 'log' && a.kind === 'sum' && a.terms.some((t) => t.kind === 'number' && Q.compare(t.value, Q.ONE) >= 0) && a.terms.every((t) => (t.kind === 'number' ? Q.signOf(t.value) > 0 : signOn(r, t) === 1))) return 1;
      return null;
    }
    default:
      return null;
  }
}

/** Sign that may touch zero: even powers have one without their base. */
export function weakSign(range: Range, e: Expression): 1 | -1 | null {
  if (e.kind === 'product') return e.factors.reduce<1 | -1 | null>((s, f) => multiplied(s, weakSign(range, f)), 1);
  if (e.kind === 'power' && e.exponent.kind === 'number' && e.exponent.value.den === 1n && e.exponent.value.num > 0n && e.exponent.value.num % 2n === 0n) return 1;
  if (e.kind === 'sum') return e.terms.every((t) => weakSign(range, t) === 1) ? 1 : e.terms.every((t) => weakSign(range, t) === -1) ? -1 : null;
  return signOn(range, e);
}

const multiplied = (a: 1 | -1 | null, b: 1 | -1 | null): 1 | -1 | null => (a === null || b === null ? null : a === b ? 1 : -1);

/** 1 where the tree increases strictly on the interval, -1 where it decreases. */
export function directionOn(r: Range, e: Expression): 1 | -1 | null {
  switch (e.kind) {
    case 'symbol':
      return isVariable(r, e) ? 1 : null;
    case 'negation':
      return flip(directionOn(r, e.operand));
    case 'sum': {
      const moving = e.terms.filter((t) => dependsOn(t, r.variable)).map((t) => directionOn(r, t));
      const [first] = moving;
      return first !== undefined && first !== null && moving.every((d) => d === first) ? first : null;
    }
    case 'product': {
      // (sign times) a product of positive factors that all move one way.
      let sign: 1 | -1 = 1;
      let direction: 1 | -1 | null = null;
      for (const f of e.factors) {
        if (!dependsOn(f, r.variable)) {
          const s = signOfConstant(r, f);
          if (s !== 1 && s !== -1) return null;
          sign = s === 1 ? sign : sign === 1 ? -1 : 1;
          continue;
        }
        const own = signOn(r, f);
        const moves = directionOn(r, f);
        if (e.factors.filter((g) => dependsOn(g, r.variable)).length === 1) {
          direction = moves;
          continue;
        }
        if (own !== 1 || moves === null || (direction !== null && direction !== moves)) return null;
        direction = moves;
      }
      return direction === null ? null : multiplied(sign, direction);
    }
    case 'quotient':
      if (!dependsOn(e.denominator, r.variable)) return multiplied(directionOn(r, e.numerator), signNonZero(r, e.denominator));
      if (!dependsOn(e.numerator, r.variable)) return signOn(r, e.denominator) === null ? null : flip(multiplied(directionOn(r, e.denominator), signNonZero(r, e.numerator)));
      return null;
    case 'power': {
      if (e.base.kind === 'constant' && e.base.name === 'e') return directionOn(r, e.exponent);
      if (e.exponent.kind !== 'number') return null;
      const up = Q.signOf(e.exponent.value) as 1 | -1 | 0;
      if (up === 0) return null;
      const inner = directionOn(r, e.base);
      if (signOn(r, e.base) === 1) return multiplied(inner, up);
      if (isInteger(e.exponent, 0) && up === 1 && signOn(r, e.base) === -1) return flip(inner);
      return isInteger(e.exponent, 1) && up === 1 ? inner : null;
    }
    case 'call': {
      const [a] = e.args;
      if (!a) return null;
      const inner = directionOn(r, a);
      if (['exp', 'sinh', 'tanh', 'asinh', 'atan', 'expm1', 'erf'].includes(e.function)) return inner;
      if (e.function === 'log' && signOn(r, a) === 1) return inner;
      if (e.function === 'sqrt' && signOn(r, a) === 1) return inner;
      if (e.function === 'cosh') return multiplied(inner, signOn(r, a));
      if (!isVariable(r, a)) return null;
      if ((e.function === 'sin' || e.function === 'tan') && within(r, { kind: 'negation', operand: halfPi }, halfPi)) return 1;
      if (e.function === 'cos' && within(r, zero, pi)) return -1;
      return null;
    }
    default:
      return null;
  }
}

function signNonZero(r: Range, e: Expression): 1 | -1 | null {
  const s = signOfConstant(r, e);
  return s === 0 ? null : s;
}

/** Whether the tree is continuous on the open interval, by its form. */
export function regularOn(r: Range, e: Expression): boolean {
  if (!dependsOn(e, r.variable)) return true;
  switch (e.kind) {
    case 'symbol':
      return true;
    case 'negation':
      return regularOn(r, e.operand);
    case 'sum':
      return e.terms.every((t) => regularOn(r, t));
    case 'product':
      return e.factors.every((f) => regularOn(r, f));
    case 'quotient':
      return regularOn(r, e.numerator) && regularOn(r, e.denominator) && signOn(r, e.denominator) !== null;
    case 'power':
      if (e.base.kind === 'constant' && e.base.name === 'e') return regularOn(r, e.exponent);
      if (!regularOn(r, e.base)) return false;
      return isInteger(e.exponent) && e.exponent.kind === 'number' && e.exponent.value.num >= 0n ? true : signOn(r, e.base) === 1 || (isInteger(e.exponent) && signOn(r, e.base) !== null);
    case 'call': {
      const [a] = e.args;
      if (e.args.length !== 1 || !a || !regularOn(r, a)) return false;
      if (['exp', 'sin', 'cos', 'sinh', 'cosh', 'tanh', 'atan', 'asinh', 'expm1', 'erf', 'erfc'].includes(e.function)) return true;
      if (e.function === 'log' || e.function === 'sqrt') return signOn(r, a) === 1;
      return false;
    }
    default:
      return false;
  }
}
