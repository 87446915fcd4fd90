/** Claims in several quantities that are small together: each is scaled by one and the same factor, in which the claim is then an expansion at 0. */
import { type Assumption, build, children, dependsOn, type Expression, freeSymbols, literalRational, mapChildren, Q, type Rational } from '../expression/index.ts';
import type { Claim } from './claims.ts';
import type { Choice } from './setting.ts';
import { withoutMarks } from './truncated.ts';

/** The common factor; no author writes this name. */
const FACTOR = '\\lambda_{joint}';

export interface Joint {
  readonly f: Expression;
  readonly claim: Claim;
  readonly choice: Choice;
}

/**
 * The claim with q -> s^w q for every quantity q of the printed side that has terms of its own there (x + y + x^2, but not a in a x + a^2 x^2): first with equal
 * weights, then with weights by which the lowest powers of each are of one size (\epsilon beside \theta^2). Empty where there are fewer than two such quantities,
 * or where not all symbols of the printed side are quantities of the function.
 */
export function jointly(f: Expression, claim: Claim, { setting }: Choice): readonly Joint[] {
  const kept = withoutMarks(claim.side);
  const names = freeSymbols(kept);
  if (names.length < 2 || names.some((name) => !dependsOn(f, name))) return [];
  const lowest = new Map(names.flatMap((name) => {
    const powers = ownPowers(kept, name, names);
    return powers.length > 0 ? [[name, powers.reduce((a, b) => (Q.compare(a, b) <= 0 ? a : b))] as const] : [];
  }));
  if (lowest.size < 2) return [];
  const equal = new Map([...lowest.keys()].map((name) => [name, Q.ONE]));
  const balanced = [...lowest.values()].every((p) => Q.signOf(p) > 0) ? new Map([...lowest].map(([name, p]) => [name, Q.divide(Q.ONE, p)])) : equal;
  const same = [...balanced.values()].every((w, _, [first]) => first !== undefined && Q.equal(w, first));
  return [equal, ...(same ? [] : [balanced])].map((weights) => {
    const scaled = (e: Expression): Expression => {
      const weight = e.kind === 'symbol' ? weights.get(e.name) : undefined;
      return weight ? { ...build.product(build.power(build.symbol(FACTOR), weight), e), ...(e.span ? { span: e.span } : {}) } : mapChildren(e, scaled);
    };
    const positive: Assumption = { kind: 'relation', left: build.symbol(setting.variable), relation: '>', right: build.number(0) };
    return { f: scaled(f), claim: { ...claim, side: scaled(claim.side) }, choice: { certain: false, setting: { ...setting, variable: FACTOR, point: build.number(0), side: 'right', assumptions: [...setting.assumptions, positive] } } };
  });
}

/** Powers of the symbol in terms, or in members of sums inside terms, in which it stands without the others and outside of functions. */
function ownPowers(e: Expression, name: string, all: readonly string[]): readonly Rational[] {
  if (!dependsOn(e, name)) return [];
  const moves = (part: Expression): boolean => all.some((other) => dependsOn(part, other));
  switch (e.kind) {
    case 'symbol':
      return [Q.ONE];
    case 'sum':
    case 'negation':
      return children(e).flatMap((c) => ownPowers(c, name, all));
    case 'product': {
      const [only, ...more] = e.factors.filter(moves);
      return only && more.length === 0 ? ownPowers(only, name, all) : [];
    }
    case 'quotient':
      if (!moves(e.denominator)) return ownPowers(e.numerator, name, all);
      return moves(e.numerator) ? [] : ownPowers(e.denominator, name, all).map((p) => Q.negate(p));
    case 'power': {
      const exponent = literalRational(e.exponent);
      return exponent ? ownPowers(e.base, name, all).map((p) => Q.multiply(p, exponent)) : [];
    }
    default:
      return [];
  }
}
