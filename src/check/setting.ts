/** In which quantity, and at which point, a claim is an expansion: from the request, from marks and words around, else from its own powers. */
import { type Assumption, build, children, dependsOn, type Expression, freeSymbols, literalRational, Q, sameExpression, type SumNode, walk } from '../expression/index.ts';
import type { Budget } from '../outcome.ts';
import { candidates } from '../read/index.ts';
import type { Setting } from './context.ts';
import { withoutMarks } from './truncated.ts';

export interface Asked {
  readonly variable: Expression | null;
  readonly point: Expression | 'inf' | '-inf' | null;
  readonly side: 'both' | 'right' | 'left';
  readonly assumptions: readonly Assumption[];
  readonly budget: Budget;
}
export interface Around {
  readonly conditions: readonly Expression[];
  readonly before: string;
  readonly after: string;
}

export interface Choice {
  readonly setting: Setting;
  /** The text or the request says so; a guess is only held against a claim that is plainly meant as an expansion. */
  readonly certain: boolean;
}

const ZERO = build.number(0);

/** The settings in which to judge the claim, likeliest first; empty where nothing varies. */
export function settingsFor(f: Expression, side: Expression, asked: Asked, around: Around): readonly Choice[] {
  const make = (variable: string, point: Expression | 'inf' | '-inf', certain: boolean): Choice => ({
    certain,
    setting: { variable, point, side: asked.side, assumptions: [...asked.assumptions, ...positive([f, side], variable, asked.assumptions)], budget: asked.budget },
  });
  const orders = [...walk(side), ...walk(f)].filter((n) => n.kind === 'order');
  const named = asked.variable ? carrier(asked.variable, f, side) : null;
  const found = candidates(build.sum(f, withoutMarks(side)), { orders, conditions: around.conditions, before: around.before, after: around.after }).found;
  const foundName = found ? carrier(found.variable.expression, f, side) : null;
  // x/log^3 x falls at 0 and rises at infinity: such an O-term names the quantity, not the point.
  const logarithmic = orders.some((o) => [...walk(o)].some((n) => n.kind === 'call'));
  const certain = found !== null && found.from !== 'only symbol' && found.from !== 'only ratio' && found.from !== 'text' && !(found.from === 'order term' && logarithmic);
  const foundPoint: Expression | 'inf' | null = found ? (found.point.kind === 'constant' && found.point.name === 'infinity' ? 'inf' : found.point) : null;
  if (named !== null) {
    if (asked.point) return [make(named, asked.point, true)];
    if (foundName === named && foundPoint && certain) return [make(named, foundPoint, true)];
    return pointsFor(side, named).map((p, i) => make(named, p, i === 0 && asked.variable !== null));
  }
  const inOrders = namesInOrders(orders);
  if (foundName === null && inOrders.length === 1 && inOrders[0] !== undefined) return [make(inOrders[0], asked.point ?? ZERO, true)];
  if (foundName !== null && foundPoint && certain) {
    const point = asked.point ?? foundPoint;
    // 1/x in an O-term does not say at which end of the line.
    return [make(foundName, point, true), ...(point === 'inf' && !asked.point ? [make(foundName, '-inf', false)] : [])];
  }
  const names = foundName !== null ? [foundName] : likelyVariables(f, side, inOrders);
  return names.flatMap((name) => {
    if (asked.point) return [make(name, asked.point, true)];
    // What running text says nearby may belong to another formula: it is tried first.
    const said: readonly (Expression | 'inf')[] = found?.from === 'text' && foundPoint ? [foundPoint] : [];
    const others = pointsFor(side, name).filter((p) => !said.some((q) => q === p || (typeof p === 'object' && typeof q === 'object' && sameExpression(p, q))));
    return [...said, ...others].map((p) => make(name, p, false));
  });
}

