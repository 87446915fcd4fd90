/** The asymptotic scale: positive functions that tend to zero, ordered by speed, none comparable with a power of another. */
import { build, type Expression, Q } from '../expression/index.ts';
import { Declined } from '../outcome.ts';
import { compareMonomials, type Monomial, monomialOf } from './leading.ts';
import { type Context, exactOf, type Multi, type Scale, type ScaleElement } from './multi.ts';
import { monomial, negate } from './ring.ts';

/** The scale of powers of t alone, given the trees of t and of log(1/t). */
export function createScale(local: Expression, largeLogarithm: Expression): Scale {
  const element: ScaleElement = { rank: 0, kind: 'local', depth: 0, expression: local, logarithm: null };
  return { elements: [element], local: element, largeLogarithm };
}

function insert(scale: Scale, element: ScaleElement, position: number): void {
  scale.elements.splice(position, 0, element);
  scale.elements.forEach((e, k) => {
    e.rank = k;
  });
}

/** log of a scale element. For the slowest one this adds 1/log(1/element) to the scale. */
export function logarithmOf(c: Context, element: ScaleElement): Multi {
  if (element.logarithm) return element.logarithm;
  if (element.kind === 'formal') throw new Declined('no-expansion', 'A function is singular at the value that is being sought; name another value.');
  const depth = element.depth + 1;
  const slower: ScaleElement = {
    rank: 0,
    kind: 'logarithm',
    depth,
    expression: build.power(element.kind === 'local' ? c.scale.largeLogarithm : build.call('log', reciprocalOf(element.expression)), -1),
    logarithm: null,
  };
  insert(c.scale, slower, 0);
  element.logarithm = negate(c, monomial(c, slower, Q.MINUS_ONE));
  return element.logarithm;
}

/** The tree L of 1/L. */
const reciprocalOf = (e: Expression): Expression => (e.kind === 'power' ? e.base : build.power(e, -1));

/** The element whose logarithm is comparable with `large` (their quotient has a finite limit other than zero), if the scale holds one; and the number of elements with slower logarithms. */
export function comparable(c: Context, large: Monomial): { readonly element: ScaleElement; readonly logarithm: Monomial } | { readonly position: number } {
  for (let k = c.scale.elements.length - 1; k >= 0; k -= 1) {
    const element = c.scale.elements[k] as ScaleElement;
    if (element.kind === 'formal') continue;
    const logarithm = element.logarithm && monomialOf(c, element.logarithm);
    if (!logarithm) return { position: k + 1 };
    const order = compareMonomials(c, large, logarithm);
    if (order === 0) return { element, logarithm };
    if (order > 0) return { position: k + 1 };
  }
  return { position: 0 };
}

/** Adds a formal element above all others. */
export function insertFormal(c: Context, name: string): ScaleElement {
  const element: ScaleElement = { rank: 0, kind: 'formal', depth: 0, expression: build.symbol(name), logarithm: null };
  insert(c.scale, element, c.scale.elements.length);
  return element;
}

/** Adds exp(-size) for a positive `size` that grows without bound. */
export function insertExponential(c: Context, size: Multi, position: number): ScaleElement {
  const element: ScaleElement = {
    rank: 0,
    kind: 'exponential',
    depth: 0,
    expression: build.power(build.constant('e'), build.negation(exactOf(c, size))),
    logarithm: negate(c, size),
  };
  insert(c.scale, element, position);
  return element;
}
