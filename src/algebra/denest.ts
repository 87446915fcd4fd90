/** Square and cube roots of numbers in fields of real square roots: within the field, by one more real radical, or not at all. */
import { Q, type Rational } from '../expression/index.ts';
import { isZeroRational, kernelElement, rationalOf, type Context } from './context.ts';
import { integerRoot } from './integers.ts';
import type { Kernel } from './kernel.ts';
import { monomialOf, multiplyMonomials, withoutKernel, exponentIn } from './monomial.ts';
import { kernelsIn, type Term } from './polynomial.ts';
import { addElements, elementFromMonomial, invertElement, multiplyElements, negateElement, scaleElement } from './quotient.ts';
import { isQuotient } from './quotientParts.ts';
import { normalise } from './normalForm.ts';
import { positiveRationalPower } from './radicals.ts';
import type { Element } from './types.ts';

const plus = (ctx: Context, a: Element, b: Element): Element => addElements(ctx.table, a, b);
const times = (ctx: Context, a: Element, b: Element): Element => multiplyElements(ctx.table, a, b);

/** Kernels of integers whose square roots make up the element, largest index last; null where anything else occurs. */
function squareRootsIn(ctx: Context, a: Element): readonly number[] | null {
  if (!isQuotient(a)) return [];
  if (a.denominator.length > 0) return null;
  const found = new Set<number>([...a.monomial.kernels, ...kernelsIn(a.numerator)]);
  for (const k of found) if ((ctx.table.kernels[k] as Kernel).shape.kind !== 'integer') return null;
  for (const t of [{ monomial: a.monomial }, ...a.numerator]) {
    for (const e of t.monomial.exponents) if (typeof e === 'number' || e.q !== 2) return null;
  }
  return [...found].sort((x, y) => x - y);
}

/** a = x + y sqrt(p). */
function splitAt(ctx: Context, a: Element, kernel: number): { readonly x: Element; readonly y: Element } {
  if (!isQuotient(a)) return { x: a, y: Q.ZERO };
  const without: Term[] = [];
  const within: Term[] = [];
  for (const t of a.numerator) {
    const monomial = multiplyMonomials(t.monomial, a.monomial);
    const half = exponentIn(monomial, kernel);
    if (half === 0) without.push({ monomial, coefficient: t.coefficient });
    else within.push({ monomial: withoutKernel(monomial, kernel), coefficient: t.coefficient });
  }
  const build = (terms: readonly Term[]): Element => normalise(ctx.table, a.content, monomialOf(0, 0), terms, [], false);
  return { x: build(without), y: build(within) };
}

const radicand = (ctx: Context, kernel: number): Rational => {
  const { shape } = ctx.table.kernels[kernel] as Kernel;
  return Q.rational(shape.kind === 'integer' ? shape.value : 1n);
};
const rootOf = (ctx: Context, kernel: number): Element => elementFromMonomial(ctx.table, monomialOf(kernel, { p: 1, q: 2 }));

function rationalSquareRoot(r: Rational): Rational | null {
  if (r.num < 0n) return null;
  const p = integerRoot(r.num, 2);
  const q = integerRoot(r.den, 2);
  return p * p === r.num && q * q === r.den ? { num: p, den: q } : null;
}

/** A square root of a inside Q(sqrt p over the given kernels), of either sign; null where there is none. */
function rootInField(ctx: Context, a: Element, kernels: readonly number[]): Element | null {
  ctx.table.check();
  if (isZeroRational(a)) return a;
  const p = kernels[kernels.length - 1];
  if (p === undefined) {
    const r = rationalOf(a);
    return r ? rationalSquareRoot(r) : null;
  }
  const rest = kernels.slice(0, -1);
  const { x, y } = splitAt(ctx, a, p);
  if (isZeroRational(y)) {
    const direct = rootInField(ctx, x, rest);
    if (direct) return direct;
    const over = rootInField(ctx, scaleElement(x, Q.reciprocal(radicand(ctx, p))), rest);
    return over ? times(ctx, over, rootOf(ctx, p)) : null;
  }
  const norm = plus(ctx, times(ctx, x, x), negateElement(scaleElement(times(ctx, y, y), radicand(ctx, p))));
  const n = rootInField(ctx, norm, rest);
  if (!n) return null;
  for (const s of [plus(ctx, x, n), plus(ctx, x, negateElement(n))]) {
    const w = isZeroRational(s) ? null : rootInField(ctx, scaleElement(s, Q.HALF), rest);
    if (w) return plus(ctx, w, times(ctx, scaleElement(times(ctx, y, invertElement(ctx.table, w)), Q.HALF), rootOf(ctx, p)));
  }
  return null;
}

/** The positive square root of a positive number in real radicals of rationals, null where that cannot be (Borodin, Fagin, Hopcroft, Tompa 1985 for one root; recursively for several). */
export function denestedSquareRoot(ctx: Context, a: Element): Element | null {
  const kernels = squareRootsIn(ctx, a);
  if (!kernels) return null;
  const root = radicalRoot(ctx, a, kernels);
  if (!root) return null;
  const sign = isQuotient(root) ? ctx.signOfNumber(root) : root.num < 0n ? -1 : 1;
  return sign === 1 ? root : sign === -1 ? negateElement(root) : null;
}

