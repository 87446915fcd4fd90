/** Integral nodes whose limits move: the derivative in t is integrated term by term, and the constant is fixed by the limits. */
import type { Element } from '../../algebra/types.ts';
import { build, children, type Expression, type IntegralNode, mapChildren, Q, type Rational, substitute } from '../../expression/index.ts';
import { Declined } from '../../outcome.ts';
import { add, type Context, eventualSign, exactOf, growth, integrate, isKnownZero, isOscillating, isZero, monomialOf, type Multi, multiply, orderSeries, Series, split, subtract, theta, unitMonomial, withExact } from '../../series/index.ts';
import { openSide } from '../open-side.ts';
import { type Evaluate, bind, type Session } from '../session.ts';
import { completeIntegral, SHIFT } from './complete.ts';
import { bySmoothStep } from './edge.ts';
import { byMellin } from './mellin.ts';
import { byMoments } from './moments.ts';
import { regularOn } from './monotone.ts';
import { byStationaryPhase } from './phase.ts';
import { finiteIntegral } from './regular.ts';
import { rescaled } from './rescale.ts';
import { integrateWaves } from './waves.ts';
import { integrableAt, laplaceForm, watson } from './watson.ts';

export function evaluateIntegral(s: Session, e: IntegralNode, evaluate: Evaluate): Multi {
  const { context: c } = s;
  if (e.variable.kind !== 'symbol') throw new Declined('bad-request', 'An integral runs over one symbol; replace the integration variable by one.');
  const { name } = e.variable;
  if (!e.lower && !e.upper) {
    const own = s.bindings.get(name);
    if (own === undefined) throw new Declined('no-expansion', 'An antiderivative in a parameter is not expanded; give the integral its limits.');
    const result = integrate(c, multiply(c, evaluate(s, e.body), theta(c, own)));
    if (growth(c, own) === 'small') return result;
    throw new Declined('no-expansion', 'The constant of the antiderivative is not known at this point; give the integral its limits.');
  }
  if (!e.lower || !e.upper) throw new Declined('bad-request', 'The integral has one limit only; write both.');
  if (dependsOnBound(s, e.body, name)) return parametric(s, e, name, e.lower, e.upper, evaluate);
  const upper = endOf(s, e.upper, evaluate);
  const lower = endOf(s, e.lower, evaluate);
  const above = upper.moving === null ? Q.ZERO : primitiveAt(s, e, name, upper.moving, evaluate);
  const below = lower.moving === null ? Q.ZERO : primitiveAt(s, e, name, lower.moving, evaluate);
  const total = subtract(c, above, below);
  if (!sameLimit(s, upper, lower)) {
    const known = acrossLimits(s, e, name, lower, upper, above, below, evaluate);
    if (known) return known;
    throw new Declined('no-expansion', 'The constant of this integral is not known in closed form; let its limits tend to the same place.');
  }
  // Each primitive has no constant in t: it is the one that vanishes at the common limit only if it tends to zero.
  const settled = [above, below].every((m) => growth(c, m) === 'small' || growth(c, m) === 'zero');
  if (!settled) {
    const one = upper.moving === null || lower.moving === null;
    throw new Declined('no-expansion', one ? 'The integral diverges at the point; correct its limits.' : 'The constant of this integral between two moving limits is not known; split it.');
  }
  return withExact(total, () => ({ ...e, lower: limitTree(s, lower, e.lower as Expression), upper: limitTree(s, upper, e.upper as Expression) }));
}

/**
 * Limits that tend to different places: the integral between these places, where it is known, and what is missing at each end.
 * Where the primitive outgrows every power at an infinite upper end, the constant is an O(1) that never shows.
 */
