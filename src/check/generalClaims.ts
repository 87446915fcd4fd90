/** Claims with a general term: a sum over an index, or a term in n between dots. Refuted by their first terms, confirmed only by proof. */
import { build, dependsOn, type Expression, freeSymbols, type IndexedNode, literalRational, mapChildren, Q, type Relation, type Span, walk } from '../expression/index.ts';
import type { Setting } from './context.ts';
import { differentiate } from '../functions/index.ts';
import { replaceNode } from './decimals.ts';
import { fold, isUndefined } from './fold.ts';
import { atIndex, generalTermOf, isProved } from './generalTerm.ts';
import { judge } from './judge.ts';
import { leading, type Size } from './size.ts';
import { printedTerms, withoutMarks } from './truncated.ts';

export type GeneralJudgement =
  | { readonly kind: 'holds' }
  | { readonly kind: 'undecided'; readonly reason: string }
  | { readonly kind: 'fails'; readonly place: Span | null; readonly reason: string };

/** Terms that are compared before a proof is tried. */
const COMPARED = 8;
const UNPROVED = `The first ${COMPARED} terms agree; that the general term holds for every index is not proved.`;

/** The parts of a side that speak of a general term; null where there is none. */
export interface General {
  readonly node: Expression;
  readonly index: string;
  /** Of a sum over an index; null for a term between dots. */
  readonly sum: IndexedNode | null;
}

export function generalIn(f: Expression, side: Expression, setting: Setting): General | null {
  const sum = [...walk(side)].find((n): n is IndexedNode => n.kind === 'indexedSum');
  if (sum) return sum.index.kind === 'symbol' && isIndex(sum.body, sum.index.name, setting.variable) ? { node: sum, index: sum.index.name, sum } : null;
  if (![...walk(side)].some((n) => n.kind === 'dots')) return null;
  for (const term of printedTerms(side, setting)) {
    const index = freeSymbols(term.node).find((name) => name !== setting.variable && !dependsOn(f, name) && isIndex(term.node, name, setting.variable));
    if (index !== undefined) return { node: term.node, index, sum: null };
  }
  return null;
}

/** The symbol stands in an exponent of the variable. */
const isIndex = (e: Expression, name: string, variable: string): boolean => [...walk(e)].some((n) => n.kind === 'power' && dependsOn(n.exponent, name) && dependsOn(n.base, variable));

/** The side without the general term and without marks that speak of its index: what is left is an ordinary claim with dots. */
export function explicitPart(side: Expression, general: General): Expression | null {
  if (general.sum) return null;
  const strip = (e: Expression): Expression => {
    if (e === general.node || (e.kind === 'order' && dependsOn(e, general.index))) return { kind: 'dots' };
    return mapChildren(e, strip);
  };
  return strip(side);
}

export function judgeGeneral(f: Expression, side: Expression, relation: Relation, general: General, setting: Setting): GeneralJudgement {
  const body = general.sum ? general.sum.body : general.node;
  const unknown = freeSymbols(body).filter((name) => name !== general.index && name !== setting.variable && !dependsOn(f, name));
  if (unknown.length > 0) return { kind: 'undecided', reason: `What ${unknown.join(', ')} stands for in the general term is not said here.` };
  const truth = withoutDerivatives(f, setting.variable);
  return general.sum ? judgeSum(truth, side, relation, general.sum, general.index, setting) : judgeBetweenDots(truth, side, relation, general, setting);
}

function judgeSum(f: Expression, side: Expression, relation: Relation, sum: IndexedNode, index: string, setting: Setting): GeneralJudgement {
  const lower = literalRational(sum.lower);
  if (!lower || !Q.isInteger(lower)) return { kind: 'undecided', reason: 'The sum starts at an index that is not a plain number.' };
  const start = Number(lower.num);
  const members: Expression[] = [];
  for (let k = start; k < start + COMPARED; k += 1) {
    const member = fold(atIndex(sum.body, index, k));
    if (isUndefined(member)) return { kind: 'fails', place: sum.lower.span ?? sum.span ?? null, reason: `The term with index ${k} is not defined.` };
    members.push(member);
  }
  const unrolled = fold(withoutMarks(replaceNode(side, sum, build.sum(...members))));
  const judged = judge(f, build.sum(unrolled, { kind: 'dots' }), relation, setting);
  if (judged.kind === 'undecided') return judged;
  if (judged.kind === 'fails') return { kind: 'fails', place: sum.body.span ?? sum.span ?? null, reason: firstWrong(members, judged.failure.difference?.size ?? null, setting, start) };
  const rest = aroundSum(side, sum);
  const term = rest && generalTermOf(build.product(...rest.factors, sum.body), index, setting.variable);
  const target = rest && build.sum(f, ...rest.others.map((o) => build.negation(o)));
  return term && target && isProved(target, term, start, COMPARED, setting) ? { kind: 'holds' } : { kind: 'undecided', reason: UNPROVED };
}

