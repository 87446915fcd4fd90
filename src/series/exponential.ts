/** Reciprocals, powers, logarithms and exponentials of multiseries on every scale. Principal values. */
import type { Element } from '../algebra/types.ts';
import { build, Q } from '../expression/index.ts';
import { Declined } from '../outcome.ts';
import { imaginaryPart, mapConstants } from './complex.ts';
import { signOfExponent } from './exponent.ts';
import { decideSign, isZero, leading, monomialOf } from './leading.ts';
import { addElements, type Context, exactOf, isRational, type Lead, type Multi, multiplyElements, negateElement, type ScaleElement, Series, type Stream, unnamed } from './multi.ts';
import { isOscillating, keepsFromZero } from './oscillation.ts';
import { plainText } from './plain.ts';
import { add, monomial, multiply, negate, scaleBy, shift, subtract } from './ring.ts';
import { comparable, insertExponential, logarithmOf } from './scale.ts';
import { split } from './split.ts';
import { dropTerms, finiteStream, mapStream } from './stream.ts';
import { expTail, inverseTail, logTail, powerTail, reciprocalElement } from './tail.ts';

function refuseOscillating(c: Context, e: Element, what: string): void {
  if (isOscillating(c, e) && !keepsFromZero(c, e)) throw new Declined('no-expansion', `${what} an oscillating function that may vanish has no expansion; ask for a point where it stays away from zero.`);
}

function reciprocalOf(c: Context, e: Element): Element {
  refuseOscillating(c, e, 'The quotient by');
  return reciprocalElement(c, e);
}

/** f = coefficient * element^exponent * (1 + rest): the rest's stream. */
export function relativeRest(c: Context, f: Series, lead: Lead): Stream {
  const factor = reciprocal(c, lead.coefficient);
  const down = negateElement(c, lead.exponent);
  return mapStream(dropTerms(f.stream, lead.index + 1), (t) => ({ ...t, exponent: addElements(c, t.exponent, down), coefficient: multiply(c, t.coefficient, factor) }));
}

function leadOf(c: Context, f: Series): Lead {
  const lead = leading(c, f);
  if (lead) relyOnNonZero(c, lead.coefficient);
  if (!lead) throw new Declined('no-expansion', 'A divisor or the argument of a logarithm is identically zero; correct the formula.');
  return lead;
}

/** A leading coefficient in parameters is not zero for generic values only: the result says so. */
function relyOnNonZero(c: Context, coefficient: Multi): void {
  if (coefficient instanceof Series || isRational(coefficient) || c.field.parameters(coefficient).length === 0) return;
  const sign = c.field.sign(coefficient);
  if (sign !== 'undecided' && sign !== 'complex') return;
  if (!isOscillating(c, coefficient)) for (const u of c.field.factorsThatMayVanish(coefficient)) c.field.require(`${plainText(c.field.toExpression(u))} != 0`);
}

/** 1/f. */
export function reciprocal(c: Context, f: Multi): Multi {
  if (!(f instanceof Series)) {
    if (isZero(c, f)) throw new Declined('no-expansion', 'The formula divides by zero everywhere; correct the formula.');
    return reciprocalOf(c, f);
  }
  const lead = leadOf(c, f);
  const exact = () => build.power(f.exact(), -1);
  const rest = relativeRest(c, f, lead);
  const base: Multi = rest.at(0) === null ? Q.ONE : new Series(f.element, inverseTail(c, rest), unnamed);
  return withExact(multiply(c, shift(c, base, f.element, negateElement(c, lead.exponent)), reciprocal(c, lead.coefficient)), exact);
}

export const divide = (c: Context, a: Multi, b: Multi): Multi => withExact(multiply(c, a, reciprocal(c, b)), () => build.quotient(exactOf(c, a), exactOf(c, b)));

export const withExact = (m: Multi, exact: () => ReturnType<typeof build.number>): Multi => {
  if (!(m instanceof Series)) return m;
  const copy = new Series(m.element, m.stream, exact);
  if (m.lead !== undefined) copy.lead = m.lead;
  return copy;
};

