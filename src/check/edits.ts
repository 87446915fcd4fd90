/** Single changes of a printed side that an author would make: one number, one sign, one exponent. Each is tried and only what proves right is offered. */
import { build, dependsOn, mapChildren, Q, walk, type Expression, type NumberNode, type Span } from '../expression/index.ts';
import { sample } from './enclose.ts';
import type { Setting } from './context.ts';
import { replaceNode } from './decimals.ts';
import { compareSizes, leading, type Size } from './size.ts';
import type { PrintedTerm, Truncated } from './truncated.ts';

export interface Edit {
  /** The side after the change, marks included. */
  readonly side: Expression;
  readonly place: Span;
  /** What stands at the place after the change. */
  readonly text: string;
  readonly kind: 'sign' | 'number' | 'exponent';
  /** Smaller is likelier. */
  readonly cost: number;
}

const LARGEST_SMALL = 30n;

/** Changes that could repair a difference whose leading term is coefficient * size, likeliest first. */
export function edits(truncated: Truncated, difference: { readonly size: Size; readonly coefficient: Expression }, truth: readonly TrueTerm[], setting: Setting, text: string): readonly Edit[] {
  const here = truncated.terms.filter((t) => sizeOf(t, setting) !== null && compareSizes(sizeOf(t, setting) as Size, difference.size) === 0);
  const all = [...here.flatMap((t) => signEdits(t, truncated, text)), ...numberEdits(here, truncated, difference, setting), ...exponentEdits(truncated, difference.size, truth, setting)];
  return all.sort((a, b) => a.cost - b.cost);
}

function sizeOf(t: PrintedTerm, setting: Setting): Size | null {
  const found = leading(setting, t.value);
  return found.kind === 'monomial' ? found.size : null;
}

/** The sign in front of a printed term, or of a member of a sum inside its coefficient. */
function signEdits(term: PrintedTerm, truncated: Truncated, text: string): readonly Edit[] {
  const out: Edit[] = [];
  const flip = (node: Expression, cost: number): void => {
    const negative = node.kind === 'negation';
    const body = negative ? node.operand : node;
    const place = signPlace(node, text);
    if (!place) return;
    out.push({ side: replaceNode(truncated.side, node, negative ? body : build.negation(node)), place, text: negative ? (place.leading ? '' : '+') : '-', kind: 'sign', cost });
  };
  flip(term.node, 0);
  const visit = (e: Expression): void => {
    if (e.kind === 'sum') for (const t of e.terms) flip(t, 2);
    mapChildren(e, (c) => {
      visit(c);
      return c;
    });
  };
  visit(term.node);
  return out;
}

/** Where the sign of a term stands; `leading` where it is the first thing of its sum and may be absent. */
function signPlace(node: Expression, text: string): (Span & { readonly leading: boolean }) | null {
  if (!node.span) return null;
  const MINUS = /[-−–]/;
  if (node.kind === 'negation') {
    if (MINUS.test(text.charAt(node.span.start))) return { start: node.span.start, end: node.span.start + 1, leading: !followsOperand(text, node.span.start) };
    const before = signBefore(text, node.span.start);
    return before && { ...before, leading: !followsOperand(text, before.start) };
  }
  const before = signBefore(text, node.span.start);
  return before ? { ...before, leading: false } : { start: node.span.start, end: node.span.start, leading: true };
}

