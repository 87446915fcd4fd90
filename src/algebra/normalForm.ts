/** The normal form of a quotient of polynomials in kernels: relations applied, content and monomial taken out, common factors cancelled. */
import { Q, type Rational } from '../expression/index.ts';
import { clearAlgebraic } from './algebraicNorm.ts';
import { cancelFactors, insertFactor } from './denominatorFactors.ts';
import { compareExponents, type Exponent, isWhole, multiplyExponents, periodsIn } from './exponent.ts';
import type { KernelTable } from './kernel.ts';
import { exponentIn, invertMonomial, isUnit, type Monomial, monomialOf, multiplyMonomials, UNIT, withoutKernel } from './monomial.ts';
import { collect, combine, constantOf, contentOf, divideByInteger, isOnePolynomial, kernelsIn, monomialContent, ONE_POLYNOMIAL, type Polynomial, powerOfPolynomial, shiftPolynomial, type Term } from './polynomial.ts';
import { type Factor, raw } from './quotientParts.ts';
import { inRange, multiplyReduced, reduceByRelations } from './relations.ts';
import { squareFreeFactors } from './squareFree.ts';
import type { Element } from './types.ts';

/** Brings content * monomial * numerator / denominator to normal form. The numerator may be any polynomial with exponents in range or above. */
export function normalise(table: KernelTable, content: Rational, monomial: Monomial, numerator: Polynomial, denominator: readonly Factor[], cancel: boolean): Element {
  let c = content;
  let m = monomial;
  let n = reduceByRelations(table, numerator);
  let d = denominator;
  let mayCancel = cancel;
  if (table.circles.length > 0 && n.length > 1) n = shortenByCircles(table, n);
  for (;;) {
    if (n.length === 0 || c.num === 0n) return Q.ZERO;
    const integer = contentOf(n);
    if (integer !== 1n) {
      n = divideByInteger(n, integer);
      c = Q.multiply(c, { num: integer, den: 1n });
    }
    const common = n.length === 1 ? (n[0] as Term).monomial : separable(table, n, monomialContent(n));
    if (!isUnit(common)) {
      n = n.length === 1 ? ONE_POLYNOMIAL : shiftPolynomial(n, invertMonomial(common));
      m = multiplyMonomials(m, common);
    }
    if (inRange(table, m)) {
      const shared = isOnePolynomial(n) ? UNIT : sharedWith(table, m, n);
      if (isUnit(shared)) break;
      n = reduceByRelations(table, shiftPolynomial(n, shared));
      m = multiplyMonomials(m, invertMonomial(shared));
      mayCancel = true;
      continue;
    }
    const folded = foldMonomial(table, m);
    m = folded.monomial;
    c = Q.multiply(c, folded.content);
    if (!isOnePolynomial(folded.numerator)) {
      n = multiplyReduced(table, n, folded.numerator);
      mayCancel = true;
    }
    for (const factor of folded.denominator) d = insertFactor(table, d, factor.polynomial, factor.exponent);
    if (folded.denominator.length > 0) mayCancel = true;
  }
  if (d.length > 0 && mayCancel && !isOnePolynomial(n)) {
    const cancelled = cancelFactors(table, n, d);
    if (cancelled.changed) return normalise(table, c, m, cancelled.numerator, cancelled.denominator, false);
  }
  return raw(c, m, n, d);
}

/** Of a common monomial the part that may stand before the sum: a kernel with a relation only if no other power of it occurs, so that the form is unique. */
function separable(table: KernelTable, f: Polynomial, common: Monomial): Monomial {
  if (!common.kernels.some((k) => table.relations[k])) return common;
  return keepKernels(common, (k, e) => {
    const relation = table.relations[k];
    return !relation || (relation.pure && f.every((t) => compareExponents(exponentIn(t.monomial, k), e) === 0));
  });
}

/** The part of a monomial that must be multiplied into the sum: powers of kernels with a relation that occur in it as well, and of algebraic integers always. */
function sharedWith(table: KernelTable, m: Monomial, f: Polynomial): Monomial {
  if (!m.kernels.some((k) => table.relations[k])) return UNIT;
  const inside = kernelsIn(f);
  return keepKernels(m, (k) => {
    const relation = table.relations[k];
    return relation ? !relation.pure || inside.has(k) : false;
  });
}

function keepKernels(m: Monomial, keep: (kernel: number, exponent: Exponent) => boolean): Monomial {
  const kept = m.kernels.map((k, i) => keep(k, m.exponents[i] as Exponent));
  if (kept.every((x) => x)) return m;
  return { kernels: m.kernels.filter((_, i) => kept[i]), exponents: m.exponents.filter((_, i) => kept[i]) };
}

/** Applies sin^2 + cos^2 = 1 and its kin one way or the other where that leaves fewer terms. */
function shortenByCircles(table: KernelTable, f: Polynomial): Polynomial {
  let best = f;
  for (const circle of table.circles) {
    const involved = best.some((t) => compareExponents(exponentIn(t.monomial, circle.sine), 2) >= 0 || compareExponents(exponentIn(t.monomial, circle.cosine), 2) >= 0);
    if (!involved) continue;
    // sine^2 = 1 + factor cosine^2, hence cosine^2 = factor (sine^2 - 1).
    const bySine = replaceSquare(best, circle.sine, [1n, circle.factor], circle.cosine);
    if (bySine.length < best.length) best = bySine;
    const byCosine = replaceSquare(best, circle.cosine, [-circle.factor, circle.factor], circle.sine);
    if (byCosine.length < best.length) best = byCosine;
  }
  return best;
}

