/** A formula in operators -> its power series in s. */
import { build, dependsOn, type Expression, Q, walk } from '../../expression/index.ts';
import { Declined } from '../../outcome.ts';
import type { Expansion } from '../expansion.ts';
import { apart, addSeries, composed, constantSeries, invertSeries, isZeroSeries, multiplySeries, type OperatorSeries, scaleSeries, type Setting, TooNarrow } from './series.ts';
import { letterName } from './letters.ts';
import { inverseOf, NONE, one, type Sum, type Word } from './words.ts';
import type { Element } from '../../algebra/types.ts';

export interface Evaluation extends Setting {
  /** Names of the letters, in order of appearance; an adjoint `A^\dagger` is entered on first sight. */
  readonly letters: string[];
  readonly nodes: Map<string, Expression>;
  readonly identity: string | null;
  /** Symbols that move, and the power of s that each carries. */
  readonly weights: ReadonlyMap<string, number>;
  /** What a moving scalar is: point + s^weight, itself kept as a factor where several move. */
  readonly scalarOf: (name: string) => Expression | null;
  /** Symbols for traces and determinants. */
  readonly traces: Map<string, Expression>;
  /** The expansion of a scalar function of s in powers of s, below s^width. */
  readonly scalar: (f: Expression, variable: string, width: number) => Expansion;
  /** A sum of words as a tree. */
  readonly treeOf: (v: Evaluation, sum: Sum) => Expression;
  /** Operators that have to have an inverse. */
  readonly inverted: Set<string>;
}

/** The moving symbol of scalar subformulas. */
export const STEP = "s'";
const ADJOINTS = new Set(['\\dagger', '\\ast', '*', '\\top', 'T', 'H', '\\intercal', '\\mathsf{T}', '\\mathrm{T}']);
/** Functions that are not given by a power series at a point of their domain, or not meant of an operator. */
const NOT_ANALYTIC = /^(?:abs|sign|floor|ceil|round|real|imag|re|im|conjugate|arg|max|min|factorial|doubleFactorial)/;

/** The series of a formula in s, coefficients sums of words; declines what has no expansion in words. Cost: that of the products of series, each quadratic in the number of words. */
export function evaluateOperators(v: Evaluation, e: Expression): OperatorSeries {
  v.budget.check();
  if (!holdsOperator(v, e)) return scalarSeries(v, e);
  switch (e.kind) {
    case 'symbol':
      return letter(v, e.name);
    case 'sum':
    case 'product':
    case 'negation':
      return combined(v, e, evaluateOperators);
    case 'quotient':
      return quotient(v, e);
    case 'power':
      return power(v, e);
    case 'call': {
      const [only] = e.args;
      if (e.args.length !== 1 || !only || NOT_ANALYTIC.test(e.function)) throw new Declined('no-expansion', `The function ${e.function} of an operator is not expanded; write it with powers, exponentials or logarithms.`);
      return analytic(v, evaluateOperators(v, only), (t) => build.call(e.function, t));
    }
    case 'vector':
      return special(v, e);
    default:
      throw new Declined('no-expansion', 'This kind of formula is not expanded in operators; write it with sums, products, powers and functions of one operator.');
  }
}

/** Sums, products in their order, and negations of what `part` evaluates. */
function combined(v: Evaluation, e: Extract<Expression, { kind: 'sum' | 'product' | 'negation' }>, part: (v: Evaluation, e: Expression) => OperatorSeries): OperatorSeries {
  switch (e.kind) {
    case 'sum':
      return e.terms.map((t) => part(v, t)).reduce((a, b) => addSeries(v, a, b));
    case 'product':
      return e.factors.map((t) => part(v, t)).reduce((a, b) => multiplySeries(v, a, b));
    case 'negation':
      return scaleSeries(v, part(v, e.operand), Q.rational(-1));
  }
}

const holdsOperator = (v: Evaluation, e: Expression): boolean =>
  [...walk(e)].some((n) => {
    const name = letterName(n);
    return (name !== null && (v.nodes.has(name) || name === v.identity)) || n.kind === 'vector';
  });

