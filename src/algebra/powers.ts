/** Powers, exponentials and logarithms with principal branches. */
import { Q, type Rational } from '../expression/index.ts';
import { constantKernel, expKernel, imaginaryKernel, isZeroRational, kernelElement, logKernel, minus, powerKernel, rationalOf, undecided, valueless, withSquaresJoined, type Context } from './context.ts';
import { compareExponents, exponentFromRational, isWhole, multiplyExponents, type Exponent } from './exponent.ts';
import { denestedCubeRoot, denestedSquareRoot, dependentSquareRoot } from './denest.ts';
import { factorInteger } from './integers.ts';
import { noteLogarithm } from './joinedLogarithms.ts';
import type { Kernel } from './kernel.ts';
import { monomialOf, multiplyMonomials, UNIT, type Monomial } from './monomial.ts';
import { isOnePolynomial, kernelsIn, scalePolynomial, type Polynomial } from './polynomial.ts';
import { addElements, elementFromMonomial, elementFromPolynomial, elementKey, invertElement, isQuotient, multiplyElements, negateElement, partsOf, scaleElement, wholePower } from './quotient.ts';
import { positiveRationalPower, radicandPower } from './radicals.ts';
import { isNonNegative, isNonZero, isRealSet, NEGATIVE, NIL, POSITIVE } from './signs.ts';
import { additiveTerms, asElement, byImaginaryUnit, rationalMultiple, singleKernel } from './split.ts';
import { squareFreeFactors } from './squareFree.ts';
import { cosineOfPi, sineOfPi } from './unitCircle.ts';
import type { Element } from './types.ts';

const times = (ctx: Context, a: Element, b: Element): Element => multiplyElements(ctx.table, a, b);
const plus = (ctx: Context, a: Element, b: Element): Element => addElements(ctx.table, a, b);

/** (-1)^r = exp(i pi r). */
export function rootOfUnity(ctx: Context, r: Rational): Element {
  return plus(ctx, cosineOfPi(ctx, r), times(ctx, kernelElement(ctx, imaginaryKernel(ctx)), sineOfPi(ctx, r)));
}

/** |a| for a real a: factors of known sign are written without bars. */
export function absolute(ctx: Context, a: Element): Element {
  const sign = ctx.signs.of(a);
  if (isNonNegative(sign)) return a;
  if (isNonNegative(ctx.signs.of(negateElement(a)))) return negateElement(a);
  const parts = partsOf(a);
  let result: Element = Q.absolute(parts.content);
  parts.monomial.kernels.forEach((index, i) => {
    const kernel = ctx.table.kernels[index] as Kernel;
    const e = parts.monomial.exponents[i] as Exponent;
    const s = ctx.signs.ofKernel(kernel);
    if (isNonNegative(s) || (isWhole(e) && e % 2 === 0 && isRealSet(s))) result = times(ctx, result, kernelElement(ctx, kernel, e));
    else if (isWhole(e) && isRealSet(s)) result = times(ctx, result, wholePower(ctx.table, absOf(ctx, kernelElement(ctx, kernel)), e));
    else result = times(ctx, result, absOf(ctx, kernelElement(ctx, kernel, e)));
  });
  const part = (f: Polynomial, exponent: number): void => {
    if (isOnePolynomial(f)) return;
    result = times(ctx, result, wholePower(ctx.table, absOf(ctx, asElement(ctx, f)), exponent));
  };
  part(parts.numerator, 1);
  for (const f of parts.denominator) part(f.polynomial, -f.exponent);
  return result;
}

