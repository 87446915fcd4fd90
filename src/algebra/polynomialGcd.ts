/**
 * Greatest common divisor of multivariate integer polynomials: images modulo a prime rule out most common factors at once,
 * the rest is a primitive remainder sequence in one kernel with coefficients in the others (Knuth, TAOCP 2, 4.6.1).
 */
import { Q } from '../expression/index.ts';
import { denominatorOf, lcm, multiplyExponents, type Exponent } from './exponent.ts';
import { exponentIn, monomialOf, withoutKernel, type Monomial } from './monomial.ts';
import {
  collect,
  constantPolynomial,
  contentOf,
  divideByInteger,
  divideExactly,
  isOnePolynomial,
  kernelsIn,
  multiplyPolynomials,
  ONE_POLYNOMIAL,
  powerOfPolynomial,
  primitivePart,
  samePolynomial,
  scalePolynomial,
  shiftPolynomial,
  subtractPolynomials,
  type Polynomial,
  type Term,
} from './polynomial.ts';

/** A polynomial in one kernel: coefficient polynomials by degree. */
type Univariate = Polynomial[];

const MODULUS = 33554393; // the largest prime below 2^25, so that products of residues are exact doubles

function split(f: Polynomial, kernel: number): Univariate {
  const parts: Term[][] = [];
  for (const t of f) {
    const e = exponentIn(t.monomial, kernel) as number;
    const part = (parts[e] ??= []);
    part.push({ monomial: withoutKernel(t.monomial, kernel), coefficient: t.coefficient });
  }
  const result: Univariate = [];
  for (let i = 0; i < parts.length; i += 1) result.push(collect(parts[i] ?? []));
  return result;
}
function join(f: Univariate, kernel: number): Polynomial {
  return collect(f.flatMap((c, i) => shiftPolynomial(c, monomialOf(kernel, i)) as Term[]));
}
const degree = (f: Univariate): number => f.length - 1;
const trim = (f: Univariate): Univariate => {
  while (f.length > 0 && (f[f.length - 1] as Polynomial).length === 0) f.pop();
  return f;
};

/** lc(g)^(deg f - deg g + 1) f modulo g. */
function pseudoRemainder(f: Univariate, g: Univariate): Univariate {
  const lead = g[degree(g)] as Polynomial;
  let rest = [...f];
  let steps = degree(f) - degree(g) + 1;
  while (rest.length >= g.length && rest.length > 0) {
    const top = rest[degree(rest)] as Polynomial;
    const shift = degree(rest) - degree(g);
    rest = trim(
      rest.map((c, i) => {
        const below = i >= shift ? (g[i - shift] as Polynomial) : [];
        return subtractPolynomials(multiplyPolynomials(c, lead), multiplyPolynomials(below, top));
      }),
    );
    steps -= 1;
  }
  const factor = powerOfPolynomial(lead, Math.max(0, steps));
  return isOnePolynomial(factor) ? rest : rest.map((c) => multiplyPolynomials(c, factor));
}

function contentInKernel(f: Univariate, check: () => void): Polynomial {
  let common: Polynomial = [];
  for (const c of [...f].filter((p) => p.length > 0).sort((a, b) => a.length - b.length)) {
    common = common.length === 0 ? c : gcdWhole(common, c, check);
    if (isOnePolynomial(common)) break;
  }
  return common;
}
const divideCoefficients = (f: Univariate, d: Polynomial): Univariate => (isOnePolynomial(d) ? f : f.map((c) => (c.length === 0 ? c : (divideExactly(c, d) as Polynomial))));

/** Degree of the gcd of the images in `kernel` modulo a prime, the other kernels replaced by fixed residues; -1 where a leading coefficient vanishes. */
function imageDegree(f: Polynomial, g: Polynomial, kernel: number): number {
  const residue = (k: number): number => (k * 7919 * 104729 + 1299709) % MODULUS;
  const power = (base: number, e: number): number => {
    let r = 1;
    let b = base;
    for (let n = e; n > 0; n = Math.floor(n / 2)) {
      if (n % 2 === 1) r = (r * b) % MODULUS;
      b = (b * b) % MODULUS;
    }
    return r;
  };
  const image = (p: Polynomial): number[] => {
    const out: number[] = [];
    for (const t of p) {
      let c = Number(((t.coefficient % BigInt(MODULUS)) + BigInt(MODULUS)) % BigInt(MODULUS));
      let d = 0;
      t.monomial.kernels.forEach((k, i) => {
        const e = t.monomial.exponents[i] as number;
        if (k === kernel) d = e;
        else c = (c * power(residue(k), e)) % MODULUS;
      });
      for (let i = out.length; i <= d; i += 1) out.push(0);
      out[d] = ((out[d] as number) + c) % MODULUS;
    }
    return out;
  };
  let a = image(f);
  let b = image(g);
  if (a[a.length - 1] === 0 || b[b.length - 1] === 0) return -1;
  const strip = (p: number[]): number[] => {
    while (p.length > 0 && p[p.length - 1] === 0) p.pop();
    return p;
  };
  while (b.length > 0) {
    const inverse = power(b[b.length - 1] as number, MODULUS - 2);
    while (a.length >= b.length && a.length > 0) {
      const c = ((a[a.length - 1] as number) * inverse) % MODULUS;
      const shift = a.length - b.length;
      for (let i = 0; i < b.length; i += 1) a[i + shift] = ((a[i + shift] as number) + (MODULUS - ((c * (b[i] as number)) % MODULUS))) % MODULUS;
      strip(a);
    }
    [a, b] = [b, a];
  }
  return a.length - 1;
}

