/** Claims in several quantities that are small together: each is scaled by one and the same factor, in which the claim is then an expansion at 0. */
import { type Assumption, build, children, dependsOn, type Expression, freeSymbols, literalRational, mapChildren, Q, type Rational, sameExpression, type SumNode } from '../expression/index.ts';
import { readExact } from '../read/index.ts';
import type { Claim } from './claims.ts';
import { type Around, type Choice, shiftIn, twoTermZero } from './setting.ts';
import { displacedArguments } from './severalArguments.ts';
import { lastSentence, SENTENCE } from './statements.ts';
import { withoutMarks } from './truncated.ts';

/** The common factor; no author writes this name. */
const FACTOR = '\\lambda_{joint}';

export interface Joint {
  readonly f: Expression;
  readonly claim: Claim;
  readonly choice: Choice;
}

/**
 * The claim with q -> b + s^w (q - b) for every quantity q of the printed side that has terms of its own there (x + y + x^2, but not a in a x + a^2 x^2), b being
 * the number about which the printed side runs (2 + (x - 1)/2 + y: x about 1, y about 0): first with equal weights, then with weights by which the lowest powers of
 * each are of one size (\epsilon beside \theta^2). Empty where there are fewer than two such quantities, or where not all symbols of the printed side are
 * quantities of the function. `said`: the point that the text names, in the alphabetical order of the quantities.
 */
export function jointly(f: Expression, claim: Claim, { setting }: Choice, said: readonly Expression[] | null): readonly Joint[] {
  const displaced = displacedArguments(f, claim.side);
  if (displaced) return [scaledBy(new Map(displaced.steps.map((name) => [name, Q.ONE])), new Map(), displaced.f, { ...claim, side: displaced.side }, setting)];
  const kept = withoutMarks(claim.side);
  const names = freeSymbols(kept);
  if (names.length < 2 || names.some((name) => !dependsOn(f, name))) return [];
  const all = [...new Set([...freeSymbols(f), ...names])].sort();
  if (said && said.length === all.length) {
    const places = new Map(all.map((name, i) => [name, said[i] ?? build.number(0)]));
    return [scaledBy(new Map(all.map((name) => [name, Q.ONE])), new Map([...places].filter(([, value]) => isNumberOtherThanZero(value))), f, claim, setting)];
  }
  const bases = basesOf(kept, names);
  const local = displacements(kept, bases);
  const lowest = new Map(names.flatMap((name) => {
    const powers = ownPowers(local, name, names);
    return powers.length > 0 ? [[name, powers.reduce((a, b) => (Q.compare(a, b) <= 0 ? a : b))] as const] : [];
  }));
  if (lowest.size < 2) return [];
  const equal = new Map([...lowest.keys()].map((name) => [name, Q.ONE]));
  const balanced = [...lowest.values()].every((p) => Q.signOf(p) > 0) ? new Map([...lowest].map(([name, p]) => [name, Q.divide(Q.ONE, p)])) : equal;
  const same = [...balanced.values()].every((w, _, [first]) => first !== undefined && Q.equal(w, first));
  return [equal, ...(same ? [] : [balanced])].map((weights) => scaledBy(weights, bases, f, claim, setting));
}

/** The claim read with the product terms of two quantities as small as they are: \phi + \omega t \cos\phi is true of sin(\omega t + \phi) where \phi and t are small. */
export function inPairs(f: Expression, claim: Claim, { setting }: Choice): readonly Joint[] {
  const kept = withoutMarks(claim.side);
  const names = freeSymbols(kept);
  if (names.length < 2 || names.length > 4 || names.some((name) => !dependsOn(f, name))) return [];
  const bases = basesOf(kept, names);
  const own = names.filter((name) => ownPowers(kept, name, names).length > 0);
  const pairs = own.flatMap((name) => names.filter((other) => other !== name && !own.includes(other)).map((other) => [name, other]));
  return pairs.map((pair) => scaledBy(new Map(pair.map((name) => [name, Q.ONE])), bases, f, claim, setting));
}

