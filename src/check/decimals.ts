/** Printed decimal coefficients: right if the exact coefficient lies within half a unit of their last digit. */
import { build, dependsOn, mapChildren, Q, walk, type Expression, type NumberNode, type Rational } from '../expression/index.ts';
import { enclose } from './enclose.ts';
import type { Setting } from './context.ts';
import { compareSizes, leading, type Leading } from './size.ts';
import type { Truncated } from './truncated.ts';

/** Half a unit in the last printed digit; null for a literal without a decimal point. */
export function halfUnit(node: NumberNode): Rational | null {
  const match = /^(\d*)\.(\d+)(?:[eE]([+-]?\d+))?[a-zA-Z_]*\d*$/.exec(node.written ?? '');
  if (!match) return null;
  const shift = (match[2] ?? '').length - Number(match[3] ?? 0);
  return shift >= 0 ? Q.rational(1n, 2n * 10n ** BigInt(shift)) : Q.rational(10n ** BigInt(-shift), 2n);
}

const decimalsIn = (e: Expression): readonly NumberNode[] => [...walk(e)].filter((n): n is NumberNode => n.kind === 'number' && halfUnit(n) !== null);

/**
 * Takes differences away that rounding of printed decimals explains, one printed term at a time, so that later terms are judged too.
 * Without decimals the arguments come back as they are.
 */
export function absorbDecimals(truth: Expression, truncated: Truncated, first: Leading, setting: Setting): { readonly sum: Expression; readonly lead: Leading } {
  let sum = truncated.kept;
  let lead = first;
  const terms = truncated.terms.filter((t) => decimalsIn(t.value).some((d) => dependsOnlyAsFactor(t.value, d)));
  for (let round = 0; round < terms.length && lead.kind === 'monomial'; round += 1) {
    const { size, coefficient } = lead;
    const term = terms.find((t) => {
      const own = leading(setting, t.value);
      return own.kind === 'monomial' && compareSizes(own.size, size) === 0;
    });
    if (!term || !withinRounding(term.value, coefficient, setting)) break;
    sum = build.sum(sum, monomial(coefficient, size, setting));
    lead = leading(setting, build.difference(truth, sum));
  }
  return { sum, lead };
}

function dependsOnlyAsFactor(e: Expression, literal: NumberNode): boolean {
  return e === literal || [...walk(e)].includes(literal);
}

/** |difference| <= what a change of each decimal by half its last unit can make. */
function withinRounding(term: Expression, difference: Expression, setting: Setting): boolean {
  let reach: Rational = Q.ZERO;
  for (const literal of decimalsIn(term)) {
    const half = halfUnit(literal);
    if (!half) continue;
    const moved = replaceNode(term, literal, build.number(Q.add(literal.value, half)));
    const change = leading(setting, build.difference(moved, term));
    if (change.kind !== 'monomial' || dependsOn(change.coefficient, setting.variable)) return false;
    const size = enclose(change.coefficient);
    if (!size) return false;
    reach = Q.add(reach, Q.compare(Q.absolute(size.high), Q.absolute(size.low)) > 0 ? Q.absolute(size.high) : Q.absolute(size.low));
  }
  const actual = enclose(difference);
  if (!actual) return false;
  return Q.compare(Q.absolute(actual.low), reach) <= 0 && Q.compare(Q.absolute(actual.high), reach) <= 0;
}

export function replaceNode(e: Expression, target: Expression, replacement: Expression): Expression {
  return e === target ? replacement : mapChildren(e, (c) => replaceNode(c, target, replacement));
}

export function monomial(coefficient: Expression, size: { readonly power: Rational; readonly log: number }, setting: Setting): Expression {
  const variable = build.symbol(setting.variable);
  const large = setting.point === 'inf' || setting.point === '-inf';
  const local = large ? variable : typeof setting.point === 'object' && setting.point.kind === 'number' && Q.isZero(setting.point.value) ? variable : build.difference(variable, setting.point as Expression);
  const power = large ? Q.negate(size.power) : size.power;
  const factors: Expression[] = [coefficient];
  if (!Q.isZero(power)) factors.push(Q.isOne(power) ? local : build.power(local, power));
  if (size.log !== 0) factors.push(build.power(build.call('log', local), size.log));
  return build.product(...factors);
}
