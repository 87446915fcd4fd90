/** An expansion as trees that are ready to be written: its sum, term by term, and its O-term. */
import type { Expansion, ExpansionRemainder, ExpansionTerm } from '../expand/expansion.ts';
import { build, type Expression, mapChildren, Q, sameExpression, walk } from '../expression/index.ts';
import { type Factors, factorsOf, multiplyFactors, NO_FACTORS, powerFactors, splitSign } from './factors.ts';
import { arrange, commonFraction, standsBehind } from './layout.ts';

type Placement = 'inside' | 'outside';

/** t^power * L^log * scale in the variable, as factors: t = 1/x gives x^(-power), t = x - a stays one base. */
function monomialFactors(expansion: Expansion, power: Expression, log: number, scale: Expression | null): Factors {
  let factors = powerOf(expansion.local, power, expansion.point !== '-inf');
  if (log !== 0) {
    const logarithm = log === 1 || log === -1 ? expansion.logarithm : build.power(expansion.logarithm, Math.abs(log));
    factors = multiplyFactors(factors, log > 0 ? { ...NO_FACTORS, numerator: [logarithm] } : { ...NO_FACTORS, denominator: [logarithm] });
  }
  if (scale) factors = multiplyFactors(factors, factorsOf(scale));
  return factors;
}

/** base^exponent for the local variable. 1/x is turned into a power of x where that has the same principal value: for x > 0, and for every x where the exponent is an integer. */
function powerOf(base: Expression, exponent: Expression, positive: boolean): Factors {
  if (exponent.kind === 'number' && Q.isZero(exponent.value)) return NO_FACTORS;
  if (exponent.kind === 'number' && Q.isOne(exponent.value)) return base.kind === 'sum' ? { ...NO_FACTORS, numerator: [base] } : factorsOf(base);
  const reciprocal = base.kind === 'quotient' && build.isOneNumber(base.numerator) ? base.denominator : null;
  const integer = exponent.kind === 'number' && Q.isInteger(exponent.value);
  if (reciprocal && (positive || integer)) return powerOf(reciprocal, negated(exponent), positive);
  return powerFactors(base, exponent) ?? { ...NO_FACTORS, numerator: [build.power(base, exponent)] };
}

function negated(e: Expression): Expression {
  if (e.kind === 'number') return build.number(Q.negate(e.value));
  // -(b - a) is a - b: a power that is a sum stays in the numerator, x^{a - b}.
  if (e.kind === 'sum') {
    const rank = (t: Expression): number => (t.kind === 'number' ? 2 : splitSign(t).negative ? 1 : 0);
    return build.sum(...e.terms.map(negated).sort((x, y) => rank(x) - rank(y)));
  }
  const { negative, magnitude } = splitSign(e);
  return negative ? magnitude : build.negation(e);
}

/** A sum as a coefficient becomes one factor, its common fraction and sign in front. */
function coefficientFactors(coefficient: Expression): Factors {
  const whole = factorsOf(coefficient);
  return whole.numerator.reduce<Factors>((all, f) => multiplyFactors(all, f.kind === 'sum' ? sumFactors(f) : { ...NO_FACTORS, numerator: [f] }), { ...whole, numerator: [] });
}

function sumFactors(sum: Extract<Expression, { kind: 'sum' }>): Factors {
  const common = commonFraction(sum.terms);
  const inner = common ? common.sum : sum;
  const signs = inner.kind === 'sum' ? inner.terms.map(splitSign) : [splitSign(inner)];
  const negative = signs.every((s) => s.negative);
  return { negative, coefficient: common?.factor ?? Q.ONE, numerator: [orderedSum(negative ? build.sum(...signs.map((s) => s.magnitude)) : inner)], denominator: [] };
}

/** A sum starts with a positive member where it has one. */
function orderedSum(e: Expression): Expression {
  if (e.kind !== 'sum') return e;
  const sum = joinLogarithms(e);
  if (sum.kind !== 'sum') return sum;
  const first = sum.terms.findIndex((t) => !splitSign(t).negative);
  const front = sum.terms[first];
  return first <= 0 || !front ? sum : build.sum(front, ...sum.terms.filter((_, i) => i !== first));
}

/** log 2 + log pi is written log(2 pi), as in Stirling's formula. */
function joinLogarithms(e: Expression): Expression {
  if (e.kind !== 'sum') return e;
  const argument = (t: Expression): Expression | null => (t.kind === 'call' && t.function === 'log' ? (t.args[0] ?? null) : null);
  const isPi = (t: Expression): boolean => {
    const a = argument(t);
    return a?.kind === 'constant' && a.name === 'pi';
  };
  const isPositiveNumber = (t: Expression): boolean => {
    const a = argument(t);
    return a?.kind === 'number' && a.value.num > 0n;
  };
  const pi = e.terms.find(isPi);
  const number = e.terms.find(isPositiveNumber);
  const inside = number ? argument(number) : null;
  if (!pi || !inside) return e;
  const joined = build.call('log', build.product(inside, build.constant('pi')));
  return build.sum(...e.terms.filter((t) => t !== pi && t !== number), joined);
}

