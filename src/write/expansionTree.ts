/** An expansion as trees that are ready to be written: its sum, term by term, and its O-term. */
import { build, Q, type Expression } from '../expression/index.ts';
import type { Expansion, ExpansionRemainder, ExpansionTerm } from '../expand/expansion.ts';
import { arrange, factorsOf, type Factors, multiplyFactors, NO_FACTORS, powerFactors, splitSign } from './layout.ts';

type Placement = 'inside' | 'outside';

/** t^power * L^log * scale in the variable, as factors: t = 1/x gives x^(-power), t = x - a stays one base. */
function monomialFactors(expansion: Expansion, power: Expression, log: number, scale: Expression | null): Factors {
  let factors = powerOf(expansion.local, power);
  if (log !== 0) {
    const logarithm = log === 1 || log === -1 ? expansion.logarithm : build.power(expansion.logarithm, Math.abs(log));
    factors = multiplyFactors(factors, log > 0 ? { ...NO_FACTORS, numerator: [logarithm] } : { ...NO_FACTORS, denominator: [logarithm] });
  }
  if (scale) factors = multiplyFactors(factors, factorsOf(scale));
  return factors;
}

/** base^exponent for the local variable. 1/x with a rational exponent is turned into a power of x (same principal value for x > 0, and for every x where the exponent is an integer). */
function powerOf(base: Expression, exponent: Expression): Factors {
  if (exponent.kind === 'number' && Q.isZero(exponent.value)) return NO_FACTORS;
  if (exponent.kind === 'number' && Q.isOne(exponent.value)) return base.kind === 'sum' ? { ...NO_FACTORS, numerator: [base] } : factorsOf(base);
  const reciprocal = base.kind === 'quotient' && build.isOneNumber(base.numerator) ? base.denominator : null;
  if (reciprocal) return powerOf(reciprocal, negated(exponent));
  return powerFactors(base, exponent) ?? { ...NO_FACTORS, numerator: [build.power(base, exponent)] };
}

function negated(e: Expression): Expression {
  if (e.kind === 'number') return build.number(Q.negate(e.value));
  const { negative, magnitude } = splitSign(e);
  return negative ? magnitude : build.negation(e);
}

/** A sum as a coefficient becomes one factor, with its common sign in front. */
function coefficientFactors(coefficient: Expression): Factors {
  if (coefficient.kind === 'sum') {
    const signs = coefficient.terms.map(splitSign);
    if (signs.every((s) => s.negative)) return { ...NO_FACTORS, negative: true, numerator: [build.sum(...signs.map((s) => s.magnitude))] };
  }
  return factorsOf(coefficient);
}

export function termTree(expansion: Expansion, term: ExpansionTerm, placement: Placement = 'inside'): Expression {
  const monomial = monomialFactors(expansion, term.power, term.log, term.scale);
  const coefficient = coefficientFactors(term.coefficient);
  const onlyCoefficient = monomial.numerator.length + monomial.denominator.length === 0;
  if (onlyCoefficient && term.coefficient.kind === 'sum') return coefficient.negative ? build.negation(build.sum(...(coefficient.numerator[0]?.kind === 'sum' ? coefficient.numerator[0].terms : coefficient.numerator))) : term.coefficient;
  return arrange(coefficient, monomial, placement);
}

/** The partial sum without the prefactor; 0 where there is no term. */
export function termsTree(expansion: Expansion, placement: Placement = 'inside'): Expression {
  const terms = expansion.terms.map((t) => termTree(expansion, t, placement));
  return build.sum(...terms.flatMap((t) => (t.kind === 'sum' ? t.terms : [t])));
}

/** What the remainder is O of, inside the prefactor. */
export function remainderArgument(expansion: Expansion, remainder: ExpansionRemainder): Expression {
  const power = remainder.power ?? build.number(0);
  const factors = monomialFactors(expansion, power, remainder.log, remainder.scale);
  if (factors.denominator.length === 0) return arrange({ ...factors, negative: false, coefficient: Q.ONE });
  return reciprocalPowers({ ...factors, negative: false, coefficient: Q.ONE });
}

/** In an O-term a lone reciprocal is written x^{-4}, not as a fraction. */
function reciprocalPowers(factors: Factors): Expression {
  const raised = factors.denominator.map((f) =>
    f.kind === 'power' ? build.power(f.base, negated(f.exponent)) : build.power(f, build.number(-1)),
  );
  return build.product(...raised, ...factors.numerator);
}

/** prefactor * (terms + O(...)), or terms + O(...). With `ending` 'none' the O-term is left out, with 'dots' dots stand in its place. */
export function expansionTree(expansion: Expansion, ending: 'order' | 'dots' | 'none' = 'order', placement: Placement = 'inside'): Expression {
  const terms = expansion.terms.map((t) => termTree(expansion, t, placement)).flatMap((t) => (t.kind === 'sum' ? t.terms : [t]));
  const members = [...terms];
  if (expansion.remainder && ending === 'order') members.push({ kind: 'order', little: false, argument: remainderArgument(expansion, expansion.remainder) });
  if (expansion.remainder && ending === 'dots') members.push({ kind: 'dots' });
  const inside = build.sum(...members);
  const { prefactor } = expansion;
  if (!prefactor) return inside;
  if (build.isOneNumber(inside)) return prefactor;
  if (inside.kind !== 'sum') return arrange(multiplyFactors(factorsOf(prefactor), factorsOf(inside)), NO_FACTORS, placement);
  const front = arrange(factorsOf(prefactor), NO_FACTORS, placement);
  const { negative, magnitude } = splitSign(front);
  const factors = magnitude.kind === 'product' ? magnitude.factors : [magnitude];
  const whole = build.product(...factors, inside);
  return negative ? build.negation(whole) : whole;
}