/** f^n for a non-negative integer, by squaring: keeps finite series finite. */
function integerPower(c: Context, f: Multi, n: number): Multi {
  let result: Multi = Q.ONE;
  let square = f;
  for (let k = n; k > 0; k >>= 1) {
    if (k & 1) result = multiply(c, result, square);
    if (k > 1) square = multiply(c, square, square);
  }
  return result;
}

/** Whether f is known to have at most a few terms on every level, so that products of it end. */
export function isShort(f: Multi, most = 12): boolean {
  if (!(f instanceof Series)) return true;
  for (let k = 0; k <= most; k += 1) {
    const term = f.stream.at(k);
    if (!term) return true;
    if (!isShort(term.coefficient, most)) return false;
  }
  return false;
}

/** f^exponent for a constant exponent, principal value. */
export function power(c: Context, f: Multi, exponent: Element): Multi {
  if (!(f instanceof Series)) {
    if (!isRational(exponent) || exponent.den !== 1n || exponent.num < 0n) refuseOscillating(c, f, 'A power of');
    return c.field.power(f, exponent);
  }
  const exact = () => build.power(f.exact(), exactOf(c, exponent));
  const n = isRational(exponent) && exponent.den === 1n ? Number(exponent.num) : null;
  if (n === 0) return Q.ONE;
  if (n === 1) return f;
  if (n !== null && n > 0 && (n <= 3 || (n <= 64 && isShort(f)))) return withExact(integerPower(c, f, n), exact);
  if (n === -1) return reciprocal(c, f);
  const lead = leading(c, f);
  if (!lead) {
    if (decideSign(c, exponent) === 1) return Q.ZERO;
    throw new Declined('no-expansion', 'The formula raises zero to a power that is not positive; correct the formula.');
  }
  relyOnNonZero(c, lead.coefficient);
  const rest = relativeRest(c, f, lead);
  const exponentOfElement = multiplyElements(c, lead.exponent, exponent);
  if (n === null && signOfExponent(c, lead.exponent) !== 0) noteSides(c, isEvenLead(lead, f.element) && isPositive(c, lead.coefficient) && isEvenLead({ ...lead, exponent: exponentOfElement }, f.element));
  let front = power(c, lead.coefficient, exponent);
  if (n === null) {
    const turns = turnsAcrossCut(c, f, lead.coefficient, rest);
    if (turns !== 0) front = scaleBy(c, front, c.field.exp(multiplyElements(c, Q.rational(2 * turns), multiplyElements(c, exponent, multiplyElements(c, c.field.i, pi(c))))));
  }
  const tail: Multi = rest.at(0) === null ? Q.ONE : new Series(f.element, powerTail(c, rest, exponent), unnamed);
  return withExact(multiply(c, shift(c, tail, f.element, exponentOfElement), front), exact);
}

export const pi = (c: Context): Element => c.field.fromExpression(build.constant('pi'));

/**
 * For f = element power * front * (1 + rest) with a negative real front: how many times 2 pi i the principal logarithm jumps from log(front) + log(1 + rest), 0 or -1.
 * The logarithm on the cut itself is continuous from above; a product just below it has the argument -pi.
 */
function turnsAcrossCut(c: Context, f: Series, front: Multi, rest: Stream): 0 | -1 {
  const lead = monomialOf(c, front);
  if (!lead || isRational(lead.constant) ? !lead || (lead.constant as { num: bigint }).num >= 0n : c.field.isReal(lead.constant) !== 'yes' || c.field.sign(lead.constant) !== -1) return 0;
  // The rest is smaller than every part of the front: where the front itself keeps away from the axis, its side is that of the product.
  if (front instanceof Series && !isRealMulti(c, front) && signOfImaginary(c, front.stream, 40) !== 0) return 0;
  if (front instanceof Series && !isRealMulti(c, front)) throw new Declined('undecided', 'The branch of a power or logarithm near its cut could not be decided; choose a side or simplify the argument.');
  let sign = signOfImaginary(c, rest, 4);
  if (sign === 0 && !isRealMulti(c, f)) sign = signOfImaginary(c, rest, 40);
  // The two sides of the point lie on different sides of the cut.
  if (sign !== 0) c.notes.sided = true;
  return sign === 1 ? -1 : 0;
}

