/**
 * Arithmetic of elements: content * monomial * numerator / product of denominator factors.
 * The numerator is a primitive integer polynomial without monomial factor and with positive leading coefficient; denominators stay factored, their factors primitive, coprime to
 * each other as far as seen, and cancelled against the numerator. Plain rationals are themselves.
 */
import { Q, type Rational } from '../expression/index.ts';
import { Declined } from '../outcome.ts';
import { compareExponents, isWhole, multiplyExponents, numeratorOf, periodsIn, subtractExponents, type Exponent } from './exponent.ts';
import type { Kernel, KernelTable } from './kernel.ts';
import { commonMonomial, exponentIn, invertMonomial, isUnit, monomialKey, monomialOf, multiplyMonomials, sameMonomial, UNIT, withoutKernel, type Monomial } from './monomial.ts';
import {
  collect,
  combine,
  constantOf,
  contentOf,
  divideByInteger,
  divideExactly,
  isOnePolynomial,
  kernelsIn,
  monomialContent,
  multiplyPolynomials,
  ONE_POLYNOMIAL,
  polynomialKey,
  powerOfPolynomial,
  scalePolynomial,
  shiftPolynomial,
  type Polynomial,
  type Term,
} from './polynomial.ts';
import { gcdPolynomials } from './polynomialGcd.ts';
import { squareFreeFactors } from './squareFree.ts';
import type { CompoundElement, DenominatorFactor, Element } from './types.ts';

export type Factor = DenominatorFactor;
export type Quotient = CompoundElement;

const NO_FACTORS: readonly Factor[] = [];

export const isQuotient = (a: Element): a is Quotient => (a as { readonly compound?: string }).compound === 'quotient';

const raw = (content: Rational, monomial: Monomial, numerator: Polynomial, denominator: readonly Factor[]): Element =>
  isOnePolynomial(numerator)
    ? isUnit(monomial) && denominator.length === 0
      ? content
      : { compound: 'quotient', content, monomial, numerator: ONE_POLYNOMIAL, denominator }
    : { compound: 'quotient', content, monomial, numerator, denominator };

/** Parts of any element. */
export const partsOf = (a: Element): Quotient => (isQuotient(a) ? a : { compound: 'quotient', content: a, monomial: UNIT, numerator: ONE_POLYNOMIAL, denominator: NO_FACTORS });

const inRange = (table: KernelTable, m: Monomial): boolean => {
  for (let i = 0; i < m.kernels.length; i += 1) {
    const relation = table.relations[m.kernels[i] as number];
    if (relation) {
      const e = m.exponents[i] as Exponent;
      if (compareExponents(e, 0) < 0 || compareExponents(e, relation.period) >= 0) return false;
    }
  }
  return true;
};

/** Applies the kernels' relations until every exponent is in range. Exponents must not be negative. */
export function reduceByRelations(table: KernelTable, f: Polynomial): Polynomial {
  if (f.every((t) => inRange(table, t.monomial))) return f;
  const done: Term[] = [];
  const open: Term[] = [...f];
  for (let t = open.pop(); t; t = open.pop()) {
    let changed = false;
    for (let i = 0; i < t.monomial.kernels.length; i += 1) {
      const k = t.monomial.kernels[i] as number;
      const relation = table.relations[k];
      const e = t.monomial.exponents[i] as Exponent;
      if (!relation || compareExponents(e, relation.period) < 0) continue;
      const count = relation.pure ? periodsIn(e, relation.period) : 1;
      const rest = multiplyMonomials(t.monomial, monomialOf(k, -count * relation.period));
      const value = count === 1 ? relation.value : powerOfPolynomial(relation.value, count);
      for (const v of value) open.push({ monomial: multiplyMonomials(rest, v.monomial), coefficient: t.coefficient * v.coefficient });
      changed = true;
      break;
    }
    if (!changed) done.push(t);
    if (open.length > 64) {
      const merged = collect(open);
      open.length = 0;
      open.push(...merged);
      table.check();
    }
  }
  return collect(done);
}