/** Symbols of O-terms outside the arguments of functions: O(h^2 f'(x)) speaks of h. */
function namesInOrders(orders: readonly Expression[]): readonly string[] {
  const names = new Set<string>();
  const visit = (e: Expression): void => {
    if (e.kind === 'symbol') names.add(e.name);
    else if (e.kind !== 'apply' && e.kind !== 'call') for (const child of childrenOf(e)) visit(child);
  };
  for (const order of orders) if (order.kind === 'order') visit(order.argument);
  return [...names];
}

/** A ratio v/c is small where v is: its first symbol above the bar that both sides show carries it. */
function carrier(variable: Expression, f: Expression, side: Expression): string | null {
  const above = variable.kind === 'quotient' ? variable.numerator : variable;
  const names = freeSymbols(above).filter((name) => dependsOn(f, name) || dependsOn(side, name));
  return names.find((name) => dependsOn(f, name)) ?? names[0] ?? null;
}

/** Parameters are taken as positive, as authors silently do; a claim that needs it says so. */
function positive(sides: readonly Expression[], variable: string, known: readonly Assumption[]): readonly Assumption[] {
  const names = new Set(sides.flatMap((s) => freeSymbols(s)));
  names.delete(variable);
  const spoken = new Set(known.flatMap((a) => (a.kind === 'relation' ? [...freeSymbols(a.left), ...freeSymbols(a.right)] : [])));
  return [...names].filter((n) => !spoken.has(n)).map((n) => ({ kind: 'relation', left: build.symbol(n), relation: '>', right: ZERO }));
}

/** Symbols in whose powers the printed side runs, those in O-terms and then those with most distinct powers first, and which the function holds too. */
function likelyVariables(f: Expression, side: Expression, inOrders: readonly string[]): readonly string[] {
  const kept = withoutMarks(side);
  const names = freeSymbols(kept).filter((name) => dependsOn(f, name));
  const bounded = names.filter((name) => inOrders.includes(name));
  const scored = (bounded.length > 0 ? bounded : names).map((name) => ({ name, plain: powersOf(kept, name, false).size, powers: powersOf(kept, name, true).size, order: freeSymbols(f).indexOf(name) }));
  return scored
    .filter((s) => s.powers > 0)
    .sort((a, b) => b.plain - a.plain || b.powers - a.powers || a.order - b.order)
    .map((s) => s.name)
    .slice(0, 3);
}

/** Distinct powers of the symbol among factors and bases; `inCalls`: inside of functions too. */
function powersOf(e: Expression, name: string, inCalls: boolean): ReadonlySet<string> {
  const found = new Set<string>();
  const visit = (node: Expression, exponent: string): void => {
    if (node.kind === 'symbol') {
      if (node.name === name) found.add(exponent);
    } else if (node.kind === 'power') {
      const own = literalRational(node.exponent);
      visit(node.base, own ? `${exponent}*${Q.toText(own)}` : '');
      visit(node.exponent, '1');
    } else if (node.kind !== 'call' || inCalls) for (const child of children(node)) visit(child, exponent);
  };
  visit(e, '1');
  return found;
}

/** Points that the printed powers suggest: a where powers of x - a stand, infinity where they fall, else 0. */
function pointsFor(side: Expression, name: string): readonly (Expression | 'inf')[] {
  const kept = withoutMarks(side);
  const shift = shiftIn(kept, name);
  if (shift) return [shift];
  const zero = commonZero(kept, name);
  if (zero) return [zero, 'inf', ZERO];
  const terms = kept.kind === 'sum' ? kept.terms : kept.kind === 'product' ? (kept.factors.find((factor) => factor.kind === 'sum' && dependsOn(factor, name)) ?? kept).kind === 'sum' ? sumTerms(kept.factors.find((factor) => factor.kind === 'sum' && dependsOn(factor, name))) : [kept] : [kept];
  const exponents = terms.map((t) => exponentOf(t, name)).filter((e) => e !== null);
  const [first] = exponents;
  const last = exponents.at(-1);
  if (first !== undefined && last !== undefined && last < first) return ['inf', ZERO];
  return first !== undefined && exponents.length === 1 && first < 0 ? ['inf', ZERO] : [ZERO, 'inf'];
}

