/** Real numbers of a circle's division as they are written. */
import { build, type Expression, Q, type Rational } from '../expression/index.ts';
import { constantKernel, type Context, kernelElement } from './context.ts';
import type { Kernel } from './kernel.ts';
import { kernelsOf } from './kernelsOf.ts';
import { exponentIn, multiplyMonomials, withoutKernel } from './monomial.ts';
import { normalise } from './normalForm.ts';
import { kernelsIn, ONE_POLYNOMIAL } from './polynomial.ts';
import { addElements, multiplyElements, negateElement, scaleElement } from './quotient.ts';
import { isQuotient, type Quotient } from './quotientParts.ts';
import type { Element } from './types.ts';
import { asSingleCosine, cosineOfPi } from './unitCircle.ts';

/** Powers of 2 cos(2 pi/m) as sums of cosines of multiples, which is how such numbers are written; null where there is no such kernel. `write` writes the coefficients. */
export function inCosines(ctx: Context, a: Quotient, write: (a: Element) => Expression): Expression | null {
  const kernels = [...kernelsOf(a)].filter((k) => (ctx.table.kernels[k] as Kernel).shape.kind === 'cosine');
  const [kernel] = kernels;
  if (kernels.length !== 1 || kernel === undefined || a.denominator.some((f) => kernelsIn(f.polynomial).has(kernel))) return null;
  const { shape } = ctx.table.kernels[kernel] as Kernel;
  if (shape.kind !== 'cosine') return null;
  const written = (r: Rational, coefficient: Element): Expression => {
    // Angles with radicals: sqrt(3) rather than 2 cos(pi/6).
    if (r.den <= 6n || r.den === 12n) return write(multiplyElements(ctx.table, coefficient, cosineOfPi(ctx, r)));
    const sine = Q.compare(r, Q.rational(1, 4)) > 0;
    const angle = sine ? Q.subtract(Q.HALF, r) : r;
    const call = ctx.table.intern(`written ${sine ? 'sin' : 'cos'} ${Q.toText(angle)}`, () => ({
      shape: { kind: 'call', id: sine ? 'sin' : 'cos', args: [scaleElement(kernelElement(ctx, constantKernel(ctx, 'pi')), angle)] },
    }));
    return write(multiplyElements(ctx.table, coefficient, kernelElement(ctx, call)));
  };
  const single = asSingleCosine(ctx, ctx.table.kernels[kernel] as Kernel, a);
  if (single) return written(single.angle, single.factor);
  const byAngle = new Map<string, { angle: Rational; coefficient: Element }>();
  const put = (k: number, coefficient: Element): void => {
    // cos(pi r), r brought into [0, 1/2].
    let r = Q.multiply(shape.angle, Q.rational(k));
    r = Q.subtract(r, Q.rational(2n * Q.floor(Q.multiply(r, Q.HALF))));
    if (Q.compare(r, Q.ONE) > 0) r = Q.subtract(Q.rational(2), r);
    const negative = Q.compare(r, Q.HALF) > 0;
    if (negative) r = Q.subtract(Q.ONE, r);
    if (Q.equal(r, Q.HALF)) return;
    const signed = negative ? negateElement(coefficient) : coefficient;
    const key = Q.toText(r);
    const known = byAngle.get(key);
    if (known) known.coefficient = addElements(ctx.table, known.coefficient, signed);
    else byAngle.set(key, { angle: r, coefficient: signed });
  };
  for (const t of a.numerator) {
    const monomial = multiplyMonomials(t.monomial, a.monomial);
    const degree = exponentIn(monomial, kernel);
    if (typeof degree !== 'number' || degree < 0) return null;
    const rest = normalise(ctx.table, Q.multiply(a.content, Q.rational(t.coefficient)), withoutKernel(monomial, kernel), ONE_POLYNOMIAL, a.denominator, false);
    let binomial = 1n;
    for (let i = 0; 2 * i <= degree; i += 1) {
      if (i > 0) binomial = (binomial * BigInt(degree - i + 1)) / BigInt(i);
      const k = degree - 2 * i;
      put(k, scaleElement(rest, Q.rational(k === 0 ? binomial : 2n * binomial)));
    }
  }
  const terms = [...byAngle.values()].filter((x) => isQuotient(x.coefficient) || x.coefficient.num !== 0n).sort((x, y) => Q.compare(x.angle, y.angle));
  return build.sum(...terms.map((x) => written(x.angle, x.coefficient)));
}
