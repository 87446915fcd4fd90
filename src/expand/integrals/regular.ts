/** Integrals over a finite interval whose integrand is regular in the small quantity: expanded uniformly and integrated exactly, term by term. */
import { build, children, dependsOn, type Expression, freeSymbols, Q, substitute } from '../../expression/index.ts';
import { differentiate } from '../../functions/index.ts';
import { Declined } from '../../outcome.ts';
import { type Context, isKnownZero, mapStream, type Multi, multiply, Series, sumOf, unnamed } from '../../series/index.ts';
import { type Evaluate, excludesValuesOfFresh, freshSymbol, type Session } from '../session.ts';
import { exactIntegral } from './exact.ts';
import { type Range, regularOn } from './monotone.ts';
import { refuse } from './polynomial.ts';
import { type ClosedInterval, isBounded, requireUniform } from './uniform.ts';

/** Over [low, high], both free of the small quantity: the integrand is expanded where that is proven uniform, else integrated as it stands and then expanded. Throws Declined where neither succeeds. */
export function finiteIntegral(s: Session, body: Expression, v: string, low: Expression, high: Expression, evaluate: Evaluate): Multi {
  // Under a name of its own nothing is assumed of the integration variable.
  const variable = freshSymbol(s, v);
  const tree = substitute(body, v, build.symbol(variable));
  const over = { variable, low, high };
  const terms = tree.kind === 'sum' ? tree.terms : [tree];
  return sumOf(s.context, terms.map((term) => ofTerm(s, term, over, evaluate)));
}

function ofTerm(s: Session, term: Expression, over: ClosedInterval, evaluate: Evaluate): Multi {
  try {
    return expandedFirst(s, term, over, evaluate);
  } catch (error) {
    if (!(error instanceof Declined) || error.failure.code === 'over-budget') throw error;
    const closed = integratedFirst(s, term, over);
    if (closed) return evaluate(s, closed);
    throw error;
  }
}

/** The integral in closed form for every small value of the variable; null where there is none. */
function integratedFirst(s: Session, term: Expression, over: ClosedInterval): Expression | null {
  const c = s.context;
  const known = c.field.needed.size;
  if (freeSymbols(term).some((name) => name !== c.local && s.bindings.has(name))) return null;
  try {
    const value = exactIntegral(c, term, over);
    if (c.field.needed.size !== known) return null;
    // Found for positive values of the local variable.
    c.notes.sided = true;
    return c.field.toExpression(value);
  } catch (error) {
    if (error instanceof Declined && error.failure.code !== 'over-budget') return null;
    throw error;
  }
}

/** The factors of a term: of the small quantity, of the integration variable, of both. */
interface Factors {
  readonly outside: Expression[];
  readonly fixed: Expression[];
  readonly mixed: Expression[];
}

function expandedFirst(s: Session, term: Expression, over: ClosedInterval, evaluate: Evaluate): Multi {
  const c = s.context;
  const moves = (e: Expression): boolean => (e.kind === 'symbol' ? e.name !== over.variable && s.bindings.has(e.name) : e.kind === 'order' || children(e).some(moves));
  const factors: Factors = { outside: [], fixed: [], mixed: [] };
  sort(term, over.variable, moves, factors);
  for (const f of factors.mixed) requireUniform(s, f, over, moves, evaluate);
  const zeros = zerosNeeded(s, factors.fixed, over);
  if (zeros > 0 && !vanishesAtZero(s, build.product(...factors.mixed), zeros, over.variable, moves, evaluate)) {
    throw new Declined('no-expansion', 'The integral diverges at 0 where the integrand is taken term by term; correct its limits or split it.');
  }
  const fixed = build.product(...factors.fixed);
  const inner = integrated(c, evaluate(s, build.product(...factors.mixed)), fixed, over);
  return multiply(c, evaluate(s, build.product(...factors.outside)), inner);
}

function sort(e: Expression, v: string, moves: (e: Expression) => boolean, into: Factors, inverse = false): void {
  if (!dependsOn(e, v)) into.outside.push(inverse ? build.power(e, -1) : e);
  else if (!moves(e)) into.fixed.push(inverse ? build.power(e, -1) : e);
  else if (e.kind === 'product') e.factors.forEach((f) => sort(f, v, moves, into, inverse));
  else if (e.kind === 'negation') {
    into.outside.push(build.number(-1));
    sort(e.operand, v, moves, into, inverse);
  } else if (e.kind === 'quotient') {
    sort(e.numerator, v, moves, into, inverse);
    sort(e.denominator, v, moves, into, !inverse);
  } else into.mixed.push(inverse ? build.power(e, -1) : e);
}

