/** cos and sin of rational multiples of pi, exactly: radicals where a person writes them, else polynomials in an algebraic integer 2 cos(2 pi/m). */
import { Q, type Rational } from '../expression/index.ts';
import { kernelElement, type Context } from './context.ts';
import type { Kernel } from './kernel.ts';
import { monomialOf, UNIT } from './monomial.ts';
import type { Polynomial, Term } from './polynomial.ts';
import { addElements, elementKey, multiplyElements, negateElement, scaleElement } from './quotient.ts';
import { dependentSquareRoot } from './denest.ts';
import { positiveRationalPower, radicandPower } from './radicals.ts';
import { rationalMultiple } from './split.ts';
import type { Element } from './types.ts';

const HALF = Q.HALF;
const root = (ctx: Context, n: number): Element => positiveRationalPower(ctx, Q.rational(n), HALF);
const nested = (ctx: Context, base: Element): Element => radicandPower(ctx, base, { p: 1, q: 2 });
const plus = (ctx: Context, a: Element, b: Element): Element => addElements(ctx.table, a, b);

/** cos(pi r). */
export function cosineOfPi(ctx: Context, r: Rational): Element {
  const turns = Q.multiply(r, HALF);
  let q = Q.subtract(r, Q.rational(2n * Q.floor(turns)));
  if (Q.compare(q, Q.ONE) > 0) q = Q.subtract(Q.rational(2), q);
  if (Q.compare(q, HALF) > 0) return negateElement(cosineInFirstQuadrant(ctx, Q.subtract(Q.ONE, q)));
  return cosineInFirstQuadrant(ctx, q);
}
export const sineOfPi = (ctx: Context, r: Rational): Element => cosineOfPi(ctx, Q.subtract(HALF, r));

function cosineInFirstQuadrant(ctx: Context, q: Rational): Element {
  const first = q.num === 1n;
  const quarter = (a: Element): Element => scaleElement(a, Q.rational(1, 4));
  switch (q.den) {
    case 1n:
      return Q.ONE;
    case 2n:
      return Q.ZERO;
    case 3n:
      return HALF;
    case 4n:
      return scaleElement(root(ctx, 2), HALF);
    case 5n:
      return quarter(plus(ctx, root(ctx, 5), Q.rational(first ? 1 : -1)));
    case 6n:
      return scaleElement(root(ctx, 3), HALF);
    case 8n:
      return conjugate(ctx, 2, root(ctx, 2), first ? 1 : -1, HALF);
    case 10n:
      return conjugate(ctx, 5, root(ctx, 5), first ? 1 : -1, quarter(root(ctx, 2)));
    case 12n:
      return quarter(plus(ctx, root(ctx, 6), first ? root(ctx, 2) : negateElement(root(ctx, 2))));
    default:
      return scaleElement(chebyshev(ctx, q), HALF);
  }
}

/** factor * sqrt(n + sign r). */
function conjugate(ctx: Context, n: number, r: Element, sign: 1 | -1, factor: Element): Element {
  const own = plus(ctx, Q.rational(n), sign === 1 ? r : negateElement(r));
  const size = Q.absolute(rationalMultiple(own).coefficient);
  const unit = scaleElement(own, Q.reciprocal(size));
  const outside = multiplyElements(ctx.table, factor, positiveRationalPower(ctx, size, HALF));
  return multiplyElements(ctx.table, outside, dependentSquareRoot(ctx, unit) ?? nested(ctx, unit));
}

const MAX_DEGREE = 40;

/** 2 cos(pi q) in the kernel 2 cos(2 pi/m), m a multiple of 4 so that sines lie in the same field. */
function chebyshev(ctx: Context, q: Rational): Element {
  const m = q.den % 2n === 1n ? 4n * q.den : 2n * q.den;
  const k = (q.num * m) / (2n * q.den);
  const kernel = m <= 400n ? cosineKernel(ctx, Number(m)) : null;
  if (!kernel) {
    const angle = multiplyElements(ctx.table, q, kernelElement(ctx, ctx.table.intern('#pi', () => ({ shape: { kind: 'constant', name: 'pi' } }))));
    const call = ctx.table.intern(`cosine ${Q.toText(q)}`, () => ({ shape: { kind: 'call', id: 'cos', args: [angle] } }));
    return scaleElement(kernelElement(ctx, call), Q.rational(2));
  }
  const c = kernelElement(ctx, kernel);
  let before: Element = Q.rational(2);
  let value: Element = c;
  for (let i = 1n; i < k; i += 1n) [before, value] = [value, plus(ctx, multiplyElements(ctx.table, c, value), negateElement(before))];
  return value;
}

