/** Equations simplified in place: every function of a small quantity is replaced by its leading terms, the rest stays as it is written. */
import { build, type Expression, mapChildren, Q, structureKey } from '../../expression/index.ts';
import { attempt, type Budget, Declined, type Outcome } from '../../outcome.ts';
import { requireShallow } from '../depth.ts';
import { expand } from '../expand.ts';
import type { Expansion, ExpansionProblem } from '../expansion.ts';

/** Simplify an equation (or a system: its formulas one by one) in the variable. */
export interface InPlaceProblem extends Omit<ExpansionProblem, 'function'> {
  /** As written; derivatives of the variable count as quantities of their own. */
  readonly formula: Expression;
}

/** One replaced piece. */
export interface Replaced {
  /** As written. */
  readonly from: Expression;
  readonly expansion: Expansion;
}

export interface InPlace {
  readonly replaced: readonly Replaced[];
  /** The formula with `piece(expansion)` in the place of each piece. */
  readonly formula: (piece: (expansion: Expansion) => Expression) => Expression;
}

/**
 * Pieces are the largest parts that depend on the variable otherwise than as a polynomial: functions, roots, broken and negative powers, quotients by it.
 * Functions multiplied with each other (sin x cos x) are one piece, so that it is consistent in its order; factors free of the variable and powers of it stay outside.
 * Declines where nothing is to be replaced.
 */
export function simplifyInPlace(problem: InPlaceProblem, budget: Budget): Outcome<InPlace> {
  return attempt(() => {
    requireShallow(problem.formula);
    if (problem.variable.kind !== 'symbol') throw new Declined('bad-request', 'The small quantity must be one symbol here; give a ratio a name of its own.');
    const name = problem.variable.name;
    const found = new Map<string, Replaced>();
    const marks = new Map<Expression, string>();
    const replace = (e: Expression): Expression => {
      const key = structureKey(e);
      if (!found.has(key)) {
        const { formula: _, ...rest } = problem;
        const expansion = expand({ ...rest, function: unapplied(e, name) }, budget);
        if (!expansion.ok) throw new Declined(expansion.error.code, expansion.error.message);
        found.set(key, { from: e, expansion: expansion.value });
      }
      const mark = build.symbol(`piece~${key}`);
      marks.set(mark, key);
      return mark;
    };
    const marked = rebuild(problem.formula, name, replace);
    if (found.size === 0) throw new Declined('bad-request', 'The equation holds no function of this quantity that could be replaced by its leading terms; name another quantity, or the unknown to be solved for.');
    const formula = (piece: (expansion: Expansion) => Expression): Expression => {
      const filled = (e: Expression): Expression => {
        const key = e.kind === 'symbol' ? marks.get(e) : undefined;
        const own = key === undefined ? undefined : found.get(key);
        return own ? piece(own.expansion) : mapChildren(e, filled);
      };
      return filled(marked);
    };
    return { replaced: [...found.values()], formula };
  });
}

/** `\theta(t)` is the quantity `\theta`. */
function unapplied(e: Expression, name: string): Expression {
  if (e.kind === 'apply' && e.name === name && e.derivatives.every((d) => d === 0)) return build.symbol(name);
  return mapChildren(e, (child) => unapplied(child, name));
}

/** Whether the quantity itself occurs: its derivatives are quantities of their own. */
function holds(e: Expression, name: string): boolean {
  if (e.kind === 'derivative' && e.body.kind === 'apply' && e.body.name === name) return false;
  if (e.kind === 'apply' && e.name === name) return e.derivatives.every((d) => d === 0);
  if (e.kind === 'symbol') return e.name === name;
  if (e.kind === 'derivative') return holds(e.body, name);
  let any = false;
  mapChildren(e, (child) => {
    any ||= holds(child, name);
    return child;
  });
  return any;
}

/** Whether the expression is a polynomial in the quantity, seen from outside its derivatives. */
function isPolynomial(e: Expression, name: string): boolean {
  if (!holds(e, name)) return true;
  switch (e.kind) {
    case 'symbol':
    case 'apply':
      return true;
    case 'sum':
      return e.terms.every((t) => isPolynomial(t, name));
    case 'product':
      return e.factors.every((f) => isPolynomial(f, name));
    case 'negation':
      return isPolynomial(e.operand, name);
    case 'quotient':
      return !holds(e.denominator, name) && isPolynomial(e.numerator, name);
    case 'power':
      return e.exponent.kind === 'number' && Q.isInteger(e.exponent.value) && e.exponent.value.num > 0n && isPolynomial(e.base, name);
    default:
      return false;
  }
}

function rebuild(e: Expression, name: string, replace: (e: Expression) => Expression): Expression {
  const inner = (child: Expression): Expression => rebuild(child, name, replace);
  if (isPolynomial(e, name)) return e;
  switch (e.kind) {
    case 'relation':
    case 'sum':
    case 'negation':
      return mapChildren(e, inner);
    case 'derivative':
      return { ...e, body: inner(e.body) };
    case 'quotient':
      return holds(e.denominator, name) ? outside(e, name, replace) : { ...e, numerator: inner(e.numerator) };
    case 'product': {
      const functions = e.factors.filter((f) => !isPolynomial(f, name));
      const [only] = functions;
      if (functions.length === 1 && only) return { ...e, factors: e.factors.map((f) => (f === only ? inner(f) : f)) };
      if (functions.some(derivativesIn)) return { ...e, factors: e.factors.map((f) => (functions.includes(f) ? inner(f) : f)) };
      const whole = replace(build.product(...functions));
      let placed = false;
      const factors = e.factors.flatMap((f) => {
        if (!functions.includes(f)) return [f];
        if (placed) return [];
        placed = true;
        return [whole];
      });
      return build.product(...factors);
    }
    case 'power':
      // A sum in brackets with derivatives in it is replaced inside.
      return derivativesIn(e.base) ? { ...e, base: inner(e.base) } : replace(e);
    default:
      return replace(e);
  }
}

const derivativesIn = (e: Expression): boolean => e.kind === 'derivative' || (e.kind === 'apply' && e.derivatives.some((d) => d > 0)) || (e.kind === 'symbol' && /^\\d{0,3}dot\{|'/.test(e.name)) || childrenOf(e).some(derivativesIn);

function childrenOf(e: Expression): readonly Expression[] {
  const list: Expression[] = [];
  mapChildren(e, (child) => {
    list.push(child);
    return child;
  });
  return list;
}

/** A quotient by the quantity: what does not depend on it stays outside the piece. */
function outside(e: Extract<Expression, { kind: 'quotient' }>, name: string, replace: (e: Expression) => Expression): Expression {
  const factorsOf = (x: Expression): readonly Expression[] => (x.kind === 'product' ? x.factors : [x]);
  const above = factorsOf(e.numerator);
  const below = factorsOf(e.denominator);
  const still = (list: readonly Expression[]): readonly Expression[] => list.filter((f) => !holds(f, name));
  const moving = (list: readonly Expression[]): readonly Expression[] => list.filter((f) => holds(f, name));
  const piece = replace(build.quotient(build.product(...moving(above)), build.product(...moving(below))));
  const front = still(above);
  const under = still(below);
  if (front.length === 0 && under.length === 0) return piece;
  const factor = under.length > 0 ? build.quotient(build.product(...front), build.product(...under)) : build.product(...front);
  return build.isOneNumber(factor) ? piece : build.product(factor, piece);
}

