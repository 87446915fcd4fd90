/** Whether a relation is plainly meant as a truncated expansion, so that what disagrees is held against it. */
import { dependsOn, type Expression, Q, walk } from '../expression/index.ts';
import { isOneChangeAway } from './blame.ts';
import { type Claim, isTranscendental } from './claims.ts';
import type { Setting } from './context.ts';
import { halfUnit } from './decimals.ts';
import type { Judgement } from './judge.ts';
import { isGridName } from './normalise.ts';
import { reduced } from './prepared.ts';
import type { Choice } from './setting.ts';
import { compare, compareSizes, leading } from './size.ts';
import { lastSentence, SENTENCE } from './statements.ts';
import { hasMarks } from './truncated.ts';
import { accusedOf, type Place } from './verdicts.ts';

/** Judged in one setting. */
export interface Tried {
  readonly choice: Choice;
  readonly judgement: Judgement;
}

/** An equation without any mark of an expansion. */
export const isPlainEquation = (c: Claim): boolean => c.relation === '=' && !hasMarks(c.side);

export const isGridLike = (e: Expression): boolean => [...walk(e)].some((n) => n.kind === 'symbol' && isGridName(n));

/** The printed side holds f(x + h) with the variable inside. */
export const movesFunction = (side: Expression, variable: string): boolean => [...walk(side)].some((n) => n.kind === 'apply' && n.args.some((a) => dependsOn(a, variable)));

export const mentionsFunction = (e: Expression): boolean => [...walk(e)].some((n) => n.kind === 'apply' || (n.kind === 'symbol' && isGridName(n)));

/** Elsewhere than where its first terms are right, the claim says nothing: every printed term vanishes in the remainder, or all are of one size. */
export function isByChance({ hint, truncated }: Extract<Judgement, { kind: 'holds' }>, tried: readonly Tried[], { certain, setting }: Choice): boolean {
  if (certain) return false;
  // Where even the first printed term vanishes in the remainder, the point is another one, if any other serves.
  if (hint?.kind === 'absorbed') return hint.term === truncated.terms[0] || tried.some((t) => t.judgement.kind === 'fails' && t.judgement.failure.matched > 0);
  if (truncated.mark === 'O' || truncated.mark === 'o' || truncated.terms.length < 2) return false;
  const sizes = truncated.terms.map((t) => leading(setting, t.value));
  const [first] = sizes;
  const moves = truncated.terms.filter((t) => dependsOn(t.value, setting.variable)).length > 0;
  return moves && first?.kind === 'monomial' && sizes.every((s) => s.kind === 'monomial' && compareSizes(s.size, first.size) === 0) && truncated.terms.some((t) => [...walk(t.value)].some((n) => n.kind === 'power' && dependsOn(n.exponent, setting.variable)));
}

export function isNearlyTrue(given: Expression, printed: Claim, tried: Tried, place: Place): boolean {
  if (tried.judgement.kind !== 'fails') return false;
  const { f, claim } = reduced(given, printed, tried.choice.setting);
  return isOneChangeAway(accusedOf(claim, f, tried.choice.setting, tried.judgement, place));
}

export const matchedIn = (t: Tried): number => (t.judgement.kind === 'fails' ? t.judgement.failure.matched : -1);

/** The claim is plainly meant as a truncated expansion: by its mark, or by terms that agree. */
export function isHeldAgainst(claim: Claim, f: Expression, best: Tried, several: boolean, place: Place, offByConstant?: Tried): boolean {
  if (best.judgement.kind !== 'fails') return false;
  const { failure, truncated } = best.judgement;
  const count = truncated.terms.length;
  const certain = best.choice.certain;
  if (claim.relation === 'to' || claim.relation === 'define') return false;
  // In running text a tilde before one term may only say how a quantity scales.
  const oneChange = (): boolean => isOneChangeAway(accusedOf(claim, f, best.choice.setting, { failure, truncated }, place));
  if (claim.relation === 'tilde' && count === 1 && truncated.mark === 'none') return !place.formula.inline && certain && failure.matched === 0;
  if (claim.relation === 'tilde' && place.formula.inline && failure.matched === 0 && truncated.mark === 'none' && !oneChange()) return false;
  const marked = truncated.mark !== 'none';
  if (marked) return certain || failure.matched > 0 || !several || (count > 1 && isTranscendental(f, best.choice.setting.variable));
  if (!isTranscendental(f, best.choice.setting.variable)) return false;
  if (claim.relation === '=') return (count >= 2 && failure.matched >= 1) || (count >= 3 && oneChange());
  return failure.matched >= 1 || (certain && failure.difference !== null) || ((count >= 2 || isPlainPower(f, best, place)) && oneChange()) || best === offByConstant;
}

/** Words of an equation to be solved, or one value at which it holds. */
const SOLVED = /\b(?:roots?|solutions?|solv(?:e|ed|es|ing)|equations?|intersect\w*|cross\w*|zeros?|satisf\w+|fit(?:s|ted|ting)?|slope)\b|\b(?:at|for|when|where)\s+\$?\s*\\?[a-z]+\s*(?:=|\\approx|≈)\s*[\d.]*[1-9]/i;

/** One printed term, a fraction times the very power with which the function begins: no fit and no solution of an equation looks like this. */
function isPlainPower(f: Expression, { choice, judgement }: Tried, { around }: Place): boolean {
  const next = around.after.search(SENTENCE);
  if (SOLVED.test(around.before.slice(lastSentence(around.before))) || SOLVED.test(next < 0 ? around.after : around.after.slice(0, next))) return false;
  if (judgement.kind !== 'fails' || judgement.truncated.terms.length !== 1 || hasDecimals(judgement.truncated.side)) return false;
  const [own, printed] = [leading(choice.setting, f), leading(choice.setting, judgement.truncated.side)];
  if (own.kind !== 'monomial' || printed.kind !== 'monomial' || Q.isZero(own.size.power)) return false;
  return compareSizes(own.size, printed.size) === 0 && ![...walk(printed.coefficient)].some((n) => n.kind === 'constant');
}

/** The two sides are of one size on a scale of their own (exponentials, n^n), so that only a constant is wrong. */
export function isOffByConstant(setting: Setting, f: Expression, side: Expression): boolean {
  return leading(setting, f).kind === 'other' && leading(setting, side).kind === 'other' && compare(setting, f, side) === 'same';
}

export function meant(claim: Claim, f: Expression, setting: Setting): boolean {
  return hasMarks(claim.side) || (claim.relation !== '=' && isTranscendental(f, setting.variable));
}

export const hasDecimals = (side: Expression): boolean => [...walk(side)].some((n) => n.kind === 'number' && halfUnit(n) !== null);
