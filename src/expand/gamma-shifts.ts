/** Gamma functions whose arguments differ by whole numbers, written by one of them: Gamma(z + n) = (z)_n Gamma(z) (DLMF 5.5.1), so that they cancel exactly. */
import { build, type Expression, mapChildren, Q, structureKey, walk } from '../expression/index.ts';
import { collected, describe } from '../functions/index.ts';

/** Calls that stand for quotients of gamma functions. */
const MADE_OF_GAMMA = new Set(['factorial', 'binomial', 'pochhammer', 'fallingFactorial', 'beta']);
/** The widest difference of two arguments that is written out. */
const MOST_SHIFT = 60n;

interface Shifted {
  /** The argument without the whole number in it. */
  readonly base: Expression;
  readonly key: string;
  readonly shift: bigint;
}

function shiftedOf(argument: Expression): Shifted | null {
  const plain = collected(argument);
  if (plain.kind === 'number') return null;
  const terms = plain.kind === 'sum' ? plain.terms : [plain];
  const number = terms.find((t) => t.kind === 'number');
  const shift = number?.kind === 'number' ? Q.floor(number.value) : 0n;
  const fraction = number?.kind === 'number' ? Q.subtract(number.value, Q.rational(shift)) : Q.ZERO;
  const rest = terms.filter((t) => t !== number);
  const base = build.sum(...rest, ...(Q.isZero(fraction) ? [] : [build.number(fraction)]));
  return { base, key: [...rest.map(structureKey).sort(), Q.toText(fraction)].join('+'), shift };
}

/** The same function, with the gamma functions of every such group joined; the tree itself where there is no group. Cost: a few walks of the tree. */
export function withGammaShiftsJoined(tree: Expression): Expression {
  if (![...walk(tree)].some((n) => n.kind === 'call' && (n.function === 'gamma' || MADE_OF_GAMMA.has(n.function)))) return tree;
  const written = inGamma(tree);
  const groups = new Map<string, { readonly base: Expression; readonly shifts: Set<bigint> }>();
  for (const node of walk(written)) {
    const [argument] = node.kind === 'call' && node.function === 'gamma' ? node.args : [];
    const s = argument && shiftedOf(argument);
    if (!s) continue;
    const group = groups.get(s.key) ?? { base: s.base, shifts: new Set() };
    group.shifts.add(s.shift);
    groups.set(s.key, group);
  }
  const least = new Map<string, { readonly base: Expression; readonly shift: bigint }>();
  for (const [key, { base, shifts }] of groups) {
    const sorted = [...shifts].sort((a, b) => (a < b ? -1 : 1));
    const [first, last] = [sorted[0], sorted[sorted.length - 1]];
    if (first !== undefined && last !== undefined && first !== last && last - first <= MOST_SHIFT) least.set(key, { base, shift: first });
  }
  return least.size === 0 ? tree : joined(written, least);
}

function inGamma(e: Expression): Expression {
  if (e.kind === 'call' && MADE_OF_GAMMA.has(e.function)) {
    const definition = describe(e.function)?.definition?.(e.args.map(inGamma));
    if (definition) return inGamma(definition);
  }
  return mapChildren(e, inGamma);
}

type Least = ReadonlyMap<string, { readonly base: Expression; readonly shift: bigint }>;

/** A product of powers, those of gamma functions kept apart. */
interface Parts {
  readonly rest: Expression[];
  readonly gammas: Map<string, { readonly tree: Expression; exponent: bigint }>;
}

function joined(e: Expression, least: Least): Expression {
  const isProduct = e.kind === 'product' || e.kind === 'quotient' || e.kind === 'power' || e.kind === 'call';
  if (!isProduct) return mapChildren(e, (child) => joined(child, least));
  const parts: Parts = { rest: [], gammas: new Map() };
  take(e, 1n, least, parts);
  const gammas = [...parts.gammas.values()].filter((g) => g.exponent !== 0n).map((g) => build.power(g.tree, Q.rational(g.exponent)));
  return build.product(...parts.rest, ...gammas);
}

function take(e: Expression, exponent: bigint, least: Least, into: Parts): void {
  const raised = (x: Expression): Expression => (exponent === 1n ? x : build.power(x, Q.rational(exponent)));
  if (e.kind === 'product') e.factors.forEach((f) => take(f, exponent, least, into));
  else if (e.kind === 'quotient') {
    take(e.numerator, exponent, least, into);
    take(e.denominator, -exponent, least, into);
  } else if (e.kind === 'negation') {
    if (exponent % 2n !== 0n) into.rest.push(build.number(-1));
    take(e.operand, exponent, least, into);
  } else if (e.kind === 'power' && e.exponent.kind === 'number' && e.exponent.value.den === 1n) take(e.base, exponent * e.exponent.value.num, least, into);
  else if (e.kind === 'call' && e.function === 'gamma' && e.args[0]) {
    const s = shiftedOf(e.args[0]);
    const start = s && least.get(s.key);
    if (!s || !start) {
      into.rest.push(raised(mapChildren(e, (child) => joined(child, least))));
      return;
    }
    const tree = build.call('gamma', collected(build.sum(start.base, build.number(Q.rational(start.shift)))));
    for (let j = start.shift; j < s.shift; j += 1n) into.rest.push(raised(collected(build.sum(start.base, build.number(Q.rational(j))))));
    const known = into.gammas.get(s.key);
    if (known) known.exponent += exponent;
    else into.gammas.set(s.key, { tree, exponent });
  } else into.rest.push(raised(mapChildren(e, (child) => joined(child, least))));
}
