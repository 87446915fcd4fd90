/** The door of check/: claims in a document or a single formula, judged. */
import { build, children, sameExpression, walk, type Assumption, type Expression, type RelationNode } from '../expression/index.ts';
import { attempt, type Budget, Declined, type Outcome, success } from '../outcome.ts';
import { missingFiles } from '../companions.ts';
import type { CompanionFile, Finding } from '../protocol.ts';
import { type Formula, macrosOf, readExact, readExpression, readNotes, readVariable, settingsAt } from '../read/index.ts';
import { branchFindings, type BranchReader } from './branches.ts';
import { type Claim, claimsOf } from './claims.ts';
import { type Definitions, definitionsOf, resolve } from './definitions.ts';
import { findingOf, orIn, unresolved, type Place } from './findings.ts';
import { type FoundFormula, formulasOf } from './formulas.ts';
import { type CheckMemory, macrosUsed, signatureOf } from './memory.ts';
import { isGridName } from './normalise.ts';
import { quantitiesNamed } from './quantities.ts';
import { remarkFinding, remarksIn } from './remarks.ts';
import type { Asked } from './setting.ts';
import { lastSentence, SENTENCE } from './statements.ts';
import { hasMarks } from './truncated.ts';

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

/** Longest time that one claim may take of what is left, so that one hard claim does not starve the others. */
const SHARE = 0.25;

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

/** Findings kept from an earlier check, else judged now and kept, unless time ran short. */
function remembered(memory: CheckMemory | undefined, keyOf: () => string, start: number, budget: Budget, find: (time: Budget) => readonly Finding[]): readonly Finding[] {
  if (!memory) return find(budget);
  const key = keyOf();
  const known = memory.verdicts.recall(key, start);
  if (known) return known;
  const allowed = budget.remaining() * SHARE;
  const begun = performance.now();
  const findings = find(budget);
  if (performance.now() - begun < allowed || findings.every((f) => f.verdict === 'holds')) memory.verdicts.keep(key, start, findings);
  return findings;
}

/** What the names in the claims stand for, as it enters their verdicts. */
function definitionsUsed(claims: readonly Claim[], definitions: Definitions, text: string, { span, by }: FoundFormula): readonly unknown[] {
  return claims.flatMap((claim) => {
    const own = claim.name ?? claim.function;
    return own && (claim.function === null || wordOf(claim.function, text, by) !== null) ? resolve(definitions, own, span.start) : [];
  });
}

/** The first of ascending numbers that is at least `from`. */
function firstFrom(ascending: readonly number[], from: number): number | null {
  let [low, high] = [0, ascending.length];
  while (low < high) {
    const middle = (low + high) >> 1;
    if ((ascending[middle] ?? 0) < from) low = middle + 1;
    else high = middle;
  }
  return ascending[low] ?? null;
}

/** The last of ascending numbers that is at most `to`. */
function lastUpTo(ascending: readonly number[], to: number): number | null {
  let [low, high] = [0, ascending.length];
  while (low < high) {
    const middle = (low + high) >> 1;
    if ((ascending[middle] ?? Infinity) <= to) low = middle + 1;
    else high = middle;
  }
  return ascending[low - 1] ?? null;
}

