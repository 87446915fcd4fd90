/** A differential equation, or a system, as it stands in a text: which names are functions of which variable, and what is given at the start. */
import { build, dependsOn, type Expression, freeSymbols, mapChildren, markedName, Q, sameExpression, walk } from '../../expression/index.ts';
import { differentiate } from '../../functions/index.ts';
import { Declined } from '../../outcome.ts';

export interface UnknownFunction {
  /** Canonical name of the symbol (`y`, `\theta`). */
  readonly name: string;
  /** Of the highest derivative that occurs; at least 1. */
  readonly order: number;
}

/** The value of a derivative (0: of the function itself) at the statement's point. */
export interface InitialValue {
  readonly name: string;
  readonly derivative: number;
  readonly value: Expression;
}

export interface DifferentialStatement {
  /** The independent variable. */
  readonly variable: string;
  readonly unknowns: readonly UnknownFunction[];
  /** Each is zero; functions and their derivatives are the symbols of `slot`. */
  readonly equations: readonly Expression[];
  readonly initial: readonly InitialValue[];
  /** Where the initial values stand; null where there are none. */
  readonly point: Expression | null;
  /** Formulas that are neither equations nor initial values. */
  readonly conditions: readonly Expression[];
  /** Unknown functions that the text writes with their argument (`y(x)`). */
  readonly applied: ReadonlySet<string>;
}

const MOST_ORDER = 12;

/** The symbol that stands for a derivative of an unknown function; no reader produces it. */
export const slot = (name: string, derivative: number): string => `${name}~${derivative}`;
/** The function and the derivative that a slot stands for. */
function slotOf(symbol: string): { readonly name: string; readonly derivative: number } | null {
  const at = symbol.lastIndexOf('~');
  return at < 0 ? null : { name: symbol.slice(0, at), derivative: Number(symbol.slice(at + 1)) };
}

/** Whether a symbol stands for an unknown function, for a derivative of one, or for one of its coefficients. */
export const standsForUnknown = (symbol: string): boolean => symbol.includes('~');

interface Evidence {
  /** Differentiated names, with whether more than a single prime says so. */
  readonly names: Map<string, { sure: boolean }>;
  /** Variables named as arguments or below a derivative's bar. */
  readonly variables: Set<string>;
  dots: boolean;
  primes: boolean;
}

function gather(pieces: readonly Expression[], unknown: string | undefined): Evidence {
  const found: Evidence = { names: new Map(), variables: new Set(), dots: false, primes: false };
  const note = (name: string, sure: boolean): void => {
    const known = found.names.get(name);
    found.names.set(name, { sure: sure || (known?.sure ?? false) || name === unknown });
  };
  for (const piece of pieces) {
    for (const e of walk(piece)) {
      if (e.kind === 'derivative' && e.variable.kind === 'symbol' && e.body.kind === 'apply') {
        note(e.body.name, true);
        found.variables.add(e.variable.name);
      } else if (e.kind === 'apply' && e.args.length === 1 && (e.derivatives[0] ?? 0) > 0) {
        note(e.name, true);
        const [argument] = e.args;
        const isValue = piece.kind === 'relation' && piece.sides.includes(e) && pieces.length > 1;
        if (argument?.kind === 'symbol' && (!isValue || USUAL_VARIABLES.includes(argument.name))) found.variables.add(argument.name);
      } else if (e.kind === 'symbol') {
        const mark = markedName(e.name);
        if (!mark) continue;
        note(mark.name, mark.dots || mark.derivative > 1);
        if (mark.dots) found.dots = true;
        else found.primes = true;
      }
    }
  }
  // A value at a point makes a primed name a function: y' = ..., y(0) = 1.
  for (const piece of pieces) {
    for (const e of walk(piece)) {
      const [argument] = e.kind === 'apply' && e.args.length === 1 && found.names.has(e.name) ? e.args : [];
      if (e.kind === 'apply' && argument && !(argument.kind === 'symbol' && USUAL_VARIABLES.includes(argument.name))) note(e.name, true);
    }
  }
  for (const [name, { sure }] of [...found.names]) if (!sure) found.names.delete(name);
  return found;
}

const USUAL_VARIABLES = ['x', 't', 's', 'z', 'r', '\\xi', '\\tau', '\\varphi', '\\phi', '\\eta', '\\rho', '\\zeta', '\\theta', 'u'];

