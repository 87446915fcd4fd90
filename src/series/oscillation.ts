/** Constants that depend on t are bounded oscillating functions: sums of products of sines and cosines of unbounded phases. */
import type { Element } from '../algebra/types.ts';
import { build, type Expression, Q } from '../expression/index.ts';
import { type Context, isRational } from './multi.ts';

export const isOscillating = (c: Context, e: Element): boolean => !isRational(e) && c.field.parameters(e).includes(c.local);

export interface OscillatingPart {
  readonly coefficient: Element;
  /** Null for the part that does not oscillate. */
  readonly factor: Expression | null;
}

/** A sum of products, each as a constant and a factor that oscillates. */
export function oscillatingParts(c: Context, e: Element): OscillatingPart[] {
  const depends = (tree: Expression): boolean => c.field.parameters(c.field.fromExpression(tree)).includes(c.local);
  const parts: OscillatingPart[] = [];
  const push = (moving: readonly Expression[], constants: readonly Expression[]): void => {
    parts.push({ coefficient: c.field.fromExpression(build.product(...constants)), factor: moving.length > 0 ? build.product(...moving) : null });
  };
  const visit = (tree: Expression, constants: readonly Expression[]): void => {
    if (!depends(tree)) return push([], [...constants, tree]);
    switch (tree.kind) {
      case 'negation':
        return visit(tree.operand, [...constants, build.number(-1)]);
      case 'sum':
        return tree.terms.forEach((t) => visit(t, constants));
      case 'quotient':
        if (depends(tree.denominator)) break;
        return visit(tree.numerator, [...constants, build.power(tree.denominator, -1)]);
      case 'product': {
        const fixed = tree.factors.filter((f) => !depends(f));
        const moving = tree.factors.filter(depends);
        const [only] = moving;
        if (moving.length === 1 && only) return visit(only, [...constants, ...fixed]);
        return push(moving, [...constants, ...fixed]);
      }
      default:
        break;
    }
    push([tree], constants);
  };
  visit(c.field.toExpression(e), []);
  return parts;
}

/** Proof that the function keeps away from zero: its constant part exceeds the sum of its amplitudes. Amplitudes are those of products of sines and cosines only. */
export function keepsFromZero(c: Context, e: Element): boolean {
  const parts = oscillatingParts(c, e);
  let constant: Element = Q.ZERO;
  let amplitude: Element = Q.ZERO;
  for (const p of parts) {
    if (p.factor === null) constant = c.field.add(constant, p.coefficient);
    else if (isProductOfWaves(p.factor)) amplitude = c.field.add(amplitude, size(c, p.coefficient));
    else return false;
  }
  return c.field.sign(c.field.subtract(size(c, constant), amplitude)) === 1;
}

const size = (c: Context, e: Element): Element => (c.field.sign(e) === -1 ? c.field.negate(e) : c.field.sign(e) === 1 || isRational(e) ? e : c.field.call('abs', [e]));

function isProductOfWaves(e: Expression): boolean {
  switch (e.kind) {
    case 'call':
      return (e.function === 'sin' || e.function === 'cos') && e.args.length === 1;
    case 'product':
      return e.factors.every(isProductOfWaves);
    case 'power':
      return e.exponent.kind === 'number' && e.exponent.value.num > 0n && e.exponent.value.den === 1n && isProductOfWaves(e.base);
    default:
      return false;
  }
}
