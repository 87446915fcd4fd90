/** From judgements to what is shown: verdict, severity, the wrong piece, the right one. */
import { build, dependsOn, type Expression } from '../expression/index.ts';
import type { Finding } from '../protocol.ts';
import { accuracyFinding, NO_INTERVAL, regionFinding, statementOf } from './beside.ts';
import { repairOf } from './blame.ts';
import { type Claim, isTranscendental } from './claims.ts';
import type { Setting } from './context.ts';
import { explicitPart, type General, generalIn, judgeGeneral } from './generalClaims.ts';
import { inPairs, jointly, pointBeside, speaksOfSeveral } from './joint.ts';
import { judge } from './judge.ts';
import { unknownSymbols, withConstants, withImaginaryUnit } from './letters.ts';
import { hasDecimals, isByChance, isGridLike, isHeldAgainst, isNearlyTrue, isOffByConstant, isPlainEquation, matchedIn, meant, mentionsFunction, movesFunction, type Tried } from './meant.ts';
import { valuesAsQuantities } from './normalise.ts';
import { prepared, reduced } from './prepared.ts';
import { type Asked, type Choice, settingsFor } from './setting.ts';
import { displacedArguments } from './severalArguments.ts';
import { hasMarks } from './truncated.ts';
import { accusedOf, failing, holding, labelOf, notDefined, type Place, undecided } from './verdicts.ts';

export interface FindingOptions {
  /** The function is only presumed (what it is taken as, in words): nothing fails. */
  readonly lenient?: string;
  /** The function is what a name stands for elsewhere in the document: a claim fails only if its terms show that this is meant. */
  readonly resolved?: boolean;
}

/**
 * The finding for one claim with its function known; null where it turns out not to be a claim (an identity, an equation to solve).
 * `lenient`: the function is only presumed, so that nothing fails.
 */
export function findingOf(claim: Claim, exact: Expression, asked: Asked, place: Place, options: FindingOptions = {}): readonly Finding[] {
  const displaced = displacedArguments(exact, claim.side);
  const [step, ...more] = displaced?.steps ?? [];
  const { f: given, side } = displaced ?? (asked.variable ? { f: exact, side: claim.side } : valuesAsQuantities(exact, claim.side));
  const printed = side === claim.side ? claim : { ...claim, side };
  if (step !== undefined && more.length === 0 && !asked.variable) return claimFindings(printed, given, { ...asked, variable: build.symbol(step), point: asked.point ?? build.number(0) }, place, options);
  return claimFindings(printed, given, asked, place, options);
}

function claimFindings(printed: Claim, given: Expression, asked: Asked, place: Place, options: FindingOptions): readonly Finding[] {
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
  const held = isHeldAgainst(claim, f, best, tried.length > 1, place, offByConstant);
  const pairs = best.choice.certain || options.lenient !== undefined ? null : trueInPairs(given, printed, best.choice, place);
  if (!held && pairs && meant(claim, f, best.choice.setting)) return only(pairs);
  if (!held) return meant(claim, f, best.choice.setting) && hasMarks(claim.side) ? only(undecided(claim, place, 'It is not plain in which quantity, and where, this is an expansion; say so with a note such as leading-order: small x.')) : null;
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
  if (pairs) return only(undecided(claim, place, 'It is not plain in which quantity, and where, this is an expansion; say so with a note such as leading-order: small x.'));
  return settled(failing(claim, f, best.choice.setting, best.judgement, place), best.choice.setting, claim.side);
}

/** What is said where the claim is true with two of its quantities small that the text does not name; null where it is not, or states an order. */
function trueInPairs(given: Expression, printed: Claim, choice: Choice, place: Place): Finding | null {
  if (printed.relation === '=' || hasMarks(printed.side)) return null;
  for (const joint of inPairs(given, printed, choice)) {
    const { f, claim } = prepared(joint.f, joint.claim, joint.choice.setting);
    const judgement = judge(f, claim.side, claim.relation, joint.choice.setting);
    if (judgement.kind === 'holds' && !isByChance(judgement, [], joint.choice)) return holding(claim, f, joint.choice.setting, judgement, place, undefined);
  }
  return null;
}

/** The claim as one in several quantities that are small together; null where it is none, or is not plainly meant so. */
function jointFinding(given: Expression, printed: Claim, choices: readonly Choice[], asked: Asked, place: Place, options: FindingOptions): Finding | null {
  const [choice] = choices;
  const displaced = displacedArguments(given, printed.side);
  if (!choice || asked.variable || asked.point || (choices.some((c) => c.certain) && !speaksOfSeveral(printed.side, place.around) && !displaced) || options.lenient !== undefined) return null;
  let repaired: Finding | null = null;
  let open: Finding | null = null;
  const said = pointBeside(place.around);
  const certain = said !== null || displaced !== null;
  for (const joint of jointly(given, printed, choice, said)) {
    const { setting } = joint.choice;
    const { f, claim } = prepared(joint.f, joint.claim, setting);
    const judgement = judge(f, claim.side, claim.relation, setting);
    if (judgement.kind === 'holds' && !isByChance(judgement, [], joint.choice)) return holding(claim, f, setting, judgement, place, undefined);
    if (judgement.kind === 'undecided') open ??= undecided(claim, place, judgement.reason);
    if (judgement.kind !== 'fails' || (judgement.failure.matched === 0 && !certain)) continue;
    const repair = repairOf(accusedOf(claim, f, setting, judgement, place));
    if (repair) repaired ??= { start: repair.place.start, end: repair.place.end, claim: claim.span, verdict: 'fails', severity: 'error', reason: repair.message, found: repair.found, fix: repair.fix, ...labelOf(place) };
    // What is beside a displaced function of several arguments, or beside a named point, is meant as its expansion.
    else if (certain) repaired ??= { ...(claim.side.span ?? claim.span), claim: claim.span, verdict: 'fails', severity: 'error', reason: 'The two sides differ by more than the claim allows.', found: '', fix: null, ...labelOf(place) };
  }
  return repaired ?? open;
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
