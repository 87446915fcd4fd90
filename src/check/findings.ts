/** From judgements to what is shown: verdict, severity, the wrong piece, the right one. */
import { build, dependsOn, freeSymbols, mapChildren, Q, walk, type Expression, type Span } from '../expression/index.ts';
import type { Finding } from '../protocol.ts';
import { toPlain } from '../write/index.ts';
import { judgeAccuracy } from './accuracy.ts';
import { type Accused, blame, isOneChangeAway, repairOf } from './blame.ts';
import { type Claim, isTranscendental } from './claims.ts';
import { regionBeside, regionError } from './convergence.ts';
import type { PlacedFormula } from './formulas.ts';
import { halfUnit } from './decimals.ts';
import { explicitPart, type General, generalIn, judgeGeneral } from './generalClaims.ts';
import { type Hint, judge, type Judgement } from './judge.ts';
import { calibrated } from './calibrate.ts';
import { jointly } from './joint.ts';
import { isGridName, normalise, valuesAsQuantities } from './normalise.ts';
import { notationOf, writeIn } from './notation.ts';
import type { Setting } from './context.ts';
import { compare, compareSizes, leading } from './size.ts';
import { settingsFor, type Around, type Asked, type Choice } from './setting.ts';
import { lastSentence, SENTENCE, type Statement, statementAround } from './statements.ts';
import { hasMarks, withoutMarks } from './truncated.ts';

export interface Place {
  readonly text: string;
  readonly formula: PlacedFormula;
  readonly around: Around;
  /** Where the next claim of the text begins: what stands behind that belongs to it. Absent: there is none. */
  readonly until?: number;
  /** Where the claim before it ends. Absent: there is none. */
  readonly since?: number;
  /** Files that the document refers to and that could not be read. */
  readonly absent?: readonly string[];
}

export interface FindingOptions {
  /** The function is only presumed (what it is taken as, in words): nothing fails. */
  readonly lenient?: string;
  /** The function is what a name stands for elsewhere in the document: a claim fails only if its terms show that this is meant. */
  readonly resolved?: boolean;
}

/** Judged in one setting. */
interface Tried {
  readonly choice: Choice;
  readonly judgement: Judgement;
}

/**
 * The finding for one claim with its function known; null where it turns out not to be a claim (an identity, an equation to solve).
 * `lenient`: the function is only presumed, so that nothing fails.
 */
export function findingOf(claim: Claim, exact: Expression, asked: Asked, place: Place, options: FindingOptions = {}): readonly Finding[] {
  const { f: given, side } = asked.variable ? { f: exact, side: claim.side } : valuesAsQuantities(exact, claim.side);
  const printed = side === claim.side ? claim : { ...claim, side };
  const main = mainFinding(printed, given, asked, place, options);
  if (!main) return options.lenient === undefined ? fittedFinding(printed, given, asked, place) : [];
  const region = main.setting && main.finding.verdict === 'holds' && options.lenient === undefined ? regionFinding(printed, given, main.setting, place) : null;
  if (region) return [main.finding, region];
  const statement = main.setting && options.lenient === undefined ? statementOf(printed, main.setting, place) : null;
  if (statement && !statement.interval && statement.doubt === null && main.finding.verdict === 'holds') return [{ ...main.finding, reason: `${main.finding.reason} ${NO_INTERVAL}` }];
  const accuracy = main.setting && statement && accuracyFinding(statement, printed, given, main.setting, place);
  // A fitted polynomial is judged by the accuracy that is claimed for it.
  if (accuracy && accuracy.verdict !== 'undecided' && main.finding.verdict === 'fails' && main.fitted) return [accuracy];
  return accuracy ? [main.finding, accuracy] : [main.finding];
}

/** A polynomial with decimals that is no expansion: only the accuracy stated for it is judged. */
function fittedFinding(printed: Claim, given: Expression, asked: Asked, place: Place): readonly Finding[] {
  if (printed.relation === 'define' || hasMarks(printed.side) || !hasDecimals(printed.side)) return [];
  const [first] = settingsFor(given, printed.side, asked, place.around).filter((c) => isTranscendental(given, c.setting.variable));
  const statement = first && statementOf(printed, first.setting, place);
  const accuracy = statement && accuracyFinding(statement, printed, given, first.setting, place);
  return accuracy && accuracy.verdict !== 'undecided' ? [accuracy] : [];
}

