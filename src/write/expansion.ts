/** Expansion -> text: typeset, as one line of Unicode, and for a numeric check. */
import { build, mapChildren, PLAIN_STYLE, Q, sameExpression, type DocumentStyle, type Expression } from '../expression/index.ts';
import type { Expansion } from '../expand/expansion.ts';
import type { NumericAnswer } from '../protocol.ts';
import { envelope } from './envelope.ts';
import { expansionTree, prefactorTree, remainderArgument, termsTree } from './expansionTree.ts';
import { toLatex } from './latex.ts';
import { NumericSymbols, toMpmath } from './mpmath.ts';
import { toUnicode } from './unicode.ts';

/** The whole expansion in the style of a document: terms, then O-term, dots or nothing as the style says. */
export function expansionLatex(expansion: Expansion, style: DocumentStyle = PLAIN_STYLE): string {
  return toLatex(withNames(expansion, expansionTree(expansion, style.ending, style.coefficient)), style);
}

/** What stands after the function: `= x - \frac{x^3}{6} + O(x^5)`, `\approx x - \frac{x^3}{6}` where the document prints no remainder. */
export function continuationLatex(expansion: Expansion, style: DocumentStyle = PLAIN_STYLE): string {
  const relation = style.ending === 'none' && !expansion.exact ? style.approximation : '=';
  return `${relation} ${expansionLatex(expansion, style)}`;
}

/** The expansion as an equation or approximation with the function on its left. */
export function equationLatex(expansion: Expansion, style: DocumentStyle = PLAIN_STYLE): string {
  return `${toLatex(expansion.function, style)} ${continuationLatex(expansion, style)}`;
}

/** One line of Unicode with the O-term. */
export function expansionText(expansion: Expansion): string {
  return toUnicode(withNames(expansion, expansionTree(expansion)));
}

/** The tree with the names that the expansion gives to numbers. */
function withNames({ names }: Expansion, tree: Expression): Expression {
  if (!names) return tree;
  const visit = (e: Expression): Expression => names.find((n) => sameExpression(n.value, e))?.symbol ?? mapChildren(e, visit);
  return visit(tree);
}

/** The O-term alone, typeset; with a prefactor the O-term is the one inside it. Empty for an exact sum. */
export function remainderLatex(expansion: Expansion, style: DocumentStyle = PLAIN_STYLE): string {
  return expansion.remainder ? toLatex({ kind: 'order', little: false, argument: remainderArgument(expansion, expansion.remainder) }, style) : '';
}

/** The O-term alone as Unicode; empty for an exact sum. */
export function remainderText(expansion: Expansion): string {
  return expansion.remainder ? toUnicode({ kind: 'order', little: false, argument: remainderArgument(expansion, expansion.remainder) }) : '';
}

/** Partial sum (prefactor included) and the positive function that the remainder is O of, as mpmath text. The scale of an exact sum is 0. */
export function expansionNumeric(expansion: Expansion): NumericAnswer {
  const symbols = new NumericSymbols();
  const terms = termsTree(expansion);
  const prefactor = prefactorTree(expansion);
  const sum = prefactor ? (build.isOneNumber(terms) ? prefactor : build.product(prefactor, terms)) : terms;
  const sumText = toMpmath(sum, symbols);
  const scaleText = toMpmath(scaleTree(expansion), symbols);
  return { syntax: 'mpmath', sum: sumText, scale: scaleText, symbols: symbols.table() };
}

/** |t|^p |L|^k times the envelope of the scale and of the prefactor. */
function scaleTree(expansion: Expansion): Expression {
  const { remainder } = expansion;
  if (!remainder) return build.number(0);
  const factors: Expression[] = [];
  const power = remainder.power;
  if (power && !(power.kind === 'number' && Q.isZero(power.value))) factors.push(distancePower(expansion.local, power));
  if (remainder.log !== 0) factors.push(raise(build.call('abs', expansion.logarithm), build.number(remainder.log)));
  if (remainder.scale) factors.push(envelope(remainder.scale));
  const prefactor = prefactorTree(expansion);
  if (prefactor) factors.push(envelope(prefactor));
  return build.product(...factors.filter((f) => !build.isOneNumber(f)));
}

function distancePower(local: Expression, power: Expression): Expression {
  if (local.kind === 'quotient' && build.isOneNumber(local.numerator)) {
    const inverse = power.kind === 'number' ? build.number(Q.negate(power.value)) : build.negation(power);
    return raise(build.call('abs', local.denominator), inverse);
  }
  return raise(build.call('abs', local), power);
}

const raise = (base: Expression, exponent: Expression): Expression => (build.isOneNumber(exponent) ? base : build.power(base, exponent));