/** The numbers of `near (1, 0)`; null where no such point stands beside. */
export function pointBeside({ before, after }: Around): readonly Expression[] | null {
  const NEAR = /\b(?:near|around|about|at)\s+(?:the\s+point\s+)?\$?(?:\([^()]*\)\s*=\s*)?\\?(?:left)?\(([^()]*,[^()]*)\\?(?:right)?\)/i;
  const next = after.search(SENTENCE);
  const found = NEAR.exec(next < 0 ? after : after.slice(0, next)) ?? NEAR.exec(before.slice(lastSentence(before)));
  if (!found?.[1]) return null;
  const values = found[1].split(',').map((piece) => readExact(piece.trim())).map((read) => (read.ok && freeSymbols(read.value).length === 0 ? read.value : null));
  const known = values.filter((value) => value !== null);
  return known.length === values.length ? known : null;
}

/** The text names a place for more than one of the quantities: `x \to 1, y \to 0`, `near (1, 0)`. */
export function speaksOfSeveral(side: Expression, around: Around): boolean {
  const named = new Set(around.conditions.flatMap((c) => (c.kind === 'relation' && c.sides[0]?.kind === 'symbol' && c.relations.some((r) => r === 'to' || r === 'll' || r === 'about' || r === '<') && dependsOn(side, c.sides[0].name) ? [c.sides[0].name] : [])));
  return named.size > 1 || pointBeside(around) !== null;
}

function scaledBy(weights: ReadonlyMap<string, Rational>, bases: ReadonlyMap<string, Expression>, f: Expression, claim: Claim, setting: Choice['setting']): Joint {
  const scaled = (e: Expression): Expression => {
    const shifted = e.kind === 'sum' ? displacementOf(e, bases) : null;
    const name = shifted ?? (e.kind === 'symbol' ? e.name : null);
    const weight = name === null ? undefined : weights.get(name);
    if (name === null || !weight) return mapChildren(e, scaled);
    const factor = build.power(build.symbol(FACTOR), weight);
    const base = shifted === null ? bases.get(name) : undefined;
    const moved = base ? build.sum(base, build.product(factor, build.difference(e, base))) : build.product(factor, e);
    return { ...moved, ...(e.span ? { span: e.span } : {}) };
  };
  const signs = [...weights.keys()].filter((name) => name !== setting.variable && bases.has(name));
  const assumptions: readonly Assumption[] = setting.assumptions.filter((a) => !(a.kind === 'relation' && a.left.kind === 'symbol' && signs.includes(a.left.name)));
  const positive: readonly Assumption[] = bases.has(setting.variable) ? [] : [{ kind: 'relation', left: build.symbol(setting.variable), relation: '>', right: build.number(0) }];
  return { f: scaled(f), claim: { ...claim, side: scaled(claim.side) }, choice: { certain: false, setting: { ...setting, variable: FACTOR, point: build.number(0), side: 'right', assumptions: [...assumptions, ...positive] } } };
}

/** The numbers b of quantities q of which the side holds q - b, other than 0. */
function basesOf(side: Expression, names: readonly string[]): ReadonlyMap<string, Expression> {
  const out = new Map<string, Expression>();
  for (const name of names) {
    const shift = shiftIn(side, name);
    if (shift && isNumberOtherThanZero(shift)) out.set(name, shift);
  }
  return out;
}

const isNumberOtherThanZero = (e: Expression): boolean => freeSymbols(e).length === 0 && !(e.kind === 'number' && Q.isZero(e.value));

/** The quantity of which the sum is the distance from its base: x in x - 1. */
function displacementOf(e: SumNode, bases: ReadonlyMap<string, Expression>): string | null {
  for (const [name, base] of bases) {
    const zero = twoTermZero(e, name);
    if (zero && sameExpression(zero, base) && e.terms[0]?.kind === 'symbol') return name;
  }
  return null;
}

/** The side with x for x - 1. */
function displacements(e: Expression, bases: ReadonlyMap<string, Expression>): Expression {
  const name = e.kind === 'sum' ? displacementOf(e, bases) : null;
  return name === null ? mapChildren(e, (c) => displacements(c, bases)) : build.symbol(name);
}

/** Letters for parameters, by common practice. */
const PARAMETER = /^(?:[abcmnpqA-Z]|\\(?:alpha|beta|gamma|lambda|omega|kappa|mu|nu|sigma))(?:_.*)?$/;

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
      const moving = e.factors.filter(moves);
      // n x, \omega t: what the trade keeps for parameters counts as a coefficient beside another quantity.
      const [only, ...more] = moving.length > 1 ? moving.filter((factor) => !PARAMETER.test(factor.kind === 'symbol' ? factor.name : '')) : moving;
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