const writtenForms = new WeakMap<Kernel, ReadonlyMap<string, { readonly angle: Rational; readonly scale: Rational }>>();

/** The r in (0, 1/2) and c with a = c cos(pi r), where a is a polynomial in the given cosine kernel and of that form; else null. */
export function asSingleCosine(ctx: Context, kernel: Kernel, a: Element): { readonly angle: Rational; readonly factor: Rational } | null {
  if (kernel.shape.kind !== 'cosine') return null;
  let forms = writtenForms.get(kernel);
  if (!forms) {
    const found = new Map<string, { readonly angle: Rational; readonly scale: Rational }>();
    const m = Number(kernel.shape.angle.den) * (kernel.shape.angle.num === 1n ? 2 : 1);
    for (let k = 1; 4 * k < m; k += 1) {
      const angle = Q.rational(2 * k, m);
      const { coefficient, unit } = rationalMultiple(cosineOfPi(ctx, angle));
      found.set(elementKey(unit), { angle, scale: coefficient });
    }
    forms = found;
    writtenForms.set(kernel, forms);
  }
  const { coefficient, unit } = rationalMultiple(a);
  const form = forms.get(elementKey(unit));
  return form ? { angle: form.angle, factor: Q.divide(coefficient, form.scale) } : null;
}

function cosineKernel(ctx: Context, m: number): Kernel | null {
  const key = `cosine of turn/${m}`;
  const known = ctx.table.find(key);
  if (known) return known;
  const minimal = minimalPolynomialOfCosine(m);
  const degree = minimal.length - 1;
  if (degree > MAX_DEGREE) return null;
  // The kernel's own index is the next free one.
  const index = ctx.table.kernels.length;
  const value: Polynomial = minimal
    .slice(0, degree)
    .map((c, i): Term => ({ monomial: i === 0 ? UNIT : monomialOf(index, i), coefficient: -c }))
    .filter((t) => t.coefficient !== 0n)
    .reverse();
  return ctx.table.intern(key, () => ({ shape: { kind: 'cosine', angle: Q.rational(2, m) }, relation: { period: degree, value, pure: false, numeric: true } }));
}

/** Coefficients, lowest first, of the minimal polynomial of 2 cos(2 pi/m) for m >= 3: the cyclotomic polynomial in z + 1/z. */
export function minimalPolynomialOfCosine(m: number): readonly bigint[] {
  const cyclotomic = cyclotomicPolynomial(m);
  const half = (cyclotomic.length - 1) / 2;
  // z^k + z^-k as polynomials in y = z + 1/z.
  let before: bigint[] = [2n];
  let value: bigint[] = [0n, 1n];
  const sum: bigint[] = Array.from({ length: half + 1 }, () => 0n);
  sum[0] = cyclotomic[half] as bigint;
  for (let k = 1; k <= half; k += 1) {
    const c = cyclotomic[half + k] as bigint;
    value.forEach((v, i) => (sum[i] = (sum[i] as bigint) + c * v));
    const next = [0n, ...value];
    before.forEach((v, i) => (next[i] = (next[i] as bigint) - v));
    [before, value] = [value, next];
  }
  return sum;
}

function cyclotomicPolynomial(m: number): readonly bigint[] {
  let f: bigint[] = [-1n, ...Array.from({ length: m - 1 }, () => 0n), 1n];
  for (let d = 1; d < m; d += 1) {
    if (m % d === 0) f = exactQuotient(f, cyclotomicPolynomial(d));
  }
  return f;
}
/** Division by a monic polynomial that divides. */
function exactQuotient(f: readonly bigint[], g: readonly bigint[]): bigint[] {
  const rest = [...f];
  const quotient: bigint[] = [];
  for (let i = f.length - g.length; i >= 0; i -= 1) {
    const c = rest[i + g.length - 1] as bigint;
    quotient[i] = c;
    for (let j = 0; j < g.length; j += 1) rest[i + j] = (rest[i + j] as bigint) - c * (g[j] as bigint);
  }
  return quotient;
}