function acrossLimits(s: Session, e: IntegralNode, v: string, lower: End, upper: End, above: Multi, below: Multi, evaluate: Evaluate): Multi | null {
  const c = s.context;
  const { field } = c;
  const settled = (m: Multi): boolean => growth(c, m) === 'small' || growth(c, m) === 'zero';
  const total = subtract(c, above, below);
  const from = lower.limit instanceof Series ? null : lower.limit;
  if (settled(above) && settled(below)) {
    const [start, end] = [fromZero(c, e.body, v, lower), fromZero(c, e.body, v, upper)];
    return start && end && add(c, total, field.subtract(end, start));
  }
  const continued = pastPole(s, e.body, v, lower, upper, evaluate);
  if (continued) return add(c, total, continued);
  // The lower end is fixed and the integrand regular from there on.
  if (!settled(below) || lower.moving !== null || from === null || upper.sign !== 1 || !outgrowsPowers(c, above)) return null;
  const low = e.lower as Expression;
  if (!regularOn({ variable: v, low, high: null, field }, e.body) || !integrableAt(s, e.body, v, low, evaluate)) return null;
  return add(c, total, orderSeries(c, unitMonomial));
}

/**
 * The constant of an integral over (0, inf) that diverges at the moving end only: the finite part at e = 0 of the continued integral of v^e f (Hadamard; Wong, Asymptotic Approximations of Integrals, ch. 3,
 * from memory), because a term c/v of f gives c/e there and c log v here.
 */
function pastPole(s: Session, body: Expression, v: string, lower: End, upper: End, evaluate: Evaluate): Element | null {
  const c = s.context;
  const { field } = c;
  if (lower.limit === null || lower.limit instanceof Series || !isZero(c, lower.limit) || upper.limit !== null || upper.sign !== 1) return null;
  if ((lower.moving === null) === (upper.moving === null)) return null;
  if (lower.moving && eventualSign(c, lower.moving) !== 1) return null;
  const shift = build.symbol(SHIFT);
  // On the other side of 0 the integral has no value.
  if (lower.moving) c.notes.sided = true;
  const value = completeIntegral(field, build.product(build.power(build.symbol(v), shift), body), v, null, { atZero: lower.moving === null, atInfinity: upper.moving === null });
  if (!value) return null;
  const inner = openSide({ variable: shift, point: build.number(0), assumptions: [] }, 'right', c.budget);
  const series = evaluate(inner.session, inner.fromVariable(field.toExpression(value)));
  const { constant } = split(inner.context, series);
  return constant instanceof Series ? null : field.fromExpression(inner.context.field.toExpression(constant));
}

/** The integral from 0 to where the end tends to. */
function fromZero(c: Context, body: Expression, v: string, { limit, sign }: End): Element | null {
  const { field } = c;
  if (limit instanceof Series) return null;
  if (limit !== null) return isZero(c, limit) ? Q.ZERO : field.sign(limit) === 1 ? completeIntegral(field, body, v, field.toExpression(limit)) : null;
  const whole = completeIntegral(field, sign === -1 ? substitute(body, v, build.negation(build.symbol(v))) : body, v, null);
  return whole && (sign === -1 ? field.negate(whole) : whole);
}

/** Whether the leading term holds a growing exponential. */
function outgrowsPowers(c: Context, m: Multi): boolean {
  const lead = growth(c, m) === 'large' ? monomialOf(c, m) : null;
  return lead?.factors[0]?.element.kind === 'exponential' && lead.factors[0].element.rank > c.scale.local.rank;
}