/** How often the rest of the integrand must vanish at 0 so that the factors in v alone, bounded but for powers of v, leave it integrable. */
function zerosNeeded(s: Session, fixed: readonly Expression[], over: ClosedInterval): number {
  const { field } = s.context;
  const [low, high] = [over.low, over.high].map((end) => field.sign(field.fromExpression(end)));
  const away = low === high && (low === 1 || low === -1);
  let total = Q.ZERO;
  for (const f of fixed.flatMap(flattened)) {
    // Where a power is integrable, it is so with a logarithm.
    if (isBounded(s, f, over) || isLogarithm(f)) continue;
    const exponent = f.kind === 'power' && f.base.kind === 'symbol' ? field.asRational(field.fromExpression(f.exponent)) : null;
    if (!exponent) throw refuse();
    if (!away) total = Q.add(total, exponent);
  }
  let zeros = 0;
  while (Q.compare(Q.add(total, Q.rational(zeros)), Q.MINUS_ONE) <= 0 && zeros <= MOST_ZEROS) zeros += 1;
  return zeros;
}

/** A whole power of log v. */
const isLogarithm = (e: Expression): boolean =>
  e.kind === 'power' && e.exponent.kind === 'number' && Q.isInteger(e.exponent.value) && e.exponent.value.num > 0n ? isLogarithm(e.base) : e.kind === 'call' && e.function === 'log' && e.args[0]?.kind === 'symbol';

const MOST_ZEROS = 12;

/** Whether e, proven to expand uniformly, is analytic in both at v = 0 and vanishes there with its first derivatives in v, whatever the small quantity is: then v^zeros can be divided out of it uniformly. */
function vanishesAtZero(s: Session, e: Expression, zeros: number, v: string, moves: (e: Expression) => boolean, evaluate: Evaluate): boolean {
  const everywhere: Range = { variable: v, low: null, high: null, field: s.context.field };
  const analytic = (node: Expression): boolean => (moves(node) ? children(node).every(analytic) : regularOn(everywhere, node));
  if (zeros > MOST_ZEROS || !analytic(e)) return false;
  let derivative: Expression | null = e;
  for (let k = 0; k < zeros; k += 1) {
    if (!derivative || !isKnownZero(s.context, evaluate(s, substitute(derivative, v, build.number(0))))) return false;
    derivative = differentiate(derivative, v);
  }
  return true;
}

function flattened(e: Expression): readonly Expression[] {
  if (e.kind === 'product') return e.factors.flatMap(flattened);
  if (e.kind === 'negation') return flattened(e.operand);
  if (e.kind === 'quotient') return [...flattened(e.numerator), ...flattened(e.denominator).map(inverted)];
  if (e.kind === 'power' && e.base.kind === 'power' && e.base.exponent.kind === 'number' && e.exponent.kind === 'number') return [build.power(e.base.base, Q.multiply(e.base.exponent.value, e.exponent.value))];
  return [e];
}
const inverted = (e: Expression): Expression => (e.kind === 'power' && e.exponent.kind === 'number' ? build.power(e.base, Q.negate(e.exponent.value)) : build.power(e, -1));

function integrated(c: Context, m: Multi, fixed: Expression, over: ClosedInterval): Multi {
  if (!(m instanceof Series)) {
    requireNoSign(c, over.variable);
    return exactIntegral(c, build.product(fixed, c.field.toExpression(m)), over);
  }
  const stream = mapStream(m.stream, (t) => {
    if (t.order) throw refuse();
    return { ...t, coefficient: integrated(c, t.coefficient, fixed, over) };
  });
  return new Series(m.element, stream, unnamed);
}

/** What the coefficients were found under. That something differs from zero excludes single values of v only. */
function requireNoSign(c: Context, variable: string): void {
  for (const condition of c.field.needed) {
    if (condition.includes(variable) && !excludesValuesOfFresh(condition)) {
      throw new Declined('no-expansion', 'The expansion of the integrand rests on the sign of a function of the integration variable; split the interval where that sign changes.');
    }
  }
}
