/** Functions of two quantities x and t that are a power of x times a function of t x^(-g). */
import type { Element, Field } from '../../algebra/types.ts';
import { build, dependsOn, type Expression, Q } from '../../expression/index.ts';

/** x^degree times the tree, in which u = t x^(-g) goes by the name of t. */
export interface Scaled {
  readonly tree: Expression;
  readonly degree: Element;
}

interface Names {
  readonly field: Field;
  readonly x: string;
  readonly v: string;
}

const exponentOf = (e: Expression): Expression | undefined => (e.kind === 'power' && e.base.kind === 'constant' && e.base.name === 'e' ? e.exponent : undefined);
const same = (field: Field, a: Element, b: Element): boolean => field.isZero(field.subtract(a, b)) === 'yes';

/** The tree in u for a given g; null where it is not homogeneous. */
function scaledBy(n: Names, e: Expression, g: Element): Scaled | null {
  const { field } = n;
  if (!dependsOn(e, n.x) && !dependsOn(e, n.v)) return { tree: e, degree: Q.ZERO };
  const unmoved = (arguments_: readonly Expression[]): Expression[] | null => {
    const inner = arguments_.map((a) => scaledBy(n, a, g));
    return inner.every((a) => a !== null && field.isZero(a.degree) === 'yes') ? inner.map((a) => (a as Scaled).tree) : null;
  };
  const exponent = exponentOf(e);
  if (exponent) {
    const inner = unmoved([exponent]);
    return inner && { tree: build.power(build.constant('e'), inner[0] as Expression), degree: Q.ZERO };
  }
  switch (e.kind) {
    case 'symbol':
      return e.name === n.x ? { tree: build.number(1), degree: Q.ONE } : { tree: e, degree: g };
    case 'negation': {
      const inner = scaledBy(n, e.operand, g);
      return inner && { ...inner, tree: build.negation(inner.tree) };
    }
    case 'sum': {
      const terms = e.terms.map((t) => scaledBy(n, t, g));
      const [first] = terms;
      if (!first || !terms.every((t) => t !== null && same(field, t.degree, first.degree))) return null;
      return { tree: build.sum(...terms.map((t) => (t as Scaled).tree)), degree: first.degree };
    }
    case 'product': {
      const factors = e.factors.map((f) => scaledBy(n, f, g));
      if (!factors.every((f) => f !== null)) return null;
      return { tree: build.product(...factors.map((f) => f.tree)), degree: factors.reduce<Element>((sum, f) => field.add(sum, f.degree), Q.ZERO) };
    }
    case 'quotient': {
      const [above, below] = [scaledBy(n, e.numerator, g), scaledBy(n, e.denominator, g)];
      return above && below && { tree: build.quotient(above.tree, below.tree), degree: field.subtract(above.degree, below.degree) };
    }
    case 'power': {
      if (dependsOn(e.exponent, n.x) || dependsOn(e.exponent, n.v)) return null;
      const base = scaledBy(n, e.base, g);
      return base && { tree: build.power(base.tree, e.exponent), degree: field.multiply(base.degree, field.fromExpression(e.exponent)) };
    }
    case 'root': {
      const base = dependsOn(e.degree, n.x) || dependsOn(e.degree, n.v) ? null : scaledBy(n, e.radicand, g);
      return base && { tree: { ...e, radicand: base.tree }, degree: field.divide(base.degree, field.fromExpression(e.degree)) };
    }
    case 'call': {
      const inner = unmoved(e.args);
      return inner && { tree: build.call(e.function, ...inner), degree: Q.ZERO };
    }
    default:
      return null;
  }
}

/** c x^a t^p as a and p; null for others. */
function sizes(n: Names, e: Expression): { readonly a: Element; readonly p: Element } | null {
  // A monomial scales for every g: its degree a + g p at two values of g.
  const [first, second] = [scaledBy(n, e, Q.ZERO), scaledBy(n, e, Q.ONE)];
  return first && second && { a: first.degree, p: n.field.subtract(second.degree, first.degree) };
}

/** The ratio of powers that a part of the tree demands. */
function demanded(n: Names, e: Expression): Element | null {
  const { field } = n;
  if (!dependsOn(e, n.x) || !dependsOn(e, n.v)) return null;
  const exponent = exponentOf(e);
  const ratio = (a: Element, p: Element): Element | null => (field.isZero(p) === 'no' ? field.negate(field.divide(a, p)) : null);
  const inner = exponent ? [exponent] : e.kind === 'call' ? e.args : null;
  if (inner) {
    for (const argument of inner) {
      const size = dependsOn(argument, n.x) && dependsOn(argument, n.v) ? sizes(n, argument) : null;
      const found = size ? ratio(size.a, size.p) : demanded(n, argument);
      if (found) return found;
    }
    return null;
  }
  if (e.kind === 'sum') {
    const all = e.terms.map((t) => sizes(n, t));
    const [first] = all;
    for (const other of all) {
      const found = first && other ? ratio(field.subtract(first.a, other.a), field.subtract(first.p, other.p)) : null;
      if (found) return found;
    }
  }
  const parts = e.kind === 'sum' ? e.terms : e.kind === 'product' ? e.factors : e.kind === 'negation' ? [e.operand] : e.kind === 'quotient' ? [e.numerator, e.denominator] : e.kind === 'power' ? [e.base] : e.kind === 'root' ? [e.radicand] : [];
  for (const part of parts) {
    const found = demanded(n, part);
    if (found) return found;
  }
  return null;
}

/** The tree as x^degree h(t x^(-g)) with the g that it demands; null where there is none. */
export function homogeneous(field: Field, e: Expression, x: string, v: string): (Scaled & { readonly g: Element }) | null {
  const names: Names = { field, x, v };
  const g = demanded(names, e);
  const found = g && scaledBy(names, e, g);
  return g && found && { ...found, g };
}
