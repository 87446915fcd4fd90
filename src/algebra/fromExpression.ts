/** Trees to elements. */
import { Q, type Expression } from '../expression/index.ts';
import { Declined } from '../outcome.ts';
import { applyKernel, constantKernel, expKernel, imaginaryKernel, isZeroRational, kernelElement, parameterKernel, rationalOf, undecided, type Context } from './context.ts';
import { callFunction } from './functions.ts';
import { absolute, divideElements, rationalPower } from './powers.ts';
import { generalPower } from './exponentials.ts';
import { addElements, multiplyElements, negateElement } from './quotient.ts';
import { isNonNegative, isRealSet } from './signs.ts';
import type { Element } from './types.ts';

const MAX_DEPTH = 2000;

/** Throws Declined where the tree has no exact value in the field: order terms, integrals, vectors, relations. */
export function fromExpression(ctx: Context, e: Expression, depth = 0): Element {
  if (depth > MAX_DEPTH) throw new Declined('unreadable', `This expression is nested more than ${MAX_DEPTH} levels deep; write it with fewer brackets.`);
  const inner = (x: Expression): Element => fromExpression(ctx, x, depth + 1);
  switch (e.kind) {
    case 'number':
      return e.value;
    case 'constant':
      switch (e.name) {
        case 'i':
          return kernelElement(ctx, imaginaryKernel(ctx));
        case 'e':
          return kernelElement(ctx, expKernel(ctx, Q.ONE));
        case 'infinity':
          throw new Declined('bad-request', 'Infinity is no number to calculate with; use it as a point or as a limit.');
        default:
          return kernelElement(ctx, constantKernel(ctx, e.name));
      }
    case 'symbol':
      return kernelElement(ctx, parameterKernel(ctx, e.name));
    case 'sum': {
      ctx.table.check();
      return e.terms.reduce<Element>((sum, t) => addElements(ctx.table, sum, inner(t)), Q.ZERO);
    }
    case 'product': {
      ctx.table.check();
      return e.factors.reduce<Element>((product, f) => multiplyElements(ctx.table, product, inner(f)), Q.ONE);
    }
    case 'quotient':
      return divideElements(ctx, inner(e.numerator), inner(e.denominator));
    case 'negation':
      return negateElement(inner(e.operand));
    case 'power':
      return generalPower(ctx, inner(e.base), inner(e.exponent));
    case 'root':
      return realRoot(ctx, inner(e.radicand), inner(e.degree));
    case 'call':
      return callFunction(ctx, e.function, e.args.map(inner));
    case 'apply':
      return kernelElement(ctx, applyKernel(ctx, e.name, e.derivatives, e.args.map(inner)));
    default:
      throw undecided('A coefficient here is not a number or a formula in parameters; give it a closed form.');
  }
}

/** The real root for an odd degree, the principal one for an even degree. */
function realRoot(ctx: Context, radicand: Element, degree: Element): Element {
  const n = rationalOf(degree);
  if (!n || n.den !== 1n || n.num < 1n) return generalPower(ctx, radicand, divideElements(ctx, Q.ONE, degree));
  const r = Q.rational(1n, n.num);
  if (n.num % 2n === 0n || isZeroRational(radicand)) return rationalPower(ctx, radicand, r);
  const sign = ctx.signs.of(radicand);
  if (isNonNegative(sign)) return rationalPower(ctx, radicand, r);
  if (isNonNegative(ctx.signs.of(negateElement(radicand)))) return negateElement(rationalPower(ctx, negateElement(radicand), r));
  if (!isRealSet(sign)) throw new Declined('needs-assumption', 'A real root needs a real number under it; state its sign as an assumption.');
  // sign(u) |u|^(1/n) for a real u of unknown sign.
  const size = absolute(ctx, radicand);
  return multiplyElements(ctx.table, divideElements(ctx, radicand, size), rationalPower(ctx, size, r));
}
