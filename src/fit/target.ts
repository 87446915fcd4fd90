/** The function of a fit as the search needs it: f = (x - z)^s g with the zero at z divided out, parity, fast values of g. */
import { build, dependsOn, type Expression, freeSymbols, Q, type Rational, rationalOf, substitute } from '../expression/index.ts';
import { expand } from '../expand/index.ts';
import { describe } from '../functions/index.ts';
import { type Budget, Declined } from '../outcome.ts';
import { encloseReal, real } from '../rigorous/index.ts';
import { chebyshevProxy } from './chebyshev.ts';
import { ballToFixed, type Fixed, fromFixed } from './fixed.ts';

export interface FitTarget {
  readonly function: Expression;
  readonly variable: string;
  /** The zero that is divided out (a rational), and its order s >= 0. The polynomial is (x - z)^s q(x - z). */
  readonly zero: Rational;
  readonly order: number;
  /** Parity of f in x - z where it is known. */
  readonly parity: 'even' | 'odd' | null;
  /** Leading terms that the polynomial keeps exactly, lowest power first: g is then that of f without them, over x^s. */
  readonly kept: readonly { readonly power: number; readonly value: Rational }[];
  /** g at u = x - z, fixed point with `bits`. */
  readonly quotient: (u: Fixed) => Fixed;
  readonly bits: number;
}

/** Parity of an expression in a symbol by its structure; null where the structure does not tell. Exact: never a guess. */
export function parityOf(e: Expression, variable: string): 'even' | 'odd' | null {
  if (!dependsOn(e, variable)) return 'even';
  const both = (list: readonly Expression[]): ('even' | 'odd' | null)[] => list.map((c) => parityOf(c, variable));
  const product = (list: readonly ('even' | 'odd' | null)[]): 'even' | 'odd' | null => (list.includes(null) ? null : list.filter((p) => p === 'odd').length % 2 === 1 ? 'odd' : 'even');
  switch (e.kind) {
    case 'symbol':
      return 'odd';
    case 'negation':
      return parityOf(e.operand, variable);
    case 'sum': {
      const parts = both(e.terms);
      const [first] = parts;
      return first && parts.every((p) => p === first) ? first : null;
    }
    case 'product':
      return product(both(e.factors));
    case 'quotient':
      return product(both([e.numerator, e.denominator]));
    case 'power': {
      const base = parityOf(e.base, variable);
      const exponent = rationalOf(e.exponent);
      if (base === 'even' && !dependsOn(e.exponent, variable)) return 'even';
      if (parityOf(e.exponent, variable) === 'even' && !dependsOn(e.base, variable)) return 'even';
      return base === 'odd' && exponent && exponent.den === 1n ? (exponent.num % 2n === 0n ? 'even' : 'odd') : null;
    }
    case 'root': {
      const degree = rationalOf(e.degree);
      const inner = parityOf(e.radicand, variable);
      return inner === 'even' ? 'even' : inner === 'odd' && degree && degree.den === 1n && degree.num % 2n !== 0n ? 'odd' : null;
    }
    case 'call': {
      const parts = both(e.args);
      if (parts.every((p) => p === 'even')) return 'even';
      const [only] = parts;
      const own = describe(e.function)?.parity;
      if (parts.length === 1 && only === 'odd' && own) return own;
      const definition = describe(e.function)?.definition;
      return definition ? parityOf(definition(e.args), variable) : null;
    }
    default:
      return null;
  }
}

/** Leading power of f at a rational point, where it is a whole number at least 0 on both sides; null otherwise. */
export function orderAt(f: Expression, variable: string, point: Rational, budget: Budget): { readonly order: number; readonly leading: Expression } | null {
  const result = expand({ function: f, variable: build.symbol(variable), point: build.number(point), side: 'both', terms: 1, assumptions: [] }, budget);
  if (!result.ok || result.value.prefactor || result.value.left) return null;
  const [term] = result.value.terms;
  if (!term || term.log !== 0 || term.scale) return null;
  const power = rationalOf(term.power);
  if (!power || power.den !== 1n || power.num < 0n || power.num > 64n) return null;
  return { order: Number(power.num), leading: term.coefficient };
}

const MOST_BITS = 8192;

/** f at a rational point to `bits` relative bits, as a ball midpoint; null where f has no value there. */
function valueAt(f: Expression, variable: string, x: Rational, bits: number): ReturnType<typeof real.fromInteger> | null {
  for (let precision = bits + 32; precision <= MOST_BITS; precision *= 2) {
    const value = encloseReal(f, new Map([[variable, real.fromRational(x, precision)]]), precision, describe);
    if (!value) return null;
    if (real.relativeAccuracy(value) >= bits) return value;
  }
  return null;
}

