/** Coefficients of a function of the unknown around a value, as multiseries in t. */
import { build, dependsOn, type Expression, Q } from '../../expression/index.ts';
import { Declined } from '../../outcome.ts';
import { add, insertFormal, isRational, monomial, type Multi, type ScaleElement, Series } from '../../series/index.ts';
import { evaluate } from '../evaluate.ts';
import { bind } from '../session.ts';
import type { OpenSide } from '../open-side.ts';

/** F(t, unknown) on one side of the point. */
export interface Curve {
  readonly side: OpenSide;
  /** In the side's symbol and the unknown; its zeros are sought. */
  readonly tree: Expression;
  readonly unknown: string;
  /** A quantity smaller than everything else: the distance from the approximation. */
  readonly offset: ScaleElement;
}

export function openCurve(side: OpenSide, tree: Expression, unknown: string): Curve {
  return { side, tree, unknown, offset: insertFormal(side.context, "offset'") };
}

export interface Taylor {
  /** Of offset^0, offset^1, ...; absent powers are zero. */
  readonly coefficients: readonly Multi[];
  /** True where no further coefficient exists: F is a polynomial in the unknown. */
  readonly complete: boolean;
}

/** The first coefficients of F(t, base + offset) in powers of the offset, up to offset^most. */
export function taylorAt(curve: Curve, base: Multi, most: number): Taylor {
  const { context: c, session } = curve.side;
  const value = add(c, base, monomial(c, curve.offset, Q.ONE));
  const f = evaluate(bind(session, [[curve.unknown, value]]), curve.tree);
  if (!(f instanceof Series) || f.element !== curve.offset) return { coefficients: [f], complete: true };
  const coefficients: Multi[] = [];
  for (let k = 0; ; k += 1) {
    const term = f.stream.at(k);
    if (!term) return { coefficients, complete: true };
    const { exponent } = term;
    if (!isRational(exponent) || exponent.den !== 1n || exponent.num < 0n) throw new Declined('no-expansion', 'The equation is singular at the value of the unknown; name another value.');
    const power = Number(exponent.num);
    if (power > most) return { coefficients, complete: false };
    while (coefficients.length < power) coefficients.push(Q.ZERO);
    coefficients[power] = term.coefficient;
  }
}

/** A(y) and B(t) with A = B where F = 0: F = A - B, or F = A1 B1 - A2 B2; null where unknown and variable are mixed otherwise. */
export function separate(curve: Curve): { readonly left: Expression; readonly right: Expression } | null {
  const terms: Expression[] = [];
  const visit = (e: Expression, negative: boolean): void => {
    if (e.kind === 'sum') e.terms.forEach((t) => visit(t, negative));
    else if (e.kind === 'negation') visit(e.operand, !negative);
    else terms.push(negative ? build.negation(e) : e);
  };
  visit(curve.tree, false);
  const symbol = curve.side.context.local;
  const mixed = terms.some((t) => dependsOn(t, curve.unknown) && dependsOn(t, symbol));
  if (mixed) return terms.length === 2 ? separatedQuotient(curve, terms) : null;
  return { left: build.sum(...terms.filter((t) => dependsOn(t, curve.unknown))), right: build.sum(...terms.filter((t) => !dependsOn(t, curve.unknown)).map(build.negation)) };
}

/** a(y) b(t) + c(y) d(t) = 0 as a/c = -d/b. */
function separatedQuotient(curve: Curve, terms: readonly Expression[]): { readonly left: Expression; readonly right: Expression } | null {
  const symbol = curve.side.context.local;
  const split = (e: Expression): { readonly own: Expression[]; readonly other: Expression[] } | null => {
    if (e.kind === 'product' || e.kind === 'negation') {
      const parts = (e.kind === 'product' ? e.factors : [build.number(-1), e.operand]).map(split);
      return parts.every((p) => p !== null) ? { own: parts.flatMap((p) => p.own), other: parts.flatMap((p) => p.other) } : null;
    }
    if (e.kind === 'quotient') {
      const [above, below] = [split(e.numerator), split(e.denominator)];
      const inverse = (list: readonly Expression[]): Expression[] => list.map((x) => build.power(x, -1));
      return above && below ? { own: [...above.own, ...inverse(below.own)], other: [...above.other, ...inverse(below.other)] } : null;
    }
    if (!dependsOn(e, curve.unknown)) return { own: [], other: [e] };
    return dependsOn(e, symbol) ? null : { own: [e], other: [] };
  };
  const [first, second] = terms.map(split);
  if (!first || !second) return null;
  return {
    left: build.product(...first.own, ...second.own.map((x) => build.power(x, -1))),
    right: build.product(build.number(-1), ...second.other, ...first.other.map((x) => build.power(x, -1))),
  };
}
