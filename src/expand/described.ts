/** A function by its description: local form at singular places and infinity, differential equation or derivative at regular points. */
import type { Element } from '../algebra/types.ts';
import { build, type CallNode, type Expression, freeSymbols, Q, type Rational, walk } from '../expression/index.ts';
import { acceptsArity, describe, type FormalSeries, type FunctionDescription, type LocalForm, type Place, type Together } from '../functions/index.ts';
import { Declined } from '../outcome.ts';
import { add, alongDerivative, beyondAllOrders, compose, type Context, decideSign, divide, eventualSign, exactOf, finiteStream, growth, isRational, isRealMulti, leading, monomial, type Multi, multiply, plainText, scaleBy, Series, signOfExponent, split, subtract, withExact } from '../series/index.ts';
import { bind, type Evaluate, freshSymbol, type Session } from './session.ts';
import { aroundSlowPart } from './slow-part.ts';
import { taylorFromEquation } from './equation.ts';

export function evaluateDescribed(s: Session, d: FunctionDescription, args: readonly Multi[], evaluate: Evaluate): Multi {
  const c = s.context;
  const index = args.findIndex((a) => a instanceof Series);
  const argument = args[index];
  if (index < 0) return c.field.call(d.id, args as readonly Element[]);
  if (!(argument instanceof Series) || args.some((a, k) => k !== index && a instanceof Series)) {
    const value = d.together ? inBothArguments(s, d, args, evaluate) : null;
    if (value) return value;
    throw new Declined('no-expansion', `${title(d)} is expanded in one of its arguments at a time; keep the others constant.`);
  }
  const key = `${d.id}:${args.map((a, k) => (k === index ? '*' : c.field.key(a as Element))).join(',')}`;
  let known = s.calls.get(argument);
  if (!known) s.calls.set(argument, (known = new Map()));
  const found = known.get(key);
  if (found !== undefined) return found;
  const remember = (value: Multi): void => void known.set(key, value);
  const value = named(c, inOneArgument(s, d, args, index, argument, evaluate, remember), () => build.call(d.id, ...args.map((a) => exactOf(c, a))));
  remember(value);
  return value;
}

/** Both arguments grow: by their constant difference or ratio. Null where neither is constant. */
function inBothArguments(s: Session, d: FunctionDescription, args: readonly Multi[], evaluate: Evaluate): Multi | null {
  const c = s.context;
  const [first, second] = args;
  if (!(first instanceof Series) || !second || !isRealMulti(c, first) || growth(c, first) !== 'large' || eventualSign(c, first) !== 1) return null;
  const relation = relationOf(c, first, second);
  if (!relation) return null;
  const z = freshSymbol(s, 'z');
  const form = d.together?.(relation, build.symbol(z));
  if (!form && relation.kind === 'ratio' && relation.size === 'unknown') throw new Declined('needs-assumption', `The answer depends on whether ${plainText(relation.value)} lies below or above 1; assume which.`, undefined, freeSymbols(relation.value));
  if (!form) return null;
  const value = evaluateForm(bind(s, [[z, first]]), form, evaluate);
  return named(c, form.subdominantDropped ? multiply(c, value, add(c, Q.ONE, beyondAllOrders(c, first))) : value, () => build.call(d.id, ...args.map((a) => exactOf(c, a))));
}

function relationOf(c: Context, first: Multi, second: Multi): Together | null {
  const constant = (m: Multi): Element | null => {
    const parts = split(c, m);
    return parts.large || (parts.small instanceof Series && leading(c, parts.small) !== null) ? null : parts.constant;
  };
  const difference = constant(subtract(c, second, first));
  if (difference !== null) return { kind: 'difference', value: exactOf(c, difference) };
  const ratio = constant(divide(c, second, first));
  if (ratio === null || decideSign(c, ratio) !== 1) return null;
  const size = c.field.compare(ratio, Q.ONE);
  return { kind: 'ratio', value: exactOf(c, ratio), size: size === -1 ? 'below' : size === 1 ? 'above' : 'unknown' };
}

/** Gives a result its tree; where it is one power of a scale element, the coefficient too, so that it can cancel exactly. */
function named(c: Context, m: Multi, exact: () => Expression): Multi {
  if (!(m instanceof Series) || m.element.kind !== 'exponential') return withExact(m, exact);
  const first = m.stream.at(0);
  if (!first || first.order || m.stream.at(1) !== null || !(first.coefficient instanceof Series)) return withExact(m, exact);
  const coefficient = withExact(first.coefficient, () => build.product(exact(), build.power(m.element.expression, build.negation(exactOf(c, first.exponent)))));
  return new Series(m.element, finiteStream([{ exponent: first.exponent, coefficient }]), exact);
}