/** The kernel |u|, for u without content and of unknown sign. */
function absOf(ctx: Context, u: Element): Element {
  const sign = ctx.signs.of(u);
  if (isNonNegative(sign)) return u;
  if ((sign & ~(NEGATIVE | NIL)) === 0) return negateElement(u);
  if (!isRealSet(sign)) {
    const k = ctx.table.intern(`abs(${elementKey(u)})`, () => ({ shape: { kind: 'call', id: 'abs', args: [u] } }));
    return kernelElement(ctx, k);
  }
  const square = partsOf(times(ctx, u, u));
  const kernel = ctx.table.intern(`|${elementKey(u)}|`, () => ({
    shape: { kind: 'abs', argument: u },
    relation:
      square.denominator.length === 0 && square.monomial.exponents.every((e) => compareExponents(e, 0) > 0)
        ? { period: 2, value: square.numerator.map((t) => ({ monomial: multiplyMonomials(t.monomial, square.monomial), coefficient: t.coefficient })), pure: true, numeric: false }
        : null,
  }));
  return kernelElement(ctx, kernel);
}

/** a^r, principal value. */
export function rationalPower(ctx: Context, base: Element, r: Rational): Element {
  const a = r.den === 1n ? base : withSquaresJoined(ctx, base);
  if (r.den === 1n) {
    const n = Number(r.num);
    if (n < 0) requireNonZero(ctx, a);
    if (Math.abs(n) > 1e6) throw undecided(`A power with exponent ${r.num} is too large to be worked out exactly.`);
    return wholePower(ctx.table, a, n);
  }
  if (isZeroRational(a)) {
    if (r.num > 0n) return Q.ZERO;
    throw valueless('A negative power of zero has no value; choose another point or parameter.');
  }
  const exponent = exponentFromRational(r);
  const parts = partsOf(a);
  if (parts.content.den !== 1n && r.den === 2n && isQuotient(a)) ctx.fractionRoots.add(elementKey(scaleElement(a, Q.reciprocal(parts.content))));
  let result = positiveRationalPower(ctx, parts.content, r);
  let negative = parts.content.num < 0n;
  let open: Element = Q.ONE;
  const take = (factor: Element): void => void (open = times(ctx, open, factor));
  parts.monomial.kernels.forEach((index, i) => {
    const kernel = ctx.table.kernels[index] as Kernel;
    const e = parts.monomial.exponents[i] as Exponent;
    const sign = ctx.signs.ofKernel(kernel);
    if (isNonNegative(sign)) {
      if (kernel.relation && !kernel.relation.pure) {
        result = times(ctx, result, radicandPower(ctx, kernelElement(ctx, kernel, e), exponent));
      } else result = times(ctx, result, kernelElement(ctx, kernel, multiplyExponents(e, exponent)));
    } else if (isWhole(e) && (sign & ~(NEGATIVE | NIL)) === 0) {
      result = times(ctx, result, radicandRationalPower(ctx, negateElement(kernelElement(ctx, kernel)), Q.multiply(r, Q.rational(e))));
      if (e % 2 !== 0) negative = !negative;
    } else if (isWhole(e) && isRealSet(sign) && kernel.shape.kind !== 'exp' && kernel.shape.kind !== 'power') {
      const even = e % 2 === 0 ? e : e - 1;
      if (even !== 0) result = times(ctx, result, rationalPower(ctx, absolute(ctx, kernelElement(ctx, kernel)), Q.multiply(r, Q.rational(even))));
      if (even !== e) take(kernelElement(ctx, kernel));
    } else take(kernelElement(ctx, kernel, e));
  });
  const polynomial = (f: Polynomial, power: number): void => {
    if (isOnePolynomial(f)) return;
    for (const factor of squareFreeFactors(f, ctx.table.check)) {
      const e = factor.exponent * power;
      const u = asElement(ctx, factor.polynomial);
      const sign = ctx.signs.of(u);
      const r2 = Q.multiply(r, Q.rational(e));
      if (isNonNegative(sign)) result = times(ctx, result, radicandRationalPower(ctx, u, r2));
      else if ((sign & ~(NEGATIVE | NIL)) === 0) {
        result = times(ctx, result, radicandRationalPower(ctx, negateElement(u), r2));
        if (e % 2 !== 0) negative = !negative;
      } else if (isRealSet(sign)) {
        const even = e % 2 === 0 ? e : e - 1;
        if (even !== 0) result = times(ctx, result, rationalPower(ctx, absolute(ctx, u), Q.multiply(r, Q.rational(even))));
        if (even !== e) take(u);
      } else take(wholePower(ctx.table, u, e));
    }
  };
  polynomial(parts.numerator, 1);
  for (const f of parts.denominator) polynomial(f.polynomial, -f.exponent);
  if (!isQuotient(open)) {
    const sign = (open.num < 0n) !== negative;
    return sign ? times(ctx, result, rootOfUnity(ctx, r)) : result;
  }
  return times(ctx, result, openPower(ctx, negative ? negateElement(open) : open, r, exponent));
}

