/** Which piece of a failing claim is wrong, and what stands there when it is right. */
import { build, Q, type Expression, type OrderNode, type Relation, type Span } from '../expression/index.ts';
import type { Expansion } from '../expand/index.ts';
import { termTree } from '../write/index.ts';
import type { Setting } from './context.ts';
import { replaceNode } from './decimals.ts';
import { edits, type Edit, type TrueTerm } from './edits.ts';
import { sample } from './enclose.ts';
import { judge, type Failed } from './judge.ts';
import { signedIn, writeIn, type Notation } from './notation.ts';
import { compareSizes, expandIn, leading, type Size } from './size.ts';
import type { PrintedTerm, Truncated } from './truncated.ts';

export interface Blame {
  readonly place: Span;
  readonly message: string;
  /** The right piece in the author's notation; empty where it is not known. */
  readonly found: string;
  readonly fix: { readonly start: number; readonly end: number; readonly text: string } | null;
}

/** Most repairs that are proved one by one. A count and not a time: the same text gets the same underline on every machine. */
const MOST_TRIES = 24;

export interface Accused {
  readonly truth: Expression;
  readonly relation: Relation;
  readonly truncated: Truncated;
  readonly failure: Failed;
  readonly setting: Setting;
  readonly notation: Notation;
  readonly text: string;
}

/** One change of one number, sign or exponent makes the whole claim true: it is plainly meant as this expansion. */
export function isOneChangeAway(accused: Accused): boolean {
  const { failure } = accused;
  if (!failure.difference) return false;
  const expansion = truthAround(accused, failure.difference.size);
  const edit = firstRepair(accused, failure.difference, expansion);
  return edit?.whole === true || isOneTermAway(accused, failure.difference.size, expansion);
}

/** The claim is true with the one printed term of this order replaced. */
function isOneTermAway({ truncated, setting, truth, relation }: Accused, size: Size, expansion: Expansion | null): boolean {
  const printed = truncated.terms.find((t) => sameSize(t, size, setting));
  const right = expansion?.terms.find((t) => !t.scale && t.power.kind === 'number' && compareSizes({ power: t.power.value, log: t.log }, size) === 0);
  if (!printed || !expansion || !right || printed.node !== printed.value) return false;
  return judge(truth, replaceNode(truncated.side, printed.node, termTree(expansion, right)), relation, setting).kind === 'holds';
}

/** The one change that makes the whole claim true; null where there is none. */
export function repairOf(accused: Accused): Blame | null {
  const { difference } = accused.failure;
  const repair = difference && firstRepair(accused, difference, truthAround(accused, difference.size));
  return repair?.whole ? repaired(accused, repair) : null;
}

export function blame(accused: Accused): Blame {
  const { truncated, failure } = accused;
  const whole = truncated.side.span ?? { start: 0, end: accused.text.length };
  const { difference } = failure;
  if (!difference) {
    const first = truncated.terms.length > 1 ? truncated.terms[failure.matched]?.node.span : undefined;
    return { place: first ?? whole, message: first && failure.matched > 0 ? 'From this term on the two sides differ by more than the claim allows.' : 'The two sides differ by more than the claim allows.', found: '', fix: null };
  }
  if (failure.onlyOrder) return orderBlame(accused, difference.size) ?? { place: whole, message: 'The stated order is too strong.', found: '', fix: null };
  const expansion = truthAround(accused, difference.size);
  const repair = firstRepair(accused, difference, expansion);
  if (repair) return repaired(accused, repair);
  return termBlame(accused, difference, expansion) ?? { place: whole, message: 'The two sides differ by more than the claim allows.', found: '', fix: null };
}

/** The true expansion some powers beyond the first difference. */
function truthAround(accused: Accused, size: Size): Expansion | null {
  const order = Q.add(size.power, Q.rational(10));
  const wide = expandIn(accused.setting, accused.truth, { order });
  if (wide.ok && !wide.value.prefactor) return wide.value;
  const near = expandIn(accused.setting, accused.truth, { order: Q.add(size.power, Q.rational(1, 1000)) });
  return near.ok && !near.value.prefactor ? near.value : null;
}

