/**
 * Arithmetic of elements: content * monomial * numerator / product of denominator factors.
 * The numerator is a primitive integer polynomial without monomial factor and with positive leading coefficient; denominators stay factored, their factors primitive, coprime to
 * each other as far as seen, and cancelled against the numerator. Plain rationals are themselves.
 */
import { Q, type Rational } from '../expression/index.ts';
import { Declined } from '../outcome.ts';
import { clearAlgebraic } from './algebraicNorm.ts';
import { cancelFactors, commonDenominator, insertFactor } from './denominatorFactors.ts';
import { multiplyExponents } from './exponent.ts';
import type { KernelTable } from './kernel.ts';
import { commonMonomial, invertMonomial, type Monomial, monomialKey, multiplyMonomials, sameMonomial, UNIT } from './monomial.ts';
import { normalise } from './normalForm.ts';
import { combine, isOnePolynomial, multiplyPolynomials, ONE_POLYNOMIAL, type Polynomial, polynomialKey, powerOfPolynomial, shiftPolynomial } from './polynomial.ts';
import { type Factor, isQuotient, NO_FACTORS, partsOf, type Quotient, raw } from './quotientParts.ts';
import { inRange, multiplyReduced, usesRelation } from './relations.ts';
import { squareFreeFactors } from './squareFree.ts';
import type { Element } from './types.ts';

export function negateElement(a: Element): Element {
  return isQuotient(a) ? { compound: 'quotient', content: Q.negate(a.content), monomial: a.monomial, numerator: a.numerator, denominator: a.denominator } : Q.negate(a);
}

export function scaleElement(a: Element, c: Rational): Element {
  if (!isQuotient(a)) return Q.multiply(a, c);
  if (c.num === 0n) return Q.ZERO;
  return { compound: 'quotient', content: Q.multiply(a.content, c), monomial: a.monomial, numerator: a.numerator, denominator: a.denominator };
}

export function multiplyElements(table: KernelTable, a: Element, b: Element): Element {
  if (!isQuotient(a)) return isQuotient(b) ? scaleElement(b, a) : Q.multiply(a, b);
  if (!isQuotient(b)) return scaleElement(a, b);
  const content = Q.multiply(a.content, b.content);
  const monomial = multiplyMonomials(a.monomial, b.monomial);
  const plainA = isOnePolynomial(a.numerator);
  const plainB = isOnePolynomial(b.numerator);
  if (plainA && plainB && a.denominator.length === 0 && b.denominator.length === 0) {
    return inRange(table, monomial) ? raw(content, monomial, ONE_POLYNOMIAL, NO_FACTORS) : normalise(table, content, monomial, ONE_POLYNOMIAL, NO_FACTORS, false);
  }
  let na = a.numerator;
  let nb = b.numerator;
  let da = a.denominator;
  let db = b.denominator;
  if (!plainA && db.length > 0) ({ numerator: na, denominator: db } = cancelFactors(table, na, db));
  if (!plainB && da.length > 0) ({ numerator: nb, denominator: da } = cancelFactors(table, nb, da));
  let denominator = da;
  for (const f of db) denominator = insertFactor(table, denominator, f.polynomial, f.exponent);
  const product = multiplyReduced(table, na, nb);
  // A relation can bring a factor of a denominator back; without one nothing more cancels.
  return normalise(table, content, monomial, product, denominator, denominator.length > 0 && usesRelation(table, product));
}

const polynomialPower = (f: Polynomial, n: number): Polynomial => (n === 0 ? ONE_POLYNOMIAL : powerOfPolynomial(f, n));

export function addElements(table: KernelTable, a: Element, b: Element): Element {
  const qa = isQuotient(a);
  const qb = isQuotient(b);
  if (!qa && !qb) return Q.add(a as Rational, b as Rational);
  const x = partsOf(a);
  const y = partsOf(b);
  if (x.content.num === 0n) return b;
  if (y.content.num === 0n) return a;
  if (x.numerator === y.numerator && x.denominator === y.denominator && sameMonomial(x.monomial, y.monomial)) {
    const content = Q.add(x.content, y.content);
    return content.num === 0n ? Q.ZERO : { compound: 'quotient', content, monomial: x.monomial, numerator: x.numerator, denominator: x.denominator };
  }
  const monomial = commonMonomial(x.monomial, y.monomial);
  const commonDen = (x.content.den / Q.gcd(x.content.den, y.content.den)) * y.content.den;
  const ca = x.content.num * (commonDen / x.content.den);
  const cb = y.content.num * (commonDen / y.content.den);
  const inverse = invertMonomial(monomial);
  let na = shiftPolynomial(x.numerator, multiplyMonomials(x.monomial, inverse));
  let nb = shiftPolynomial(y.numerator, multiplyMonomials(y.monomial, inverse));
  let denominator: readonly Factor[] = NO_FACTORS;
  let cancel = false;
  if (x.denominator.length > 0 || y.denominator.length > 0) {
    const common = commonDenominator(table, x.denominator, y.denominator);
    denominator = common.factors;
    common.factors.forEach((f, i) => {
      const ea = common.left[i] as number;
      const eb = common.right[i] as number;
      if (ea < f.exponent) na = multiplyPolynomials(na, polynomialPower(f.polynomial, f.exponent - ea));
      if (eb < f.exponent) nb = multiplyPolynomials(nb, polynomialPower(f.polynomial, f.exponent - eb));
      if (ea === eb) cancel = true;
    });
    if (!cancel) cancel = usesRelation(table, na) || usesRelation(table, nb);
  }
  return normalise(table, { num: 1n, den: commonDen }, monomial, combine(na, ca, nb, cb), denominator, cancel);
}