export const multiplyReduced = (table: KernelTable, f: Polynomial, g: Polynomial): Polynomial => reduceByRelations(table, multiplyPolynomials(f, g));

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
export function replaceSquare(f: Polynomial, kernel: number, [a, b]: readonly [bigint, bigint], other: number): Polynomial {
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

/** Divides common factors of numerator and denominator out. */
function cancelFactors(table: KernelTable, numerator: Polynomial, denominator: readonly Factor[]): { numerator: Polynomial; denominator: readonly Factor[]; changed: boolean } {
  let n = numerator;
  let changed = false;
  const left: Factor[] = [];
  for (const factor of denominator) {
    let exponent = factor.exponent;
    while (exponent > 0) {
      const whole = divideExactly(n, factor.polynomial);
      if (!whole) break;
      n = whole;
      exponent -= 1;
      changed = true;
    }
    if (exponent === 0) continue;
    const common = factor.polynomial.length > 2 || n.length > 1 ? gcdPolynomials(n, factor.polynomial, table.check) : ONE_POLYNOMIAL;
    if (isOnePolynomial(common) || common.length < 2) {
      left.push(exponent === factor.exponent ? factor : { polynomial: factor.polynomial, exponent });
      continue;
    }
    changed = true;
    const other = divideExactly(factor.polynomial, common);
    if (!other) throw new RangeError('a gcd that does not divide');
    let inside = exponent;
    for (;;) {
      const quotient = inside > 0 ? divideExactly(n, common) : null;
      if (!quotient) break;
      n = quotient;
      inside -= 1;
    }
    if (inside > 0) left.push({ polynomial: common, exponent: inside });
    if (!isOnePolynomial(other)) left.push({ polynomial: other, exponent });
  }
  return { numerator: n, denominator: left, changed };
}

/** The list with polynomial^exponent multiplied in, factors kept coprime. The polynomial is primitive with positive leading coefficient and no monomial factor. */
export function insertFactor(table: KernelTable, factors: readonly Factor[], polynomial: Polynomial, exponent: number): readonly Factor[] {
  if (isOnePolynomial(polynomial)) return factors;
  for (let i = 0; i < factors.length; i += 1) {
    const f = factors[i] as Factor;
    const others = factors.filter((_, j) => j !== i);
    if (f.polynomial.length === polynomial.length && polynomialKey(f.polynomial) === polynomialKey(polynomial)) {
      return factors.map((x, j) => (j === i ? { polynomial: x.polynomial, exponent: x.exponent + exponent } : x));
    }
    if (isPlainlyIrreducible(f.polynomial) && isPlainlyIrreducible(polynomial)) continue;
    const common = gcdPolynomials(f.polynomial, polynomial, table.check);
    if (common.length < 2) continue;
    const a = divideExactly(f.polynomial, common);
    const b = divideExactly(polynomial, common);
    if (!a || !b) throw new RangeError('a gcd that does not divide');
    let list = insertFactor(table, others, common, f.exponent + exponent);
    list = insertFactor(table, list, a, f.exponent);
    return insertFactor(table, list, b, exponent);
  }
  return [...factors, { polynomial, exponent }];
}

/** c K + rest with K alone in its term and absent from the rest: a primitive polynomial of this form has no factors. */
const isPlainlyIrreducible = (f: Polynomial): boolean =>
  f.length < 9 && f.some((t) => t.monomial.kernels.length === 1 && t.monomial.exponents[0] === 1 && f.every((u) => u === t || !u.monomial.kernels.includes(t.monomial.kernels[0] as number)));

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

const usesRelation = (table: KernelTable, f: Polynomial): boolean => [...kernelsIn(f)].some((k) => table.relations[k] !== null);

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

/** The union of two factored denominators, with each one's exponents beside it. */
function commonDenominator(table: KernelTable, a: readonly Factor[], b: readonly Factor[]): { readonly factors: readonly Factor[]; readonly left: readonly number[]; readonly right: readonly number[] } {
  let bases: readonly Factor[] = NO_FACTORS;
  for (const f of a) bases = insertFactor(table, bases, f.polynomial, 1);
  const known = new Map(a.map((f) => [polynomialKey(f.polynomial), f.exponent]));
  const other = new Map(b.map((f) => [polynomialKey(f.polynomial), f.exponent]));
  let refined = false;
  for (const f of b) {
    if (known.has(polynomialKey(f.polynomial))) continue;
    const before = bases.length;
    bases = insertFactor(table, bases, f.polynomial, 1);
    if (bases.length !== before + 1 || bases[before]?.polynomial !== f.polynomial) refined = true;
  }
  const exponentsOf = (list: readonly Factor[], direct: ReadonlyMap<string, number>): number[] =>
    bases.map((base) => {
      const hit = direct.get(polynomialKey(base.polynomial));
      if (hit !== undefined && !refined) return hit;
      if (!refined) return 0;
      let e = 0;
      for (const f of list) {
        let p = f.polynomial;
        for (let q = divideExactly(p, base.polynomial); q; q = divideExactly(p, base.polynomial)) {
          p = q;
          e += f.exponent;
        }
      }
      return e;
    });
  const left = exponentsOf(a, known);
  const right = exponentsOf(b, other);
  return { factors: bases.map((f, i) => ({ polynomial: f.polynomial, exponent: Math.max(left[i] as number, right[i] as number) })), left, right };
}

/**
 * A polynomial g with f*g free of algebraic numbers, and that product: the cofactor is read off the characteristic polynomial of
 * multiplication by f, whose coefficients come from traces of powers by Newton's identities.
 */
function clearAlgebraic(table: KernelTable, f: Polynomial): { readonly cofactor: Polynomial; readonly norm: Polynomial } {
  let cofactor = ONE_POLYNOMIAL;
  let norm = f;
  for (;;) {
    table.check();
    const candidates = [...kernelsIn(norm)].filter((k) => table.relations[k]?.numeric === true);
    const kernel = candidates.length === 0 ? undefined : Math.max(...candidates);
    if (kernel === undefined) return { cofactor, norm };
    const step = conjugateCofactor(table, norm, kernel);
    cofactor = multiplyReduced(table, cofactor, step.cofactor);
    norm = step.norm;
    const c = Q.gcd(contentOf(cofactor), contentOf(norm));
    if (c > 1n) {
      cofactor = divideByInteger(cofactor, c);
      norm = divideByInteger(norm, c);
    }
  }
}

function conjugateCofactor(table: KernelTable, f: Polynomial, kernel: number): { readonly cofactor: Polynomial; readonly norm: Polynomial } {
  const relation = table.relations[kernel];
  if (!relation) throw new RangeError('no relation to clear');
  let step: Exponent = relation.pure ? relation.period : 1;
  for (const t of relation.pure ? f : []) {
    const e = exponentIn(t.monomial, kernel);
    if (e !== 0) step = commonStep(step, e);
  }
  const degree = numeratorOf(relation.period) / (typeof step === 'number' ? step : step.p / step.q);
  const n = Math.round(degree);
  if (n > 24) throw new Declined('undecided', 'A denominator here has a root of too high a degree to be cleared; simplify it first.');
  const traces = powerTraces(table, kernel, relation.value, relation.pure, step, n);
  const traceOf = (p: Polynomial): Polynomial => {
    let sum: Polynomial = [];
    for (const t of p) {
      const e = exponentIn(t.monomial, kernel);
      const j = e === 0 ? 0 : Math.round((numeratorOf(e) / (typeof e === 'number' ? 1 : e.q)) / (typeof step === 'number' ? step : step.p / step.q));
      const trace = traces[j] as Polynomial;
      if (trace.length > 0) sum = combine(sum, 1n, multiplyPolynomials([{ monomial: withoutKernel(t.monomial, kernel), coefficient: t.coefficient }], trace), 1n);
    }
    return reduceByRelations(table, sum);
  };
  // f^n + c1 f^(n-1) + ... + cn = 0, so f * (f^(n-1) + ... + c(n-1)) = -cn.
  const powers: Polynomial[] = [ONE_POLYNOMIAL];
  for (let i = 1; i <= n; i += 1) powers.push(multiplyReduced(table, powers[i - 1] as Polynomial, f));
  const sums = powers.map(traceOf);
  const c: Polynomial[] = [ONE_POLYNOMIAL];
  for (let k = 1; k <= n; k += 1) {
    let s: Polynomial = sums[k] as Polynomial;
    for (let i = 1; i < k; i += 1) s = combine(s, 1n, multiplyReduced(table, c[i] as Polynomial, sums[k - i] as Polynomial), 1n);
    c.push(scalePolynomial(divideByInteger(s, BigInt(k)), -1n));
  }
  let cofactor: Polynomial = [];
  for (let i = 0; i < n; i += 1) cofactor = combine(cofactor, 1n, multiplyReduced(table, c[i] as Polynomial, powers[n - 1 - i] as Polynomial), 1n);
  return { cofactor, norm: scalePolynomial(c[n] as Polynomial, -1n) };
}

const commonStep = (a: Exponent, b: Exponent): Exponent => {
  let x = a;
  let y = b;
  while (compareExponents(y, 0) > 0) {
    let r = x;
    while (compareExponents(r, y) >= 0) r = subtractExponents(r, y);
    [x, y] = [y, r];
  }
  return x;
};

/** Traces of 1, y, ..., y^(n-1) for y = kernel^step of degree n. */
function powerTraces(table: KernelTable, kernel: number, value: Polynomial, pure: boolean, step: Exponent, n: number): readonly Polynomial[] {
  const traces: Polynomial[] = [[{ monomial: UNIT, coefficient: BigInt(n) }]];
  if (pure) {
    for (let i = 1; i < n; i += 1) traces.push([]);
    return traces;
  }
  if (step !== 1) throw new RangeError('a fractional power of an algebraic number');
  // y^n = sum of v_j y^j: elementary symmetric functions e_k = (-1)^(k-1) v_(n-k).
  const coefficient = (j: number): bigint => value.find((t) => exponentIn(t.monomial, kernel) === j)?.coefficient ?? 0n;
  const p: bigint[] = [BigInt(n)];
  for (let k = 1; k < n; k += 1) {
    let s = BigInt(k) * coefficient(n - k);
    for (let i = 1; i < k; i += 1) s += coefficient(n - i) * (p[k - i] as bigint);
    p.push(s);
    traces.push(s === 0n ? [] : [{ monomial: UNIT, coefficient: s }]);
  }
  return traces;
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

/** Indices of all kernels that occur. */
export function kernelsOf(a: Element): ReadonlySet<number> {
  const found = new Set<number>();
  if (!isQuotient(a)) return found;
  for (const k of a.monomial.kernels) found.add(k);
  for (const k of kernelsIn(a.numerator)) found.add(k);
  for (const f of a.denominator) for (const k of kernelsIn(f.polynomial)) found.add(k);
  return found;
}

/** Kernels of the element and of all that they are built on. */
export function allKernels(table: KernelTable, a: Element): ReadonlySet<number> {
  const found = new Set<number>();
  const open: Element[] = [a];
  for (let x = open.pop(); x; x = open.pop()) {
    for (const k of kernelsOf(x)) {
      if (found.has(k)) continue;
      found.add(k);
      const { shape } = table.kernels[k] as Kernel;
      if (shape.kind === 'radicand') open.push(shape.base);
      else if (shape.kind === 'exp') open.push(shape.unit);
      else if (shape.kind === 'power') open.push(shape.base, shape.unit);
      else if (shape.kind === 'log' || shape.kind === 'abs') open.push(shape.argument);
      else if (shape.kind === 'call' || shape.kind === 'apply') open.push(...shape.args);
    }
  }
  return found;
}

/** True where every kernel exponent of the element is a whole number. */
export const isWholeMonomial = (m: Monomial): boolean => m.exponents.every(isWhole);