/** Sign of the imaginary part of the first term that is not real; 0 where none of the first terms is. */
function signOfImaginary(c: Context, stream: Stream, most: number): -1 | 0 | 1 {
  for (let k = 0; k < most; k += 1) {
    const term = stream.at(k);
    if (!term || term.order) return 0;
    const { coefficient } = term;
    if (coefficient instanceof Series) {
      const inner = signOfImaginary(c, coefficient.stream, 12);
      if (inner !== 0) return inner;
      continue;
    }
    if (isRational(coefficient) || c.field.isReal(coefficient) === 'yes') continue;
    const sign = decideSign(c, imaginaryPart(c, coefficient));
    if (sign === 1 || sign === -1) return sign;
  }
  return 0;
}

/** Whether f is real for small t by construction: made of real constants by real operations, or a finite sum of real terms. */
export function isRealMulti(c: Context, f: Multi): boolean {
  return !c.notes.complex || isRealSum(c, f, 12);
}

function isRealSum(c: Context, f: Multi, most: number): boolean {
  if (!(f instanceof Series)) return isRational(f) || c.field.isReal(f) === 'yes';
  for (let k = 0; k < most; k += 1) {
    const term = f.stream.at(k);
    if (!term) return true;
    if (!isRealSum(c, term.coefficient, most)) return false;
  }
  return isRealTree(c, f);
}

function isRealTree(c: Context, f: Series): boolean {
  try {
    return c.field.isReal(c.field.fromExpression(f.exact())) === 'yes';
  } catch (error) {
    if (error instanceof Declined && error.failure.code !== 'over-budget') return false;
    throw error;
  }
}

/** Whether coefficient * element^exponent has the same sign and size at t and -t: an even power of t with a constant. */
export const isEvenLead = (lead: Pick<Lead, 'exponent' | 'coefficient'>, element: ScaleElement): boolean =>
  element.kind === 'local' && !(lead.coefficient instanceof Series) && isRational(lead.exponent) && lead.exponent.den === 1n && lead.exponent.num % 2n === 0n;

/** A step that needs the sign of t, or at least that t is real. */
export function noteSides(c: Context, even: boolean): void {
  c.notes.onReal = true;
  if (!even) c.notes.sided = true;
}

const isPositive = (c: Context, m: Multi): boolean => !(m instanceof Series) && (isRational(m) ? m.num > 0n : c.field.sign(m) === 1);

/** Principal logarithm. */
export function logarithm(c: Context, f: Multi): Multi {
  if (!(f instanceof Series)) {
    if (isZero(c, f)) throw new Declined('no-expansion', 'The formula takes the logarithm of zero everywhere; correct the formula.');
    refuseOscillating(c, f, 'The logarithm of');
    return c.field.log(f);
  }
  const exact = () => build.call('log', f.exact());
  const lead = leadOf(c, f);
  const rest = relativeRest(c, f, lead);
  let total = logarithm(c, lead.coefficient);
  if (turnsAcrossCut(c, f, lead.coefficient, rest) !== 0) total = subtract(c, total, multiplyElements(c, Q.rational(2), multiplyElements(c, c.field.i, pi(c))));
  if (signOfExponent(c, lead.exponent) !== 0) {
    noteSides(c, isEvenLead(lead, f.element) && isPositive(c, lead.coefficient));
    total = add(c, scaleBy(c, logarithmOf(c, f.element), lead.exponent), total);
  }
  if (rest.at(0) !== null) total = add(c, total, new Series(f.element, logTail(c, rest), unnamed));
  return withExact(total, exact);
}

/** e^f on every scale: what is unbounded becomes powers of scale elements, of new ones where needed. */
export function exponential(c: Context, f: Multi): Multi {
  const exact = () => build.power(build.constant('e'), exactOf(c, f));
  const { large, constant, small } = split(c, f);
  let result: Multi = c.field.exp(constant);
  if (small) result = multiply(c, result, exponentialOfSmall(c, small));
  if (large) result = multiply(c, exponentialOfLarge(c, large), result);
  return withExact(result, exact);
}