function signBefore(text: string, from: number): Span | null {
  let i = from - 1;
  for (; i >= 0; i -= 1) {
    const sign = text.charAt(i);
    if (/[-−–+]/.test(sign)) return { start: i, end: i + 1 };
    if (!/[\s&{(]/.test(sign)) return null;
  }
  return null;
}

function followsOperand(text: string, at: number): boolean {
  const before = text.slice(Math.max(0, at - 40), at).replace(/(?:\s|&|\\[,;!:> ]|\\quad|\\left\s*[([]?)+$/, '');
  return before !== '' && /[\w)\]}!′'²³⁴⁵⁶⁷⁸⁹⁰¹ⁿ]$/u.test(before);
}

/** Numbers in the coefficient of the wrong term, and in factors around it. */
function numberEdits(here: readonly PrintedTerm[], truncated: Truncated, difference: { readonly coefficient: Expression }, setting: Setting): readonly Edit[] {
  const out: Edit[] = [];
  const delta = sample(difference.coefficient);
  if (delta === null) return out;
  const usesFactorials = [...walk(truncated.side)].some((n) => n.kind === 'call' && n.function === 'factorial');
  for (const term of here) {
    const found = leading(setting, term.value);
    if (found.kind !== 'monomial') continue;
    const printed = sample(found.coefficient);
    if (printed === null) continue;
    const target = printed + delta;
    out.push(...factorialEdits(term, truncated, target, found.size, usesFactorials ? 0.5 : 1.2, setting));
    for (const literal of literalsOf(term.value, setting)) {
      if (!literal.span || !Q.isInteger(literal.value)) continue;
      // A number under a sum that was opened stands in several terms of this order: (x^2 + y^2)/2.
      const sharing = here.filter((t) => contains(t.value, literal));
      const valueWith = (m: bigint): number | null =>
        sharing.reduce<number | null>((sum, t) => {
          const changed = leading(setting, replaceNode(t.value, literal, build.number(m)));
          const value = changed.kind === 'monomial' && compareSizes(changed.size, found.size) === 0 ? sample(changed.coefficient) : null;
          return sum === null || value === null ? null : sum + value;
        }, 0);
      const together = sharing.length > 1 ? valueWith(literal.value.num) : printed;
      if (together === null) continue;
      for (const m of candidates(literal.value.num, together + delta, valueWith)) {
        const inTerm = contains(term.node, literal);
        const distance = Math.abs(Math.log(Number(m) / Math.max(1, Number(literal.value.num))));
        out.push({ side: replaceNode(truncated.side, literal, build.number(m)), place: literal.span, text: `${m}`, kind: 'number', cost: (inTerm ? 1 : 4) + distance / 100 });
      }
    }
  }
  return out;
}

/** A factorial lost or invented: 3! for 3, 3 for 3!. */
function factorialEdits(term: PrintedTerm, truncated: Truncated, target: number, size: Size, cost: number, setting: Setting): readonly Edit[] {
  const out: Edit[] = [];
  const offer = (node: Expression, replacement: Expression, text: string, place: Span): void => {
    const changed = leading(setting, replaceNode(term.value, node, replacement));
    const value = changed.kind === 'monomial' && compareSizes(changed.size, size) === 0 ? sample(changed.coefficient) : null;
    if (value !== null && Math.abs(value - target) <= 1e-9 * Math.abs(target)) out.push({ side: replaceNode(truncated.side, node, replacement), place, text, kind: 'number', cost });
  };
  const visit = (node: Expression): void => {
    if (node.kind === 'call' && node.function === 'factorial' && node.args[0]?.kind === 'number' && node.span) {
      offer(node, node.args[0], Q.toText(node.args[0].value), node.span);
      return;
    }
    if (node.kind === 'power' && dependsOn(node.base, setting.variable)) return;
    if (node.kind === 'number' && node.span && Q.isInteger(node.value) && node.value.num > 2n && node.value.num < 30n) offer(node, build.call('factorial', node), `${node.value.num}!`, node.span);
    mapChildren(node, (c) => {
      visit(c);
      return c;
    });
  };
  visit(term.node);
  return out;
}

/** Integers for which the coefficient would be right, by sampling: small ones, and what a numerator or denominator would have to be. */
function candidates(current: bigint, target: number, valueWith: (m: bigint) => number | null): readonly bigint[] {
  const tries = new Set<bigint>();
  for (let m = 0n; m <= LARGEST_SMALL; m += 1n) tries.add(m);
  const base = current === 0n ? 1n : current;
  const [one, two] = [valueWith(base), valueWith(2n * base)];
  if (one !== null && two !== null) {
    const b = Number(base);
    const slope = (two - one) / b;
    const linear = slope === 0 ? NaN : b + (target - one) / slope;
    const inverse = 2 * b * (one - two);
    const constant = one - inverse / b;
    const reciprocal = inverse / (target - constant);
    for (const solved of [linear, reciprocal]) if (Number.isFinite(solved) && Math.abs(solved - Math.round(solved)) < 1e-6 * Math.abs(solved) && Math.abs(solved) < 1e15) tries.add(BigInt(Math.round(solved)));
  }
  tries.delete(current);
  return [...tries].filter((m) => {
    const value = m < 0n ? null : valueWith(m);
    return value !== null && Math.abs(value - target) <= 1e-9 * Math.max(Math.abs(target), 1e-30);
  });
}

/** Integer literals that are not exponents of the variable. */
function literalsOf(e: Expression, setting: Setting): readonly NumberNode[] {
  const out: NumberNode[] = [];
  const visit = (node: Expression): void => {
    if (node.kind === 'number') out.push(node);
    else if (node.kind === 'power' && dependsOn(node.base, setting.variable)) visit(node.base);
    else
      mapChildren(node, (c) => {
        visit(c);
        return c;
      });
  };
  visit(e);
  return out;
}

const contains = (e: Expression, target: Expression): boolean => e === target || (e.kind !== 'number' && childrenContain(e, target));
function childrenContain(e: Expression, target: Expression): boolean {
  let found = false;
  mapChildren(e, (c) => {
    found ||= contains(c, target);
    return c;
  });
  return found;
}

/** A term of the true expansion, its coefficient at the sample point. */
export interface TrueTerm {
  readonly size: Size;
  readonly value: number | null;
}

/** Exponents of the variable: a term that stands at a power where the function has another coefficient, while its own belongs elsewhere. */
function exponentEdits(truncated: Truncated, size: Size, truth: readonly TrueTerm[], setting: Setting): readonly Edit[] {
  const out: Edit[] = [];
  for (const term of truncated.terms) {
    const own = leading(setting, term.value);
    if (own.kind !== 'monomial') continue;
    const coefficient = sample(own.coefficient);
    if (coefficient === null) continue;
    const fits = (changed: Expression): boolean => {
      const moved = leading(setting, changed);
      if (moved.kind !== 'monomial' || (compareSizes(own.size, size) !== 0 && compareSizes(moved.size, size) !== 0)) return false;
      const value = sample(moved.coefficient);
      return value !== null && truth.some((t) => t.value !== null && compareSizes(t.size, moved.size) === 0 && Math.abs(t.value - value) <= 1e-9 * Math.abs(value));
    };
    const offer = (node: Expression, replacement: Expression, place: Span, text: string, cost: number): void => {
      if (fits(replaceNode(term.value, node, replacement))) out.push({ side: replaceNode(truncated.side, node, replacement), place, text, kind: 'exponent', cost });
    };
    const visit = (node: Expression): void => {
      if (node.kind === 'power' && node.exponent.kind === 'number' && dependsOn(node.base, setting.variable)) {
        if (node.exponent.span && Q.isInteger(node.exponent.value)) {
          const current = node.exponent.value.num;
          for (let m = current > 8n ? current - 8n : 1n; m <= current + 8n; m += 1n) if (m !== current) offer(node.exponent, build.number(m), node.exponent.span, `${m}`, 1.5 + Number(m > current ? m - current : current - m) / 10);
        }
        if (node.base.kind === 'symbol') return;
      }
      if (node.kind === 'symbol' && node.name === setting.variable && node.span) {
        for (let m = 2n; m <= 9n; m += 1n) offer(node, build.power(node, m), { start: node.span.end, end: node.span.end }, `^${m}`, 2 + Number(m) / 10);
      }
      mapChildren(node, (c) => {
        visit(c);
        return c;
      });
    };
    visit(term.node);
  }
  return out;
}
