/**
 * Logarithms and powers of products, written as they were met. The normal form splits log(4 pi mu^2/Delta) into logarithms of single factors, so that equal things are equal;
 * a person wants the one logarithm back. Each split is noted here with its argument, and undone in writing wherever that shortens the result.
 */
import { Q, type Rational } from '../expression/index.ts';
import { kernelElement, type Context, type JoinedLogarithm } from './context.ts';
import type { Kernel } from './kernel.ts';
import { exponentIn, isUnit, UNIT, withoutKernel } from './monomial.ts';
import { isOnePolynomial, kernelsIn, type Polynomial, type Term } from './polynomial.ts';
import { addElements, elementKey, invertElement, multiplyElements, negateElement, scaleElement, wholePower } from './quotient.ts';
import { isQuotient, partsOf } from './quotientParts.ts';
import { normalise } from './normalForm.ts';
import { kernelsOf } from './kernelsOf.ts';
import type { Element } from './types.ts';

/** Longer sums are not worth the search. */
const MOST_TERMS = 300;
const MOST_NOTED = 24;

/** Takes note of log(argument) = value where that is a sum of at least two logarithms; numbers have rules of their own in writing. */
export function noteLogarithm(ctx: Context, argument: Element, value: Element): void {
  if (ctx.joined.size >= MOST_NOTED || !isQuotient(argument) || !isQuotient(value) || value.numerator.length < 2 || value.denominator.length > 0 || !isUnit(value.monomial)) return;
  const parts = new Map<number, Rational>();
  for (const t of value.numerator) {
    const [k] = t.monomial.kernels;
    if (t.monomial.kernels.length !== 1 || t.monomial.exponents[0] !== 1 || k === undefined || (ctx.table.kernels[k] as Kernel).shape.kind !== 'log') return;
    parts.set(k, Q.multiply(value.content, Q.rational(t.coefficient)));
  }
  const key = elementKey(value);
  // log(a^2/b^2) and 2 log(a/b) are one sum of logarithms only up to a factor; the first argument seen stays.
  if (!ctx.joined.has(key)) ctx.joined.set(key, { argument, value, parts });
}

/** The element with noted sums of logarithms replaced by single ones, wherever that leaves fewer terms. */
export function withJoinedLogarithms(ctx: Context, a: Element): Element {
  if (ctx.joined.size === 0 || !isQuotient(a)) return a;
  let best: Element = a;
  const noted = [...ctx.joined.values()].sort((x, y) => y.parts.size - x.parts.size);
  for (const joined of noted) {
    if (!isQuotient(best) || best.numerator.length > MOST_TERMS) return best;
    const present = kernelsOf(best);
    if (![...joined.parts.keys()].every((k) => present.has(k))) continue;
    const [pivot] = [...joined.parts].reduce((x, y) => (occurrences(best, y[0]) < occurrences(best, x[0]) ? y : x));
    const tried = substitute(ctx, best, pivot, solveFor(ctx, joined, pivot));
    if (tried && size(tried) < size(best)) best = tried;
  }
  return best;
}

const occurrences = (a: Element, kernel: number): number => partsOf(a).numerator.filter((t) => exponentIn(t.monomial, kernel) !== 0).length;

function size(a: Element): number {
  const parts = partsOf(a);
  return parts.numerator.length + parts.denominator.reduce((n, f) => n + f.polynomial.length, 0);
}

/** The pivot's logarithm through the joined one and the others. */
function solveFor(ctx: Context, joined: JoinedLogarithm, pivot: number): Element {
  const whole = ctx.table.intern(`written log ${elementKey(joined.argument)}`, () => ({ shape: { kind: 'log', argument: joined.argument } }));
  const own = joined.parts.get(pivot) ?? Q.ONE;
  const k = kernelElement(ctx, ctx.table.kernels[pivot] as Kernel);
  const others = addElements(ctx.table, joined.value, negateElement(scaleElement(k, own)));
  return scaleElement(addElements(ctx.table, kernelElement(ctx, whole), negateElement(others)), Q.reciprocal(own));
}

/** a with the kernel replaced by the value; null where it occurs in other than whole powers. */
function substitute(ctx: Context, a: Element, kernel: number, value: Element): Element | null {
  const parts = partsOf(a);
  const outside = exponentIn(parts.monomial, kernel);
  if (typeof outside !== 'number') return null;
  const numerator = inPolynomial(ctx, parts.numerator, kernel, value);
  if (numerator === null) return null;
  let result = multiplyElements(ctx.table, numerator, normalise(ctx.table, parts.content, withoutKernel(parts.monomial, kernel), [{ monomial: UNIT, coefficient: 1n }], [], false));
  if (outside !== 0) result = multiplyElements(ctx.table, result, wholePower(ctx.table, value, outside));
  for (const f of parts.denominator) {
    const below = inPolynomial(ctx, f.polynomial, kernel, value);
    if (below === null) return null;
    result = multiplyElements(ctx.table, result, wholePower(ctx.table, invertElement(ctx.table, below), f.exponent));
  }
  return result;
}

function inPolynomial(ctx: Context, f: Polynomial, kernel: number, value: Element): Element | null {
  const element = (terms: readonly Term[]): Element => normalise(ctx.table, Q.ONE, UNIT, terms, [], false);
  if (isOnePolynomial(f) || !kernelsIn(f).has(kernel)) return element(f);
  const byDegree: Term[][] = [];
  for (const t of f) {
    const degree = exponentIn(t.monomial, kernel);
    if (typeof degree !== 'number' || degree < 0 || degree > 40) return null;
    while (byDegree.length <= degree) byDegree.push([]);
    byDegree[degree]?.push({ monomial: withoutKernel(t.monomial, kernel), coefficient: t.coefficient });
  }
  let result: Element = Q.ZERO;
  for (let j = byDegree.length - 1; j >= 0; j -= 1) result = addElements(ctx.table, multiplyElements(ctx.table, result, value), element(byDegree[j] ?? []));
  return result;
}

/**
 * u1^(c1 E) u2^(c2 E) ... for a noted log(argument) = c1 log u1 + c2 log u2 + ... is argument^E. `exponentOf` gives the exponent of a base, by its key.
 * Returns the argument with E, and the keys that it stands for.
 */
export function joinedPower(ctx: Context, exponentOf: (key: string) => Element | null): { readonly argument: Element; readonly exponent: Element; readonly keys: readonly string[] } | null {
  for (const joined of ctx.joined.values()) {
    let exponent: Element | null = null;
    const keys: string[] = [];
    for (const [k, c] of joined.parts) {
      const { shape } = ctx.table.kernels[k] as Kernel;
      const key = shape.kind === 'log' ? elementKey(shape.argument) : '';
      const own = exponentOf(key);
      const scaled = own && isQuotient(own) ? scaleElement(own, Q.reciprocal(c)) : null;
      if (!scaled || (exponent && elementKey(exponent) !== elementKey(scaled))) {
        exponent = null;
        break;
      }
      exponent = scaled;
      keys.push(key);
    }
    if (exponent) return { argument: joined.argument, exponent, keys };
  }
  return null;
}
