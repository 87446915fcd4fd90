/** The door of check/: claims in a document or a single formula, judged. */
import type { Assumption, Expression, RelationNode } from '../expression/index.ts';
import { attempt, type Budget, type Outcome, success } from '../outcome.ts';
import { missingFiles } from '../companions.ts';
import type { CompanionFile, Finding } from '../protocol.ts';
import { type Formula, macrosOf, readNotes, settingsAt } from '../read/index.ts';
import { firstFrom, lastUpTo } from './ascending.ts';
import { readAsked, readGiven, withNote } from './asked.ts';
import { branchFindings, type BranchReader } from './branches.ts';
import { type Claim, claimsOf } from './claims.ts';
import { type Definitions, definitionsOf, resolve } from './definitions.ts';
import { type FoundFormula, formulasOf } from './formulas.ts';
import { type CheckMemory, macrosUsed, signatureOf } from './memory.ts';
import { checkClaim, wordOf } from './named.ts';
import { remarkFinding, remarksIn } from './remarks.ts';
import { lastSentence, SENTENCE } from './statements.ts';
import { remembered, share, withinTime } from './time.ts';
import { hasMarks } from './truncated.ts';
import { orIn, type Place } from './verdicts.ts';

export { CheckMemory } from './memory.ts';

export interface CheckParts {
  readonly text: string;
  readonly language: string;
  readonly fileName?: string;
  /** As a request names them; absent: found from the text. */
  readonly variable?: string;
  readonly point?: string;
  readonly side?: 'both' | 'right' | 'left';
  /** The function, where the text holds only its expansion: a formula, an equation that defines it, `derivative of ...`. */
  readonly of?: string;
  readonly assumptions?: readonly Assumption[];
  /** Reads the series branches of a program; without it only comments are looked at. */
  readonly code?: BranchReader;
  /** Files that the document refers to: their macros and definitions are known. */
  readonly files?: readonly CompanionFile[];
  /** Verdicts of earlier checks; with it only what an edit touches is judged again. */
  readonly memory?: CheckMemory;
}

export interface Checked {
  readonly findings: readonly Finding[];
  readonly unread: readonly { readonly start: number; readonly end: number; readonly reason: string }[];
}

/**
 * Every claim of the text with its verdict, in order. What cannot be read is listed as unread and never fails. Fails with `bad-request` for a variable, point or
 * function that cannot be read. Claims that the time does not reach are undecided with that reason.
 */
export function check(parts: CheckParts, budget: Budget): Outcome<Checked> {
  return attempt(() => {
    const steps = checking(parts, budget);
    for (;;) {
      const step = steps.next();
      if (step.done) return step.value;
    }
  });
}

/** The same in steps of one formula each; between them `pause` may let other work through, or throw to give up. */
export async function checkInSteps(parts: CheckParts, budget: Budget, pause: () => Promise<void>): Promise<Outcome<Checked>> {
  const steps = checking(parts, budget);
  for (;;) {
    const step = attempt(() => steps.next());
    if (!step.ok) return step;
    if (step.value.done) return success(step.value.value);
    await pause();
  }
}

