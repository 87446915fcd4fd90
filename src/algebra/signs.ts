/** Signs as sets: what an element can be under the assumptions. All rules only widen, so that a single member is a proof. */
import type { Rational } from '../expression/index.ts';
import { signOfAlgebraic } from './algebraicSign.ts';
import { compareExponents, isWhole, type Exponent } from './exponent.ts';
import type { Kernel, KernelTable } from './kernel.ts';
import type { Monomial } from './monomial.ts';
import { isOnePolynomial, polynomialKey, type Polynomial } from './polynomial.ts';
import { isQuotient, partsOf } from './quotientParts.ts';
import type { Element } from './types.ts';

/** Bits: negative, zero, positive, not real. */
export type SignSet = number;
export const NEGATIVE = 1;
export const NIL = 2;
export const POSITIVE = 4;
export const NOT_REAL = 8;
export const REAL = NEGATIVE | NIL | POSITIVE;
export const ANY = REAL | NOT_REAL;

export const isPositive = (s: SignSet): boolean => s === POSITIVE;
export const isNonNegative = (s: SignSet): boolean => (s & ~(POSITIVE | NIL)) === 0;
const signSetOf = (sign: 1 | -1 | 'complex'): SignSet => (sign === 1 ? POSITIVE : sign === -1 ? NEGATIVE : NOT_REAL);
export const isRealSet = (s: SignSet): boolean => (s & NOT_REAL) === 0;
export const isNonZero = (s: SignSet): boolean => (s & NIL) === 0 && isRealSet(s);

const signOfRational = (r: Rational): SignSet => (r.num > 0n ? POSITIVE : r.num < 0n ? NEGATIVE : NIL);
const flip = (s: SignSet): SignSet => (s & (NIL | NOT_REAL)) | (s & NEGATIVE ? POSITIVE : 0) | (s & POSITIVE ? NEGATIVE : 0);

function timesSigns(a: SignSet, b: SignSet): SignSet {
  if (a === POSITIVE) return b;
  if (b === POSITIVE) return a;
  let s = 0;
  if (a & NIL || b & NIL) s |= NIL;
  if (a & POSITIVE) s |= b & (POSITIVE | NEGATIVE);
  if (a & NEGATIVE) s |= flip(b) & (POSITIVE | NEGATIVE);
  if ((a | b) & NOT_REAL) s = ANY;
  return s;
}
function plusSigns(a: SignSet, b: SignSet): SignSet {
  if (a === NIL) return b;
  if (b === NIL) return a;
  if ((a | b) & NOT_REAL) return ANY;
  const both = a | b;
  if (both & POSITIVE && both & NEGATIVE) return REAL;
  return (both & (POSITIVE | NEGATIVE)) | (a & b & NIL);
}

/** The sign of k^e from the sign of k; principal power. */
export function powerSign(s: SignSet, e: Exponent): SignSet {
  if (s === POSITIVE) return POSITIVE;
  const negativePower = compareExponents(e, 0) < 0;
  const zero = negativePower ? 0 : s & NIL;
  if (isWhole(e)) {
    if (s & NOT_REAL) return e === 1 ? s : ANY;
    if (e % 2 === 0) return (s & (POSITIVE | NEGATIVE) ? POSITIVE : 0) | zero;
    return (s & (POSITIVE | NEGATIVE)) | zero;
  }
  if (s & NOT_REAL) return ANY;
  return (s & POSITIVE) | zero | (s & NEGATIVE ? NOT_REAL : 0);
}

export interface SignFacts {
  /** What the assumptions say of the symbol. */
  ofParameter(name: string): SignSet;
  /** What they say of a polynomial as a whole (`a > b`), by its key; ANY where nothing. */
  ofPolynomial(key: string): SignSet;
  /** Outer bounds of a polynomial over intervals of the parameters, where there are such; else ANY. */
  byIntervals(f: Polynomial): SignSet;
}