/** kernel^2 replaced by a + b other^2 throughout, by Horner's rule in kernel^2. */
function replaceSquare(f: Polynomial, kernel: number, [a, b]: readonly [bigint, bigint], other: number): Polynomial {
  const byCount: Term[][] = [];
  for (const t of f) {
    const e = exponentIn(t.monomial, kernel);
    const count = isWhole(e) && e >= 2 ? Math.floor(e / 2) : 0;
    while (byCount.length <= count) byCount.push([]);
    byCount[count]?.push(count === 0 ? t : { monomial: multiplyMonomials(t.monomial, monomialOf(kernel, -2 * count)), coefficient: t.coefficient });
  }
  const square = monomialOf(other, 2);
  let result: Polynomial = [];
  for (let count = byCount.length - 1; count >= 0; count -= 1) {
    if (result.length > 0) result = combine(shiftPolynomial(result, square), b, result, a);
    const own = byCount[count] ?? [];
    if (own.length > 0) result = combine(result, 1n, count === 0 ? own : collect(own), 1n);
  }
  return result;
}

/** Exponents of a monomial brought into range; what leaves it becomes content, numerator or denominator. */
function foldMonomial(table: KernelTable, monomial: Monomial): { content: Rational; monomial: Monomial; numerator: Polynomial; denominator: readonly Factor[] } {
  let m = monomial;
  let content = Q.ONE;
  let numerator = ONE_POLYNOMIAL;
  const denominator: Factor[] = [];
  for (let again = true; again; ) {
    again = false;
    for (let i = 0; i < m.kernels.length; i += 1) {
      const k = m.kernels[i] as number;
      const relation = table.relations[k];
      if (!relation) continue;
      const e = m.exponents[i] as Exponent;
      if (compareExponents(e, 0) >= 0 && compareExponents(e, relation.period) < 0) continue;
      again = true;
      if (!relation.pure) {
        m = withoutKernel(m, k);
        const whole = e as number;
        numerator = multiplyReduced(table, numerator, whole >= 0 ? reduceByRelations(table, [{ monomial: monomialOf(k, whole), coefficient: 1n }]) : ONE_POLYNOMIAL);
        if (whole < 0) {
          const inverse = invertAlgebraic(k, relation.period, relation.value);
          content = Q.multiply(content, Q.power({ num: 1n, den: inverse.divisor }, -whole));
          for (let j = 0; j < -whole; j += 1) numerator = multiplyReduced(table, numerator, inverse.polynomial);
        }
        break;
      }
      const count = periodsIn(e, relation.period);
      m = multiplyMonomials(m, monomialOf(k, -count * relation.period));
      const [only] = relation.value;
      if (relation.value.length === 1 && only) {
        content = Q.multiply(content, Q.power({ num: only.coefficient, den: 1n }, count));
        m = multiplyMonomials(m, { kernels: only.monomial.kernels, exponents: only.monomial.exponents.map((x) => multiplyExponents(x, count)) });
      } else if (count > 0) numerator = multiplyReduced(table, numerator, powerOfPolynomial(relation.value, count));
      else if (relation.numeric) {
        const cleared = clearAlgebraic(table, relation.value);
        const norm = constantOf(cleared.norm);
        if (norm === null || norm === 0n) throw new RangeError('the norm of an algebraic number is a rational other than zero');
        content = Q.multiply(content, Q.power(Q.rational(norm), count));
        for (let j = 0; j < -count; j += 1) numerator = multiplyReduced(table, numerator, cleared.cofactor);
      } else {
        const sign = contentOf(relation.value);
        // A radicand such as b (2 - b) has a monomial of its own, which must not hide among the factors: they are taken for coprime.
        const outside = monomialContent(relation.value);
        const rest = isUnit(outside) ? relation.value : shiftPolynomial(relation.value, invertMonomial(outside));
        content = Q.multiply(content, Q.power({ num: sign, den: 1n }, count));
        m = multiplyMonomials(m, { kernels: outside.kernels, exponents: outside.exponents.map((x) => multiplyExponents(x, count)) });
        for (const f of squareFreeFactors(divideByInteger(rest, sign), table.check)) denominator.push({ polynomial: f.polynomial, exponent: -count * f.exponent });
      }
      break;
    }
  }
  return { content, monomial: m, numerator, denominator };
}

/** 1/K for K^period = value(K) with a constant term: (K^(period-1) - (value - value(0))/K) / value(0). */
function invertAlgebraic(kernel: number, period: number, value: Polynomial): { readonly polynomial: Polynomial; readonly divisor: bigint } {
  const constant = value.find((t) => isUnit(t.monomial));
  if (!constant) throw new RangeError('a minimal polynomial without constant term');
  const rest = value.filter((t) => t !== constant);
  const down = monomialOf(kernel, -1);
  const polynomial = combine([{ monomial: monomialOf(kernel, period - 1), coefficient: 1n }], 1n, collect(shiftPolynomial(rest, down)), -1n);
  return { polynomial, divisor: constant.coefficient };
}