function letter(v: Evaluation, name: string, node?: Expression): OperatorSeries {
  if (name === v.identity) return constantSeries(one(Q.ONE));
  if (!v.nodes.has(name) && node) v.nodes.set(name, node);
  let index = v.letters.indexOf(name);
  if (index < 0) index = v.letters.push(name) - 1;
  return constantSeries(one(Q.ONE, [index + 1]), v.weights.get(name) ?? 0);
}

/** A formula without operators: constants as they are, what moves by the expansion of scalars. */
function scalarSeries(v: Evaluation, e: Expression): OperatorSeries {
  const moving = [...v.weights.keys()].filter((name) => dependsOn(e, name));
  if (moving.length === 0) return constantSeries(sumOf(v, v.field.fromExpression(e)));
  switch (e.kind) {
    case 'symbol': {
      const value = v.scalarOf(e.name);
      if (value) return scalarSeries(v, value);
      return constantSeries(e.name === STEP ? one(Q.ONE) : sumOf(v, v.field.fromExpression(e)), v.weights.get(e.name) ?? 0);
    }
    case 'sum':
    case 'product':
    case 'negation':
      return combined(v, e, scalarSeries);
    case 'quotient':
      return multiplySeries(v, scalarSeries(v, e.numerator), invert(v, scalarSeries(v, e.denominator)));
    case 'power':
      if (e.exponent.kind === 'number' && Q.isInteger(e.exponent.value)) return integerPower(v, scalarSeries(v, e.base), e.exponent.value.num);
      if (e.base.kind === 'constant' && e.base.name === 'e') return analytic(v, scalarSeries(v, e.exponent), (t) => build.power(e.base, t));
      if (moving.every((name) => !dependsOn(e.exponent, name))) return analytic(v, scalarSeries(v, e.base), (t) => build.power(t, e.exponent));
      break;
    case 'call': {
      const [only] = e.args;
      if (e.args.length === 1 && only) return analytic(v, scalarSeries(v, only), (t) => build.call(e.function, t));
      break;
    }
    default:
  }
  throw new Declined('no-expansion', 'A scalar factor beside the operators is not expanded; expand it by itself first.');
}

const sumOf = (v: Evaluation, value: Element): Sum => (v.field.isZero(value) === 'yes' ? NONE : one(value));

function quotient(v: Evaluation, e: Extract<Expression, { kind: 'quotient' }>): OperatorSeries {
  const [above, below] = [evaluateOperators(v, e.numerator), evaluateOperators(v, e.denominator)];
  const inverse = invert(v, below);
  // One operator commutes with its own inverse; two do only by chance.
  const used = new Set([e.numerator, e.denominator].flatMap((part) => operatorsIn(v, part)));
  const plain = operatorsIn(v, e.numerator).length === 0 || operatorsIn(v, e.denominator).length === 0 || used.size === 1;
  if (!plain) throw new Declined('bad-request', 'It is not plain on which side of the numerator the divisor stands; write A B^{-1} or B^{-1} A.');
  return multiplySeries(v, above, inverse);
}
const operatorsIn = (v: Evaluation, e: Expression): readonly string[] => [...new Set([...walk(e)].map(letterName).filter((name): name is string => name !== null && v.nodes.has(name)))];

/** The inverse of a sum of operators is a letter of its own, the inverted sum: a resolvent. */
function invert(v: Evaluation, a: OperatorSeries): OperatorSeries {
  return invertSeries(v, a, (lead) => {
    const word = [...lead.values()][0]?.word ?? [];
    const known = inverseOf(v.field, lead);
    for (const x of known ? word : []) if (x > 0) v.inverted.add(v.letters[x - 1] ?? '');
    if (known) return known;
    const name = `sum ${[...lead].map(([key, s]) => `${key}:${v.field.key(s.coefficient)}`).sort().join(' ')}`;
    if (!v.nodes.has(name)) v.nodes.set(name, v.treeOf(v, lead));
    v.inverted.add(name);
    const index = v.letters.includes(name) ? v.letters.indexOf(name) : v.letters.push(name) - 1;
    return one(Q.ONE, [-(index + 1)]);
  });
}