const sumTerms = (e: Expression | undefined): readonly Expression[] => (e?.kind === 'sum' ? e.terms : e ? [e] : []);

/** The power of the symbol in a product of powers; null where it occurs in another way. */
export function exponentOf(e: Expression, name: string): number | null {
  switch (e.kind) {
    case 'negation':
      return exponentOf(e.operand, name);
    case 'symbol':
      return e.name === name ? 1 : 0;
    case 'number':
    case 'constant':
      return 0;
    case 'product':
      return e.factors.reduce<number | null>((sum, factor) => add(sum, exponentOf(factor, name)), 0);
    case 'quotient':
      return add(exponentOf(e.numerator, name), negate(exponentOf(e.denominator, name)));
    case 'power': {
      const exponent = literalRational(e.exponent);
      const base = exponentOf(e.base, name);
      return exponent && base !== null ? Q.toDouble(exponent) * base : dependsOn(e, name) ? null : 0;
    }
    default:
      return dependsOn(e, name) ? null : 0;
  }
}
const add = (a: number | null, b: number | null): number | null => (a === null || b === null ? null : a + b);
const negate = (a: number | null): number | null => (a === null ? null : -a);

/** The a of powers of (x - a), where x occurs in no other way in the sum. */
export function shiftIn(e: Expression, name: string): Expression | null {
  const shifts: Expression[] = [];
  let loose = false;
  const visit = (node: Expression): void => {
    const zero = node.kind === 'sum' && node !== e ? twoTermZero(node, name) : null;
    if (zero) {
      shifts.push(zero);
      return;
    }
    if (node.kind === 'symbol' && node.name === name) loose = true;
    else for (const child of [...childrenOf(node)]) visit(child);
  };
  visit(e);
  const [first] = shifts;
  return first && !loose ? first : null;
}
/** The a of x - a, x + b or a - x. */
export function twoTermZero({ terms }: SumNode, name: string): Expression | null {
  const [a, b] = terms;
  if (!a || !b || terms.length !== 2) return null;
  if (a.kind === 'symbol' && a.name === name && !dependsOn(b, name)) return b.kind === 'negation' ? b.operand : build.negation(b);
  return b.kind === 'negation' && b.operand.kind === 'symbol' && b.operand.name === name && !dependsOn(a, name) ? a : null;
}

/** The a where x - a is a factor of what every term that moves is a power of: ((x - 1)/(x + 1))^3. */
function commonZero(e: Expression, name: string): Expression | null {
  const zerosOf = (node: Expression): readonly Expression[] => {
    switch (node.kind) {
      case 'sum': {
        const own = twoTermZero(node, name);
        if (own) return [own];
        const moving = node.terms.filter((t) => dependsOn(t, name)).map(zerosOf);
        return moving[0]?.filter((a) => moving.every((others) => others.some((b) => sameExpression(a, b)))) ?? [];
      }
      case 'product':
        return node.factors.flatMap(zerosOf);
      case 'quotient':
        return zerosOf(node.numerator);
      case 'negation':
        return zerosOf(node.operand);
      case 'power': {
        const exponent = literalRational(node.exponent);
        return exponent && Q.signOf(exponent) > 0 ? zerosOf(node.base) : [];
      }
      default:
        return [];
    }
  };
  return zerosOf(e)[0] ?? null;
}
const childrenOf = (node: Expression): readonly Expression[] => {
  switch (node.kind) {
    case 'sum':
      return node.terms;
    case 'product':
      return node.factors;
    case 'quotient':
      return [node.numerator, node.denominator];
    case 'negation':
      return [node.operand];
    case 'power':
      return [node.base, node.exponent];
    case 'call':
    case 'apply':
      return node.args;
    default:
      return [];
  }
};