function trueTerms(expansion: Expansion | null): readonly TrueTerm[] {
  return (expansion?.terms ?? []).flatMap((t) => (t.scale || t.power.kind !== 'number' ? [] : [{ size: { power: t.power.value, log: t.log }, value: sample(t.coefficient) }]));
}

function firstRepair(accused: Accused, difference: { readonly size: Size; readonly coefficient: Expression }, expansion: Expansion | null): (Edit & { readonly whole: boolean }) | null {
  const { truncated, setting, text, truth, relation } = accused;
  let partial: Edit | null = null;
  for (const edit of edits(truncated, difference, trueTerms(expansion), setting, text).slice(0, MOST_TRIES)) {
    const again = judge(truth, edit.side, relation, setting);
    if (again.kind === 'holds' || again.kind === 'identity') return { ...edit, whole: true };
    // A claim with two errors: the change that puts this one right.
    const further = again.kind === 'fails' && again.failure.difference !== null && compareSizes(again.failure.difference.size, difference.size) > 0 && edit.kind !== 'exponent';
    if (further) partial ??= edit;
  }
  return partial && { ...partial, whole: false };
}

function repaired(accused: Accused, edit: Edit): Blame {
  const { text } = accused;
  const printed = text.slice(edit.place.start, edit.place.end).trim();
  const place = edit.place.end > edit.place.start ? edit.place : { start: Math.max(0, edit.place.start - 1), end: edit.place.start };
  const what = edit.kind === 'sign' ? 'sign' : edit.kind === 'exponent' ? 'exponent' : 'number';
  const right = edit.kind === 'sign' ? (edit.text === '-' ? 'minus' : 'plus') : edit.text.replace('^', '');
  const message = printed === '' || edit.place.start === edit.place.end ? `The ${what} must be ${right}.` : edit.kind === 'sign' ? `The sign must be ${right}.` : `The ${what} is printed as ${printed}; ${right} is right.`;
  const fixText = bracedExponent(accused, edit);
  return { place, message, found: patched(accused, edit.place, fixText), fix: { start: edit.place.start, end: edit.place.end, text: fixText } };
}

/** Two digits after `^` need braces in LaTeX; Unicode raises its digits. */
function bracedExponent({ text, notation }: Accused, edit: Edit): string {
  if (edit.kind === 'sign') return notation.kind === 'unicode' && edit.text === '-' ? '−' : edit.text;
  if (edit.kind !== 'exponent') return edit.text;
  const digits = edit.text.replace('^', '');
  if (/^[⁰¹²³⁴⁵⁶⁷⁸⁹]+$/u.test(text.slice(edit.place.start, edit.place.end)) || (notation.kind === 'unicode' && edit.place.start === edit.place.end)) return [...digits].map((d) => '⁰¹²³⁴⁵⁶⁷⁸⁹'.charAt(Number(d))).join('');
  const braced = text.charAt(edit.place.start - 1) === '{' || digits.length === 1 || notation.kind !== 'latex' ? digits : `{${digits}}`;
  return edit.text.startsWith('^') ? `^${braced}` : braced;
}

/** The printed side with one piece replaced. */
function patched({ truncated, text }: Accused, place: Span, replacement: string): string {
  const { span } = truncated.side;
  if (!span || place.start < span.start || place.end > span.end) return replacement;
  return text.slice(span.start, place.start) + replacement + text.slice(place.end, span.end);
}

/** Every printed term is right; the O or o promises too much. */
function orderBlame(accused: Accused, size: Size): Blame | null {
  const { truncated, setting, notation } = accused;
  const order = truncated.orders[0];
  if (!order?.span) return null;
  const argument = rightArgument(order, size, accused);
  const place = exponentPlace(order) ?? order.argument.span ?? order.span;
  const message = `The difference is of order ${writeIn(notation, boundOf(size, setting))}, so this ${truncated.mark}-term promises too much.`;
  const argumentSpan = order.argument.span;
  if (!argument || !argumentSpan) return { place, message, found: '', fix: null };
  const replacement = writeIn(notation, argument);
  return { place, message, found: patched(accused, argumentSpan, replacement), fix: { ...argumentSpan, text: replacement } };
}

