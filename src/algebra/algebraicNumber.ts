/**
 * Zeros of irreducible polynomials over the rationals as exact numbers. With p = a_n x^n + ... the kernel is the algebraic integer a_n x, whose monic minimal polynomial reduces its powers;
 * inverses come from the characteristic polynomial (quotient.ts), zero from the normal form, signs from proven discs.
 */
import { Q, type Rational } from '../expression/index.ts';
import { isolateRoots } from '../functions/index.ts';
import { kernelElement, rationalOf, type Context } from './context.ts';
import { type Cubic, depressedCubic, type PolynomialZero, zerosOfCubic } from './cubic.ts';
import { monomialOf, UNIT } from './monomial.ts';
import type { Polynomial, Term } from './polynomial.ts';
import { rationalPower } from './powers.ts';
import { addElements, multiplyElements, scaleElement } from './quotient.ts';
import { isQuotient } from './quotientParts.ts';
import { rationalFactors, type IntegerPolynomial } from './rationalFactors.ts';
import type { Element } from './types.ts';
import { cosineOfPi } from './unitCircle.ts';

/** Denominators with such a number are cleared up to this degree. */
const MOST_DEGREE = 24;

/** The zero of the given index (from 1, as in polynomialRoot) of an irreducible primitive polynomial, lowest coefficient first. */
function algebraicNumber(ctx: Context, polynomial: IntegerPolynomial, index: number): Element {
  const n = polynomial.length - 1;
  const lead = polynomial[n] as bigint;
  const coefficients = [...polynomial].reverse();
  const kernel = ctx.table.intern(`zero ${index} of ${coefficients.join(' ')}`, () => {
    const own = ctx.table.kernels.length;
    // a_n^(n-1) p(y/a_n) = y^n + sum of c_k a_n^(n-1-k) y^k.
    const value: Polynomial = polynomial
      .slice(0, n)
      .map((c, k): Term => ({ monomial: k === 0 ? UNIT : monomialOf(own, k), coefficient: -c * lead ** BigInt(n - 1 - k) }))
      .filter((t) => t.coefficient !== 0n)
      .reverse();
    return { shape: { kind: 'algebraic', coefficients, index }, relation: { period: n, value, pure: false, numeric: true } };
  });
  return scaleElement(kernelElement(ctx, kernel), Q.rational(1n, lead));
}

/**
 * All zeros of the polynomial (lowest coefficient first, degree 3 or more), the real ones first: cubics by cube roots of rationals or cosines of rational angles where they are such,
 * everything else as numbers of their own. Each factor of degree 2 or less is left to the caller: null there, and where the degree is too high.
 */
export function zerosOfPolynomial(ctx: Context, coefficients: readonly Rational[]): readonly PolynomialZero[] | null {
  const [factor, more] = rationalFactors(coefficients, ctx.table.check) ?? [];
  if (!factor || more || factor.multiplicity > 1) return null;
  const { polynomial } = factor;
  const n = polynomial.length - 1;
  if (n < 3 || n > MOST_DEGREE) return null;
  if (n === 3) {
    const cubic = polynomial.map((c) => Q.rational(c)) as unknown as readonly [Rational, Rational, Rational, Rational];
    const written = (hasShortRadicals(ctx, cubic) ? zerosOfCubic(ctx, cubic) : null) ?? byCosines(ctx, cubic);
    if (written) return written;
  }
  const discs = isolateRoots([...polynomial].reverse(), ctx.table.check);
  return discs && discs.map((disc, i) => ({ value: algebraicNumber(ctx, polynomial, i + 1), real: disc.real }));
}

/** Cube roots of rationals only: no square root stands under them. */
function hasShortRadicals(ctx: Context, cubic: Cubic): boolean {
  const discriminant = rationalOf(depressedCubic(ctx, cubic).discriminant);
  return discriminant !== null && Q.signOf(discriminant) > 0 && rationalOf(rationalPower(ctx, discriminant, Q.HALF)) !== null;
}

/** x = t - a/3 gives t^3 + p t + q with t = 2 sqrt(-p/3) cos(theta), cos(3 theta) = v (Viete; DLMF 1.11(iii)); written so only where 3 theta is a multiple of pi/6. */
function byCosines(ctx: Context, cubic: readonly [Rational, Rational, Rational, Rational]): readonly PolynomialZero[] | null {
  const reduced = depressedCubic(ctx, cubic);
  const [centre, p, halfQ] = [reduced.centre, reduced.p, reduced.halfQ].map(rationalOf);
  if (!centre || !p || !halfQ || Q.signOf(p) >= 0) return null;
  const squared = Q.divide(Q.multiply(Q.rational(-27), Q.multiply(halfQ, halfQ)), Q.power(p, 3));
  const angles = new Map([['0', Q.HALF], ['1/4', Q.rational(1, 3)], ['1/2', Q.rational(1, 4)], ['3/4', Q.rational(1, 6)]]);
  const first = angles.get(Q.toText(squared));
  if (!first) return null;
  // v has the sign of -q.
  const angle = Q.signOf(halfQ) > 0 ? Q.subtract(Q.ONE, first) : first;
  const size = scaleElement(rationalPower(ctx, Q.divide(p, Q.rational(-3)), Q.HALF), Q.rational(2));
  const third = Q.rational(1, 3);
  return [0, 2, 4].map((turn) => ({
    value: addElements(ctx.table, centre, multiplyElements(ctx.table, size, cosineOfPi(ctx, Q.multiply(Q.add(angle, Q.rational(turn)), third)))),
    real: true,
  }));
}

/** polynomialRoot(index, c_n, ..., c_0) of an irreducible polynomial as its number; null for any other arguments. */
export function algebraicCall(ctx: Context, args: readonly Element[]): Element | null {
  const integers = args.map((x) => (isQuotient(x) || x.den !== 1n ? null : x.num));
  const [index, ...coefficients] = integers;
  if (index === null || index === undefined || index < 1n || coefficients.length < 4 || coefficients.length > MOST_DEGREE + 1 || index >= BigInt(integers.length - 1)) return null;
  const lowestFirst = coefficients.flatMap((c) => (c === null ? [] : [c])).reverse();
  if (lowestFirst.length !== coefficients.length || (lowestFirst[lowestFirst.length - 1] ?? 0n) <= 0n) return null;
  const [factor, more] = rationalFactors(lowestFirst.map((c) => Q.rational(c)), ctx.table.check) ?? [];
  const irreducible = factor && !more && factor.multiplicity === 1 && factor.polynomial.length === lowestFirst.length && factor.polynomial.every((c, k) => c === lowestFirst[k]);
  return irreducible ? algebraicNumber(ctx, lowestFirst, Number(index)) : null;
}