const hasDecimals = (side: Expression): boolean => [...walk(side)].some((n) => n.kind === 'number' && halfUnit(n) !== null);

interface Main {
  readonly finding: Finding;
  /** Null where no setting was decided on. */
  readonly setting: Setting | null;
  /** The printed side has decimals and no remainder mark. */
  readonly fitted: boolean;
}

function mainFinding(printed: Claim, given: Expression, asked: Asked, place: Place, options: FindingOptions): Main | null {
  const only = (finding: Finding | null): Main | null => finding && { finding, setting: null, fitted: false };
  const settled = (finding: Finding | null, setting: Setting, side: Expression): Main | null => finding && { finding, setting, fitted: !hasMarks(side) && hasDecimals(side) };
  const all = settingsFor(given, printed.side, asked, place.around);
  // Where the function does not hold the quantity in which the printed side runs, one of the two names it differently.
  const choices = all.filter((c) => dependsOn(given, c.setting.variable) || isGridLike(given) || movesFunction(printed.side, c.setting.variable));
  if (choices.length === 0) return all.length > 0 && hasMarks(printed.side) ? only(undecided(printed, place, `The function does not hold ${all[0]?.setting.variable ?? 'the variable'}, in which the printed side runs.`)) : null;
  if (isPlainEquation(printed) && choices.some((c) => unknownSymbols(given, printed.side, c.setting).length > 0)) return null;
  const tried: Tried[] = [];
  let chance: (Tried & { readonly finding: () => Finding | null; readonly side: Expression }) | null = null;
  for (const choice of choices) {
    const { f, claim } = reduced(given, printed, choice.setting);
    const general = generalIn(f, claim.side, choice.setting);
    if (general) {
      const finding = generalFinding(claim, f, general, choice, place, options);
      if (finding !== 'next') return settled(finding, choice.setting, claim.side);
      continue;
    }
    const judgement = judge(f, claim.side, claim.relation, choice.setting);
    if (judgement.kind === 'identity') return null;
    if (judgement.kind === 'holds' && !isByChance(judgement, tried, choice)) return settled(holding(claim, f, choice.setting, judgement, place, options.lenient), choice.setting, claim.side);
    if (judgement.kind !== 'holds') tried.push({ choice, judgement });
    else chance ??= { choice, judgement, finding: () => holding(claim, f, choice.setting, judgement, place, options.lenient), side: claim.side };
  }
  const together = jointFinding(given, printed, choices, asked, place, options);
  if (together) return only(together);
  if (chance && !tried.some((t) => t.judgement.kind === 'fails' && t.judgement.failure.matched > 0)) return settled(chance.finding(), chance.choice.setting, chance.side);
  // A guess that fails counts only if no likelier guess is open, and if the terms show that it is the right one.
  const open = tried.findIndex((t) => t.judgement.kind === 'undecided');
  const firm = tried.findIndex((t) => t.judgement.kind === 'fails' && (t.choice.certain || t.judgement.failure.matched > 0 || (open >= 0 && isNearlyTrue(given, printed, t, place))));
  if (open >= 0 && (firm < 0 || (open < firm && tried[firm]?.choice.certain !== true))) tried.splice(0, tried.length, ...tried.slice(open, open + 1));
  else if (firm >= 0) tried.splice(0, tried.length, ...tried.slice(firm, firm + 1));
  const offByConstant = firm < 0 && open < 0 && !hasMarks(printed.side) ? tried.find((t) => isOffByConstant(t.choice.setting, given, printed.side)) : undefined;
  const best = offByConstant ?? tried.reduce<Tried | null>((a, b) => (a === null || matchedIn(b) > matchedIn(a) ? b : a), null);
  if (!best) return null;
  const { f, claim } = reduced(given, printed, best.choice.setting);
  if (best.judgement.kind === 'undecided') return meant(claim, f, best.choice.setting) ? only(undecided(claim, place, best.judgement.reason)) : null;
  if (best.judgement.kind !== 'fails') return null;
  if (!isHeldAgainst(claim, f, best, tried.length > 1, place, offByConstant)) return meant(claim, f, best.choice.setting) && hasMarks(claim.side) ? only(undecided(claim, place, 'It is not plain in which quantity, and where, this is an expansion; say so with a note such as leading-order: small x.')) : null;
  if (!best.choice.certain && (mentionsFunction(f) || mentionsFunction(claim.side))) return only(undecided(claim, place, 'In which quantity this is an expansion is not plain; say so with a note such as leading-order: small h.'));
  if (options.resolved === true && best.judgement.failure.matched === 0 && !isNearlyTrue(given, printed, best, place)) return only(undecided(claim, place, 'The definition of the left side that stands in this document does not belong to this claim, or the claim is wrong from its first term.'));
  const unknown = unknownSymbols(f, claim.side, best.choice.setting);
  if (unknown.length > 0) {
    const meaning = withConstants(f, claim, unknown, best.choice.setting);
    if (meaning?.judgement.kind === 'holds') return settled(holding(meaning.claim, f, best.choice.setting, meaning.judgement, place, options.lenient), best.choice.setting, meaning.claim.side);
    if (meaning?.judgement.kind === 'undecided') return only(undecided(claim, place, meaning.judgement.reason));
    if (meaning?.judgement.kind === 'fails' && options.lenient === undefined && meaning.left.length === 0) return only(failing(meaning.claim, f, best.choice.setting, meaning.judgement, place));
    return only(undecided(claim, place, `What ${unknown.join(', ')} stands for is not said in this document.`));
  }
  const imaginary = options.lenient === undefined ? withImaginaryUnit(f, claim) : null;
  if (imaginary) {
    const again = judge(imaginary.f, imaginary.claim.side, claim.relation, best.choice.setting);
    if (again.kind === 'holds') return settled(holding(imaginary.claim, imaginary.f, best.choice.setting, again, place, undefined), best.choice.setting, claim.side);
    return only(undecided(claim, place, 'Whether a letter here is the imaginary unit is not plain.'));
  }
  if (options.lenient !== undefined) return only(undecided(claim, place, `Taken as ${options.lenient} the claim does not hold; its definition does not stand in this document.`));
  return settled(failing(claim, f, best.choice.setting, best.judgement, place), best.choice.setting, claim.side);
}