function firstWrong(members: readonly Expression[], size: Size | null, setting: Setting, start: number): string {
  const index = members.findIndex((m) => {
    const own = leading(setting, m);
    return size !== null && own.kind === 'monomial' && Q.equal(own.size.power, size.power);
  });
  return index < 0 ? 'The first terms of this sum are not those of the function.' : `The term with index ${start + index} is not that of the function.`;
}

/** Factors on the sum and terms beside it. */
function aroundSum(side: Expression, sum: Expression): { readonly factors: readonly Expression[]; readonly others: readonly Expression[] } | null {
  if (side === sum) return { factors: [], others: [] };
  switch (side.kind) {
    case 'negation': {
      const inner = aroundSum(side.operand, sum);
      return inner && { factors: [build.number(-1), ...inner.factors], others: inner.others.map((o) => build.negation(o)) };
    }
    case 'product': {
      const holder = side.factors.find((f) => [...walk(f)].includes(sum));
      const inner = holder && aroundSum(holder, sum);
      if (!holder || !inner) return null;
      const others = side.factors.filter((f) => f !== holder);
      return { factors: [...others, ...inner.factors], others: inner.others.map((o) => build.product(...others, o)) };
    }
    case 'sum': {
      const holder = side.terms.find((t) => [...walk(t)].includes(sum));
      const inner = holder && aroundSum(holder, sum);
      return inner ? { factors: inner.factors, others: [...inner.others, ...side.terms.filter((t) => t !== holder).map((t) => withoutMarks(t))] } : null;
    }
    default:
      return null;
  }
}

function judgeBetweenDots(f: Expression, side: Expression, relation: Relation, general: General, setting: Setting): GeneralJudgement {
  const printed = printedTerms(side, setting);
  const own = printed.find((t) => t.node === general.node);
  const explicit = printed.filter((t) => t.node !== general.node && !dependsOn(t.node, general.index));
  if (!own) return { kind: 'undecided', reason: UNPROVED };
  const powers = explicit.map((t) => powerOf(t.value, setting)).filter((p) => p !== null);
  const last = powers.reduce<number | null>((a, p) => (a === null || p > a ? p : a), null);
  const at = (k: number): Expression => fold(atIndex(own.value, general.index, k));
  const first = indices(0, 60).find((k) => !isUndefined(at(k)) && (powerOf(at(k), setting) ?? -1) > (last ?? -Infinity));
  if (first === undefined) return { kind: 'undecided', reason: UNPROVED };
  const members = indices(first, first + COMPARED).map(at);
  const judged = judge(f, build.sum(...explicit.map((t) => t.value), ...members, { kind: 'dots' }), relation, setting);
  if (judged.kind === 'undecided') return judged;
  if (judged.kind === 'fails') return { kind: 'fails', place: general.node.span ?? null, reason: 'The general term is not that of the function.' };
  const start = startIndex(at, powers, first, setting);
  if (start === null) return { kind: 'undecided', reason: UNPROVED };
  const beginning = powerOf(at(start), setting) ?? 0;
  const before = explicit.filter((t) => (powerOf(t.value, setting) ?? 0) < beginning);
  const term = generalTermOf(own.value, general.index, setting.variable);
  const target = build.sum(f, ...before.map((t) => build.negation(t.value)));
  return term && isProved(target, term, start, first - start + COMPARED, setting) ? { kind: 'holds' } : { kind: 'undecided', reason: UNPROVED };
}

/** The smallest index whose term is one of the printed ones. */
function startIndex(at: (k: number) => Expression, powers: readonly number[], first: number, setting: Setting): number | null {
  for (let k = 0; k <= first; k += 1) {
    const member = at(k);
    if (isUndefined(member)) continue;
    const power = powerOf(member, setting);
    if (power !== null && (powers.includes(power) || k === first)) return k;
  }
  return null;
}

const indices = (from: number, to: number): readonly number[] => Array.from({ length: to - from }, (_, i) => from + i);

function powerOf(e: Expression, setting: Setting): number | null {
  const size = leading(setting, e);
  return size.kind === 'monomial' ? Q.toDouble(size.size.power) : null;
}

/** Derivatives carried out, so that the function can be differentiated further. */
function withoutDerivatives(e: Expression, variable: string): Expression {
  const inner = mapChildren(e, (c) => withoutDerivatives(c, variable));
  if (inner.kind !== 'derivative' || inner.variable.kind !== 'symbol') return inner;
  let body: Expression | null = inner.body;
  for (let i = 0; i < inner.times && body; i += 1) body = differentiate(body, inner.variable.name);
  return body ?? inner;
}
