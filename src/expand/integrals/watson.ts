/**
 * Laplace's method by Watson's lemma: integral of g(v) exp(-lambda phi(v)) with unbounded lambda, phi monotone on each piece.
 * Source: Olver, Asymptotics and Special Functions (1974), ch. 3, sections 3 and 8 (from memory).
 */
import { build, dependsOn, type Expression, Q, sameExpression, substitute } from '../../expression/index.ts';
import { Declined } from '../../outcome.ts';
import { add, beyondAllOrders, compareExponents, exponential, growth, isZero, monomialOf, type Multi, multiply, negate, scaleBy, subtract } from '../../series/index.ts';
import { type Direction, openSide } from '../open-side.ts';
import type { Evaluate, Session } from '../session.ts';
import { atEnd, transfer } from './end.ts';
import { directionOn, type Range, regularOn } from './monotone.ts';
import { monotonePieces } from './stationary.ts';

/** exp(-lambda(t) phi(v)) g(v) c(t). */
export interface LaplaceForm {
  readonly front: Expression;
  readonly lambda: Expression;
  readonly phi: Expression;
  readonly weight: Expression;
}

/** Reads the integrand as a Laplace form; null where variable and integration variable are mixed otherwise. `moves` tells whether a tree depends on the expansion variable. */
export function laplaceForm(body: Expression, v: string, moves: (e: Expression) => boolean): LaplaceForm | null {
  const front: Expression[] = [];
  const weight: Expression[] = [];
  const exponents: Expression[] = [];
  const visit = (e: Expression, inverse: boolean): boolean => {
    const put = (list: Expression[]): true => {
      list.push(inverse ? build.power(e, -1) : e);
      return true;
    };
    if (!dependsOn(e, v)) return put(front);
    if (!moves(e)) return put(weight);
    switch (e.kind) {
      case 'negation':
        front.push(build.number(-1));
        return visit(e.operand, inverse);
      case 'product':
        return e.factors.every((f) => visit(f, inverse));
      case 'quotient':
        return visit(e.numerator, inverse) && visit(e.denominator, !inverse);
      case 'power':
        if (e.base.kind === 'constant' && e.base.name === 'e') {
          exponents.push(inverse ? build.negation(e.exponent) : e.exponent);
          return true;
        }
        if (moves(e.base) || dependsOn(e.exponent, v)) return false;
        // f(v)^lambda = exp(lambda log f(v)) where f is positive, which the proof that log f is regular shows.
        exponents.push(build.product(inverse ? build.negation(e.exponent) : e.exponent, build.call('log', e.base)));
        return true;
      case 'call':
        if (e.function !== 'exp' || !e.args[0]) return false;
        exponents.push(inverse ? build.negation(e.args[0]) : e.args[0]);
        return true;
      default:
        return false;
    }
  };
  if (!visit(body, false)) return null;
  const mixed: { lambda: Expression[]; phi: Expression[] }[] = [];
  const sort = (e: Expression, negative: boolean): boolean => {
    if (e.kind === 'sum') return e.terms.every((t) => sort(t, negative));
    if (e.kind === 'negation') return sort(e.operand, !negative);
    const signed = negative ? build.negation(e) : e;
    if (!dependsOn(e, v)) {
      front.push(build.power(build.constant('e'), signed));
      return true;
    }
    if (!moves(e)) {
      weight.push(build.power(build.constant('e'), signed));
      return true;
    }
    const lambda: Expression[] = [];
    const phi: Expression[] = [build.number(negative ? 1 : -1)];
    const split = (f: Expression, inverse: boolean): boolean => {
      const value = inverse ? build.power(f, -1) : f;
      if (!dependsOn(f, v) && f.kind !== 'product') lambda.push(value);
      else if (!moves(f)) phi.push(value);
      else if (f.kind === 'product') return f.factors.every((g) => split(g, inverse));
      else if (f.kind === 'quotient') return split(f.numerator, inverse) && split(f.denominator, !inverse);
      else if (f.kind === 'negation') {
        phi.push(build.number(-1));
        return split(f.operand, inverse);
      } else return false;
      return true;
    };
    if (!split(e, false)) return false;
    mixed.push({ lambda, phi });
    return true;
  };
  if (!exponents.every((e) => sort(e, false))) return null;
  // Constants belong to phi: lambda is what moves, the same in all terms.
  const terms = mixed.map((m) => ({ lambda: build.product(...m.lambda.filter(moves)), phi: build.product(...m.lambda.filter((f) => !moves(f)), ...m.phi) }));
  const [first] = terms;
  if (!first || !terms.every((t) => sameExpression(t.lambda, first.lambda))) return null;
  return { front: build.product(...front), lambda: first.lambda, phi: build.sum(...terms.map((t) => t.phi)), weight: build.product(...weight) };
}