/** The findings, or that there was no time for them. */
function withinTime(span: { readonly start: number; readonly end: number }, find: () => readonly Finding[]): readonly Finding[] {
  try {
    return find();
  } catch (error) {
    if (!(error instanceof Declined)) throw error;
    return [{ ...span, claim: span, verdict: 'undecided', severity: 'hint', reason: error.failure.message, found: '', fix: null }];
  }
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

function checkClaim(claim: Claim, given: Expression | null, definitions: Definitions, asked: Asked, place: Place): readonly Finding[] {
  const printedName = claim.function ? wordOf(claim.function, place.text) : null;
  if (claim.function && printedName === null) return findingOf(claim, claim.function, asked, place);
  if (given) return findingOf(claim, given, asked, place);
  const own = claim.name ?? claim.function;
  if (!own) return [];
  if (isGridName(own)) return findingOf(claim, own, asked, place, { lenient: 'values of a function on a grid' });
  if (isAnsatz(own, claim.side)) return [];
  if (speaksOfItself(own, claim.side)) return findingOf(claim, own, asked, place);
  let failed: readonly Finding[] = [];
  for (const value of resolve(definitions, own, place.formula.span.start)) {
    if (sameExpression(value, claim.side)) continue;
    const found = findingOf(claim, value, asked, place, { resolved: true });
    if (found[0]?.verdict === 'holds') return found;
    if (failed.length === 0) failed = found;
  }
  if (failed.length > 0) return failed;
  const printed = printedName ?? place.text.slice(own.span?.start ?? 0, own.span?.end ?? 0).replace(/\s/g, '');
  for (const quantity of quantitiesNamed(printed, symbolsOf(claim.side))) {
    const variable = asked.variable ?? build.symbol(quantity.variable);
    const found = findingOf(claim, quantity.value, { ...asked, variable, point: asked.point ?? build.number(0) }, place, { lenient: quantity.title });
    if (found[0]?.verdict === 'holds') return found;
  }
  return hasMarks(claim.side) || (claim.relation === 'about' && isSeriesLike(claim.side)) ? [unresolved(claim, place)] : [];
}

const baseName = (e: Expression): string | null => (e.kind === 'symbol' || e.kind === 'apply' ? e.name.replace(/'+$/, '').replace(/_.*$/, '') : null);

/** y = y_0 + \epsilon y_1 + ...: names the coefficients of an expansion and claims nothing. */
function isAnsatz(name: Expression, side: Expression): boolean {
  const base = baseName(name)?.toLowerCase();
  return base !== undefined && [...walk(side)].some((n) => (n.kind === 'symbol' || n.kind === 'apply') && /_/.test(n.name) && /\d/.test(n.name) && baseName(n)?.toLowerCase() === base);
}

/** f'(x) beside f(x + h): an expansion of an unspecified function. */
function speaksOfItself(name: Expression, side: Expression): boolean {
  const base = baseName(name);
  return base !== null && [...walk(side)].some((n) => n.kind === 'apply' && n.name === base && n.args.some((a) => a.kind !== 'symbol' && a.kind !== 'number'));
}

/** A sum, a common factor looked through. */
const isSeriesLike = (e: Expression): boolean => e.kind === 'sum' || ((e.kind === 'product' || e.kind === 'negation') && children(e).some(isSeriesLike));

/** Capital letters without a gap (KE) that were read as a product are one name. */
function wordOf(e: Expression, text: string, by = 0): string | null {
  if (e.kind !== 'product' || !e.span || !e.factors.every((f) => f.kind === 'symbol' && /^[A-Z]$/.test(f.name))) return null;
  const written = text.slice(e.span.start + by, e.span.end + by);
  return /^[A-Z]{2,}$/.test(written) ? written : null;
}

function symbolsOf(e: Expression): readonly string[] {
  const names = new Set<string>();
  const visit = (node: Expression): void => {
    if (node.kind === 'symbol') names.add(node.name);
    else if (node.kind === 'sum') node.terms.forEach(visit);
    else if (node.kind === 'product') node.factors.forEach(visit);
    else if (node.kind === 'quotient') [node.numerator, node.denominator].forEach(visit);
    else if (node.kind === 'negation') visit(node.operand);
    else if (node.kind === 'power') [node.base, node.exponent].forEach(visit);
    else if (node.kind === 'call') node.args.forEach(visit);
    else if (node.kind === 'order') visit(node.argument);
  };
  visit(e);
  return [...names];
}

function readAsked(parts: CheckParts, budget: Budget): Asked {
  const variable = parts.variable === undefined ? null : need(readVariable(parts.variable), 'variable');
  return { variable, point: parts.point === undefined ? null : readPoint(parts.point), side: parts.side ?? 'both', assumptions: parts.assumptions ?? [], budget };
}

function readPoint(text: string): Expression | 'inf' | '-inf' {
  const plain = text.replace(/\s/g, '');
  if (/^\+?(?:inf|infinity|∞|\\infty)$/.test(plain)) return 'inf';
  if (/^[-−](?:inf|infinity|∞|\\infty)$/.test(plain)) return '-inf';
  return need(readExact(text), 'point');
}

function need<T>(outcome: Outcome<T>, what: string): T {
  if (!outcome.ok) throw new Declined('bad-request', `The ${what} cannot be read: ${outcome.error.message}`);
  return outcome.value;
}

const PHRASE = /^\s*(?:the\s+)?(first|second|third)?\s*(derivative|integral|antiderivative)\s+of\s+/i;

/** A formula, the right side of an equation, or a derivative or integral in words. */
function readGiven(text: string, variable: Expression | null): Expression {
  const phrase = PHRASE.exec(text);
  const rest = phrase ? text.slice(phrase[0].length) : text;
  const read = need(readExpression(rest, rest.includes('\\') ? 'latex' : 'plain'), 'function');
  const value = read.kind === 'relation' ? (read.sides.at(-1) ?? read) : read;
  if (!phrase) return value;
  const symbols = symbolsOf(value);
  const by = variable?.kind === 'symbol' ? variable : build.symbol(symbols[0] ?? 'x');
  if (/integral|antiderivative/i.test(phrase[2] ?? '')) return { kind: 'integral', body: value, variable: by };
  const times = phrase[1] === undefined ? 1 : ['first', 'second', 'third'].indexOf(phrase[1].toLowerCase()) + 1;
  return { kind: 'derivative', body: value, variable: by, times };
}

function withNote(asked: Asked, note: ReturnType<typeof settingsAt>, parts: CheckParts): Asked {
  const variable = asked.variable ?? (note.variable === undefined ? null : valueOf(readVariable(note.variable)));
  const point = asked.point ?? (parts.variable === undefined && note.point !== undefined ? readPoint(note.point) : null);
  return { ...asked, variable, point, side: parts.side ?? note.side ?? 'both' };
}
const valueOf = <T>(outcome: Outcome<T>): T | null => (outcome.ok ? outcome.value : null);

const REACH = 240;
/** A part of the remaining time, never none. */
function share(whole: Budget): Budget {
  const end = performance.now() + Math.max(20, whole.remaining() * SHARE);
  return {
    deadline: Math.min(end, whole.deadline),
    remaining: () => Math.min(end - performance.now(), whole.remaining()),
    check() {
      whole.check();
      if (performance.now() > end) throw new Declined('over-budget', 'This claim took too long to judge; allow more time.');
    },
  };
}