/** Constant limits and the variable in the integrand. */
function byParameter(s: Session, e: IntegralNode, name: string, lower: Expression, upper: Expression, evaluate: Evaluate): Multi {
  const low = infinityOf(lower);
  const high = infinityOf(upper);
  if (dependsOnBound(s, lower, '') || dependsOnBound(s, upper, '')) throw new Declined('no-expansion', 'An integral with the variable both in a limit and in the integrand is not expanded here; substitute so that only one of them moves.');
  if (low === 1 || high === -1) throw new Declined('bad-request', 'The limits of the integral stand in the wrong order; exchange them.');
  const moves = (tree: Expression): boolean => dependsOnBound(s, tree, name);
  const from = low === 0 ? lower : null;
  const to = high === 0 ? upper : null;
  const grows = from !== null && to === null && isZero(s.context, s.context.field.fromExpression(from)) && growth(s.context, evaluate(s, build.symbol(s.context.local))) === 'large';
  const balanced = grows ? rescaled(s, e.body, name, s.context.local) : null;
  const form = balanced ?? laplaceForm(e.body, name, moves);
  if (form && growth(s.context, evaluate(s, form.lambda)) === 'large') return watson(s, form, name, from, to, evaluate);
  if (from !== null && to !== null) return finiteIntegral(s, e.body, name, from, to, evaluate);
  return byMoments(s, e.body, name, from, to, evaluate);
}

/** The integrand as the methods for regular, decaying and summable ones take it; where none of them serves, by Mellin transforms over (0, inf), about a smooth step, or by stationary phase. */
function parametric(s: Session, e: IntegralNode, name: string, lower: Expression, upper: Expression, evaluate: Evaluate): Multi {
  try {
    return byParameter(s, e, name, lower, upper, evaluate);
  } catch (error) {
    if (!(error instanceof Declined) || error.failure.code !== 'no-expansion') throw error;
    const found = otherwise(s, e, name, lower, upper, evaluate);
    if (found === null) throw error;
    return found;
  }
}

function otherwise(s: Session, e: IntegralNode, name: string, lower: Expression, upper: Expression, evaluate: Evaluate): Multi | null {
  const c = s.context;
  const low = infinityOf(lower) === 0 ? lower : null;
  const high = infinityOf(upper) === 0 ? upper : null;
  if (low && high === null && isZero(c, c.field.fromExpression(low))) {
    const found = orNull(() => byMellin(s, e.body, name, c.local, null, evaluate));
    if (found !== null) return found;
  }
  const singular = low && high ? orNull(() => bySingularKernel(s, e.body, name, low, high, evaluate)) : null;
  if (singular !== null) return singular;
  const step = low && high === null ? orNull(() => bySmoothStep(s, e.body, name, low, evaluate)) : null;
  if (step !== null) return step;
  return orNull(() => byStationaryPhase(s, e.body, name, low, high, evaluate));
}

/** Over a finite range with a kernel of t/x about an end or about 0 inside, where it becomes singular; a sum term by term. */
function bySingularKernel(s: Session, body: Expression, v: string, low: Expression, high: Expression, evaluate: Evaluate): Multi | null {
  const c = s.context;
  const t = build.symbol(v);
  const over = (from: Expression | null, direction: 1 | -1, length: Expression): Multi | null => {
    const step = direction === 1 ? t : build.negation(t);
    const turned = from === null ? substitute(body, v, step) : tidied(substitute(body, v, build.sum(from, step)));
    const whole = orNull(() => byMellin(s, turned, v, c.local, length, evaluate));
    if (whole !== null || turned.kind !== 'sum') return whole;
    return turned.terms.reduce<Multi | null>((sum, term) => {
      const part = sum === null ? null : parametric(s, { kind: 'integral', variable: t, lower: build.number(0), upper: length, body: term }, v, build.number(0), length, evaluate);
      return sum === null || part === null ? null : add(c, sum, part);
    }, Q.ZERO);
  };
  const [below, above] = [low, high].map((end) => c.field.sign(c.field.fromExpression(end)));
  if (below === 0 && above === 1) return over(null, 1, high);
  if (below === -1 && above === 0) return over(null, -1, build.negation(low));
  if (below === -1 && above === 1) {
    const left = over(null, -1, build.negation(low));
    const right = left === null ? null : over(null, 1, high);
    return left === null || right === null ? null : add(c, left, right);
  }
  const length = build.difference(high, low);
  return c.field.sign(c.field.fromExpression(length)) === 1 ? (over(low, 1, length) ?? over(high, -1, length)) : null;
}