/** e^f for f -> 0, level by level. */
export function exponentialOfSmall(c: Context, f: Multi): Multi {
  if (!(f instanceof Series)) return c.field.exp(f);
  const { base, rest } = levels(c, f);
  const exact = () => build.power(build.constant('e'), f.exact());
  const tail: Multi = rest.at(0) === null ? Q.ONE : new Series(f.element, expTail(c, rest), unnamed);
  return base === null ? withExact(tail, exact) : withExact(multiply(c, tail, exponentialOfSmall(c, base)), exact);
}

/** The coefficient of element^0 (null if absent) and the stream of positive exponents, for f without negative ones. */
export function levels(c: Context, f: Series): { readonly base: Multi | null; readonly rest: Stream } {
  for (let k = 0; ; k += 1) {
    const term = f.stream.at(k);
    if (!term) return { base: null, rest: finiteStream([]) };
    const sign = signOfExponent(c, term.exponent);
    if (sign > 0) return { base: null, rest: dropTerms(f.stream, k) };
    if (sign === 0) {
      if (term.order) throw new Declined('no-expansion', 'An O-term that is not small stands inside a function; write more terms before it.');
      return { base: term.coefficient, rest: dropTerms(f.stream, k + 1) };
    }
    if (!isZero(c, term.coefficient)) throw new Error('a bounded series has a negative exponent');
  }
}

function exponentialOfLarge(c: Context, large: Multi): Multi {
  c.budget.check();
  const lead = monomialOf(c, large);
  if (!lead) return Q.ONE;
  const real = isRational(lead.constant) ? 'yes' : c.field.isReal(lead.constant);
  if (real !== 'yes' || !isRealMulti(c, large)) return exponentialOfComplex(c, large);
  const found = comparable(c, lead);
  if ('element' in found) {
    const factor = isRational(lead.constant) && isRational(found.logarithm.constant) ? Q.divide(lead.constant, found.logarithm.constant) : c.field.divide(lead.constant, found.logarithm.constant);
    const rest = subtract(c, large, scaleBy(c, found.element.logarithm as Multi, factor));
    noteSides(c, isEvenLead({ exponent: factor, coefficient: Q.ONE }, found.element));
    return multiply(c, monomial(c, found.element, factor), exponential(c, rest));
  }
  // Powers of the local variable stand beside the new element, not inside it: e^(n + log n) is n e^n.
  const power = large instanceof Series && large.element.kind === 'local' ? atExponentZero(c, large) : null;
  if (power) return multiply(c, exponentialOfLarge(c, mapConstants(c, subtract(c, large, power), (e) => e)), exponential(c, power));
  const sign = decideSign(c, lead.constant);
  if (sign === 'complex' || sign === 0) throw new Error('a large part without a sign');
  const element = insertExponential(c, sign === 1 ? large : negate(c, large), found.position);
  c.notes.sided = true;
  return monomial(c, element, Q.rational(-sign));
}

/** The term of a finite series with the element to the power 0, behind others; null where there is none. */
function atExponentZero(c: Context, large: Series): Multi | null {
  for (let k = 0; ; k += 1) {
    const term = large.stream.at(k);
    if (!term) return null;
    if (signOfExponent(c, term.exponent) === 0) return k > 0 && !isZero(c, term.coefficient) ? term.coefficient : null;
  }
}

/** e^(a + i b) = e^a e^(i b): an unbounded b oscillates. */
function exponentialOfComplex(c: Context, large: Multi): Multi {
  const { i } = c.field;
  const imaginary = mapConstants(c, large, (e) => imaginaryPart(c, e));
  const real = subtract(c, large, scaleBy(c, imaginary, i));
  requireOscillation(c);
  const phase = c.field.exp(c.field.multiply(i, c.field.fromExpression(exactOf(c, imaginary))));
  return monomialOf(c, real) === null ? phase : scaleBy(c, exponential(c, real), phase);
}

export function requireOscillation(c: Context): void {
  c.notes.sided = true;
  if (!c.oscillation) {
    throw new Declined('no-expansion', 'The function oscillates without bound in frequency at the point (an essential singularity), so it has no expansion there; choose another point.');
  }
}

/** base^exponent where both vary. */
export const generalPower = (c: Context, base: Multi, exponent: Multi): Multi => exponential(c, multiply(c, exponent, logarithm(c, base)));