/** The claim as one in several quantities that are small together; null where it is none, or is not plainly meant so. */
function jointFinding(given: Expression, printed: Claim, choices: readonly Choice[], asked: Asked, place: Place, options: FindingOptions): Finding | null {
  const [choice] = choices;
  if (!choice || asked.variable || asked.point || choices.some((c) => c.certain) || options.lenient !== undefined) return null;
  let repaired: Finding | null = null;
  for (const joint of jointly(given, printed, choice)) {
    const { setting } = joint.choice;
    const { f, claim } = prepared(joint.f, joint.claim, setting);
    const judgement = judge(f, claim.side, claim.relation, setting);
    if (judgement.kind === 'holds' && !isByChance(judgement, [], joint.choice)) return holding(claim, f, setting, judgement, place, undefined);
    if (judgement.kind !== 'fails' || judgement.failure.matched === 0) continue;
    const repair = repairOf(accusedOf(claim, f, setting, judgement, place));
    if (repair) repaired ??= { start: repair.place.start, end: repair.place.end, claim: claim.span, verdict: 'fails', severity: 'error', reason: repair.message, found: repair.found, fix: repair.fix, ...labelOf(place) };
  }
  return repaired;
}

const NO_INTERVAL = 'The stated accuracy is not judged, since no interval is named beside it.';