/** u^r for a non-negative element without denominator. */
function radicandRationalPower(ctx: Context, u: Element, r: Rational): Element {
  if (r.den === 1n) return wholePower(ctx.table, u, Number(r.num));
  if (isNumericRadicand(ctx, u) && !ctx.table.find(`radicand ${elementKey(u)}`)) {
    if (r.den % 2n === 0n) {
      const root = denestedSquareRoot(ctx, u) ?? (r.den === 2n ? dependentSquareRoot(ctx, u) : null);
      if (root) return rationalPower(ctx, root, Q.multiply(r, Q.rational(2)));
    }
    if (r.den % 3n === 0n) {
      const root = denestedCubeRoot(ctx, u);
      if (root) return rationalPower(ctx, root, Q.multiply(r, Q.rational(3)));
    }
  }
  return radicandPower(ctx, u, exponentFromRational(r));
}

const isNumericRadicand = (ctx: Context, u: Element): boolean => isQuotient(u) && u.denominator.length === 0 && [...kernelsIn(u.numerator)].every((k) => ctx.table.relations[k]?.numeric === true);

/** sqrt(x + i y) for numbers whose modulus is rational, by DLMF 4.8(i) halving of the argument; else null. */
function complexSquareRoot(ctx: Context, a: Element): Element | null {
  const { re, im } = byImaginaryUnit(ctx, a);
  const x = rationalOf(re);
  const y = rationalOf(im);
  if (!x || !y || y.num === 0n) return null;
  const modulus = rationalOf(rationalPower(ctx, Q.add(Q.multiply(x, x), Q.multiply(y, y)), Q.HALF));
  if (!modulus) return null;
  const half = (sign: 1 | -1): Element => rationalPower(ctx, Q.multiply(Q.HALF, sign === 1 ? Q.add(modulus, x) : Q.subtract(modulus, x)), Q.HALF);
  const imaginary = times(ctx, kernelElement(ctx, imaginaryKernel(ctx)), half(-1));
  return plus(ctx, half(1), y.num < 0n ? negateElement(imaginary) : imaginary);
}

/** base^r where the sign of the base is not known. */
function openPower(ctx: Context, base: Element, r: Rational, exponent: Exponent): Element {
  const single = singleKernel(base);
  if (single) {
    const kernel = ctx.table.kernels[single.kernel] as Kernel;
    const e = single.exponent;
    if (kernel.shape.kind === 'imaginary') return rootOfUnity(ctx, Q.divide(r, Q.rational(2)));
    const principal = kernel.shape.kind !== 'exp' && kernel.shape.kind !== 'power';
    if (principal && compareExponents(e, -1) > 0 && compareExponents(e, 1) <= 0 && (!kernel.relation || kernel.shape.kind === 'radicand')) {
      return kernelElement(ctx, kernel, multiplyExponents(e, exponent));
    }
  }
  if (r.den === 2n) {
    const root = complexSquareRoot(ctx, base);
    if (root) return wholePower(ctx.table, root, Number(r.num));
  }
  const parts = partsOf(base);
  const simple = parts.denominator.length === 0 && parts.monomial.exponents.every((e) => compareExponents(e, 0) > 0);
  if (simple) return radicandPower(ctx, base, exponent);
  // N/D = N*D/D^2, and D^2 > 0 for real D.
  let bottom: Element = Q.ONE;
  for (const f of parts.denominator) bottom = times(ctx, bottom, wholePower(ctx.table, asElement(ctx, f.polynomial), f.exponent));
  parts.monomial.kernels.forEach((index, i) => {
    const e = parts.monomial.exponents[i] as Exponent;
    if (compareExponents(e, 0) < 0) bottom = times(ctx, bottom, elementFromMonomial(ctx.table, monomialOf(index, multiplyExponents(e, -1))));
  });
  if (isQuotient(bottom) && isRealSet(ctx.signs.of(bottom))) {
    const top = times(ctx, base, times(ctx, bottom, bottom));
    const outside = rationalPower(ctx, absolute(ctx, bottom), Q.multiply(r, Q.rational(-2)));
    return times(ctx, outside, rationalPower(ctx, top, r));
  }
  if (r.den === 2n && isQuotient(bottom)) {
    // One of the two square roots of N/D is (N D)^(1/2)/D; the principal one has a positive real part.
    const root = divideElements(ctx, radicandPower(ctx, times(ctx, base, times(ctx, bottom, bottom)), exponentFromRational(Q.HALF)), bottom);
    const sign = ctx.signOfRealPart(root);
    if (sign) return wholePower(ctx.table, sign === 1 ? root : negateElement(root), Number(r.num));
  }
  return kernelElement(ctx, powerKernel(ctx, base, Q.ONE), exponent);
}

