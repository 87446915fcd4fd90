/** Roots of polynomials that are perfect powers: sqrt(x^2 - 2x + 1) for large x is x - 1, and its series ends there. */
import { build, type Expression, Q, type Rational } from '../expression/index.ts';
import { exactOf, finiteStream, isKnownZero, isRational, type Multi, power, Series, subtract, withExact } from '../series/index.ts';
import type { Session } from './session.ts';

const MOST_TERMS = 33;
const MOST_DENOMINATOR = 6n;

interface Term {
  readonly exponent: Rational;
  readonly coefficient: Multi;
}

/** f^exponent for a fractional exponent where f, the value of the tree, is a polynomial and its root one too; null elsewhere. */
export function perfectPower(s: Session, tree: Expression, f: Multi, exponent: Multi): Multi | null {
  const c = s.context;
  if (!(f instanceof Series) || f.element.kind !== 'local' || exponent instanceof Series || !isRational(exponent) || exponent.den === 1n || exponent.den > MOST_DENOMINATOR || !isPolynomial(tree)) return null;
  const terms = firstTerms(f, MOST_TERMS, null);
  const [first, last] = [terms?.[0], terms?.[terms.length - 1]];
  if (!terms || !first || !last || terms.length < 3 || f.stream.at(terms.length) !== null) return null;
  const part = Q.rational(1, exponent.den);
  const root = power(c, f, part);
  const kept = root instanceof Series && root.element === f.element ? firstTerms(root, MOST_TERMS, Q.multiply(last.exponent, part)) : null;
  if (!kept || kept.length < 2) return null;
  const finite = new Series(f.element, finiteStream(kept), () => build.sum(...kept.map((t) => build.product(exactOf(c, t.coefficient), build.power(f.element.expression, t.exponent)))));
  const difference = subtract(c, power(c, finite, Q.rational(exponent.den)), f);
  if (!isZeroThroughout(s, difference)) return null;
  return withExact(power(c, finite, Q.rational(exponent.num)), () => build.power(exactOf(c, f), build.number(exponent)));
}

/** The terms with exponents up to `upTo`, or all; null where there are more than `most`, or where they are not plain. */
function firstTerms(f: Series, most: number, upTo: Rational | null): Term[] | null {
  const terms: Term[] = [];
  for (let k = 0; k < most; k += 1) {
    const term = f.stream.at(k);
    if (!term) return terms;
    if (term.order || term.coefficient instanceof Series || !isRational(term.exponent)) return null;
    if (upTo && Q.compare(term.exponent, upTo) > 0) return terms;
    terms.push({ exponent: term.exponent, coefficient: term.coefficient });
  }
  return null;
}

function isZeroThroughout(s: Session, difference: Multi): boolean {
  if (!(difference instanceof Series)) return isKnownZero(s.context, difference);
  for (let k = 0; ; k += 1) {
    const term = difference.stream.at(k);
    if (!term) return true;
    if (term.order || term.coefficient instanceof Series || !isKnownZero(s.context, term.coefficient)) return false;
  }
}

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
      return isPolynomial(e.numerator) && (e.denominator.kind === 'number' || e.denominator.kind === 'symbol');
    case 'power':
      return isPolynomial(e.base) && e.exponent.kind === 'number' && e.exponent.value.den === 1n && e.exponent.value.num > 0n && e.exponent.value.num <= 16n;
    default:
      return false;
  }
}