/** 1/a; a must not be zero. */
export function invertElement(table: KernelTable, a: Element): Element {
  if (!isQuotient(a)) return Q.reciprocal(a);
  const content = Q.reciprocal(a.content);
  const monomial = invertMonomial(a.monomial);
  if (isOnePolynomial(a.numerator) && a.denominator.length === 0) return normalise(table, content, monomial, ONE_POLYNOMIAL, NO_FACTORS, false);
  let numerator: Polynomial = ONE_POLYNOMIAL;
  for (const f of a.denominator) numerator = multiplyReduced(table, numerator, polynomialPower(f.polynomial, f.exponent));
  if (isOnePolynomial(a.numerator)) return normalise(table, content, monomial, numerator, NO_FACTORS, false);
  const cleared = clearAlgebraic(table, a.numerator);
  if (cleared.norm.length === 0) throw new Declined('undecided', 'A denominator here is zero or could not be shown to be non-zero; state an assumption that excludes it.');
  const whole = normalise(table, content, monomial, multiplyReduced(table, numerator, cleared.cofactor), NO_FACTORS, false);
  const norm = partsOf(normalise(table, Q.ONE, UNIT, cleared.norm, NO_FACTORS, false));
  if (!isQuotient(whole)) return withDenominator(table, partsOf(whole), norm);
  return withDenominator(table, whole, norm);
}

function withDenominator(table: KernelTable, a: Quotient, b: Quotient): Element {
  const content = Q.divide(a.content, b.content);
  const monomial = multiplyMonomials(a.monomial, invertMonomial(b.monomial));
  let denominator = a.denominator;
  if (!isOnePolynomial(b.numerator)) for (const f of squareFreeFactors(b.numerator, table.check)) denominator = insertFactor(table, denominator, f.polynomial, f.exponent);
  return normalise(table, content, monomial, a.numerator, denominator, true);
}

/** a^n for a whole number n; a not zero where n is negative. */
export function wholePower(table: KernelTable, a: Element, n: number): Element {
  if (!isQuotient(a)) return Q.power(a, n);
  if (n === 0) return Q.ONE;
  if (n < 0) return wholePower(table, invertElement(table, a), -n);
  if (n === 1) return a;
  const monomial: Monomial = { kernels: a.monomial.kernels, exponents: a.monomial.exponents.map((e) => multiplyExponents(e, n)) };
  const content = Q.power(a.content, n);
  const denominator = a.denominator.map((f) => ({ polynomial: f.polynomial, exponent: f.exponent * n }));
  let numerator = ONE_POLYNOMIAL;
  if (!isOnePolynomial(a.numerator)) {
    if (a.numerator.length > 1 && n * Math.log(a.numerator.length) > 60) throw new Declined('undecided', `A power with ${n} as its exponent is too large to be expanded; use a smaller exponent.`);
    for (let i = 0; i < n; i += 1) {
      numerator = multiplyReduced(table, numerator, a.numerator);
      table.check();
    }
  }
  return normalise(table, content, monomial, numerator, denominator, denominator.length > 0 && usesRelation(table, numerator));
}

export function elementKey(a: Element): string {
  if (!isQuotient(a)) return Q.toText(a);
  const denominator = a.denominator.map((f) => `(${polynomialKey(f.polynomial)})^${f.exponent}`).sort();
  return `${Q.toText(a.content)} ${monomialKey(a.monomial)}(${polynomialKey(a.numerator)})/${denominator.join('')}`;
}

export const elementFromPolynomial = (table: KernelTable, f: Polynomial): Element => normalise(table, Q.ONE, UNIT, f, NO_FACTORS, false);
export const elementFromMonomial = (table: KernelTable, m: Monomial, content: Rational = Q.ONE): Element => normalise(table, content, m, ONE_POLYNOMIAL, NO_FACTORS, false);