/** The tolerance stated in the sentence of the claim, or in one behind it that goes on about the error. */
function statementOf(printed: Claim, setting: Setting, { text, formula, around, since, until }: Place): Statement | null {
  const { start } = formula.span;
  const from = printed.span.end;
  const end = Math.min(text.length, Math.max(formula.span.end, from) + ACCURACY_REACH, until ?? Infinity);
  const stop = text.slice(from, end).search(OTHER_SENTENCE);
  const first = Math.max(start - around.before.length, since ?? 0);
  return statementAround({
    text,
    claim: printed.span,
    from: first >= start ? start : first + lastSentence(text.slice(first, start)),
    to: stop < 0 ? end : from + stop,
    since: since ?? null,
    until: until ?? null,
    conditions: around.conditions,
    variable: setting.variable,
    small: typeof setting.point === 'object' && setting.point.kind === 'number' && Q.isZero(setting.point.value),
  });
}

/** The verdict on a stated tolerance; null where no interval is stated. */
function accuracyFinding(statement: Statement, printed: Claim, given: Expression, setting: Setting, place: Place): Finding | null {
  const { interval, doubt } = statement;
  if (!interval) return null;
  const { f, claim } = prepared(given, printed, setting);
  const judged = judgeAccuracy(statement, interval, f, withoutMarks(claim.side), setting);
  const verdict = doubt !== null ? { kind: 'undecided' as const, reason: doubt } : judged;
  const base = { ...statement.place, claim: printed.span, found: '', fix: null, ...labelOf(place) };
  switch (verdict.kind) {
    case 'holds':
      return { ...base, verdict: 'holds', severity: 'none', reason: `Holds: the error on this interval is proved to be at most ${verdict.error}.` };
    case 'fails':
      return { ...base, verdict: 'fails', severity: 'error', reason: `The error on this interval reaches ${verdict.error}.`, found: verdict.error, fix: statement.plain ? { ...statement.place, text: statement.percent ? verdict.error.replace('%', statement.printed.includes('\\%') ? '\\%' : '%') : verdict.error } : null };
    case 'undecided':
      return { ...base, verdict: 'undecided', severity: 'hint', reason: verdict.reason };
  }
}

/** A region of convergence beside dots or an infinite sum that is larger than the disc. */
function regionFinding(printed: Claim, given: Expression, setting: Setting, place: Place): Finding | null {
  const endless = [...walk(printed.side)].some((n) => n.kind === 'dots' || (n.kind === 'indexedSum' && n.upper.kind === 'constant'));
  if (!endless || printed.relation === 'tilde') return null;
  const { end } = place.formula.span;
  const region = regionBeside(place.text, place.around.conditions, end, Math.min(end + ACCURACY_REACH, place.until ?? Infinity), setting.variable);
  const error = region && regionError(region, prepared(given, printed, setting).f, setting);
  if (!error) return null;
  const notation = notationOf(place.text.slice(place.formula.span.start, place.formula.span.end), place.formula.notation);
  const right = writeIn(notation, error.radius);
  const base = { ...error.place, claim: printed.span, verdict: 'fails' as const, severity: 'error' as const, found: right, ...labelOf(place) };
  return { ...base, reason: `${error.reason}: the radius of convergence is ${right}.`, fix: error.bound && { ...error.bound, text: right } };
}

const ACCURACY_REACH = 160;
/** The end of the paragraph, or of a sentence that the next one does not go on about. */
const OTHER_SENTENCE = /\n\s*\n|[.!?][$)\s]*\s(?=[A-Z])(?!(?:The|Its|Here the|This|It)\b[^.;]{0,40}?\b(?:errors?|accura\w+|within|correct to|precision|deviat\w+)\b)/;

/** Short writings written out, and a factor that only the printed side has fixed by the leading terms. */
function prepared(given: Expression, printed: Claim, setting: Setting): { readonly f: Expression; readonly claim: Claim } {
  const { f, side } = normalise(given, printed.side, setting.variable);
  return { f, claim: { ...printed, side: calibrated(f, side, setting) } };
}

