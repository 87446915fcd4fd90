/**
 * Integrals of g(v) cos(lambda phi(v)) and g(v) sin(lambda phi(v)) with unbounded lambda by the method of stationary phase: phi is monotone between its stationary points, and each end of such a piece contributes
 * exp(i lambda phi) there times a series in powers of 1/lambda; what lies between contributes less than any power. Source: Erdelyi, Asymptotic Expansions (1956), 2.8 and 2.9; Olver ch. 3, section 13 (from memory).
 */
import type { Element } from '../../algebra/types.ts';
import { build, children, dependsOn, type Expression, Q, sameExpression, substitute } from '../../expression/index.ts';
import { differentiate } from '../../functions/index.ts';
import { Declined } from '../../outcome.ts';
import { add, beyondAllOrders, type Context, eventualSign, growth, type Multi, multiply, negate, Series, subtract } from '../../series/index.ts';
import { openSide } from '../open-side.ts';
import { type Evaluate, freshSymbol, type Session } from '../session.ts';
import { atEnd, transfer } from './end.ts';
import { separated } from './moments.ts';
import { directionOn, type Range, regularOn } from './monotone.ts';
import { monotonePieces, type Piece } from './stationary.ts';

interface Wave {
  readonly name: 'sin' | 'cos';
  readonly front: Expression;
  readonly weight: Expression;
  readonly lambda: Expression;
  readonly phi: Expression;
}

const isWave = (name: string): name is 'sin' | 'cos' => name === 'sin' || name === 'cos';

/** The waves that the integrand is the sum of; null where it is of another form. `moves` tells whether a tree depends on the expansion variable. */
function wavesOf(body: Expression, v: string, moves: (e: Expression) => boolean): readonly Wave[] | null {
  const front: Expression[] = [];
  const weight: Expression[] = [];
  const mixed: Expression[] = [];
  const visit = (e: Expression, inverse: boolean): void => {
    const put = inverse ? build.power(e, -1) : e;
    if (!dependsOn(e, v)) front.push(put);
    else if (!moves(e)) weight.push(put);
    else if (e.kind === 'product') e.factors.forEach((f) => visit(f, inverse));
    else if (e.kind === 'negation') {
      front.push(build.number(-1));
      visit(e.operand, inverse);
    } else if (e.kind === 'quotient') {
      visit(e.numerator, inverse);
      visit(e.denominator, !inverse);
    } else mixed.push(put);
  };
  visit(body, false);
  const [only] = mixed;
  if (!only || mixed.length !== 1 || only.kind !== 'call' || !isWave(only.function) || !only.args[0]) return null;
  const [argument] = only.args;
  const terms = argument.kind === 'sum' ? argument.terms : [argument];
  const parts = terms.filter((t) => moves(t) && dependsOn(t, v)).map((t) => separated(t, v, moves));
  const [first] = parts;
  if (!first || !parts.every((p) => p !== null && sameExpression(p.variable, first.variable))) return null;
  const lambda = first.variable;
  const phi = build.sum(...parts.map((p) => p?.polynomial ?? build.number(0)));
  const own = terms.filter((t) => dependsOn(t, v) && !moves(t));
  const outer = terms.filter((t) => !dependsOn(t, v));
  // cos(A + B + C) with A of both, B of v and C of the rest, by the addition theorems.
  let waves: Wave[] = [{ name: only.function, front: build.product(...front), weight: build.product(...weight), lambda, phi }];
  for (const [sum, key] of [[own, 'weight'], [outer, 'front']] as const) {
    if (sum.length === 0) continue;
    const shift = build.sum(...sum);
    waves = waves.flatMap((w) => {
      const other = w.name === 'cos' ? 'sin' : 'cos';
      const turned = build.product(w[key], build.call('sin', shift));
      return [{ ...w, [key]: build.product(w[key], build.call('cos', shift)) }, { ...w, name: other, [key]: w.name === 'cos' ? build.negation(turned) : turned }];
    });
  }
  return waves;
}

/** Over (low, high), null for infinite ends; null where the integrand is of another form. Throws Declined where the conditions of the method are not proven. */
export function byStationaryPhase(s: Session, body: Expression, v: string, low: Expression | null, high: Expression | null, evaluate: Evaluate): Multi | null {
  const c = s.context;
  const moves = (e: Expression): boolean => (e.kind === 'symbol' ? e.name !== v && s.bindings.has(e.name) : children(e).some(moves));
  const waves = wavesOf(body, v, moves);
  if (!waves || !c.oscillation) return null;
  const range: Range = { variable: v, low, high, field: c.field };
  return waves.map((w) => ofWave(s, w, range, evaluate)).reduce((sum, part) => add(c, sum, part));
}