function radicalRoot(ctx: Context, a: Element, kernels: readonly number[]): Element | null {
  const r = rationalOf(a);
  if (r) return r.num > 0n ? positiveRationalPower(ctx, r, Q.HALF) : null;
  const p = kernels[kernels.length - 1];
  if (p === undefined) return null;
  const rest = kernels.slice(0, -1);
  const { x, y } = splitAt(ctx, a, p);
  if (isZeroRational(y)) return radicalRoot(ctx, x, rest);
  const norm = plus(ctx, times(ctx, x, x), negateElement(scaleElement(times(ctx, y, y), radicand(ctx, p))));
  const n = rootInField(ctx, norm, rest);
  if (!n) return null;
  for (const s of [plus(ctx, x, n), plus(ctx, x, negateElement(n))]) {
    if (isZeroRational(s)) continue;
    const half = scaleElement(s, Q.HALF);
    const positive = isQuotient(half) ? ctx.signOfNumber(half) === 1 : half.num > 0n;
    const w = positive ? radicalRoot(ctx, half, rest) : null;
    if (w) return plus(ctx, w, times(ctx, scaleElement(times(ctx, y, invertElement(ctx.table, w)), Q.HALF), rootOf(ctx, p)));
  }
  return null;
}

/** The real cube root of x + y sqrt(p) with rational x and y where it is of that form itself, else null. */
export function denestedCubeRoot(ctx: Context, a: Element): Element | null {
  const kernels = squareRootsIn(ctx, a);
  const [p] = kernels ?? [];
  if (!kernels || kernels.length === 0 || p === undefined) return null;
  // The product of the radicals acts as one: x + y sqrt(d).
  if (!isQuotient(a) || a.numerator.length !== 2) return null;
  const [s, t] = a.numerator.map((term) => normalise(ctx.table, a.content, a.monomial, [term], [], false));
  if (s === undefined || t === undefined) return null;
  const x = rationalOf(s) ?? rationalOf(t);
  const surd = rationalOf(s) ? t : s;
  const square = rationalOf(times(ctx, surd, surd));
  if (!x || !square) return null;
  // c = u + v with u rational, v a surd: u^2 - v^2 = n is the cube root of the norm, and 4u^3 - 3nu = x.
  const norm = Q.subtract(Q.multiply(x, x), square);
  const n = rationalCubeRoot(norm);
  if (!n) return null;
  const u = rationalRootOfCubic(n, x);
  if (!u) return null;
  // (u + v)^3 = x + v (3u^2 + v^2), v^2 = u^2 - n.
  const v2 = Q.subtract(Q.multiply(u, u), n);
  const slope = Q.add(Q.multiply(Q.rational(3), Q.multiply(u, u)), v2);
  if (slope.num === 0n) return null;
  return plus(ctx, u, scaleElement(surd, Q.reciprocal(slope)));
}

function rationalCubeRoot(r: Rational): Rational | null {
  const size = r.num < 0n ? -r.num : r.num;
  const p = integerRoot(size, 3);
  const q = integerRoot(r.den, 3);
  if (p ** 3n !== size || q ** 3n !== r.den) return null;
  return Q.rational(r.num < 0n ? -p : p, q);
}

/** A rational root of 4u^3 - 3nu - x, found from a numerical one and verified. */
function rationalRootOfCubic(n: Rational, x: Rational): Rational | null {
  const den = 2n * n.den * x.den;
  const [N, X] = [Q.toDouble(n), Q.toDouble(x)];
  for (const start of [-1, 0, 1]) {
    let u = start * Math.sqrt(Math.abs(N) + 1) * 2 + Math.cbrt(X / 4);
    for (let i = 0; i < 200; i += 1) {
      const slope = 12 * u * u - 3 * N;
      if (slope === 0) break;
      const step = (4 * u ** 3 - 3 * N * u - X) / slope;
      u -= step;
      if (Math.abs(step) < 1e-15 * Math.abs(u)) break;
    }
    const scaled = Math.round(u * Number(den));
    if (!Number.isSafeInteger(scaled)) continue;
    for (const candidate of [scaled - 1, scaled, scaled + 1]) {
      const r = Q.rational(BigInt(candidate), den);
      const value = Q.subtract(Q.subtract(Q.multiply(Q.rational(4), Q.power(r, 3)), Q.multiply(Q.rational(3), Q.multiply(n, r))), x);
      if (value.num === 0n) return r;
    }
  }
  return null;
}

/**
 * sqrt(a) through square roots seen before: only independent ones may become kernels, for the zero test rests on that.
 * Null where a is independent of each of them, as far as products of two show.
 */
export function dependentSquareRoot(ctx: Context, a: Element): Element | null {
  for (const k of ctx.table.kernels) {
    if (k.shape.kind !== 'radicand' || k.relation?.numeric !== true) continue;
    const b = k.shape.base;
    if (isQuotient(b) && ctx.signOfNumber(b) !== 1) continue;
    const joint = denestedSquareRoot(ctx, times(ctx, a, b));
    if (joint) return times(ctx, joint, invertElement(ctx.table, kernelElement(ctx, k, { p: 1, q: 2 })));
  }
  return null;
}