/** The limit of f at a rational point where it has no value of its own (0/0, x log x at 0), from inside [low, high]; null where the expansion gives none. */
function limitAt(f: Expression, variable: string, x: Rational, low: Rational, bits: number, budget: Budget): ReturnType<typeof real.fromInteger> | null {
  const side = Q.compare(x, low) > 0 ? 'left' : 'right';
  const result = expand({ function: f, variable: build.symbol(variable), point: build.number(x), side, terms: 1, assumptions: [] }, budget);
  if (!result.ok || result.value.prefactor) return null;
  const [term] = result.value.terms;
  if (!term) return real.ZERO;
  const power = rationalOf(term.power);
  if (!power || term.scale) return null;
  if (power.num > 0n) return real.ZERO;
  return power.num === 0n && term.log === 0 ? encloseReal(term.coefficient, new Map(), bits + 64, describe) : null;
}

/**
 * Prepares f on [low, high]. With `divideOut` (relative measures) zeros are divided out: a zero at 0 or at another rational z that is proven;
 * a zero that is no such number is declined. Without a zero the polynomial is in x - centre. `leastOrder`: f is known to vanish there to this order, which is divided out in any measure. Throws Declined with `bad-request` for free parameters and for points without a value.
 */
export function prepareTarget(f: Expression, variable: string, low: Rational, high: Rational, divideOut: boolean, bits: number, budget: Budget, centre: Rational = Q.ZERO, leastOrder = 0): FitTarget {
  const others = freeSymbols(f).filter((name) => name !== variable);
  if (others.length > 0) throw new Declined('needs-assumption', `A fit needs numbers: give a value for ${others.slice(0, 3).join(', ')}.`);
  const inside = (q: Rational): boolean => Q.compare(low, q) <= 0 && Q.compare(q, high) <= 0;
  const zeroes = divideOut ? zerosOf(f, variable, low, high, budget) : [];
  if (zeroes.length > 1) throw new Declined('bad-request', 'The function has several zeros on this interval; split the interval between them or ask for the absolute measure.');
  const [found] = zeroes;
  const zero = found ?? centre;
  const shifted = Q.isZero(zero) ? f : substitute(f, variable, build.sum(build.symbol(variable), build.number(zero)));
  const parity = parityOf(shifted, variable);
  const local = inside(zero) ? orderAt(f, variable, zero, budget) : null;
  const natural = found && local ? local.order : divideOut && local ? local.order : parity === 'odd' && inside(Q.ZERO) && local && local.order > 0 ? 1 : 0;
  const order = Math.max(natural, leastOrder);
  const atZero = local && local.order === order ? encloseReal(local.leading, new Map(), bits + 64, describe) : null;
  const direct = (u: Fixed): Fixed => {
    const offset = fromFixed(u, bits);
    if (Q.isZero(offset)) {
      if (atZero) return ballToFixed(atZero, bits);
      const here = order === 0 ? (valueAt(f, variable, zero, bits) ?? limitAt(f, variable, zero, low, bits, budget)) : null;
      if (here) return ballToFixed(here, bits);
      if (local && local.order > order) return 0n;
      throw new Declined('bad-request', 'The function has no value inside the interval; take an interval without that point.');
    }
    const value = valueAt(f, variable, Q.add(zero, offset), bits) ?? limitAt(f, variable, Q.add(zero, offset), low, bits, budget);
    if (!value) throw new Declined('bad-request', `The function has no real value at ${Q.toDouble(Q.add(zero, offset))}; take an interval inside its domain.`);
    const power = real.powerInteger(real.fromRational(offset, bits + 64), order, bits + 64);
    const quotient = power && real.divide(value, power, bits + 64);
    if (!quotient) throw new Declined('bad-request', 'The function cannot be divided by its zero here; take another interval.');
    return ballToFixed(quotient, bits);
  };
  const proxy = chebyshevProxy(direct, Q.subtract(low, zero), Q.subtract(high, zero), bits, Math.min(bits - 24, 140), budget);
  return { function: f, variable, zero, order, parity, kept: [], quotient: proxy ? proxy.evaluate : direct, bits };
}