function ofWave(s: Session, wave: Wave, range: Range, evaluate: Evaluate): Multi {
  const c = s.context;
  const { variable: v } = range;
  const { weight, phi } = wave;
  const lambda = evaluate(s, wave.lambda);
  if (growth(c, lambda) !== 'large') throw new Declined('no-expansion', 'The parameter in the phase does not grow at the point; choose the point where it does.');
  const sign = eventualSign(c, lambda);
  if (sign !== 1 && sign !== -1) throw new Declined('undecided', 'The sign of the parameter in the phase could not be decided; state an assumption on it.');
  if (!regularOn(range, weight) || !regularOn(range, phi)) throw new Declined('no-expansion', 'The integrand could not be shown to be regular between the limits; split the integral.');
  const direction = directionOn(range, phi);
  const pieces: readonly Piece[] | null = direction === null ? monotonePieces(s, range, phi, evaluate) : [{ low: range.low, high: range.high, direction }];
  if (!pieces) throw new Declined('no-expansion', 'The stationary points of the phase could not be found; split the integral where its derivative is zero.');
  const large = sign === 1 ? lambda : negate(c, lambda);
  let total: Multi = Q.ZERO;
  for (const piece of pieces) {
    for (const [end, outward] of [[piece.low, -1], [piece.high, 1]] as const) {
      if (end === null) requireVanishing(s, weight, phi, v, outward, evaluate);
      else total = add(c, total, contribution(s, wave, v, end, outward, { large, rising: (-outward * piece.direction) as 1 | -1, sign }, evaluate));
    }
  }
  if (!(total instanceof Series)) throw new Declined('no-expansion', 'The integral is smaller than every power of its parameter here; integrate first.');
  return multiply(c, evaluate(s, wave.front), add(c, total, beyondAllOrders(c, lambda)));
}

/** What one end gives: `rising` is the sign of the change of phi from the end on, `sign` that of lambda, `large` its size. */
function contribution(s: Session, wave: Wave, v: string, end: Expression, outward: 1 | -1, { large, rising, sign }: { readonly large: Multi; readonly rising: 1 | -1; readonly sign: 1 | -1 }, evaluate: Evaluate): Multi {
  const c = s.context;
  const inner = openSide({ variable: build.symbol(v), point: end, assumptions: [] }, outward === -1 ? 'right' : 'left', c.budget);
  const own = inner.context;
  const height = c.field.fromExpression(substitute(wave.phi, v, end));
  const change = subtract(own, evaluate(inner.session, inner.fromVariable(wave.phi)), transfer(own, c, height));
  const g = evaluate(inner.session, inner.fromVariable(wave.weight));
  const parts = atEnd(c, own, rising === 1 ? change : negate(own, change), g, large, (rising * sign) as 1 | -1);
  if (!parts.finite) c.notes.divergent = true;
  const parity = parityAt(s, wave, v, end);
  const sum = parity === 1 ? Q.ZERO : parts.sum;
  const imaginary = parity === -1 ? Q.ZERO : parts.imaginary;
  const phase = build.product(wave.lambda, c.field.toExpression(height));
  const [cosine, sine] = ['cos', 'sin'].map((f) => evaluate(s, build.call(f, phase))) as [Multi, Multi];
  return wave.name === 'cos' ? subtract(c, multiply(c, cosine, sum), multiply(c, sine, imaginary)) : add(c, multiply(c, sine, sum), multiply(c, cosine, imaginary));
}

/** Parity of g about an end where phi is odd with a slope: for an even g the real part has no terms, for an odd one the imaginary part. Null where neither is shown. */
function parityAt(s: Session, { phi, weight }: Wave, v: string, end: Expression): 1 | -1 | null {
  const { field } = s.context;
  const distance = build.symbol(freshSymbol(s, v));
  const around = (e: Expression): [Element, Element] => [build.sum(end, distance), build.difference(end, distance)].map((place) => field.fromExpression(substitute(e, v, place))) as [Element, Element];
  const vanishes = (e: Element): boolean => field.isZero(e) === 'yes';
  try {
    const [ahead, behind] = around(phi);
    const height = field.fromExpression(substitute(phi, v, end));
    if (!vanishes(field.subtract(field.add(ahead, behind), field.multiply(Q.rational(2), height)))) return null;
    const slope = differentiate(phi, v);
    if (!slope || field.isZero(field.fromExpression(substitute(slope, v, end))) !== 'no') return null;
    const [right, left] = around(weight);
    return vanishes(field.subtract(right, left)) ? 1 : vanishes(field.add(right, left)) ? -1 : null;
  } catch (error) {
    if (error instanceof Declined && error.failure.code !== 'over-budget') return null;
    throw error;
  }
}

/** At an infinite end phi must be unbounded and g/phi' tend to zero: then so do all of its derivatives by phi, as these functions form a Hardy field, and nothing comes from there. */
function requireVanishing(s: Session, weight: Expression, phi: Expression, v: string, outward: 1 | -1, evaluate: Evaluate): void {
  const direction = outward === 1 ? 'inf' : '-inf';
  const inner = openSide({ variable: build.symbol(v), point: direction, assumptions: [] }, direction, s.context.budget);
  // Without oscillation: a phase that itself oscillates is refused here.
  const own: Context = { ...inner.context, oscillation: false };
  const session: Session = { ...inner.session, context: own };
  const slope = differentiate(phi, v);
  const refuse = (): Declined => new Declined('no-expansion', 'The integral could not be shown to converge; correct its integrand.');
  if (!slope) throw refuse();
  if (growth(own, evaluate(session, inner.fromVariable(phi))) !== 'large') throw refuse();
  const size = growth(own, evaluate(session, inner.fromVariable(build.quotient(weight, slope))));
  if (size !== 'small' && size !== 'zero') throw refuse();
}
