/** From a tree to the multiseries it stands for. */
import { children, type Expression, Q, walk } from '../expression/index.ts';
import { Declined } from '../outcome.ts';
import {
  add, divide, eventualSign, exactOf, exponential, generalPower, isLiteralOne, isLiteralZero, isRational, isKnownZero, isRealMulti, monomialOf, multiply, negate, type Multi, orderSeries, power,
  Series, theta,
} from '../series/index.ts';
import { evaluateApply } from './apply.ts';
import { DEEPEST } from './depth.ts';
import { evaluateCall } from './calls.ts';
import { refusePoleOf } from './described.ts';
import { evaluateIndexed } from './sums/evaluate-sum.ts';
import { evaluateIntegral } from './integrals/integral.ts';
import { perfectPower } from './perfect-power.ts';
import type { Session } from './session.ts';

export function evaluate(s: Session, e: Expression): Multi {
  const known = s.memo.get(e);
  if (known !== undefined) return known;
  s.context.budget.check();
  if (s.depth.value >= DEEPEST) throw new Declined('bad-request', 'The formula is nested too deeply to be expanded; split it into parts.');
  s.depth.value += 1;
  try {
    const value = varies(s, e) ? byKind(s, e) : constantOf(s, e);
    s.memo.set(e, value);
    return value;
  } finally {
    s.depth.value -= 1;
  }
}

/** Whether a bound symbol (or an O-term) occurs in the tree. */
export function varies(s: Session, e: Expression): boolean {
  const known = s.varying.get(e);
  if (known !== undefined) return known;
  const result = e.kind === 'symbol' ? s.bindings.has(e.name) : e.kind === 'order' ? true : children(e).some((child) => varies(s, child));
  s.varying.set(e, result);
  return result;
}

function constantOf(s: Session, e: Expression): Multi {
  if (e.kind === 'number') return e.value;
  if (e.kind === 'constant' && e.name === 'infinity') throw new Declined('bad-request', 'Infinity is not a number to calculate with; use it as the point or as a limit.');
  for (const node of walk(e)) if (node.kind === 'call') refusePoleOf(s, node, evaluate);
  return s.context.field.fromExpression(e);
}

function byKind(s: Session, e: Expression): Multi {
  const c = s.context;
  switch (e.kind) {
    case 'symbol':
      return s.bindings.get(e.name) as Multi;
    case 'sum':
      return balanced(e.terms.map((t) => evaluate(s, t)), (a, b) => add(c, a, b));
    case 'product':
      return balanced(e.factors.map((f) => evaluate(s, f)), (a, b) => multiply(c, a, b));
    case 'quotient': {
      const numerator = evaluate(s, e.numerator);
      return divide(c, numerator, evaluate(s, e.denominator));
    }
    case 'negation':
      return negate(c, evaluate(s, e.operand));
    case 'power':
      return evaluatePower(s, e.base, e.exponent);
    case 'root':
      return evaluateRoot(s, e.degree, e.radicand);
    case 'call':
      return evaluateCall(s, e, evaluate);
    case 'order':
      return orderTerm(s, e.argument, e.little);
    case 'derivative':
      return evaluateDerivative(s, e);
    case 'apply':
      return evaluateApply(s, e, evaluate);
    case 'indexedSum':
    case 'indexedProduct':
      return evaluateIndexed(s, e, evaluate);
    case 'integral':
      return evaluateIntegral(s, e, evaluate);
    default:
      throw new Declined('no-expansion', notExpanded[e.kind] ?? 'This kind of formula is not expanded; rewrite it with sums, products, powers and functions.');
  }
}

const notExpanded: Partial<Record<Expression['kind'], string>> = {
  relation: 'An equation or inequality is not a function to expand; choose one side of it.',
  dots: 'Dots stand for terms that are not written; write an O-term instead.',
  vector: 'Vectors are not expanded; write their components.',
  limit: 'A limit inside a formula is not expanded; take the limit first.',
  piecewise: 'A choice between branches is not expanded; expand the branch that holds at the point.',
};

function balanced(parts: readonly Multi[], join: (a: Multi, b: Multi) => Multi): Multi {
  if (parts.length === 1) return parts[0] as Multi;
  const middle = parts.length >> 1;
  return join(balanced(parts.slice(0, middle), join), balanced(parts.slice(middle), join));
}

function evaluatePower(s: Session, base: Expression, exponent: Expression): Multi {
  const c = s.context;
  if (!varies(s, exponent)) {
    const e = constantOf(s, exponent);
    if (e instanceof Series) throw new Error('a constant exponent that varies');
    const b = evaluate(s, base);
    return perfectPower(s, base, b, e) ?? power(c, b, e);
  }
  const e = evaluate(s, exponent);
  if (base.kind === 'constant' && base.name === 'e') return exponential(c, e);
  const b = evaluate(s, base);
  if (!(e instanceof Series)) return power(c, b, e);
  if (isLiteralOne(b)) return Q.ONE;
  return generalPower(c, b, e);
}

/** The real root of odd degree, the principal root of even degree. */
function evaluateRoot(s: Session, degree: Expression, radicand: Expression): Multi {
  const c = s.context;
  const n = evaluate(s, degree);
  if (n instanceof Series) return generalPower(c, evaluate(s, radicand), divide(c, Q.ONE, n));
  const f = evaluate(s, radicand);
  const exponent = isRational(n) && n.num !== 0n ? Q.reciprocal(n) : c.field.divide(Q.ONE, n);
  const odd = isRational(n) && n.den === 1n && n.num % 2n !== 0n;
  if (odd && !isRealMulti(c, f)) throw new Declined('no-expansion', 'The real root of a quantity that is not real has no meaning; write a power instead.');
  if (odd && f instanceof Series && eventualSign(c, f) === -1) return negate(c, power(c, negate(c, f), exponent));
  return perfectPower(s, radicand, f, exponent) ?? power(c, f, exponent);
}

/** O(g): nothing is known from g's leading monomial on. */
function orderTerm(s: Session, argument: Expression, little: boolean): Multi {
  const c = s.context;
  if (little) throw new Declined('no-expansion', 'A little-o term says too little to calculate with; write the O-term that is meant.');
  const size = evaluate(s, argument);
  if (isLiteralZero(size)) return Q.ZERO;
  const lead = monomialOf(c, size);
  if (!lead) return Q.ZERO;
  return orderSeries(c, lead, () => ({ kind: 'order', little: false, argument: exactOf(c, size) }));
}

/** A derivative in a symbol that varies with t (or in what stands for it at another point): df/dv = theta(f)/theta(v). In another symbol it is a derivative in a parameter. */
function evaluateDerivative(s: Session, e: Extract<Expression, { kind: 'derivative' }>): Multi {
  const c = s.context;
  if (!varies(s, e.variable)) throw new Declined('no-expansion', 'A derivative in a parameter is not expanded; carry it out first.');
  const speed = theta(c, evaluate(s, e.variable));
  if (isKnownZero(c, speed)) throw new Declined('no-expansion', 'A derivative in a quantity that stays constant has no meaning; correct the formula.');
  let value = evaluate(s, e.body);
  if (isKnownZero(c, value)) return Q.ZERO;
  for (let k = 0; k < e.times; k += 1) value = divide(c, theta(c, value), speed);
  return value;
}