/** The largest claim that is true: O of the first difference; for o the integer power before it. */
function rightArgument(order: OrderNode, size: Size, { truncated, setting }: Accused): Expression | null {
  if (truncated.scale === null) return null;
  const stated = leading(setting, order.argument);
  const whole = leading(setting, truncated.scale);
  if (stated.kind !== 'monomial' || whole.kind !== 'monomial') return null;
  const shift = Q.subtract(whole.size.power, stated.size.power);
  const power = Q.subtract(size.power, shift);
  const allowed = order.little ? Q.subtract(Q.rational(-Q.floor(Q.negate(power))), Q.ONE) : power;
  return boundOf({ power: allowed, log: order.little ? 0 : size.log }, setting);
}

function boundOf(size: Size, setting: Setting): Expression {
  const variable = build.symbol(setting.variable);
  const large = setting.point === 'inf' || setting.point === '-inf';
  const local = large || (typeof setting.point === 'object' && setting.point.kind === 'number' && Q.isZero(setting.point.value)) ? variable : build.difference(variable, setting.point as Expression);
  const raised = Q.isZero(size.power) ? build.number(1) : Q.isOne(size.power) ? local : build.power(local, size.power);
  const power = large && !Q.isZero(size.power) ? build.quotient(build.number(1), raised) : raised;
  return size.log === 0 ? power : build.product(power, size.log === 1 ? build.call('log', local) : build.power(build.call('log', local), size.log));
}

function exponentPlace(order: OrderNode): Span | null {
  let place: Span | null = null;
  const visit = (e: Expression): void => {
    if (e.kind === 'power' && e.exponent.span) place ??= e.exponent.span;
    else if (e.kind === 'quotient') visit(e.denominator);
    else if (e.kind === 'product') e.factors.forEach(visit);
  };
  visit(order.argument);
  return place;
}

/** No single change repairs the claim: the wrong or missing term itself. */
function termBlame(accused: Accused, difference: { readonly size: Size; readonly coefficient: Expression }, expansion: Expansion | null): Blame | null {
  const { truncated, setting, notation } = accused;
  const trueTerm = expansion?.terms.find((t) => !t.scale && t.power.kind === 'number' && compareSizes({ power: t.power.value, log: t.log }, difference.size) === 0);
  const right = expansion && trueTerm ? termTree(expansion, trueTerm, notation.style.coefficient) : null;
  const printed = truncated.terms.find((t) => sameSize(t, difference.size, setting));
  if (printed?.node.span) {
    const place = printed.node.span;
    const text = right ? writeIn(notation, right) : '';
    const isWhole = printed.node === printed.value;
    const removal = expansion && !right && isWhole ? withoutTerm(accused, place) : null;
    if (removal) return { place: coefficientPlace(printed, setting) ?? place, message: 'The function has no term of this order.', found: patched(accused, removal, ''), fix: { ...removal, text: '' } };
    return {
      place: coefficientPlace(printed, setting) ?? place,
      message: right ? `The term of this order is ${text}.` : 'The function has no term of this order.',
      found: text,
      fix: right && isWhole ? termFix(accused, printed, right) : null,
    };
  }
  const next = truncated.terms.find((t) => {
    const size = leading(setting, t.value);
    return size.kind === 'monomial' && compareSizes(size.size, difference.size) > 0 && t.node.span;
  });
  const place = next?.node.span ?? truncated.orders[0]?.span ?? truncated.side.span;
  if (!place || !right) return null;
  return { place, message: `A term is missing: ${writeIn(notation, right)}.`, found: writeIn(notation, right), fix: insertion(accused, next ?? null, right, difference.size) };
}