/** The integral over (low, high), null for infinite ends. Throws Declined where the conditions of Watson's lemma are not proven. */
export function watson(s: Session, form: LaplaceForm, v: string, low: Expression | null, high: Expression | null, evaluate: Evaluate, known: 1 | -1 | null = null): Multi {
  const c = s.context;
  const range: Range = { variable: v, low, high, field: c.field };
  const lambda = evaluate(s, form.lambda);
  const lead = monomialOf(c, lambda);
  if (growth(c, lambda) !== 'large' || !lead) throw new Declined('no-expansion', 'The parameter in the exponent does not grow at the point; choose the point where it does.');
  const positive = c.field.sign(lead.constant) === 1;
  const phi = positive ? form.phi : build.negation(form.phi);
  const large = positive ? lambda : negate(c, lambda);
  const contains = (e: Expression): boolean => {
    const below = low === null || c.field.sign(c.field.fromExpression(low)) === -1;
    const above = high === null || c.field.sign(c.field.fromExpression(high)) === 1;
    return below && above && dependsOn(e, v);
  };
  const direction = known ?? directionOn(range, phi);
  if (direction === null && contains(phi)) {
    const zero = build.number(0);
    const turned = { ...form, phi, lambda: positive ? form.lambda : build.negation(form.lambda) };
    return add(c, watson(s, turned, v, low, zero, evaluate), watson(s, turned, v, zero, high, evaluate));
  }
  const pieces = direction === null ? monotonePieces(s, range, phi, evaluate) : null;
  if (pieces) {
    const turned = { ...form, phi, lambda: positive ? form.lambda : build.negation(form.lambda) };
    return pieces.map((p) => watson(s, turned, v, p.low, p.high, evaluate, p.direction)).reduce((sum, part) => add(c, sum, part));
  }
  if (direction === null) throw new Declined('no-expansion', 'The exponent of the integrand could not be shown to be monotone between the limits; split the integral at its extremum.');
  const end = direction === 1 ? low : high;
  if (end === null) throw new Declined('no-expansion', 'The integral diverges for large values of the parameter; correct its sign or limits.');
  if (!regularOn(range, form.weight) || !regularOn(range, phi)) throw new Declined('no-expansion', 'The integrand could not be shown to be regular between the limits; split the integral.');
  const far = direction === 1 ? high : low;
  requireIntegrable(s, form.weight, phi, v, far, direction, evaluate);
  const inner = openSide({ variable: build.symbol(v), point: end, assumptions: [] }, direction === 1 ? 'right' : 'left', c.budget);
  const height = c.field.fromExpression(substitute(phi, v, end));
  const own = inner.context;
  const psi = subtract(own, evaluate(inner.session, inner.fromVariable(phi)), transfer(own, c, height));
  const g = evaluate(inner.session, inner.fromVariable(form.weight));
  const { sum, finite } = atEnd(c, own, psi, g, large, null);
  const whole = finite && far === null;
  if (!finite) c.notes.divergent = true;
  const series = whole ? sum : multiply(c, sum, add(c, Q.ONE, beyondAllOrders(c, large)));
  const front = evaluate(s, form.front);
  const peak = isZero(c, height) ? Q.ONE : exponential(c, scaleBy(c, large, c.field.negate(height)));
  return multiply(c, multiply(c, front, peak), series);
}

/** Whether (v - low) f(v) tends to zero faster than any logarithm could undo: f is integrable to the right of low. */
export function integrableAt(s: Session, body: Expression, v: string, low: Expression, evaluate: Evaluate): boolean {
  const inner = openSide({ variable: build.symbol(v), point: low, assumptions: [] }, 'right', s.context.budget);
  const lead = monomialOf(inner.context, evaluate(inner.session, inner.fromVariable(body)));
  if (!lead) return true;
  const [first] = lead.factors;
  if (!first) return true;
  return first.element === inner.context.scale.local && compareExponents(inner.context, first.exponent, Q.MINUS_ONE) === 1;
}

/** g exp(-K phi) must be integrable at the far end for some K. */
function requireIntegrable(s: Session, weight: Expression, phi: Expression, v: string, far: Expression | null, direction: 1 | -1, evaluate: Evaluate): void {
  const { context: c } = s;
  const symbol = build.symbol(v);
  const side: Direction = far === null ? (direction === 1 ? 'inf' : '-inf') : direction === 1 ? 'left' : 'right';
  const point = far ?? (direction === 1 ? 'inf' : '-inf');
  for (const k of [1, 4]) {
    const inner = openSide({ variable: symbol, point: point as Expression, assumptions: [] }, side, c.budget);
    const distance = far === null ? build.power(symbol, 2) : build.difference(symbol, far);
    const damped = build.product(weight, build.power(build.constant('e'), build.product(build.number(-k), phi)), distance);
    const size = growth(inner.context, evaluate(inner.session, inner.fromVariable(damped)));
    if (size === 'small' || size === 'zero') return;
  }
  throw new Declined('no-expansion', 'The integral could not be shown to converge; correct its integrand.');
}