const title = (d: FunctionDescription): string => d.title.charAt(0).toUpperCase() + d.title.slice(1);

function inOneArgument(s: Session, d: FunctionDescription, args: readonly Multi[], index: number, f: Series, evaluate: Evaluate, remember: (value: Multi) => void): Multi {
  const c = s.context;
  const { large, constant, small } = split(c, f);
  const z = build.symbol(freshSymbol(s, 'z'));
  const trees = args.map((a, k) => (k === index ? z : exactOf(c, a)));
  if (large) {
    const sign = eventualSign(c, large);
    const slope = fasterPart(f, large) ? (d.derivative?.(trees, index) ?? null) : null;
    if (slope) {
      return aroundSlowPart(
        c,
        f,
        (base) => evaluateDescribed(s, d, args.map((a, k) => (k === index ? base : a)), evaluate),
        (base) => evaluate(bind(s, [[(z as { name: string }).name, base]]), slope),
      );
    }
    if (sign === 'complex' || sign === 0) throw new Declined('no-expansion', `${title(d)} is not expanded towards complex infinity; use a real direction.`);
    const form = d.local?.(trees, index, { kind: 'infinite', argument: z, direction: sign });
    if (form && !isRealMulti(c, f) && !holdsAround(d.id, sign)) throw new Declined('no-expansion', `${title(d)} is not expanded for a complex argument beside its cut; use a real direction.`);
    if (form) {
      const value = evaluateForm(bind(s, [[z.kind === 'symbol' ? z.name : '', f]]), form, evaluate);
      return form.subdominantDropped ? multiply(c, value, add(c, Q.ONE, beyondAllOrders(c, large))) : value;
    }
    if (d.local) {
      const general = d.parity && sign === -1 ? 'its behaviour for large negative arguments is not known here' : 'its behaviour for large arguments is not known here';
      throw new Declined('no-expansion', `${title(d)}: ${general}; choose a finite point.`);
    }
    throw new Declined('no-expansion', `${title(d)} has no known expansion for a large argument; choose a finite point.`);
  }
  if (!small || (small instanceof Series && leading(c, small) === null)) {
    const constants = args.map((a, k) => (k === index ? constant : (a as Element)));
    refusePole(s, d, constants, evaluate);
    return c.field.call(d.id, constants);
  }
  const offset = freshSymbol(s, 'u');
  const sign = eventualSign(c, small);
  const place: Place = {
    kind: 'finite',
    center: exactOf(c, constant),
    offset: build.symbol(offset),
    side: sign === 'complex' || sign === 0 ? 'complex' : isRealMulti(c, small) ? 'both' : sign === 1 ? 'right' : 'complex',
  };
  const form = d.local?.(trees, index, place) ?? null;
  if (form) return evaluateForm(bind(s, [[(z as { name: string }).name, f], [offset, small]]), form, evaluate, place.side === 'both');
  if (place.side === 'complex' && d.local?.(trees, index, { ...place, side: 'right' })) throw new Declined('no-expansion', `${title(d)} is not expanded at this point along a complex direction; choose a side on which its argument is real.`);
  const constants = trees.map((t, k) => (k === index ? exactOf(c, constant) : t));
  const taylor = taylorFromEquation(c, d, constants, index, constant);
  if (taylor) return compose(c, taylor, small);
  const slope = d.derivative?.(trees, index) ?? null;
  if (!slope) throw new Declined('no-expansion', `${title(d)} has no known expansion at this point; choose another one.`);
  return alongDerivative(
    c,
    f,
    (at) => c.field.call(d.id, args.map((a, k) => (k === index ? at : (a as Element)))),
    (g, self) => {
      if (g === f) remember(self);
      return evaluate(bind(s, [[(z as { name: string }).name, g]]), slope);
    },
  );
}

/** Without a cut on the negative real axis: their forms there hold on both sides of it. */
const SINGLE_VALUED: ReadonlySet<string> = new Set(['erf', 'erfc', 'erfi', 'erfcx', 'dawson', 'gamma', 'digamma', 'airyAi', 'airyBi', 'airyAiPrime', 'airyBiPrime', 'sinIntegral', 'sinhIntegral', 'fresnelS', 'fresnelC', 'cin', 'ein', 'barnesG']);
/** With a cut on the positive real axis. */
const CUT_BEYOND_ONE: ReadonlySet<string> = new Set(['polylog', 'hypergeometric', 'boseEinstein', 'legendreChi', 'incompleteBeta', 'regularizedBeta', 'ellipticK', 'ellipticE', 'ellipticKParameter', 'ellipticEParameter']);