/** As prepared; and `f = P (1 + ...)` with a P that is no power, as in Stirling's series, is judged as `f/P = 1 + ...`. */
function reduced(given: Expression, printed: Claim, setting: Setting): { readonly f: Expression; readonly claim: Claim } {
  const whole = prepared(given, printed, setting);
  const { side } = whole.claim;
  if (side.kind !== 'product') return whole;
  const sums = side.factors.filter((factor) => factor.kind === 'sum' && dependsOn(withoutMarks(factor), setting.variable));
  const [sum] = sums;
  if (!sum || sums.length !== 1) return whole;
  const front = build.product(...side.factors.filter((factor) => factor !== sum));
  if (!dependsOn(front, setting.variable) || hasMarks(front) || leading(setting, front).kind !== 'other') return whole;
  return { f: build.quotient(whole.f, front), claim: { ...whole.claim, side: sum } };
}

/** A claim with a general term: its explicit part first, then its first terms, then a proof. `next`: try the next setting. */
function generalFinding(claim: Claim, f: Expression, general: General, choice: Choice, place: Place, options: { readonly lenient?: string }): Finding | null | 'next' {
  const explicit = explicitPart(claim.side, general);
  if (explicit) {
    const judgement = judge(f, explicit, claim.relation, choice.setting);
    if (judgement.kind === 'fails') {
      if (!choice.certain && judgement.failure.matched === 0) return 'next';
      return options.lenient === undefined ? failing({ ...claim, side: explicit }, f, choice.setting, judgement, place) : undecided(claim, place, `The claim does not hold for the usual meaning of its left side, whose ${notDefined(place)}.`);
    }
  }
  const judged = judgeGeneral(f, claim.side, claim.relation, general, choice.setting);
  const base = { ...claim.span, claim: claim.span, found: '', fix: null, ...labelOf(place) };
  switch (judged.kind) {
    case 'holds':
      return { ...base, verdict: 'holds', severity: 'none', reason: 'Holds: the general term is proved for every index.' };
    case 'undecided':
      return undecided(claim, place, judged.reason);
    case 'fails':
      if (options.lenient !== undefined || !isTranscendental(f, choice.setting.variable)) return undecided(claim, place, `The claim does not hold for the usual meaning of its left side, whose ${notDefined(place)}.`);
      return { ...base, ...(judged.place ?? claim.span), verdict: 'fails', severity: 'error', reason: judged.reason };
  }
}

const notDefined = ({ absent }: Place): string => `definition does not stand in this document${orIn(absent)}`;

/** Names the files that were not reached. */
export const orIn = (absent: readonly string[] | undefined): string => (absent?.length ? `; it may stand in ${absent.slice(0, 3).join(', ')}${absent.length > 3 ? ', ...' : ''}, which could not be read` : '');

/** Symbols of the printed side that the function does not hold. */
function unknownSymbols(f: Expression, side: Expression, setting: Setting): readonly string[] {
  // How far a sum goes is no quantity of the function.
  const open = (e: Expression): Expression => (e.kind === 'indexedSum' && e.upper.kind === 'symbol' && !dependsOn(e.body, e.upper.name) ? { ...e, upper: build.constant('infinity') } : mapChildren(e, open));
  return freeSymbols(open(withoutMarks(side))).filter((name) => name !== setting.variable && !dependsOn(f, name));
}

/** i or j read as a symbol on both sides may be the imaginary unit. */
function withImaginaryUnit(f: Expression, claim: Claim): { readonly f: Expression; readonly claim: Claim } | null {
  const name = ['j', 'i'].find((n) => dependsOn(f, n) && dependsOn(claim.side, n));
  return name === undefined ? null : { f: named(f, name, build.constant('i')), claim: { ...claim, side: named(claim.side, name, build.constant('i')) } };
}

/** Letters by which the trade names constants. */
const CONSTANT_LETTERS: Readonly<Record<string, readonly Expression[]>> = {
  '\\gamma': [build.constant('eulerGamma')],
  '\\gamma_E': [build.constant('eulerGamma')],
  '\\gamma_e': [build.constant('eulerGamma')],
  C: [build.constant('eulerGamma'), build.constant('catalan')],
  G: [build.constant('catalan')],
  K: [build.constant('catalan')],
  A: [build.constant('glaisher')],
  e: [build.constant('e')],
};
const stieltjes = (name: string): Expression | null => {
  const index = /^\\gamma_(?:\{(\d+)\}|(\d))$/.exec(name);
  return index ? build.call('stieltjes', build.number(Number(index[1] ?? index[2]))) : null;
};