/** The missing term set in before the first smaller one, else before the remainder mark; only where the sum is the whole side and the claim gets further with it. */
function insertion(accused: Accused, next: PrintedTerm | null, right: Expression, size: Size): Blame['fix'] {
  const { truncated, setting, notation, text, truth, relation } = accused;
  const { side } = truncated;
  if (side.kind !== 'sum') return null;
  const again = judge(truth, { ...side, terms: [...side.terms, right] }, relation, setting);
  const helps = again.kind === 'holds' || again.kind === 'identity' || (again.kind === 'fails' && again.failure.difference !== null && compareSizes(again.failure.difference.size, size) > 0);
  if (!helps) return null;
  const isMark = (e: Expression): boolean => e.kind === 'order' || e.kind === 'dots' || (e.kind === 'negation' && isMark(e.operand));
  const follower = next ? side.terms.find((t) => t === next.node) : side.terms.find(isMark);
  if (!follower) {
    const end = side.span?.end;
    return next || end === undefined ? null : { start: end, end, text: ` ${signedIn(notation, right)}` };
  }
  if (!follower.span) return null;
  const head = text.slice(0, follower.span.start);
  const sign = /[-−–+](?:\s|&)*$/.exec(head);
  if (/[-−–+]/.test(text.charAt(follower.span.start)) || (side.terms[0] !== follower && sign)) {
    const own = /[-−–+]/.test(text.charAt(follower.span.start));
    const at = own ? follower.span.start : follower.span.start - (sign?.[0].length ?? 0);
    const first = own && side.terms[0] === follower;
    return { start: at, end: at, text: `${first ? withoutPlus(signedIn(notation, right)) : signedIn(notation, right)} ` };
  }
  const at = follower.span.start;
  return side.terms[0] === follower ? { start: at, end: at, text: `${withoutPlus(signedIn(notation, right))} + ` } : null;
}
const withoutPlus = (signed: string): string => signed.replace(/^\+ /, '').replace(/^([-−]) /, '$1');

/** The term with the sign in front of it; null at the head of the sum, where its loss would leave a bare sign. */
function withoutTerm({ text }: Accused, term: Span): Span | null {
  if (/[-−–]/.test(text.charAt(term.start))) return /[\w)\]}!′'²³⁴⁵⁶⁷⁸⁹⁰¹ⁿ]\s*$/u.test(text.slice(0, term.start)) ? { start: term.start - (/\s*$/.exec(text.slice(0, term.start))?.[0].length ?? 0), end: term.end } : null;
  const sign = /\s*[-−–+]\s*$/.exec(text.slice(0, term.start));
  return sign ? { start: term.start - sign[0].length, end: term.end } : null;
}

function sameSize(t: PrintedTerm, size: Size, setting: Setting): boolean {
  const own = leading(setting, t.value);
  return own.kind === 'monomial' && compareSizes(own.size, size) === 0;
}

/** The coefficient alone, where the term is coefficient times power in so many pieces. */
function coefficientPlace(term: PrintedTerm, setting: Setting): Span | null {
  const body = term.node.kind === 'negation' ? term.node.operand : term.node;
  const [first] = body.kind === 'product' ? body.factors : [];
  if (!first?.span) return null;
  const size = leading(setting, first);
  return size.kind === 'monomial' && Q.isZero(size.size.power) && size.size.log === 0 ? first.span : null;
}

/** The term with its sign replaced by the right one. */
function termFix({ notation, text }: Accused, printed: PrintedTerm, right: Expression): Blame['fix'] {
  const { span } = printed.node;
  if (!span) return null;
  const negative = right.kind === 'negation';
  const bodyText = writeIn(notation, negative ? right.operand : right);
  const minus = notation.kind === 'unicode' ? '−' : '-';
  if (printed.node.kind === 'negation') {
    const starts = /[-−–]/.test(text.charAt(span.start));
    if (!starts) return null;
    const leadsSum = /(?:^|[=(\[{&]|\\left\(|\\approx|\\sim|\\simeq|≈|~)\s*$/.test(text.slice(0, span.start));
    return { start: span.start, end: span.end, text: negative ? `${minus} ${bodyText}` : leadsSum ? bodyText : `+ ${bodyText}` };
  }
  const sign = /[+]\s*$/.exec(text.slice(0, span.start));
  if (!negative) return { start: span.start, end: span.end, text: bodyText };
  return sign ? { start: span.start - sign[0].length, end: span.end, text: `${minus} ${bodyText}` } : { start: span.start, end: span.end, text: `${minus}${bodyText}` };
}