/** Rejects zero ('no-expansion') and what may be zero ('undecided'). */
export function requireNonZero(ctx: Context, a: Element, what: 'divisor' | 'argument of a logarithm' = 'divisor'): void {
  const zero = ctx.isZero(a);
  if (zero === 'no') return;
  const divides = what === 'divisor';
  if (zero === 'yes') throw valueless(divides ? 'A division by zero has no value; choose another point or parameter.' : 'The logarithm of zero has no value; choose another point or parameter.');
  throw undecided(
    divides ? 'A divisor could not be shown to be non-zero; state an assumption that excludes zero.' : 'The argument of a logarithm could not be shown to be non-zero; state an assumption that excludes zero.',
  );
}

export function divideElements(ctx: Context, a: Element, b: Element): Element {
  if (!isQuotient(b)) {
    if (b.num === 0n) requireNonZero(ctx, b);
    return scaleElement(a, Q.reciprocal(b));
  }
  requireNonZero(ctx, b);
  return times(ctx, a, invertElement(ctx.table, b));
}

/** exp(a): sums become products, logarithms become powers, multiples of i pi roots of unity. */
export function exponential(ctx: Context, a: Element): Element {
  let result: Element = Q.ONE;
  for (const term of additiveTerms(ctx, a)) result = times(ctx, result, exponentialOfTerm(ctx, term));
  return result;
}

function exponentialOfTerm(ctx: Context, term: Element): Element {
  const { coefficient, unit } = rationalMultiple(term);
  if (!isQuotient(unit)) return kernelElement(ctx, expKernel(ctx, Q.ONE), exponentFromRational(coefficient));
  const pi = constantKernel(ctx, 'pi').index;
  const i = imaginaryKernel(ctx).index;
  const plain = isOnePolynomial(unit.numerator) && unit.denominator.length === 0;
  if (plain) {
    const { kernels, exponents } = unit.monomial;
    if (kernels.length === 2 && kernels.includes(pi) && kernels.includes(i) && exponents.every((e) => e === 1)) return rootOfUnity(ctx, coefficient);
  }
  // A factor log(x) turns the rest into an exponent of x.
  for (let j = 0; j < unit.monomial.kernels.length; j += 1) {
    const kernel = ctx.table.kernels[unit.monomial.kernels[j] as number] as Kernel;
    if (kernel.shape.kind !== 'log' || unit.monomial.exponents[j] !== 1) continue;
    const rest = times(ctx, unit, kernelElement(ctx, kernel, -1));
    const base = kernel.shape.argument;
    if (!isQuotient(rest)) return rationalPower(ctx, base, Q.multiply(coefficient, rest));
    return kernelElement(ctx, powerKernel(ctx, base, rest), exponentFromRational(coefficient));
  }
  if (plain && coefficient.den === 1n) {
    const inverse = exponentialOfInverse(ctx, unit.monomial, i);
    if (inverse) return wholePower(ctx.table, inverse, Number(coefficient.num));
  }
  if (plain && unit.monomial.kernels.includes(pi) && unit.monomial.kernels.includes(i)) {
    const others = unit.monomial.kernels.filter((k) => k !== pi && k !== i).map((k) => ctx.table.kernels[k] as Kernel);
    const whole = others.every((k) => k.shape.kind === 'parameter' && ctx.isInteger(k.shape.name)) && unit.monomial.exponents.every((e) => isWhole(e) && e > 0);
    if (whole && unit.monomial.exponents[unit.monomial.kernels.indexOf(pi)] === 1) {
      const kernel = ctx.table.intern(`exp ${elementKey(unit)}`, () => ({
        shape: { kind: 'exp', unit },
        relation: { period: 2, value: [{ monomial: UNIT, coefficient: 1n }], pure: true, numeric: false },
      }));
      return kernelElement(ctx, kernel, exponentFromRational(coefficient));
    }
  }
  return kernelElement(ctx, expKernel(ctx, unit), exponentFromRational(coefficient));
}