export function termTree(expansion: Expansion, term: ExpansionTerm, placement: Placement = 'inside'): Expression {
  const monomial = monomialFactors(expansion, term.power, term.log, term.scale);
  const coefficient = coefficientFactors(term.coefficient);
  const onlyCoefficient = monomial.numerator.length + monomial.denominator.length === 0;
  if (onlyCoefficient && term.coefficient.kind === 'sum') return orderedSum(term.coefficient.terms.some(standsBehind) ? build.sum(...term.coefficient.terms.map((t) => operatorsLast(factorsOf(t), NO_FACTORS))) : term.coefficient);
  if (coefficient.numerator.some(standsBehind)) return operatorsLast(coefficient, monomial);
  return arrange(coefficient, monomial, isTall(expansion.local) ? 'outside' : placement);
}

/** `\frac{\epsilon^2}{2} [A, B]`: scalars with their fraction, then what must keep its place. */
function operatorsLast(coefficient: Factors, monomial: Factors): Expression {
  if (monomial.denominator.length > 0) return arrange(coefficient, monomial);
  const behind = coefficient.numerator.filter(standsBehind);
  const scalars = { ...coefficient, numerator: coefficient.numerator.filter((f) => !standsBehind(f)) };
  return arrange(multiplyFactors(scalars, monomial), { ...NO_FACTORS, numerator: behind }, 'outside');
}

/** A local variable that holds a fraction (x - pi/4) is not set into another one. */
const isTall = (local: Expression): boolean => local.kind === 'sum' && [...walk(local)].some((e) => e.kind === 'quotient' || (e.kind === 'number' && !Q.isInteger(e.value)));

/** The partial sum without the prefactor; 0 where there is no term. */
export function termsTree(expansion: Expansion, placement: Placement = 'inside'): Expression {
  return build.sum(...termMembers(expansion, placement));
}

/** The members of the printed sum: a constant term that is a sum joins it, a local variable that is a sum (x - 1) stays together. */
function termMembers(expansion: Expansion, placement: Placement): readonly Expression[] {
  return expansion.terms.flatMap((term) => {
    const tree = termTree(expansion, term, placement);
    const isConstant = term.coefficient.kind === 'sum' && term.log === 0 && !term.scale && term.power.kind === 'number' && Q.isZero(term.power.value);
    return isConstant && tree.kind === 'sum' ? tree.terms : [tree];
  });
}

/** What the remainder is O of, inside the prefactor. */
export function remainderArgument(expansion: Expansion, remainder: ExpansionRemainder): Expression {
  const power = remainder.power ?? build.number(0);
  const factors = monomialFactors(expansion, power, remainder.log, remainder.scale);
  const bare = { ...factors, negative: false, coefficient: Q.ONE };
  const [only] = bare.denominator;
  if (bare.denominator.length !== 1 || bare.numerator.length > 0 || !only) return arrange(bare);
  return only.kind === 'power' ? build.power(only.base, negated(only.exponent)) : build.power(only, -1);
}

/** The prefactor as it is written: one fraction, powers of 1/x turned into powers of x where the point is at +infinity. */
export function prefactorTree(expansion: Expansion, placement: Placement = 'inside'): Expression | null {
  const { prefactor, local, point } = expansion;
  if (!prefactor) return null;
  const reciprocal = point === 'inf' && local.kind === 'quotient' && build.isOneNumber(local.numerator) ? local : null;
  const turn = (e: Expression): Expression => (reciprocal && e.kind === 'power' && sameExpression(e.base, reciprocal) ? build.power(reciprocal.denominator, negated(e.exponent)) : mapChildren(e, turn));
  return arrange(factorsOf(turn(prefactor)), NO_FACTORS, placement);
}

/** prefactor * (terms + O(...)), or terms + O(...). With `ending` 'none' the O-term is left out, with 'dots' dots stand in its place. */
export function expansionTree(expansion: Expansion, ending: 'order' | 'dots' | 'none' = 'order', placement: Placement = 'inside'): Expression {
  const members = [...termMembers(expansion, placement)];
  if (expansion.remainder && ending === 'order') members.push({ kind: 'order', little: false, argument: remainderArgument(expansion, expansion.remainder) });
  if (expansion.remainder && ending === 'dots') members.push({ kind: 'dots' });
  const inside = build.sum(...members);
  const front = prefactorTree(expansion, placement);
  if (!front) return inside;
  if (build.isOneNumber(inside)) return front;
  if (inside.kind !== 'sum') return arrange(multiplyFactors(factorsOf(front), factorsOf(inside)), NO_FACTORS, placement);
  const { negative, magnitude } = splitSign(front);
  const factors = magnitude.kind === 'product' ? magnitude.factors : [magnitude];
  const whole = build.product(...factors, inside);
  return negative ? build.negation(whole) : whole;
}
