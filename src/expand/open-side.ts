/** One side of a point made into t -> 0+: the symbol that trees are written in, and the variable as a series. */
import { createField } from '../algebra/index.ts';
import type { Element, Field } from '../algebra/types.ts';
import { type Assumption, build, type Expression, Q, substitute } from '../expression/index.ts';
import { describe } from '../functions/index.ts';
import { type Budget, Declined } from '../outcome.ts';
import { type Context, createScale, finiteStream, isRational, type Notes, Series } from '../series/index.ts';
import type { ExpansionProblem } from './expansion.ts';
import { openSession, type Session } from './session.ts';

export type Direction = 'right' | 'left' | 'inf' | '-inf';

/** The positive symbol w that trees are written in: w = x - a, a - x, x or -x. */
interface Chart {
  readonly symbol: string;
  /** The variable in w. */
  readonly variable: Expression;
  /** w in the variable. */
  readonly inverse: Expression;
  readonly infinite: boolean;
}

function chartOf(problem: Pick<ExpansionProblem, 'variable' | 'point'>, direction: Direction): Chart {
  const { variable, point } = problem;
  const name = variable.kind === 'symbol' ? variable.name : null;
  const infinite = direction === 'inf' || direction === '-inf';
  const atZero = point !== 'inf' && point !== '-inf' && point.kind === 'number' && Q.isZero(point.value);
  if (name !== null && (direction === 'inf' || (direction === 'right' && atZero))) return { symbol: name, variable, inverse: variable, infinite };
  const symbol = "w'";
  const w = build.symbol(symbol);
  if (direction === '-inf' || (direction === 'left' && atZero)) return { symbol, variable: build.negation(w), inverse: build.negation(variable), infinite };
  if (infinite) return { symbol, variable: w, inverse: variable, infinite };
  const a = point as Expression;
  return direction === 'right'
    ? { symbol, variable: build.sum(a, w), inverse: build.difference(variable, a), infinite }
    : { symbol, variable: build.difference(a, w), inverse: build.difference(a, variable), infinite };
}

/** The field, with a note where a constant arises that is not provably real: sums, products and quotients of real ones are real. */
function watched(field: Field, notes: Notes): Field {
  const watch = (e: Element): Element => {
    if (!notes.complex && !isRational(e) && field.isReal(e) !== 'yes') notes.complex = true;
    return e;
  };
  const watching: Field = Object.create(field, {
    i: {
      get: () => {
        notes.complex = true;
        return field.i;
      },
    },
    fromExpression: { value: (e: Expression) => watch(field.fromExpression(e)) },
    power: { value: (a: Element, exponent: Element) => watch(field.power(a, exponent)) },
    exp: { value: (a: Element) => watch(field.exp(a)) },
    log: { value: (a: Element) => watch(field.log(a)) },
    call: { value: (id: string, args: readonly Element[]) => watch(field.call(id, args)) },
  }) as Field;
  return watching;
}

export function openContext(plainField: Field, budget: Budget, symbol: string, local: Expression, largeLogarithm: Expression, oscillation: boolean): Context {
  const notes: Notes = { sided: false, onReal: false, divergent: false, complex: false, assumptions: new Set() };
  return {
    field: watched(plainField, notes),
    budget,
    scale: createScale(local, largeLogarithm),
    local: symbol,
    oscillation,
    notes,
    patience: { value: 16 },
  };
}

export interface OpenSide {
  readonly context: Context;
  /** The variable bound to its series. */
  readonly session: Session;
  /** A tree in the variable, rewritten in the context's symbol. */
  readonly fromVariable: (e: Expression) => Expression;
  readonly toVariable: (e: Expression) => Expression;
}

/** A context for one side of a point: field, scale of powers of t, and the variable as a series. The variable must be one symbol; compound variables are replaced before. */
export function openSide(problem: Pick<ExpansionProblem, 'variable' | 'point' | 'assumptions'>, direction: Direction, budget: Budget): OpenSide {
  const name = problem.variable.kind === 'symbol' ? problem.variable.name : null;
  if (name === null) throw new Declined('bad-request', 'The variable must be one symbol here.');
  const chart = chartOf(problem, direction);
  const w = build.symbol(chart.symbol);
  const positive: Assumption = { kind: 'relation', left: w, relation: '>', right: build.number(0) };
  const field: Field = createField([...problem.assumptions, positive], budget, describe);
  const local = chart.infinite ? build.quotient(build.number(1), w) : w;
  const largeLogarithm = chart.infinite ? build.call('log', w) : build.negation(build.call('log', w));
  const context = openContext(field, budget, chart.symbol, local, largeLogarithm, chart.infinite);
  const exponent = chart.infinite ? Q.MINUS_ONE : Q.ONE;
  const base = new Series(context.scale.local, finiteStream([{ exponent, coefficient: Q.ONE }]), () => w);
  const same = chart.symbol === name;
  return {
    context,
    session: openSession(context, new Map([[chart.symbol, base]])),
    fromVariable: same ? (e) => e : (e) => substitute(e, name, chart.variable),
    toVariable: same ? (e) => e : (e) => substitute(e, chart.symbol, chart.inverse),
  };
}