/** exp(i asin x), exp(i acos x), exp(i atan x), exp(asinh x), exp(acosh x), exp(atanh x) without the inverse function (DLMF 4.23(iv), 4.37(iv)), and exp(W(z)) = z/W(z) for z other than 0 (DLMF 4.13.1); null for anything else. */
function exponentialOfInverse(ctx: Context, m: Monomial, i: number): Element | null {
  const circular = m.kernels.length === 2 && m.kernels.includes(i);
  if ((!circular && m.kernels.length !== 1) || m.exponents.some((e) => e !== 1)) return null;
  const index = m.kernels.find((k) => k !== i);
  const shape = index === undefined ? undefined : (ctx.table.kernels[index] as Kernel).shape;
  const x = shape?.kind === 'call' ? shape.args[0] : undefined;
  if (shape?.kind !== 'call' || x === undefined) return null;
  const [, z] = shape.args;
  if (shape.id === 'lambertW' && !circular && index !== undefined && z !== undefined && isNonZero(ctx.signs.of(z))) return divideElements(ctx, z, kernelElement(ctx, ctx.table.kernels[index] as Kernel));
  const unit = kernelElement(ctx, imaginaryKernel(ctx));
  const root = (a: Element): Element => rationalPower(ctx, a, Q.HALF);
  const square = times(ctx, x, x);
  const one = (a: Element): Element => plus(ctx, Q.ONE, a);
  switch (`${circular ? 'i ' : ''}${shape.id}`) {
    case 'i asin':
      return plus(ctx, root(one(negateElement(square))), times(ctx, unit, x));
    case 'i acos':
      return plus(ctx, x, times(ctx, unit, root(one(negateElement(square)))));
    case 'i atan':
      return isRealSet(ctx.signs.of(x)) ? divideElements(ctx, one(times(ctx, unit, x)), root(one(square))) : null;
    case 'asinh':
      return plus(ctx, x, root(one(square)));
    case 'acosh':
      return plus(ctx, x, times(ctx, root(plus(ctx, x, Q.MINUS_ONE)), root(one(x))));
    case 'atanh':
      return isNonNegative(ctx.signs.of(one(negateElement(square)))) ? divideElements(ctx, one(x), root(one(negateElement(square)))) : null;
    default:
      return null;
  }
}

/** log|c| for a rational c that is not zero. */
function logOfRational(ctx: Context, c: Rational): Element {
  let result: Element = Q.ZERO;
  const part = (n: bigint, sign: bigint): void => {
    for (const { base, exponent } of factorInteger(n < 0n ? -n : n)) {
      result = plus(ctx, result, scaleElement(kernelElement(ctx, logKernel(ctx, Q.rational(base))), { num: sign * BigInt(exponent), den: 1n }));
    }
  };
  part(c.num, 1n);
  part(c.den, -1n);
  return result;
}

const multiple = (a: Element, e: Exponent): Element => scaleElement(a, typeof e === 'number' ? Q.rational(e) : Q.rational(e.p, e.q));

