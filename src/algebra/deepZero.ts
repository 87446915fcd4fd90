/** The second normal form of the zero test: every trigonometric and hyperbolic kernel written in exponentials, where all their identities become those of powers. */
import { Q } from '../expression/index.ts';
import { imaginaryKernel, kernelElement, type Context } from './context.ts';
import type { Kernel, KernelShape } from './kernel.ts';
import type { Monomial } from './monomial.ts';
import type { Polynomial } from './polynomial.ts';
import { exponential } from './powers.ts';
import { addElements, elementFromMonomial, invertElement, isQuotient, kernelsOf, multiplyElements, negateElement, scaleElement, wholePower } from './quotient.ts';
import { isWhole, periodsIn, subtractExponents, type Exponent } from './exponent.ts';
import { monomialOf } from './monomial.ts';
import type { Element } from './types.ts';

const REWRITTEN: ReadonlySet<string> = new Set(['sin', 'cos', 'sinh', 'cosh']);

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

/** sin, cos, sinh, cosh of a in exponentials, else null. */
function rewriteKernel(ctx: Context, k: Kernel): Element | null {
  const { shape } = k;
  if (shape.kind !== 'call' || !REWRITTEN.has(shape.id)) return null;
  const [a] = shape.args;
  if (a === undefined) return null;
  const i = kernelElement(ctx, imaginaryKernel(ctx));
  const circular = shape.id === 'sin' || shape.id === 'cos';
  const up = exponential(ctx, circular ? multiplyElements(ctx.table, a, i) : a);
  const down = invertElement(ctx.table, up);
  const odd = shape.id === 'sin' || shape.id === 'sinh';
  const sum = scaleElement(addElements(ctx.table, up, odd ? negateElement(down) : down), Q.HALF);
  return shape.id === 'sin' ? multiplyElements(ctx.table, sum, invertElement(ctx.table, i)) : sum;
}
