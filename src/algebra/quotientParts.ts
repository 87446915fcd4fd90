/** The parts of an element: content, monomial, numerator, factored denominator. */
import type { Rational } from '../expression/index.ts';
import { isUnit, type Monomial, UNIT } from './monomial.ts';
import { isOnePolynomial, ONE_POLYNOMIAL, type Polynomial } from './polynomial.ts';
import type { CompoundElement, DenominatorFactor, Element } from './types.ts';

export type Factor = DenominatorFactor;
export type Quotient = CompoundElement;

export const NO_FACTORS: readonly Factor[] = [];

export const isQuotient = (a: Element): a is Quotient => (a as { readonly compound?: string }).compound === 'quotient';

export const raw = (content: Rational, monomial: Monomial, numerator: Polynomial, denominator: readonly Factor[]): Element =>
  isOnePolynomial(numerator)
    ? isUnit(monomial) && denominator.length === 0
      ? content
      : { compound: 'quotient', content, monomial, numerator: ONE_POLYNOMIAL, denominator }
    : { compound: 'quotient', content, monomial, numerator, denominator };

/** Parts of any element. */
export const partsOf = (a: Element): Quotient => (isQuotient(a) ? a : { compound: 'quotient', content: a, monomial: UNIT, numerator: ONE_POLYNOMIAL, denominator: NO_FACTORS });
