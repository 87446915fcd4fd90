/**
 * Factors over the rationals of polynomials in one variable with rational coefficients, through their zeros: a_n times the sum of a factor's zeros is an integer (Gauss's lemma),
 * so the sets of zeros for which that holds within proven bounds are the only candidates, each tried by exact division.
 */
import { Q, type Rational } from '../expression/index.ts';
import { isolateRoots, rootBall } from '../functions/index.ts';
import { type Ball, type ComplexBall, complex, real } from '../rigorous/index.ts';

/** Coefficients, lowest first; the last is not zero. */
export type IntegerPolynomial = readonly bigint[];

export interface RationalFactor {
  /** Irreducible, primitive, with positive leading coefficient. */
  readonly polynomial: IntegerPolynomial;
  readonly multiplicity: number;
}

/** Conjugate zeros go together; of more groups than this all subsets are too many. */
const MOST_GROUPS = 16;

/** The irreducible factors other than constants; null where they could not be found in reasonable time. */
export function rationalFactors(coefficients: readonly Rational[], check: () => void): readonly RationalFactor[] | null {
  let common = 1n;
  for (const q of coefficients) common = (common / Q.gcd(common, q.den)) * q.den;
  const whole = primitive(coefficients.map((q) => q.num * (common / q.den)));
  const found: RationalFactor[] = [];
  for (const part of squareFreeParts(whole)) {
    const factors = irreducibleFactors(part.polynomial, check);
    if (!factors) return null;
    found.push(...factors.map((polynomial) => ({ polynomial, multiplicity: part.multiplicity })));
  }
  return found;
}

function trimmed(p: readonly bigint[]): bigint[] {
  let n = p.length;
  while (n > 0 && p[n - 1] === 0n) n -= 1;
  return p.slice(0, n);
}

function primitive(p: readonly bigint[]): bigint[] {
  const t = trimmed(p);
  const g = t.reduce((x, c) => Q.gcd(x, c), 0n);
  const sign = (t[t.length - 1] ?? 1n) < 0n ? -1n : 1n;
  return g === 0n ? t : t.map((c) => (c / g) * sign);
}

const derivativeOf = (p: IntegerPolynomial): bigint[] => p.slice(1).map((c, k) => c * BigInt(k + 1));

/** The greatest common divisor, primitive, by pseudo-remainders. */
function gcd(p: IntegerPolynomial, q: IntegerPolynomial): bigint[] {
  let [a, b] = [primitive(p), primitive(q)];
  while (b.length > 0) {
    const rest = [...a];
    const lead = b[b.length - 1] as bigint;
    while (rest.length >= b.length) {
      const top = rest[rest.length - 1] as bigint;
      const shift = rest.length - b.length;
      for (let k = 0; k < rest.length; k += 1) rest[k] = (rest[k] as bigint) * lead - (k >= shift ? top * (b[k - shift] as bigint) : 0n);
      while (rest.length > 0 && rest[rest.length - 1] === 0n) rest.pop();
    }
    [a, b] = [b, primitive(rest)];
  }
  return a;
}

/** p/q where that is a polynomial with integer coefficients, else null. */
function exactQuotient(p: IntegerPolynomial, q: IntegerPolynomial): bigint[] | null {
  const rest = [...p];
  const quotient: bigint[] = [];
  const lead = q[q.length - 1] as bigint;
  for (let shift = p.length - q.length; shift >= 0; shift -= 1) {
    const top = rest[shift + q.length - 1] as bigint;
    if (top % lead !== 0n) return null;
    const c = top / lead;
    quotient[shift] = c;
    for (let k = 0; k < q.length; k += 1) rest[k + shift] = (rest[k + shift] as bigint) - c * (q[k] as bigint);
  }
  return rest.every((c) => c === 0n) ? quotient : null;
}

/** Yun's algorithm (Proc. SYMSAC 1976, from memory) in the plain form with gcds. */
function squareFreeParts(p: bigint[]): { readonly polynomial: bigint[]; readonly multiplicity: number }[] {
  const parts: { readonly polynomial: bigint[]; readonly multiplicity: number }[] = [];
  let shared = gcd(p, derivativeOf(p));
  let radical = primitive(exactQuotient(p, shared) ?? p);
  for (let multiplicity = 1; radical.length > 1; multiplicity += 1) {
    const next = gcd(radical, shared);
    const own = primitive(exactQuotient(radical, next) ?? radical);
    if (own.length > 1) parts.push({ polynomial: own, multiplicity });
    radical = next;
    shared = primitive(exactQuotient(shared, next) ?? shared);
  }
  return parts;
}

function irreducibleFactors(p: bigint[], check: () => void): bigint[][] | null {
  if (p.length <= 2) return [p];
  if (p[0] === 0n) {
    const rest = irreducibleFactors(p.slice(1), check);
    return rest && [[0n, 1n], ...rest];
  }
  const highestFirst = [...p].reverse();
  const discs = isolateRoots(highestFirst, check);
  if (!discs) return null;
  const lead = p[p.length - 1] as bigint;
  const bits = 64 + p.reduce((most, c) => Math.max(most, c.toString(2).length), 0) * 2;
  const groups: ComplexBall[][] = [];
  for (const [i, disc] of discs.entries()) {
    if (!disc.real && real.isNegative(disc.centre.im)) continue;
    const z = rootBall(highestFirst, i + 1, bits, check);
    if (!z) return null;
    groups.push(disc.real ? [z] : [z, complex.conjugate(z)]);
  }
  if (groups.length > MOST_GROUPS) return null;
  const a = complex.arithmetic(bits);
  const scaledSums = groups.map((g): Ball => real.multiply(real.fromInteger(lead), g.reduce<Ball>((s, z) => real.add(s, z.re, bits), real.ZERO), bits));
  const holdsInteger = (x: Ball): boolean => real.contains(x, Q.rational(real.nearestInteger(x))) || real.exponentOf(real.radius(x)) > -2;
  const n = p.length - 1;
  for (let degree = 1; 2 * degree <= n; degree += 1) {
    for (let set = 1; set < 2 ** groups.length; set += 1) {
      if ((set & 1023) === 0) check();
      const chosen = groups.filter((_, k) => (set >> k) & 1);
      if (chosen.reduce((d, g) => d + g.length, 0) !== degree) continue;
      const sum = scaledSums.reduce<Ball>((s, x, k) => ((set >> k) & 1 ? real.add(s, x, bits) : s), real.ZERO);
      if (!holdsInteger(sum)) continue;
      let product: ComplexBall[] = [a.fromInteger(lead)];
      for (const z of chosen.flat()) product = [...product, a.zero].map((_, k) => a.subtract(k > 0 ? (product[k - 1] as ComplexBall) : a.zero, k < product.length ? a.multiply(z, product[k] as ComplexBall) : a.zero));
      const candidate = primitive(product.map((z) => real.nearestInteger(z.re)));
      const quotient = candidate.length === degree + 1 ? exactQuotient(p, candidate) : null;
      if (!quotient) continue;
      const rest = irreducibleFactors(primitive(quotient), check);
      // Smaller factors were tried before: this one has none.
      return rest && [candidate, ...rest];
    }
  }
  return [p];
}