function independent(found: Evidence, pieces: readonly Expression[], asked: string | undefined): string | null {
  const named = [...found.variables].filter((v) => !found.names.has(v));
  const [only] = named;
  if (named.length > 1) throw new Declined('no-expansion', 'This equation has derivatives in several variables (a partial differential equation), which is not solved; write an equation in one variable.');
  if (only !== undefined) return only;
  if (found.dots) return asked === '\\tau' ? '\\tau' : found.names.has('t') ? '\\tau' : 't';
  const inside = new Set(pieces.flatMap((p) => (p.kind === 'relation' ? freeSymbols(p) : [])));
  if (asked !== undefined && USUAL_VARIABLES.includes(asked) && !found.names.has(asked)) return asked;
  const usual = USUAL_VARIABLES.slice(0, 7).filter((v) => inside.has(v) && !found.names.has(v));
  const [first] = usual;
  if (first !== undefined) return first;
  return ['x', 't', 's'].find((v) => !found.names.has(v)) ?? null;
}

/**
 * The differential statement of a formula and what stands beside it; null where nothing is differentiated.
 * A single prime alone (`x' = \gamma(x - vt)`) is a derivative only where the unknown is named, or a value at a point is given.
 * Dots are derivatives in t; primes and fractions in the variable that they name, that is asked for, or that stands in the equation under a usual name (x, t, s, z, ...).
 */
export function differentialStatement(written: readonly Expression[], asked: { readonly unknown?: string; readonly variable?: string }): DifferentialStatement | null {
  const found = gather(written, asked.unknown);
  if (found.names.size === 0) return null;
  const variable = independent(found, written, asked.variable);
  if (variable === null) return null;
  const names = new Set(found.names.keys());
  if (asked.unknown !== undefined && !names.has(asked.unknown)) return null;
  const reader = new Slots(names, variable);
  const pieces = written.map((p) => ownNames(p, names));
  const equations: Expression[] = [];
  const initial: InitialValue[] = [];
  const conditions: Expression[] = [];
  let point: Expression | null = null;
  const at = (where: Expression): void => {
    if (point !== null && !sameExpression(point, where)) throw new Declined('no-expansion', 'Values are given at two different points (a boundary-value problem), which is not solved; give all values at one point.');
    point = where;
  };
  // `y = 1 at x = 0`: where the point stands as a formula of its own.
  const place = pieces.find((p) => p.kind === 'relation' && p.relations.every((r) => r === '=') && p.sides.length === 2 && p.sides[0]?.kind === 'symbol' && p.sides[0].name === variable && !dependsOn(p.sides[1] ?? p, variable));
  const stated = place?.kind === 'relation' ? (place.sides[1] ?? null) : null;
  for (const piece of pieces) {
    if (piece === place) continue;
    const values = reader.initialValues(piece, stated);
    if (values) {
      for (const v of values) {
        at(v.point);
        initial.push({ name: v.name, derivative: v.derivative, value: v.value });
      }
    } else if (reader.speaksOfDerivatives(piece)) equations.push(...reader.equations(piece));
    else conditions.push(piece);
  }
  if (equations.length === 0) return null;
  const unknowns = [...names].map((name) => ({ name, order: orderOf(equations, name) })).filter((u) => u.order > 0);
  if (unknowns.length === 0) return null;
  if (unknowns.some((u) => u.order > MOST_ORDER)) throw new Declined('bad-request', `Derivatives up to order ${MOST_ORDER} are read; this equation has a higher one.`);
  // A place without values at it says where to expand only if it is a number; a name `x = a` of a parameter is not one.
  return { variable, unknowns, equations, initial, point, conditions: [...conditions, ...(place && point === null ? [place] : [])], applied: reader.applied };
}

/** A letter that is elsewhere a special function (`\psi(0)`, `E(t)`) is here the unknown that it is differentiated as. */
function ownNames(e: Expression, names: ReadonlySet<string>): Expression {
  const inner = mapChildren(e, (child) => ownNames(child, names));
  if (inner.kind !== 'call' || inner.written === undefined || !names.has(inner.written)) return inner;
  const argument = inner.args[inner.args.length - 1];
  const [first] = inner.args;
  const derivative = inner.function === 'polygamma' && first?.kind === 'number' ? Number(first.value.num) : 0;
  return argument ? { kind: 'apply', name: inner.written, args: [argument], derivatives: [derivative], span: inner.span } : inner;
}

function orderOf(equations: readonly Expression[], name: string): number {
  let order = 0;
  for (const equation of equations) {
    for (const symbol of freeSymbols(equation)) {
      const s = slotOf(symbol);
      if (s?.name === name) order = Math.max(order, s.derivative);
    }
  }
  return order;
}

/** Puts slots in the place of functions and derivatives. */
class Slots {
  readonly applied = new Set<string>();
  constructor(
    private readonly names: ReadonlySet<string>,
    private readonly variable: string,
  ) {}