/** Numbers that meet in nested sums, added: x + (1 + t) - 1 is x + t. */
function tidied(e: Expression): Expression {
  const inner = mapChildren(e, tidied);
  if (inner.kind !== 'sum') return inner;
  const flat = inner.terms.flatMap((t) => (t.kind === 'sum' ? t.terms : t.kind === 'negation' && t.operand.kind === 'sum' ? t.operand.terms.map(build.negation) : [t]));
  const valueOf = (t: Expression): Rational | null => (t.kind === 'number' ? t.value : t.kind === 'negation' && t.operand.kind === 'number' ? Q.negate(t.operand.value) : null);
  const others = flat.filter((t) => valueOf(t) === null);
  const total = flat.reduce<Rational>((sum, t) => Q.add(sum, valueOf(t) ?? Q.ZERO), Q.ZERO);
  return build.sum(...others, ...(Q.isZero(total) && others.length > 0 ? [] : [build.number(total)]));
}

function orNull(find: () => Multi | null): Multi | null {
  try {
    return find();
  } catch (error) {
    if (error instanceof Declined && (error.failure.code === 'no-expansion' || error.failure.code === 'undecided')) return null;
    throw error;
  }
}

interface End {
  /** Null for a constant end. */
  readonly moving: Series | null;
  /** The limit; null for infinity. */
  readonly limit: Multi | null;
  readonly sign: -1 | 0 | 1;
}

function endOf(s: Session, e: Expression, evaluate: Evaluate): End {
  const c = s.context;
  const infinite = infinityOf(e);
  if (infinite !== 0) return { moving: null, limit: null, sign: infinite };
  const value = evaluate(s, e);
  if (!(value instanceof Series)) return { moving: null, limit: value, sign: 0 };
  const { large, constant } = split(c, value);
  if (!large) return { moving: value, limit: constant, sign: 0 };
  return { moving: value, limit: null, sign: eventualSign(c, large) === -1 ? -1 : 1 };
}

export function infinityOf(e: Expression): -1 | 0 | 1 {
  if (e.kind === 'constant' && e.name === 'infinity') return 1;
  if (e.kind === 'negation' && e.operand.kind === 'constant' && e.operand.name === 'infinity') return -1;
  return 0;
}

function sameLimit(s: Session, a: End, b: End): boolean {
  if (a.limit === null || b.limit === null) return a.limit === b.limit && a.sign === b.sign;
  return isZero(s.context, subtract(s.context, a.limit, b.limit));
}

/** The antiderivative of the integrand along a moving end. */
function primitiveAt(s: Session, e: IntegralNode, name: string, end: Series, evaluate: Evaluate): Multi {
  const value = evaluate(bind(s, [[name, end]]), e.body);
  if (isKnownZero(s.context, value)) return Q.ZERO;
  const c = s.context;
  const speed = multiply(c, value, theta(c, end));
  try {
    return integrate(c, checked(c, speed));
  } catch (error) {
    if (!(error instanceof Declined) || error.failure.code !== 'no-expansion' || !c.oscillation) throw error;
    return integrateWaves(s, speed, evaluate);
  }
}

/** Terms are integrated when they are asked for; an oscillation is met at once where the first of them oscillates. */
function checked(c: Context, m: Multi): Multi {
  const lead = m instanceof Series ? monomialOf(c, m)?.constant : m;
  if (lead && isOscillating(c, lead)) throw new Declined('no-expansion', 'The integral of this oscillating function is not expanded here; write its products of waves as sums.');
  return m;
}

const limitTree = (s: Session, end: End, written: Expression): Expression => (end.moving ? exactOf(s.context, end.moving) : written);

/** Whether a symbol that varies, other than the integration variable, occurs in the tree. */
export function dependsOnBound(s: Session, e: Expression, except: string): boolean {
  if (e.kind === 'symbol') return e.name !== except && s.bindings.has(e.name);
  return children(e).some((child) => dependsOnBound(s, child, except));
}
