/** The second normal form of the zero test: every trigonometric and hyperbolic kernel written in exponentials, where all their identities become those of powers; complements and recurrences of other functions applied one way. */
import { Q } from '../expression/index.ts';
import { constantKernel, imaginaryKernel, kernelElement, type Context } from './context.ts';
import type { Kernel, KernelShape } from './kernel.ts';
import type { Monomial } from './monomial.ts';
import type { Polynomial } from './polynomial.ts';
import { exponential } from './exponentials.ts';
import { addElements, elementFromMonomial, invertElement, multiplyElements, negateElement, scaleElement, wholePower } from './quotient.ts';
import { isQuotient } from './quotientParts.ts';
import { kernelsOf } from './kernelsOf.ts';
import { isWhole, periodsIn, subtractExponents, type Exponent } from './exponent.ts';
import { monomialOf } from './monomial.ts';
import type { Element } from './types.ts';

const WAVES: ReadonlySet<string> = new Set(['sin', 'cos', 'sinh', 'cosh']);
const REWRITTEN: ReadonlySet<string> = new Set([...WAVES, 'erfc', 'acos', 'atan', 'besselJ', 'besselY', 'besselI', 'besselK']);

/** True if the numerator of a vanishes once rewritten; false says nothing. */
export function deepZero(ctx: Context, a: Element): boolean {
  if (!isQuotient(a)) return a.num === 0n;
  const rewritable = [...kernelsOf(a)].some((k) => {
    const { shape } = ctx.table.kernels[k] as Kernel;
    return (shape.kind === 'call' && REWRITTEN.has(shape.id)) || isPlainPower(shape);
  });
  if (!rewritable) return false;
  const value = rewritePolynomial(ctx, a.numerator);
  return !isQuotient(value) && value.num === 0n;
}

/** base^r without a relation of its own: the whole part of r can still be worked out. */
const isPlainPower = (shape: KernelShape): shape is Extract<KernelShape, { kind: 'power' }> => shape.kind === 'power' && !isQuotient(shape.unit);

function rewritePolynomial(ctx: Context, f: Polynomial): Element {
  let sum: Element = Q.ZERO;
  for (const t of f) sum = addElements(ctx.table, sum, scaleElement(rewriteMonomial(ctx, t.monomial), Q.rational(t.coefficient)));
  return sum;
}

function rewriteMonomial(ctx: Context, m: Monomial): Element {
  let product: Element = Q.ONE;
  m.kernels.forEach((k, i) => {
    const e = m.exponents[i] as Exponent;
    const kernel = ctx.table.kernels[k] as Kernel;
    if (isPlainPower(kernel.shape)) {
      // base^e = base^floor(e) * base^(e - floor(e)).
      const whole = periodsIn(e, 1);
      product = multiplyElements(ctx.table, product, wholePower(ctx.table, kernel.shape.base, whole));
      product = multiplyElements(ctx.table, product, elementFromMonomial(ctx.table, monomialOf(k, subtractExponents(e, whole))));
      return;
    }
    const value = isWhole(e) ? rewriteKernel(ctx, kernel) : null;
    product = multiplyElements(ctx.table, product, value ? wholePower(ctx.table, value, e as number) : elementFromMonomial(ctx.table, monomialOf(k, e)));
  });
  return product;
}

/** The kernel in others; null where it stays. */
function rewriteKernel(ctx: Context, k: Kernel): Element | null {
  const { shape } = k;
  if (shape.kind !== 'call') return null;
  const [a, z] = shape.args;
  if (a === undefined) return null;
  const complement = (whole: Element, id: string, at: Element): Element => addElements(ctx.table, whole, negateElement(ctx.call(id, [at])));
  const quarterTurn = (): Element => scaleElement(kernelElement(ctx, constantKernel(ctx, 'pi')), Q.HALF);
  if (shape.id === 'erfc') return complement(Q.ONE, 'erf', a);
  if (shape.id === 'acos') return complement(quarterTurn(), 'asin', a);
  // atan r + atan 1/r = pi/2 for r > 0 (DLMF 4.24.17).
  if (shape.id === 'atan') return !isQuotient(a) && Q.compare(a, Q.ONE) > 0 ? complement(quarterTurn(), 'atan', Q.reciprocal(a)) : null;
  if (shape.id.startsWith('bessel')) return z === undefined ? null : besselByLowerOrders(ctx, shape.id, a, z);
  return WAVES.has(shape.id) ? waveInExponentials(ctx, shape.id, a) : null;
}

/** Orders that the recurrence is applied to. */
const HIGHEST_ORDER = 40n;

/** Of a whole order from 2 on by the orders 0 and 1 (DLMF 10.6.1, 10.29.1); null for others. */
function besselByLowerOrders(ctx: Context, id: string, order: Element, z: Element): Element | null {
  if (isQuotient(order) || order.den !== 1n || order.num < 2n || order.num > HIGHEST_ORDER) return null;
  const [down, across] = id === 'besselI' ? [1n, -1n] : id === 'besselK' ? [1n, 1n] : [-1n, 1n];
  const step = invertElement(ctx.table, z);
  let before = ctx.call(id, [Q.ZERO, z]);
  let last = ctx.call(id, [Q.ONE, z]);
  for (let n = 1n; n < order.num; n += 1n) {
    const next = addElements(ctx.table, scaleElement(before, Q.rational(down)), scaleElement(multiplyElements(ctx.table, step, last), Q.rational(2n * n * across)));
    [before, last] = [last, next];
  }
  return last;
}

/** sin, cos, sinh or cosh of a in exponentials. */
function waveInExponentials(ctx: Context, id: string, a: Element): Element {
  const i = kernelElement(ctx, imaginaryKernel(ctx));
  const circular = id === 'sin' || id === 'cos';
  const up = exponential(ctx, circular ? multiplyElements(ctx.table, a, i) : a);
  const down = invertElement(ctx.table, up);
  const odd = id === 'sin' || id === 'sinh';
  const sum = scaleElement(addElements(ctx.table, up, odd ? negateElement(down) : down), Q.HALF);
  return id === 'sin' ? multiplyElements(ctx.table, sum, invertElement(ctx.table, i)) : sum;
}