/** The claim with its unknown letters read as constants of the trade: the reading that agrees furthest. */
function withConstants(f: Expression, claim: Claim, unknown: readonly string[], setting: Setting): { readonly claim: Claim; readonly judgement: Judgement; readonly left: readonly string[] } | null {
  let readings: readonly (readonly [Expression, readonly string[]])[] = [[claim.side, []]];
  for (const name of unknown) {
    const values = [...(CONSTANT_LETTERS[name] ?? []), ...(stieltjes(name) ? [stieltjes(name) as Expression] : [])];
    readings = values.length === 0 ? readings.map(([side, left]) => [side, [...left, name]] as const) : readings.flatMap(([side, left]) => values.map((v) => [named(side, name, v), left] as const));
    if (readings.length > 6) return null;
  }
  let best: { readonly claim: Claim; readonly judgement: Judgement; readonly left: readonly string[] } | null = null;
  for (const [side, left] of readings) {
    if (side === claim.side) continue;
    const judgement = judge(f, side, claim.relation, setting);
    const candidate = { claim: { ...claim, side }, judgement, left };
    if (judgement.kind === 'holds') return candidate;
    if (!best || (judgement.kind === 'fails' && best.judgement.kind === 'fails' && judgement.failure.matched > best.judgement.failure.matched)) best = candidate;
  }
  return best;
}

/** The symbol replaced, places kept. */
function named(e: Expression, name: string, value: Expression): Expression {
  return e.kind === 'symbol' && e.name === name ? { ...value, ...(e.span ? { span: e.span } : {}) } : mapChildren(e, (c) => named(c, name, value));
}

/** An equation without any mark of an expansion. */
const isPlainEquation = (c: Claim): boolean => c.relation === '=' && !hasMarks(c.side);

const isGridLike = (e: Expression): boolean => [...walk(e)].some((n) => n.kind === 'symbol' && isGridName(n));
/** The printed side holds f(x + h) with the variable inside. */
const movesFunction = (side: Expression, variable: string): boolean => [...walk(side)].some((n) => n.kind === 'apply' && n.args.some((a) => dependsOn(a, variable)));
const mentionsFunction = (e: Expression): boolean => [...walk(e)].some((n) => n.kind === 'apply' || (n.kind === 'symbol' && isGridName(n)));

/** Elsewhere than where its first terms are right, the claim says nothing: every printed term vanishes in the remainder, or all are of one size. */
function isByChance({ hint, truncated }: Extract<Judgement, { kind: 'holds' }>, tried: readonly Tried[], { certain, setting }: Choice): boolean {
  if (certain) return false;
  // Where even the first printed term vanishes in the remainder, the point is another one, if any other serves.
  if (hint?.kind === 'absorbed') return hint.term === truncated.terms[0] || tried.some((t) => t.judgement.kind === 'fails' && t.judgement.failure.matched > 0);
  if (truncated.mark === 'O' || truncated.mark === 'o' || truncated.terms.length < 2) return false;
  const sizes = truncated.terms.map((t) => leading(setting, t.value));
  const [first] = sizes;
  const moves = truncated.terms.filter((t) => dependsOn(t.value, setting.variable)).length > 0;
  return moves && first?.kind === 'monomial' && sizes.every((s) => s.kind === 'monomial' && compareSizes(s.size, first.size) === 0) && truncated.terms.some((t) => [...walk(t.value)].some((n) => n.kind === 'power' && dependsOn(n.exponent, setting.variable)));
}

function isNearlyTrue(given: Expression, printed: Claim, tried: Tried, place: Place): boolean {
  if (tried.judgement.kind !== 'fails') return false;
  const { f, claim } = reduced(given, printed, tried.choice.setting);
  return isOneChangeAway(accusedOf(claim, f, tried.choice.setting, tried.judgement, place));
}