/** Rational zeros of f in the interval that are proven; a sign change that belongs to none of them is declined. */
function zerosOf(f: Expression, variable: string, low: Rational, high: Rational, budget: Budget): Rational[] {
  const found: Rational[] = [];
  const prove = (q: Rational): boolean => {
    if (Q.compare(low, q) > 0 || Q.compare(q, high) > 0 || found.some((z) => Q.equal(z, q))) return false;
    const at = orderAt(f, variable, q, budget);
    if (!at || at.order === 0) return false;
    found.push(q);
    return true;
  };
  prove(Q.ZERO);
  const signAt = (x: Rational): -1 | 0 | 1 | null => {
    const value = encloseReal(f, new Map([[variable, real.fromRational(x, 128)]]), 128, describe);
    return value ? real.sign(value) : null;
  };
  const step = Q.divide(Q.subtract(high, low), Q.rational(64));
  let before: { readonly x: Rational; readonly sign: -1 | 1 } | null = null;
  for (let k = 0; k <= 64; k += 1) {
    const x = Q.add(low, Q.multiply(step, Q.rational(k)));
    const sign = signAt(x);
    if (sign === 0 || sign === null) {
      prove(x);
      continue;
    }
    if (before && before.sign !== sign && !found.some((z) => Q.compare(before?.x ?? z, z) <= 0 && Q.compare(z, x) <= 0)) {
      const candidate = simplestBetween(...bisect(signAt, before.x, x, before.sign));
      if (!prove(candidate)) throw new Declined('bad-request', `The function has a zero near ${Q.toDouble(candidate)} that is no float, where no relative error can be kept; ask for the absolute measure or leave that point out.`);
    }
    before = { x, sign };
  }
  return found;
}

function bisect(signAt: (x: Rational) => -1 | 0 | 1 | null, low: Rational, high: Rational, lowSign: -1 | 1): [Rational, Rational] {
  let [a, b] = [low, high];
  for (let k = 0; k < 60; k += 1) {
    const middle = Q.divide(Q.add(a, b), Q.rational(2));
    const sign = signAt(middle);
    if (sign === 0 || sign === null) return [middle, middle];
    if (sign === lowSign) a = middle;
    else b = middle;
  }
  return [a, b];
}

/** The rational of least denominator in a closed interval (Stern-Brocot). */
function simplestBetween(a: Rational, b: Rational): Rational {
  const floor = Q.floor(a);
  if (Q.compare(Q.rational(floor), a) === 0) return a;
  if (Q.compare(Q.rational(floor + 1n), b) <= 0) return Q.rational(floor + 1n);
  const rest = simplestBetween(Q.reciprocal(Q.subtract(b, Q.rational(floor))), Q.reciprocal(Q.subtract(a, Q.rational(floor))));
  return Q.add(Q.rational(floor), Q.reciprocal(rest));
}


const MOST_EXACT = 16;

/**
 * f with its first `count` coefficients at 0 kept as they are: what is left is of order x^count. Throws Declined with `bad-request` where 0 lies outside,
 * where the expansion at 0 is no power series, or where one of the coefficients is no number of the format.
 */
export function prepareKept(f: Expression, variable: string, low: Rational, high: Rational, count: number, exact: (q: Rational) => boolean, bits: number, budget: Budget): FitTarget {
  if (Q.compare(low, Q.ZERO) > 0 || Q.compare(Q.ZERO, high) > 0) throw new Declined('bad-request', 'Leading coefficients are kept at 0; take an interval that contains it.');
  if (count > MOST_EXACT) throw new Declined('bad-request', `At most ${MOST_EXACT} leading coefficients can be kept; ask for fewer.`);
  const result = expand({ function: f, variable: build.symbol(variable), point: build.number(Q.ZERO), side: 'both', order: Q.rational(count), assumptions: [] }, budget);
  if (!result.ok || result.value.prefactor || result.value.left) throw new Declined('bad-request', 'The expansion at 0 is no power series there; no coefficients can be kept.');
  const kept = result.value.terms.map((term) => {
    const [power, value] = [rationalOf(term.power), rationalOf(term.coefficient)];
    if (!power || power.den !== 1n || power.num < 0n || term.log !== 0 || term.scale) throw new Declined('bad-request', 'The expansion at 0 is no power series there; no coefficients can be kept.');
    if (!value || !exact(value)) throw new Declined('bad-request', `The coefficient of the power ${power.num} is no number of the format; keep at most ${power.num} leading coefficients.`);
    return { power: Number(power.num), value };
  });
  const x = build.symbol(variable);
  const left = build.sum(f, ...kept.map(({ power, value }) => build.product(build.number(Q.negate(value)), build.power(x, power))));
  return { ...prepareTarget(left, variable, low, high, false, bits, budget, Q.ZERO, count), function: f, kept };
}
