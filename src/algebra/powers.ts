/** Rational powers with principal branches, absolute values, division. */
import { Q, type Rational } from '../expression/index.ts';
import { type Context, imaginaryKernel, isZeroRational, kernelElement, powerKernel, rationalOf, undecided, valueless, withSquaresJoined } from './context.ts';
import { denestedCubeRoot, denestedSquareRoot, dependentSquareRoot } from './denest.ts';
import { compareExponents, type Exponent, exponentFromRational, isWhole, multiplyExponents } from './exponent.ts';
import { splitBySigns } from './factorsBySign.ts';
import type { Kernel } from './kernel.ts';
import { monomialOf, multiplyMonomials } from './monomial.ts';
import { isOnePolynomial, kernelsIn, type Polynomial } from './polynomial.ts';
import { addElements, elementFromMonomial, elementKey, invertElement, multiplyElements, negateElement, scaleElement, wholePower } from './quotient.ts';
import { isQuotient, partsOf } from './quotientParts.ts';
import { positiveRationalPower, radicandPower } from './radicals.ts';
import { isNonNegative, isRealSet, NEGATIVE, NIL } from './signs.ts';
import { asElement, byImaginaryUnit, singleKernel } from './split.ts';
import type { Element } from './types.ts';
import { cosineOfPi, sineOfPi } from './unitCircle.ts';

export const times = (ctx: Context, a: Element, b: Element): Element => multiplyElements(ctx.table, a, b);
export const plus = (ctx: Context, a: Element, b: Element): Element => addElements(ctx.table, a, b);

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
  const { content } = partsOf(a);
  if (content.den !== 1n && r.den === 2n && isQuotient(a)) ctx.fractionRoots.add(elementKey(scaleElement(a, Q.reciprocal(content))));
  let result = positiveRationalPower(ctx, content, r);
  const take = (factor: Element): void => void (result = times(ctx, result, factor));
  const { negative, open } = splitBySigns(ctx, a, {
    kernel: (kernel, e) => take(kernel.relation && !kernel.relation.pure ? radicandPower(ctx, kernelElement(ctx, kernel, e), exponent) : kernelElement(ctx, kernel, multiplyExponents(e, exponent))),
    positive: (u, e) => take(radicandRationalPower(ctx, u, Q.multiply(r, Q.rational(e)))),
    even: (u, e) => take(rationalPower(ctx, absolute(ctx, u), Q.multiply(r, Q.rational(e)))),
  });
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

export const isNumericRadicand = (ctx: Context, u: Element): boolean => isQuotient(u) && u.denominator.length === 0 && [...kernelsIn(u.numerator)].every((k) => ctx.table.relations[k]?.numeric === true);

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