const matchedIn = (t: Tried): number => (t.judgement.kind === 'fails' ? t.judgement.failure.matched : -1);

/** The claim is plainly meant as a truncated expansion: by its mark, or by terms that agree. */
function isHeldAgainst(claim: Claim, f: Expression, best: Tried, several: boolean, place: Place, offByConstant?: Tried): boolean {
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
function isOffByConstant(setting: Setting, f: Expression, side: Expression): boolean {
  return leading(setting, f).kind === 'other' && leading(setting, side).kind === 'other' && compare(setting, f, side) === 'same';
}

function meant(claim: Claim, f: Expression, setting: Setting): boolean {
  return hasMarks(claim.side) || (claim.relation !== '=' && isTranscendental(f, setting.variable));
}

function holding(claim: Claim, f: Expression, setting: Setting, judgement: Extract<Judgement, { kind: 'holds' }>, place: Place, presumed: string | undefined): Finding | null {
  if (claim.relation === '=' && judgement.truncated.mark === 'none' && (!isTranscendental(f, setting.variable) || judgement.truncated.terms.length === 0)) return null;
  const suffix = presumed === undefined ? '' : ` (taken as ${presumed})`;
  const base = { ...claim.span, claim: claim.span, verdict: 'holds' as const, found: '', fix: null, ...labelOf(place) };
  const { hint } = judgement;
  if (!hint) return { ...base, severity: 'none', reason: `Holds: every printed term agrees with the expansion${suffix}.` };
  const { place: at, reason } = hintText(claim, hint, judgement, setting);
  return { ...base, ...at, severity: 'hint', reason: `Holds${suffix}. ${reason}` };
}

function hintText(claim: Claim, hint: Hint, judgement: Extract<Judgement, { kind: 'holds' }>, setting: Setting): { readonly place: Span; readonly reason: string } {
  const order = judgement.truncated.orders[0];
  switch (hint.kind) {
    case 'weak': {
      const power = Q.toText(hint.difference.power);
      const reached = setting.point === 'inf' || setting.point === '-inf' ? `the power -${power} of ${setting.variable}` : `the power ${power}`;
      return { place: order?.argument.span ?? claim.span, reason: `The difference is smaller than stated: it is of order ${reached}.` };
    }
    case 'absorbed':
      return { place: hint.term.node.span ?? claim.span, reason: 'This term is not larger than the stated remainder, which absorbs it.' };
    case 'approximation':
      return { place: claim.span, reason: 'The two sides are not equal; an approximation sign or a remainder is meant.' };
  }
}

function undecided(claim: Claim, place: Place, reason: string): Finding {
  return { ...claim.span, claim: claim.span, verdict: 'undecided', severity: 'hint', reason, found: '', fix: null, ...labelOf(place) };
}

export const unresolved = (claim: Claim, place: Place): Finding =>
  undecided(claim, place, `The left side ${claim.name ? toPlain(claim.name) : ''} is only a name, and its ${notDefined(place)}.`);

function failing(claim: Claim, f: Expression, setting: Setting, judgement: Extract<Judgement, { kind: 'fails' }>, place: Place): Finding {
  const found = blame(accusedOf(claim, f, setting, judgement, place));
  return { start: found.place.start, end: found.place.end, claim: claim.span, verdict: 'fails', severity: 'error', reason: found.message, found: found.found, fix: found.fix, ...labelOf(place) };
}

function accusedOf(claim: Claim, f: Expression, setting: Setting, { failure, truncated }: Pick<Extract<Judgement, { kind: 'fails' }>, 'failure' | 'truncated'>, place: Place): Accused {
  const notation = notationOf(place.text.slice(place.formula.span.start, place.formula.span.end), place.formula.notation);
  return { truth: f, relation: claim.relation, truncated, failure, setting, notation, text: place.text };
}

const labelOf = (place: Place): { readonly label?: string } => (place.formula.label === null ? {} : { label: place.formula.label });