function power(v: Evaluation, e: Extract<Expression, { kind: 'power' }>): OperatorSeries {
  if (e.exponent.kind === 'symbol' && ADJOINTS.has(e.exponent.name)) {
    const name = letterName(e.base);
    if (name === null) throw new Declined('no-expansion', 'The adjoint of a product or sum is not expanded; write it out letter by letter.');
    if (name === v.identity) return letter(v, name);
    if (v.weights.has(name)) throw new Declined('bad-request', 'The adjoint of the small operator moves with it; name both as small quantities.');
    return letter(v, `${name}^${e.exponent.name}`, build.symbol(`${name}^${e.exponent.name.startsWith('\\math') ? `{${e.exponent.name}}` : e.exponent.name}`));
  }
  if (e.base.kind === 'constant' && e.base.name === 'e') return analytic(v, evaluateOperators(v, e.exponent), (t) => build.power(e.base, t));
  const exponent = e.exponent.kind === 'negation' && e.exponent.operand.kind === 'number' ? build.number(Q.negate(e.exponent.operand.value)) : e.exponent;
  if (holdsOperator(v, exponent)) throw new Declined('no-expansion', 'An operator as an exponent is expanded over e only; write e^{A \\ln x}.');
  const base = evaluateOperators(v, e.base);
  if (exponent.kind === 'number' && Q.isInteger(exponent.value)) return integerPower(v, base, exponent.value.num);
  if ([...v.weights.keys()].some((name) => dependsOn(exponent, name))) throw new Declined('no-expansion', 'A power with a moving exponent is not expanded in operators; write it over e.');
  return analytic(v, base, (t) => build.power(t, exponent));
}

/** Cost: |n| products; refused above 1000. */
function integerPower(v: Evaluation, base: OperatorSeries, n: bigint): OperatorSeries {
  if (n < 0n) return integerPower(v, invert(v, base), -n);
  if (n > 1000n) throw new Declined('bad-request', 'This power of an operator is too high to be written in words; choose an exponent below 1000.');
  let result = constantSeries(one(Q.ONE));
  for (let k = 0n; k < n; k += 1n) result = multiplySeries(v, result, base);
  return result;
}

/** g(c + x) = sum of g^(k)(c)/k! x^k, for a scalar limit c and an x that vanishes: functions of one argument commute with it. */
function analytic(v: Evaluation, argument: OperatorSeries, g: (t: Expression) => Expression): OperatorSeries {
  if (argument.terms.length === 0 && !argument.exact) throw new TooNarrow();
  if (argument.start < 0) throw new Declined('no-expansion', 'The argument of this function grows without bound; choose another point.');
  const parts = apart(argument);
  if (!parts) throw new Declined('no-expansion', 'A function of an operator that does not tend to a multiple of the identity has no expansion in words; expand where its argument is small or close to a number.');
  if (isZeroSeries(parts.rest)) return constantSeries(sumOf(v, v.field.fromExpression(g(v.field.toExpression(parts.limit)))));
  const t = "t'";
  const taylor = v.scalar(g(build.sum(v.field.toExpression(parts.limit), build.symbol(t))), t, v.width);
  const coefficients = new Map<number, Element>();
  for (const term of taylor.terms) {
    const whole = term.power.kind === 'number' && Q.isInteger(term.power.value) && term.power.value.num >= 0n && term.log === 0 && term.scale === null;
    if (!whole || taylor.prefactor) throw new Declined('no-expansion', 'The function has no power series at the value that its argument tends to; choose another point.');
    if (term.power.kind === 'number') coefficients.set(Number(term.power.value.num), v.field.fromExpression(term.coefficient));
  }
  return composed(v, parts.rest, (k) => coefficients.get(k) ?? Q.ZERO);
}