/** log a, principal value: positive factors split off, the rest stays together. */
export function logarithm(ctx: Context, a: Element): Element {
  const value = splitLogarithm(ctx, withSquaresJoined(ctx, a));
  noteLogarithm(ctx, a, value);
  return value;
}

function splitLogarithm(ctx: Context, a: Element): Element {
  requireNonZero(ctx, a, 'argument of a logarithm');
  const parts = partsOf(a);
  let result = logOfRational(ctx, parts.content);
  let negative = parts.content.num < 0n;
  let open: Element = Q.ONE;
  const take = (factor: Element): void => void (open = times(ctx, open, factor));
  parts.monomial.kernels.forEach((index, j) => {
    const kernel = ctx.table.kernels[index] as Kernel;
    const e = parts.monomial.exponents[j] as Exponent;
    const sign = ctx.signs.ofKernel(kernel);
    const shape = kernel.shape;
    if (shape.kind === 'exp' && isNonNegative(sign)) result = plus(ctx, result, multiple(shape.unit, e));
    else if (shape.kind === 'power' && isNonNegative(sign)) result = plus(ctx, result, multiple(times(ctx, shape.unit, splitLogarithm(ctx, shape.base)), e));
    else if (shape.kind === 'integer') result = plus(ctx, result, multiple(logOfRational(ctx, Q.rational(shape.value)), e));
    else if (shape.kind === 'radicand' && isNonNegative(sign)) result = plus(ctx, result, multiple(splitLogarithm(ctx, shape.base), e));
    else if (isNonNegative(sign)) result = plus(ctx, result, multiple(kernelElement(ctx, logKernel(ctx, kernelElement(ctx, kernel))), e));
    else if (isWhole(e) && (sign & ~(NEGATIVE | NIL)) === 0) {
      result = plus(ctx, result, multiple(kernelElement(ctx, logKernel(ctx, negateElement(kernelElement(ctx, kernel)))), e));
      if (e % 2 !== 0) negative = !negative;
    } else if (isWhole(e) && isRealSet(sign) && shape.kind !== 'exp' && shape.kind !== 'power') {
      const even = e % 2 === 0 ? e : e - 1;
      if (even !== 0) result = plus(ctx, result, multiple(splitLogarithm(ctx, absolute(ctx, kernelElement(ctx, kernel))), even));
      if (even !== e) take(kernelElement(ctx, kernel));
    } else take(kernelElement(ctx, kernel, e));
  });
  const polynomial = (f: Polynomial, power: number): void => {
    if (isOnePolynomial(f)) return;
    for (const factor of squareFreeFactors(f, ctx.table.check)) {
      const e = factor.exponent * power;
      const u = asElement(ctx, factor.polynomial);
      const sign = ctx.signs.of(u);
      if (isNonNegative(sign)) result = plus(ctx, result, multiple(kernelElement(ctx, logKernel(ctx, u)), e));
      else if ((sign & ~(NEGATIVE | NIL)) === 0) {
        result = plus(ctx, result, multiple(kernelElement(ctx, logKernel(ctx, elementFromPolynomial(ctx.table, scalePolynomial(factor.polynomial, -1n)))), e));
        if (e % 2 !== 0) negative = !negative;
      } else if (isRealSet(sign)) {
        const even = e % 2 === 0 ? e : e - 1;
        if (even !== 0) result = plus(ctx, result, multiple(splitLogarithm(ctx, absolute(ctx, u)), even));
        if (even !== e) take(u);
      } else take(wholePower(ctx.table, u, e));
    }
  };
  polynomial(parts.numerator, 1);
  for (const f of parts.denominator) polynomial(f.polynomial, -f.exponent);
  const iPi = times(ctx, kernelElement(ctx, imaginaryKernel(ctx)), kernelElement(ctx, constantKernel(ctx, 'pi')));
  if (!isQuotient(open)) return (open.num < 0n) !== negative ? plus(ctx, result, iPi) : result;
  const base = negative ? negateElement(open) : open;
  const single = singleKernel(open);
  const kernel = single ? (ctx.table.kernels[single.kernel] as Kernel) : null;
  if (single && kernel && kernel.shape.kind === 'imaginary') return plus(ctx, result, scaleElement(iPi, Q.rational(negative ? -1 : 1, 2)));
  if (single && kernel && !negative && kernel.shape.kind === 'exp') {
    // log exp(i t) = i t for -pi < t <= pi only; unknown otherwise.
    const im = byImaginaryUnit(ctx, multiple(kernel.shape.unit, single.exponent));
    const pi = kernelElement(ctx, constantKernel(ctx, 'pi'));
    if (isZeroRational(im.re) && isNonNegative(ctx.signs.of(minus(ctx, pi, im.im))) && ctx.signs.of(plus(ctx, pi, im.im)) === POSITIVE) return plus(ctx, result, multiple(kernel.shape.unit, single.exponent));
  }
  if (single && kernel && !negative && kernel.shape.kind !== 'exp' && kernel.shape.kind !== 'power' && compareExponents(single.exponent, -1) > 0 && compareExponents(single.exponent, 1) <= 0) {
    return plus(ctx, result, multiple(kernelElement(ctx, logKernel(ctx, kernel.shape.kind === 'radicand' ? kernel.shape.base : kernelElement(ctx, kernel))), single.exponent));
  }
  return plus(ctx, result, logarithmOfNumber(ctx, base) ?? kernelElement(ctx, logKernel(ctx, base)));
}

