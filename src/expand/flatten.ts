/** The terms of a multiseries one after the other, in decreasing size. */
import type { Element } from '../algebra/types.ts';
import { build, type Expression, freeSymbols, Q } from '../expression/index.ts';
import { Declined } from '../outcome.ts';
import { addElements, type Context, exactOf, isOscillating, isRational, type Multi, negateElement, nextTerm, nextTermOrOrder, oscillatingParts, plainText, type ScaleElement, Series } from '../series/index.ts';

/** One monomial: coefficient * t^power * L^log * product of element^exponent * oscillation. With `order` only its size is known. */
export interface RawTerm {
  readonly coefficient: Element;
  readonly power: Element;
  /** Exponent of log(1/t), if it is an integer; others are among the factors. */
  readonly log: number;
  readonly factors: readonly { readonly element: ScaleElement; readonly exponent: Element }[];
  /** Bounded oscillating factor as a tree in the context's symbol. */
  readonly oscillation: Expression | null;
  readonly order: boolean;
}

type Factor = RawTerm['factors'][number];

export function* rawTerms(c: Context, m: Multi, outer: readonly Factor[] = []): Generator<RawTerm> {
  if (!(m instanceof Series)) {
    if (!isCertainlyZero(c, m)) yield* constantTerms(c, m, outer);
    return;
  }
  for (let k = 0; ; k += 1) {
    const lead = nextTermOrOrder(c, m, k, true);
    if (!lead) return;
    k = lead.index;
    const factors = [...outer, { element: m.element, exponent: lead.exponent }];
    if (lead.order) {
      yield { ...shapeOf(c, factors, lead.coefficient), order: true };
      return;
    }
    let truncated = false;
    for (const term of rawTerms(c, lead.coefficient, factors)) {
      truncated ||= term.order;
      yield term;
    }
    if (truncated) return;
  }
}

/** A coefficient in parameters that could not be compared with zero is shown as a term, with what was taken for granted. */
function isCertainlyZero(c: Context, e: Element): boolean {
  if (isRational(e)) return e.num === 0n;
  const truth = c.field.isZero(e);
  if (truth === 'undecided') {
    const tree = c.field.toExpression(e);
    // Nothing can be assumed of a number: it is zero or it is not.
    if (freeSymbols(tree).length === 0) throw new Declined('undecided', 'It could not be decided whether a coefficient is zero; simplify the formula.');
    c.notes.assumptions.add(`${plainText(tree)} != 0`);
  }
  return truth === 'yes';
}

function* constantTerms(c: Context, e: Element, outer: readonly Factor[]): Generator<RawTerm> {
  const shape = shapeOf(c, outer, Q.ONE);
  if (!isOscillating(c, e)) {
    yield { ...shape, coefficient: e, order: false };
    return;
  }
  for (const part of oscillatingParts(c, e)) yield { ...shape, coefficient: part.coefficient, oscillation: part.factor, order: false };
}

/** Sorts scale elements into the power of t, the power of L and the rest. The bound of an O-term adds its own slower factors. */
function shapeOf(c: Context, outer: readonly Factor[], bound: Multi): Omit<RawTerm, 'order'> {
  const all = [...outer];
  for (let rest: Multi = bound; rest instanceof Series; ) {
    const lead = nextTerm(c, rest, 0);
    if (!lead) break;
    all.push({ element: rest.element, exponent: lead.exponent });
    rest = lead.coefficient;
  }
  let power: Element = Q.ZERO;
  let log = 0;
  const factors: Factor[] = [];
  for (const f of all) {
    if (isRational(f.exponent) && f.exponent.num === 0n) continue;
    if (f.element.kind === 'local') power = addElements(c, power, f.exponent);
    else if (f.element.kind === 'logarithm' && f.element.depth === 1 && isRational(f.exponent) && f.exponent.den === 1n) log -= Number(f.exponent.num);
    else factors.push(f);
  }
  return { coefficient: Q.ONE, power, log, factors, oscillation: null };
}

/** The product of the factors as a tree in the context's symbol; null for none. */
export function factorTree(c: Context, factors: readonly Factor[]): Expression | null {
  if (factors.length === 0) return null;
  return build.product(...factors.map((f) => factorPower(c, f)));
}

function factorPower(c: Context, f: Factor): Expression {
  const { expression } = f.element;
  if (f.element.kind === 'exponential' && expression.kind === 'power') {
    const exponent = build.product(exactOf(c, f.exponent), expression.exponent);
    return build.power(build.constant('e'), tidy(c, exponent));
  }
  if (f.element.kind === 'logarithm' && expression.kind === 'power') {
    const up = negateElement(c, f.exponent);
    return isRational(up) && up.num === 1n && up.den === 1n ? expression.base : build.power(expression.base, exactOf(c, up));
  }
  return build.power(expression, exactOf(c, f.exponent));
}

/** The field's normal form where it has one. */
function tidy(c: Context, e: Expression): Expression {
  try {
    return c.field.toExpression(c.field.fromExpression(e));
  } catch (error) {
    if (error instanceof Declined) return e;
    throw error;
  }
}