function special(v: Evaluation, e: Extract<Expression, { kind: 'vector' }>): OperatorSeries {
  const [first, second] = e.args;
  switch (e.operation) {
    case 'symbol':
      return letter(v, e.name ?? '', e);
    case 'ordered':
      return e.args.map((a) => evaluateOperators(v, a)).reduce((a, b) => multiplySeries(v, a, b));
    case 'commutator':
    case 'anticommutator': {
      if (!first || !second) break;
      const [a, b] = [evaluateOperators(v, first), evaluateOperators(v, second)];
      const back = multiplySeries(v, b, a);
      return addSeries(v, multiplySeries(v, a, b), e.operation === 'commutator' ? scaleSeries(v, back, Q.rational(-1)) : back);
    }
    case 'trace':
      if (first) return traceOf(v, evaluateOperators(v, first));
      break;
    case 'determinant':
      if (first) return determinantOf(v, evaluateOperators(v, first));
      break;
    default:
  }
  throw new Declined('no-expansion', 'Vectors and operators in one formula are not expanded together; write components.');
}

/** tr is linear, and the same for a word turned around. */
const traceOf = (v: Evaluation, a: OperatorSeries): OperatorSeries => ({
  ...a,
  terms: a.terms.map((t) => {
    let total: Element = Q.ZERO;
    for (const { word, coefficient } of t.values()) total = v.field.add(total, v.field.multiply(coefficient, traceSymbol(v, word)));
    return sumOf(v, total);
  }),
});

function traceSymbol(v: Evaluation, word: Word): Element {
  const turned = word.map((_, k) => [...word.slice(k), ...word.slice(0, k)]);
  const least = turned.reduce((m, w) => (w.join() < m.join() ? w : m), [...word]);
  // Inverses that meet only around the corner cancel too.
  if (least.length > 1 && word[0] === -(word[word.length - 1] as number)) return traceSymbol(v, word.slice(1, -1));
  return named(v, `trace ${least.join(' ')}`, { kind: 'vector', operation: 'trace', args: [least.length === 0 ? (v.identity === null ? build.number(1) : build.symbol(v.identity)) : ordered(v, least)] });
}

function named(v: Evaluation, name: string, meaning: Expression): Element {
  v.traces.set(name, meaning);
  return v.field.fromExpression(build.symbol(name));
}

/** det(w (1 + x)) = det w exp(tr log(1 + x)) for a word w. */
function determinantOf(v: Evaluation, a: OperatorSeries): OperatorSeries {
  const lead = a.terms[0];
  const [only] = lead?.values() ?? [];
  if (!lead || !only) throw a.exact ? new Declined('no-expansion', 'This determinant is zero; check the formula.') : new TooNarrow();
  const unit = only.coefficient;
  if (lead.size !== 1 || v.field.isZero(v.field.subtract(unit, Q.ONE)) !== 'yes' || a.start !== 0) throw new Declined('needs-assumption', 'The determinant of a multiple of an operator depends on the dimension; take the factor out of the determinant.');
  const inverse = inverseOf(v.field, lead);
  const normalised = inverse && only.word.length > 0 ? multiplySeries(v, constantSeries(inverse), a) : a;
  const logarithm = analytic(v, normalised, (t) => build.call('log', t));
  const value = analytic(v, traceOf(v, logarithm), (t) => build.power(build.constant('e'), t));
  const front = only.word.reduce<Element>((product, x) => {
    const name = v.letters[Math.abs(x) - 1] ?? '';
    const det = named(v, `determinant ${Math.abs(x)}`, { kind: 'vector', operation: 'determinant', args: [v.nodes.get(name) ?? build.symbol(name)] });
    if (x > 0) v.inverted.add(name);
    return x > 0 ? v.field.multiply(product, det) : v.field.divide(product, det);
  }, Q.ONE);
  return scaleSeries(v, value, front);
}

/** The word as it is written: equal neighbours as powers. */
export function ordered(v: Pick<Evaluation, 'letters' | 'nodes'>, word: Word): Expression {
  const factors: Expression[] = [];
  for (let k = 0; k < word.length; ) {
    const x = word[k] as number;
    let n = 0;
    for (; word[k] === x; k += 1) n += 1;
    const name = v.letters[Math.abs(x) - 1] ?? '';
    const node = v.nodes.get(name) ?? build.symbol(name);
    factors.push(n === 1 && x > 0 ? node : build.power(node, x > 0 ? n : -n));
  }
  return { kind: 'vector', operation: 'ordered', args: factors };
}