/** log(x + i y) = log(x^2 + y^2)/2 + i atan2(y, x) for real algebraic numbers x and y, y not zero; else null. */
function logarithmOfNumber(ctx: Context, a: Element): Element | null {
  const { re, im } = byImaginaryUnit(ctx, a);
  if (isZeroRational(im) || !isRealAlgebraic(ctx, re) || !isRealAlgebraic(ctx, im)) return null;
  const i = kernelElement(ctx, imaginaryKernel(ctx));
  const pi = kernelElement(ctx, constantKernel(ctx, 'pi'));
  const size = scaleElement(logarithm(ctx, plus(ctx, times(ctx, re, re), times(ctx, im, im))), Q.HALF);
  const up = signOfReal(ctx, im);
  const right = isZeroRational(re) ? 0 : signOfReal(ctx, re);
  if (up === null || right === null) return null;
  if (right === 0) return plus(ctx, size, times(ctx, i, scaleElement(pi, Q.rational(up, 2))));
  const angle = ctx.call('atan', [divideElements(ctx, im, re)]);
  // Of other numbers the logarithm stays whole: the parts would bring nested roots.
  const familiar = (rationalOf(re) && rationalOf(im)) || isRationalMultipleOfPi(ctx, angle);
  if (!familiar) return null;
  return plus(ctx, size, times(ctx, i, right > 0 ? angle : plus(ctx, angle, scaleElement(pi, Q.rational(up)))));
}
const isRationalMultipleOfPi = (ctx: Context, a: Element): boolean => singleKernel(rationalMultiple(a).unit)?.kernel === constantKernel(ctx, 'pi').index;
const signOfReal = (ctx: Context, a: Element): -1 | 1 | null => (isQuotient(a) ? ctx.signOfNumber(a) : a.num > 0n ? 1 : -1);
const isRealAlgebraic = (ctx: Context, a: Element): boolean => !isQuotient(a) || (isRealSet(ctx.signs.of(a)) && isNumericRadicand(ctx, a) && a.monomial.kernels.every((k) => ctx.table.relations[k]?.numeric === true));

/** a^b, principal value, for any exponent. */
export function generalPower(ctx: Context, a: Element, b: Element): Element {
  const r = rationalOf(b);
  if (r) return rationalPower(ctx, a, r);
  if (isZeroRational(a)) {
    if (ctx.signs.of(b) === POSITIVE) return Q.ZERO;
    throw undecided('A power of zero with this exponent has no settled value; state that the exponent is positive.');
  }
  return exponential(ctx, times(ctx, b, logarithm(ctx, a)));
}
