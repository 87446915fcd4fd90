/** Splitting a polynomial in one parameter into linear factors over the rationals, for writing. */
import { Q, type Rational } from '../expression/index.ts';
import { isWhole } from './exponent.ts';
import { exponentIn, monomialOf, UNIT } from './monomial.ts';
import { kernelsIn, type Polynomial } from './polynomial.ts';

export interface LinearFactor {
  readonly polynomial: Polynomial;
  readonly exponent: number;
}

const MAX_DEGREE = 40;
/** Roots p/q with larger p or q are not worth writing as factors. */
const MAX_ROOT = 200n;
const MAX_DENOMINATOR = 24n;

/**
 * The linear factors of a primitive polynomial in one parameter without monomial factor, largest root last; null where it does not split into such with small roots,
 * is linear already, or is a quadratic binomial that stands alone (a^2 - 1).
 */
export function linearFactors(f: Polynomial, isParameter: (kernel: number) => boolean, withMonomial: boolean): readonly LinearFactor[] | null {
  const kernels = [...kernelsIn(f)];
  const [kernel] = kernels;
  if (kernels.length !== 1 || kernel === undefined || !isParameter(kernel)) return null;
  if (!f.every((t) => t.monomial.exponents.every(isWhole))) return null;
  const degree = exponentIn(f[0]?.monomial ?? UNIT, kernel) as number;
  if (degree < 2 || degree > MAX_DEGREE) return null;
  if (degree === 2 && !withMonomial && f.length === 2) return null;
  let c: bigint[] = Array.from({ length: degree + 1 }, () => 0n);
  for (const t of f) c[exponentIn(t.monomial, kernel) as number] = t.coefficient;
  const roots: Rational[] = [];
  const high = c[degree] as bigint;
  for (let q = 1n; q <= MAX_DENOMINATOR && c.length > 1; q += 1n) {
    if (high % q !== 0n) continue;
    for (let p = 1n; p <= MAX_ROOT && c.length > 1; p += 1n) {
      if ((c[0] as bigint) % p !== 0n) continue;
      for (const sign of [1n, -1n]) {
        const root = Q.rational(sign * p, q);
        if (root.den !== q) continue;
        for (let next = deflate(c, root); next; next = deflate(c, root)) {
          roots.push(root);
          c = next;
        }
      }
    }
  }
  if (c.length !== 1) return null;
  roots.sort((a, b) => Q.compare(Q.absolute(a), Q.absolute(b)) || Q.compare(b, a));
  const factors: { polynomial: Polynomial; exponent: number; root: Rational }[] = [];
  for (const root of roots) {
    const last = factors[factors.length - 1];
    if (last && Q.equal(last.root, root)) last.exponent += 1;
    else
      factors.push({
        root,
        exponent: 1,
        polynomial: [
          { monomial: monomialOf(kernel, 1), coefficient: root.den },
          { monomial: UNIT, coefficient: -root.num },
        ],
      });
  }
  return factors;
}

/** c divided by (den x - num), or null where the root is none. */
function deflate(c: readonly bigint[], root: Rational): bigint[] | null {
  if (c.length < 2) return null;
  const out: bigint[] = Array.from({ length: c.length - 1 }, () => 0n);
  let carry = 0n;
  for (let i = c.length - 1; i >= 1; i -= 1) {
    const top = (c[i] as bigint) + carry;
    if (top % root.den !== 0n) return null;
    const q = top / root.den;
    out[i - 1] = q;
    carry = q * root.num;
  }
  return (c[0] as bigint) + carry === 0n ? out : null;
}