export interface SignRules {
  ofKernel(k: Kernel): SignSet;
  ofMonomial(m: Monomial): SignSet;
  ofPolynomial(f: Polynomial): SignSet;
  of(a: Element): SignSet;
  /** Forgets what was derived so far, after new facts. */
  reset(): void;
}

/** `decide` gives the sign of opaque kernels, `ofNumber` that of a sum without parameters; both may use balls. */
export function createSignRules(table: KernelTable, facts: SignFacts, decide: (k: Kernel, rules: SignRules) => SignSet, ofNumber: (f: Polynomial) => SignSet): SignRules {
  const known = new Map<number, SignSet>();
  const rules: SignRules = {
    reset: () => known.clear(),
    ofKernel(k) {
      const hit = known.get(k.index);
      if (hit !== undefined) return hit;
      known.set(k.index, ANY);
      const sign = signOfShape(k);
      known.set(k.index, sign);
      return sign;
    },
    ofMonomial(m) {
      let s = POSITIVE;
      for (let i = 0; i < m.kernels.length && s !== ANY; i += 1) {
        const k = table.kernels[m.kernels[i] as number] as Kernel;
        const e = m.exponents[i] as Exponent;
        // exp(r unit) has the sign of exp for every r.
        // (-1)^n for an integer n.
        const unit = k.relation?.period === 2 && k.shape.kind === 'exp' && isWhole(e);
        const own = unit ? POSITIVE | NEGATIVE : k.shape.kind === 'exp' || k.shape.kind === 'power' ? rules.ofKernel(k) : powerSign(rules.ofKernel(k), e);
        s = timesSigns(s, own);
      }
      return s;
    },
    ofPolynomial(f) {
      if (isOnePolynomial(f)) return POSITIVE;
      let s = NIL;
      for (const t of f) {
        const term = rules.ofMonomial(t.monomial);
        s = plusSigns(s, t.coefficient < 0n ? flip(term) : term);
        if (s === ANY) break;
      }
      if (s === POSITIVE || s === NEGATIVE || s === NIL) return s;
      const stated = facts.ofPolynomial(polynomialKey(f));
      const narrowed = stated === ANY ? s : s & stated || stated;
      if (narrowed === POSITIVE || narrowed === NEGATIVE) return narrowed;
      const bounded = facts.byIntervals(f);
      if (bounded === ANY) {
        const value = ofNumber(f);
        return value === ANY ? narrowed : value;
      }
      return narrowed & bounded || bounded;
    },
    of(a) {
      if (!isQuotient(a)) return signOfRational(a);
      let s = timesSigns(signOfRational(a.content), rules.ofMonomial(a.monomial));
      s = timesSigns(s, rules.ofPolynomial(a.numerator));
      for (const f of a.denominator) {
        const d = rules.ofPolynomial(f.polynomial);
        s = timesSigns(s, f.exponent % 2 === 0 ? powerSign(d, f.exponent) & ~NIL : d & ~NIL);
      }
      return s;
    },
  };
  function signOfShape(k: Kernel): SignSet {
    switch (k.shape.kind) {
      case 'parameter':
        return facts.ofParameter(k.shape.name);
      case 'constant':
      case 'integer':
      case 'cosine':
        return POSITIVE;
      case 'algebraic':
        return signSetOf(signOfAlgebraic(k.shape));
      case 'imaginary':
        return NOT_REAL;
      case 'radicand': {
        const base = partsOf(k.shape.base);
        return rules.of(base);
      }
      case 'exp':
        return isRealSet(rules.of(k.shape.unit)) ? POSITIVE : ANY;
      case 'power':
        return isPositive(rules.of(k.shape.base)) && isRealSet(rules.of(k.shape.unit)) ? POSITIVE : ANY;
      case 'abs': {
        const inner = rules.of(k.shape.argument);
        return isNonZero(inner) ? POSITIVE : POSITIVE | NIL;
      }
      case 'apply':
        return k.shape.args.every((a) => isRealSet(rules.of(a))) ? REAL : ANY;
      case 'log':
      case 'call':
        return decide(k, rules);
    }
  }
  return rules;
}