/** Whether the form at real infinity also holds for complex arguments on both sides of the axis. */
const holdsAround = (id: string, direction: 1 | -1): boolean => (direction === 1 ? !CUT_BEYOND_ONE.has(id) : SINGLE_VALUED.has(id));

/** Whether f moves on a faster scale element than its unbounded part. */
function fasterPart(f: Series, large: Multi): boolean {
  return !(large instanceof Series) || f.element.rank > large.element.rank;
}

/** The same for a call that stands as a constant in the formula. */
export function refusePoleOf(s: Session, e: CallNode, evaluate: Evaluate): void {
  const d = describe(e.function);
  if (!d || !acceptsArity(d, e.args.length)) return;
  if (!d.local) {
    const tree = d.definition?.(e.args);
    if (tree) for (const node of walk(tree)) if (node.kind === 'call' && node.function !== e.function) refusePoleOf(s, node, evaluate);
    return;
  }
  refusePole(s, d, e.args.map((a) => s.context.field.fromExpression(a)), evaluate);
}

/** A value at a rational constant where the function's local form is unbounded: there is none. */
export function refusePole(s: Session, d: FunctionDescription, args: readonly Element[], evaluate: Evaluate): void {
  const c = s.context;
  const index = args.length - 1;
  const at = args[index];
  if (!d.local || at === undefined || !isRational(at)) return;
  const key = `${d.id}:${args.map((a) => c.field.key(a)).join(',')}`;
  if (s.finiteCalls.has(key)) return;
  s.finiteCalls.add(key);
  const trees = args.map((a) => exactOf(c, a));
  if (d.value?.(trees)) return;
  for (const side of ['right', 'left'] as const) {
    const offset = freshSymbol(s, 'u');
    const z = freshSymbol(s, 'z');
    const form = d.local(trees.map((t, k) => (k === index ? build.symbol(z) : t)), index, { kind: 'finite', center: build.number(at), offset: build.symbol(offset), side });
    if (!form) continue;
    const u = scaleBy(c, monomial(c, c.scale.local, Q.ONE), Q.rational(side === 'right' ? 1 : -1));
    const notes = { ...c.notes };
    const value = evaluateForm(bind(s, [[offset, u], [z, add(c, at, u)]]), form, evaluate);
    Object.assign(c.notes, { sided: notes.sided, onReal: notes.onReal, divergent: notes.divergent, complex: notes.complex });
    const first = value instanceof Series ? value.stream.at(0) : null;
    if (!first || !(value instanceof Series)) continue;
    const order = signOfExponent(c, first.exponent);
    const singular = order < 0 || (order === 0 && first.coefficient instanceof Series && growth(c, first.coefficient) === 'large');
    if (singular && growth(c, value) === 'large') throw new Declined('no-expansion', `${title(d)} has no finite value at ${plainText(build.number(at))}; correct the formula.`);
  }
}

/** Evaluates a local form: its formal series become series of their arguments, then its body. `twoSided`: the form holds on both sides of its place, so that only the body can tell them apart. */
export function evaluateForm(s: Session, form: LocalForm, evaluate: Evaluate, twoSided = false): Multi {
  const c = s.context;
  if (!twoSided) c.notes.sided = true;
  for (const assumption of form.assumptions ?? []) c.notes.assumptions.add(assumption);
  const leaves: [string, Multi][] = [];
  for (const [name, formal] of Object.entries(form.formals)) leaves.push([name, evaluateFormal(s, formal, evaluate)]);
  return evaluate(bind(s, leaves), form.body);
}

export function evaluateFormal(s: Session, formal: FormalSeries, evaluate: Evaluate): Multi {
  const c = s.context;
  const argument = evaluate(s, formal.argument);
  const size = growth(c, argument);
  if (size === 'large' || size === 'finite') throw new Declined('no-expansion', 'A series of a function was asked for where its argument is not small; choose another point.');
  if (formal.divergent) c.notes.divergent = true;
  const coefficients: Element[] = [];
  const coefficient = (k: number): Element | null => {
    if (formal.length !== undefined && k >= formal.length) return null;
    const known = coefficients[k];
    if (known !== undefined) return known;
    const raw: Expression | Rational = formal.coefficient(k);
    return (coefficients[k] = 'kind' in raw ? c.field.fromExpression(raw) : raw);
  };
  return compose(c, coefficient, argument);
}