function* checking(parts: CheckParts, budget: Budget): Generator<void, Checked> {
  const asked = readAsked(parts, budget);
  const given = parts.of === undefined ? null : readGiven(parts.of, asked.variable);
  const files = parts.files ?? [];
  const options = { macros: macrosOf(files.map((f) => f.text)), ...(parts.memory ? { memory: parts.memory } : {}), ...(parts.fileName === undefined ? {} : { fileName: parts.fileName }) };
  const { found, unread, content } = formulasOf(parts.text, parts.language, options);
  const notes = readNotes(parts.text, parts.language, parts.fileName);
  const absent = missingFiles(parts.text, parts.language, files);
  const definitions = definitionsOf(found, files, options);
  const findings: Finding[] = [];
  const request = signatureOf([parts.language, absent, asked.variable, asked.point, asked.side, asked.assumptions, parts.of, parts.variable]);
  const claims = found.map((formula) => ({ formula, claims: stillClaims(formula, given) }));
  const starts = claims.flatMap((c) => c.claims.filter((claim) => claim.function !== null || hasMarks(claim.side)).map((claim) => claim.span.start + c.formula.by)).sort((a, b) => a - b);
  const ends = claims.flatMap((c) => c.claims.filter((claim) => claim.function !== null || hasMarks(claim.side)).map((claim) => claim.span.end + c.formula.by)).sort((a, b) => a - b);
  for (const { formula, claims: own } of claims) {
    if (own.length === 0) continue;
    const note = settingsAt(notes, formula.span.start);
    if (note.skip === true) continue;
    const { start, end } = formula.span;
    const [before, after] = [parts.text.slice(Math.max(0, start - REACH), start), parts.text.slice(end, end + REACH)];
    const judgeAll = (time: Budget): readonly Finding[] => {
      const around: Place['around'] = { conditions: formula.formula.conditions, before, after };
      return (formula.by === 0 ? own : claimsIn(formula.formula, given)).flatMap((claim) => {
        const until = firstFrom(starts, claim.span.end);
        const since = lastUpTo(ends, claim.span.start);
        const place: Place = { text: parts.text, formula, around, absent, ...(until === null ? {} : { until }), ...(since === null || since < start - REACH ? {} : { since }) };
        const local = withNote({ ...asked, budget: share(time) }, note, parts);
        if (claim.bare && !isSpokenOf(around)) return [];
        const found = withinTime(claim.span, () => checkClaim(claim, given, definitions, local, place));
        // Such a relation that is no expansion may be an equation that holds at one value.
        return claim.bare && found[0]?.verdict !== 'holds' && found[0]?.start === claim.span.start ? [] : found;
      });
    };
    const next = firstFrom(starts, end);
    const last = lastUpTo(ends, start);
    const key = (): string =>
      signatureOf([request, note, parts.text.slice(start, end), formula.notation, formula.inline, formula.label, before, after, next === null || next > end + REACH ? null : next - start, last === null || last < start - REACH ? null : start - last, definitionsUsed(own, definitions, parts.text, formula), macrosUsed(parts.text.slice(start, end), content.macros)]);
    findings.push(...remembered(parts.memory, key, start, budget, judgeAll));
    yield;
  }
  const branches = parts.code?.readBranches(parts.text, parts.language) ?? [];
  for (const branch of branches) {
    const note = settingsAt(notes, branch.span.start);
    if (note.skip === true) continue;
    const { start, end } = branch.span;
    const judgeBranch = (time: Budget): readonly Finding[] => withinTime(branch.span, () => branchFindings(parts.text, branch, withNote({ ...asked, budget: share(time) }, note, parts)));
    const key = (): string => signatureOf([request, note, branch, parts.text.slice(start, end + REACH)]);
    findings.push(...remembered(parts.memory, key, start, budget, judgeBranch));
    yield;
  }
  for (const remark of parts.code && PROMISING.test(parts.text) ? remarksIn(parts.text, parts.code.readPolynomials(parts.text, parts.language), parts.code.readComments(parts.text, parts.language), branches) : []) {
    const { start } = remark.place;
    const note = settingsAt(notes, start);
    // A formula in the comment has been judged by the same words.
    if (note.skip === true || findings.some((f) => f.start === start)) continue;
    const key = (): string => signatureOf([request, remark.comment.text, remark.polynomial.expression, remark.polynomial.format, remark.named, remark.interval, remark.tolerance]);
    findings.push(...remembered(parts.memory, key, start, budget, (time) => withinTime(remark.place, () => [remarkFinding(remark, { ...asked, budget: share(time) })])));
    yield;
  }
  return { findings: findings.sort((a, b) => a.claim.start - b.claim.start || a.start - b.start), unread: unread.map(({ start, end, reason, unknown }) => ({ start, end, reason: unknown && absent.length > 0 ? `${reason.replace(/\.$/, '')}${orIn(absent)}.` : reason })) };
}

/** Words by which comments promise an accuracy. */
const PROMISING = /\berr(?:or)?s?\b|\baccura|\bprecis|\bwithin\b|\bgood\s+to\b|\bcorrect\s+to\b|\bdeviat|\beps(?:ilon)?\b|ε/i;

const SPOKEN = /\bsmall\b|\btiny\b|\bwithin\b|\baccura|\berrors?\b|%|\bper\s?cent\b|\bprecision\b|\bcorrect to\b|\bparts? in\b|\bbetter than\b|\\ll(?![a-z])|≪|(?:\\to(?![a-z])|→)\s*0(?![.\d])|<|≤|\\leq?(?![a-z])|\b(?:near|around|about)\s+\$?(?:0|zero)\b/i;

/** Words of smallness or accuracy, or an interval, stand in the sentence of the formula. */
function isSpokenOf({ conditions, before, after }: Place['around']): boolean {
  if (conditions.length > 0) return true;
  const next = after.search(SENTENCE);
  return SPOKEN.test(before.slice(lastSentence(before))) || SPOKEN.test(next < 0 ? after : after.slice(0, next));
}

/** What the names in the claims stand for, as it enters their verdicts. */
function definitionsUsed(claims: readonly Claim[], definitions: Definitions, text: string, { span, by }: FoundFormula): readonly unknown[] {
  return claims.flatMap((claim) => {
    const own = claim.name ?? claim.function;
    return own && (claim.function === null || wordOf(claim.function, text, by) !== null) ? resolve(definitions, own, span.start) : [];
  });
}

/** Claims of formulas as they were read first, where no function is given. */
const knownClaims = new WeakMap<Formula, readonly Claim[]>();

function stillClaims({ still }: FoundFormula, given: Expression | null): readonly Claim[] {
  if (given) return claimsIn(still, given);
  const claims = knownClaims.get(still) ?? claimsIn(still, given);
  knownClaims.set(still, claims);
  return claims;
}

function claimsIn({ expression, conditions }: Formula, given: Expression | null): readonly Claim[] {
  const chains = [expression, ...conditions].filter((e): e is RelationNode => e.kind === 'relation');
  if (expression.kind !== 'relation' && given && hasMarks(expression)) {
    return expression.span ? [{ function: given, name: null, side: expression, relation: '=', span: expression.span, neighbour: null }] : [];
  }
  return chains.flatMap(claimsOf);
}

const REACH = 240;