  /** The value of an unknown function or derivative at a point: `y(0)`, `y'(x_0)`, `\dot{x}(0)`. */
  private valueAt(e: Expression, stated: Expression | null): { readonly name: string; readonly derivative: number; readonly point: Expression } | null {
    if (e.kind === 'apply' && e.args.length === 1 && this.names.has(e.name)) {
      const [point] = e.args;
      return point && !dependsOn(point, this.variable) ? { name: e.name, derivative: e.derivatives[0] ?? 0, point } : null;
    }
    // `\theta(0)`, where the name also stands alone: the bracket behind it holds the point.
    if (e.kind === 'product' && e.factors.length === 2) {
      const [first, point] = e.factors;
      const own = first ? this.unapplied(first) : null;
      const gap = first?.span && point?.span ? point.span.start > first.span.end : false;
      return own && point && gap && !dependsOn(point, this.variable) && !this.mentions(point) ? { ...own, point } : null;
    }
    const own = stated ? this.unapplied(e) : null;
    return own && stated ? { ...own, point: stated } : null;
  }

  /** A function or derivative written without argument, or at the variable below a derivative's bar. */
  private unapplied(e: Expression): { readonly name: string; readonly derivative: number } | null {
    if (e.kind === 'symbol') {
      if (this.names.has(e.name)) return { name: e.name, derivative: 0 };
      const mark = markedName(e.name);
      return mark && this.names.has(mark.name) ? { name: mark.name, derivative: mark.derivative } : null;
    }
    if (e.kind === 'derivative' && e.body.kind === 'apply' && this.names.has(e.body.name) && e.variable.kind === 'symbol' && e.variable.name === this.variable) return { name: e.body.name, derivative: e.times + (e.body.derivatives[0] ?? 0) };
    return null;
  }

  initialValues(piece: Expression, stated: Expression | null): readonly { readonly name: string; readonly derivative: number; readonly point: Expression; readonly value: Expression }[] | null {
    if (piece.kind !== 'relation' || !piece.relations.every((r) => r === '=' || r === 'define')) return null;
    const value = piece.sides[piece.sides.length - 1];
    const places = piece.sides.slice(0, -1).map((side) => this.valueAt(side, stated));
    if (!value || places.some((p) => p === null) || this.mentions(value) || dependsOn(value, this.variable)) return null;
    return places.flatMap((p) => (p ? [{ ...p, value }] : []));
  }

  private mentions(e: Expression): boolean {
    return [...walk(e)].some((n) => (n.kind === 'symbol' && (this.names.has(n.name) || this.names.has(markedName(n.name)?.name ?? ''))) || (n.kind === 'apply' && this.names.has(n.name)));
  }

  speaksOfDerivatives(piece: Expression): boolean {
    if (piece.kind === 'relation' && !piece.relations.every((r) => r === '=' || r === 'define')) return false;
    return this.mentions(piece);
  }

  /** lhs - rhs of each equals sign in a chain. */
  equations(piece: Expression): readonly Expression[] {
    if (piece.kind !== 'relation') return [this.slots(piece)];
    const sides = piece.sides.map((s) => this.slots(s));
    const last = sides[sides.length - 1] as Expression;
    return sides.slice(0, -1).map((s) => (last.kind === 'number' && Q.isZero(last.value) ? s : build.difference(s, last)));
  }

  slots(e: Expression): Expression {
    if (e.kind === 'symbol') {
      const own = this.unapplied(e);
      return own ? build.symbol(slot(own.name, own.derivative)) : e;
    }
    if (e.kind === 'apply' && this.names.has(e.name)) {
      const [argument] = e.args;
      if (e.args.length !== 1 || argument?.kind !== 'symbol' || argument.name !== this.variable) throw new Declined('no-expansion', `The unknown function ${e.name} stands at another argument than ${this.variable} (a delay or a value elsewhere), which is not solved; write the equation at one argument.`);
      this.applied.add(e.name);
      return build.symbol(slot(e.name, e.derivatives[0] ?? 0));
    }
    if (e.kind === 'derivative') return this.derivative(e);
    return mapChildren(e, (child) => this.slots(child));
  }

  private derivative(e: Extract<Expression, { kind: 'derivative' }>): Expression {
    const body = e.body.kind === 'apply' && this.names.has(e.body.name) ? build.symbol(slot(e.body.name, e.body.derivatives[0] ?? 0)) : this.slots(e.body);
    if (e.variable.kind !== 'symbol' || e.variable.name !== this.variable) throw new Declined('no-expansion', 'This equation has derivatives in several variables (a partial differential equation), which is not solved; write an equation in one variable.');
    let value: Expression | null = body;
    for (let k = 0; k < e.times && value; k += 1) value = totalDerivative(value, this.variable);
    if (!value) throw new Declined('no-expansion', 'A derivative in this equation could not be carried out; write it out.');
    return value;
  }
}

/** d/dx along a solution: each slot moves to the next derivative. Null where a function in it has no derivative in closed form. */
function totalDerivative(e: Expression, variable: string): Expression | null {
  return differentiate(e, variable, (symbol) => {
    const s = slotOf(symbol);
    return s ? build.symbol(slot(s.name, s.derivative + 1)) : null;
  });
}