const degreeIn = (f: Polynomial, kernel: number): number => f.reduce((d, t) => Math.max(d, exponentIn(t.monomial, kernel) as number), 0);

/** For polynomials with whole, non-negative exponents. Leading coefficient positive; integer content included. */
function gcdWhole(f: Polynomial, g: Polynomial, check: () => void): Polynomial {
  if (f.length === 0) return scalePolynomial(g, g[0] && g[0].coefficient < 0n ? -1n : 1n);
  if (g.length === 0) return scalePolynomial(f, f[0] && f[0].coefficient < 0n ? -1n : 1n);
  const cf = contentOf(f);
  const cg = contentOf(g);
  const c = Q.gcd(cf, cg);
  const a = divideByInteger(f, cf);
  const b = divideByInteger(g, cg);
  if (samePolynomial(a, b)) return scalePolynomial(a, c);
  const kf = kernelsIn(a);
  const kg = kernelsIn(b);
  if (kf.size === 0 || kg.size === 0) return constantPolynomial(c);
  // A kernel in one of them only cannot be in the gcd: go on with the coefficients.
  for (const k of kf) if (!kg.has(k)) return scalePolynomial(gcdWhole(contentInKernel(split(a, k), check), b, check), c);
  for (const k of kg) if (!kf.has(k)) return scalePolynomial(gcdWhole(a, contentInKernel(split(b, k), check), check), c);
  if (a.length <= b.length ? divideExactly(b, a) : null) return scalePolynomial(a, c);
  if (b.length <= a.length ? divideExactly(a, b) : null) return scalePolynomial(b, c);
  let main = -1;
  let least = Infinity;
  let coprime = true;
  for (const k of kf) {
    const image = imageDegree(a, b, k);
    if (image !== 0) {
      coprime = false;
      const size = Math.min(degreeIn(a, k), degreeIn(b, k));
      if (size < least) {
        least = size;
        main = k;
      }
    }
  }
  if (coprime) return constantPolynomial(c);
  check();
  let u = split(a, main);
  let v = split(b, main);
  const cu = contentInKernel(u, check);
  const cv = contentInKernel(v, check);
  const common = gcdWhole(cu, cv, check);
  u = divideCoefficients(u, cu);
  v = divideCoefficients(v, cv);
  if (degree(u) < degree(v)) [u, v] = [v, u];
  while (v.length > 0) {
    check();
    if (degree(v) === 0) {
      u = [ONE_POLYNOMIAL];
      break;
    }
    const r = pseudoRemainder(u, v);
    u = v;
    v = r.length === 0 ? r : divideCoefficients(r, contentInKernel(r, check));
  }
  const primitive = primitivePart(join(divideCoefficients(u, contentInKernel(u, check)), main));
  return scalePolynomial(multiplyPolynomials(primitivePart(common), primitive), c);
}

/** gcd of two polynomials with non-negative (perhaps fractional) exponents; leading coefficient positive. `check` is called in long loops. */
export function gcdPolynomials(f: Polynomial, g: Polynomial, check: () => void): Polynomial {
  const scale = new Map<number, number>();
  for (const p of [f, g]) {
    for (const t of p) {
      t.monomial.exponents.forEach((e, i) => {
        if (typeof e !== 'number') {
          const k = t.monomial.kernels[i] as number;
          scale.set(k, lcm(scale.get(k) ?? 1, denominatorOf(e)));
        }
      });
    }
  }
  if (scale.size === 0) return gcdWhole(f, g, check);
  const rescale = (p: Polynomial, factor: (k: number) => Exponent): Polynomial =>
    p.map((t): Term => {
      const monomial: Monomial = { kernels: t.monomial.kernels, exponents: t.monomial.exponents.map((e, i) => multiplyExponents(e, factor(t.monomial.kernels[i] as number))) };
      return { monomial, coefficient: t.coefficient };
    });
  const up = (k: number): Exponent => scale.get(k) ?? 1;
  const down = (k: number): Exponent => {
    const s = scale.get(k) ?? 1;
    return s === 1 ? 1 : { p: 1, q: s };
  };
  return rescale(gcdWhole(rescale(f, up), rescale(g, up), check), down);
}

