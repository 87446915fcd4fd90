/** Finite sums of t^m exp(lambda t) with exact coefficients: closed under sums, products and integration, so that linear equations with constant coefficients are solved in it. */
import type { Element } from '../../algebra/types.ts';
import { build, type Expression, Q } from '../../expression/index.ts';
import { Declined } from '../../outcome.ts';
import { addElements, type Context, isRational, multiplyElements, negateElement } from '../../series/index.ts';
import { addPolynomials, derivativeOf, type Polynomial, scalePolynomial, trimmed } from './operator.ts';

/** polynomial(t) * exp((re + i im) t); re and im are real. */
export interface Mode {
  readonly re: Element;
  readonly im: Element;
  readonly polynomial: Polynomial;
}
/** No two modes have the same exponent, and no polynomial is zero. */
export type ExponentialPolynomial = readonly Mode[];

const sameElement = (c: Context, a: Element, b: Element): boolean => {
  if (isRational(a) && isRational(b)) return Q.equal(a, b);
  const truth = c.field.equal(a, b);
  if (truth === 'undecided') throw new Declined('undecided', 'It could not be decided whether two frequencies of the solution are equal; give them as simpler numbers.');
  return truth === 'yes';
};
export const exponentOf = (c: Context, m: Pick<Mode, 're' | 'im'>): Element => addElements(c, m.re, multiplyElements(c, c.field.i, m.im));

export function addModes(c: Context, a: ExponentialPolynomial, b: ExponentialPolynomial): ExponentialPolynomial {
  const result = [...a];
  for (const mode of b) {
    const k = result.findIndex((m) => sameElement(c, m.re, mode.re) && sameElement(c, m.im, mode.im));
    const other = result[k];
    if (other) result[k] = { ...other, polynomial: addPolynomials(c, other.polynomial, mode.polynomial) };
    else result.push(mode);
  }
  return result.map((m) => ({ ...m, polynomial: trimmed(c, m.polynomial) })).filter((m) => m.polynomial.length > 0);
}
export const scaleModes = (c: Context, a: ExponentialPolynomial, by: Element): ExponentialPolynomial => addModes(c, [], a.map((m) => ({ ...m, polynomial: scalePolynomial(c, m.polynomial, by) })));

function multiplyPolynomials(c: Context, a: Polynomial, b: Polynomial): Polynomial {
  const result: Element[] = Array.from({ length: a.length + b.length - 1 }, () => Q.ZERO);
  a.forEach((x, i) => b.forEach((y, j) => (result[i + j] = addElements(c, result[i + j] as Element, multiplyElements(c, x, y)))));
  return result;
}

function multiplyModes(c: Context, a: ExponentialPolynomial, b: ExponentialPolynomial): ExponentialPolynomial {
  c.budget.check();
  return addModes(c, [], a.flatMap((x) => b.map((y) => ({ re: addElements(c, x.re, y.re), im: addElements(c, x.im, y.im), polynomial: multiplyPolynomials(c, x.polynomial, y.polynomial) }))));
}

export const differentiateModes = (c: Context, a: ExponentialPolynomial): ExponentialPolynomial =>
  addModes(c, [], a.map((m) => ({ ...m, polynomial: addPolynomials(c, derivativeOf(c, m.polynomial), scalePolynomial(c, m.polynomial, exponentOf(c, m))) })));

export const constantModes = (c: Context, value: Element): ExponentialPolynomial => addModes(c, [], [{ re: Q.ZERO, im: Q.ZERO, polynomial: [value] }]);
/** The value of a constant; null for anything that varies. */
function constantValue(a: ExponentialPolynomial): Element | null {
  const [only] = a;
  if (!only) return Q.ZERO;
  const still = isRational(only.re) && only.re.num === 0n && isRational(only.im) && only.im.num === 0n;
  return a.length === 1 && still && only.polynomial.length === 1 ? (only.polynomial[0] as Element) : null;
}
export const valueAtZero = (c: Context, a: ExponentialPolynomial): Element => a.reduce<Element>((total, m) => addElements(c, total, m.polynomial[0] ?? Q.ZERO), Q.ZERO);

const MOST_POWER = 60n;

/** A tree in t and in symbols that stand for exponential polynomials. Declines what is none: sin(t^2), 1/t, a function of an oscillation. */
export function modesOf(c: Context, e: Expression, t: string, known: (symbol: string) => ExponentialPolynomial | null): ExponentialPolynomial {
  const visit = (node: Expression): ExponentialPolynomial => {
    c.budget.check();
    switch (node.kind) {
      case 'symbol':
        if (node.name === t) return [{ re: Q.ZERO, im: Q.ZERO, polynomial: [Q.ZERO, Q.ONE] }];
        return known(node.name) ?? constantModes(c, c.field.fromExpression(node));
      case 'number':
      case 'constant':
        return constantModes(c, c.field.fromExpression(node));
      case 'sum':
        return node.terms.map(visit).reduce((a, b) => addModes(c, a, b));
      case 'negation':
        return scaleModes(c, visit(node.operand), Q.MINUS_ONE);
      case 'product':
        return node.factors.map(visit).reduce((a, b) => multiplyModes(c, a, b));
      case 'quotient': {
        // A single exponential has a reciprocal of its kind.
        const [below, more] = visit(node.denominator);
        if (!below || more || below.polynomial.length !== 1) return refuse();
        const inverse = { re: negateElement(c, below.re), im: negateElement(c, below.im), polynomial: [c.field.divide(Q.ONE, below.polynomial[0] as Element)] };
        return multiplyModes(c, visit(node.numerator), [inverse]);
      }
      case 'power':
        return raised(node.base, node.exponent);
      case 'call':
        return called(node.function, node.args);
      default:
        return refuse();
    }
  };
  const refuse = (): never => {
    throw new Declined('no-expansion', 'A correction needs the integral of a function of the earlier solution that is no sum of powers, exponentials and oscillations; this is not solved in closed form.');
  };
  const raised = (base: Expression, exponent: Expression): ExponentialPolynomial => {
    if (base.kind === 'constant' && base.name === 'e') return exponential(exponent);
    const inner = visit(base);
    const value = constantValue(inner);
    const power = constantValue(visit(exponent));
    if (power === null) return refuse();
    if (value !== null) return constantModes(c, c.field.power(value, power));
    if (!isRational(power) || power.den !== 1n || power.num < 0n || power.num > MOST_POWER) return refuse();
    let result = constantModes(c, Q.ONE);
    for (let k = 0n; k < power.num; k += 1n) result = multiplyModes(c, result, inner);
    return result;
  };
  /** rate * t + phase, both free of t; null for other arguments. */
  const linear = (argument: Expression): { readonly rate: Element; readonly phase: Element } | null => {
    const modes = visit(argument);
    const value = constantValue(modes);
    if (value !== null) return { rate: Q.ZERO, phase: value };
    const [only] = modes;
    if (modes.length !== 1 || !only || only.polynomial.length !== 2) return null;
    if (!(isRational(only.re) && only.re.num === 0n && isRational(only.im) && only.im.num === 0n)) return null;
    return { rate: only.polynomial[1] as Element, phase: only.polynomial[0] as Element };
  };
  const exponential = (argument: Expression): ExponentialPolynomial => {
    const parts = linear(argument);
    if (!parts) return refuse();
    const { rate } = parts;
    const real = isRational(rate) || c.field.isReal(rate) === 'yes';
    const turned = real ? Q.ZERO : c.field.divide(rate, c.field.i);
    if (!real && c.field.isReal(turned) !== 'yes') return refuse();
    return addModes(c, [], [{ re: real ? rate : Q.ZERO, im: turned, polynomial: [c.field.exp(parts.phase)] }]);
  };
  const called = (id: string, args: readonly Expression[]): ExponentialPolynomial => {
    const values = args.map((a) => constantValue(visit(a)));
    if (values.every((v) => v !== null)) return constantModes(c, c.field.call(id, values as Element[]));
    const [argument] = args;
    if (!argument) return refuse();
    if (id === 'exp') return exponential(argument);
    const parts = id === 'sin' || id === 'cos' || id === 'sinh' || id === 'cosh' ? linear(argument) : null;
    if (!parts) return refuse();
    const { rate, phase } = parts;
    const f = c.field;
    if (id === 'sinh' || id === 'cosh') {
      const [up, down] = [f.multiply(Q.HALF, f.exp(phase)), f.multiply(Q.HALF, f.exp(f.negate(phase)))];
      return addModes(c, [], [
        { re: rate, im: Q.ZERO, polynomial: [up] },
        { re: negateElement(c, rate), im: Q.ZERO, polynomial: [id === 'cosh' ? down : f.negate(down)] },
      ]);
    }
    // a cos(rate t) + b sin(rate t)
    const [sine, cosine] = [f.call('sin', [phase]), f.call('cos', [phase])];
    return oscillation(c, rate, id === 'cos' ? cosine : sine, id === 'cos' ? f.negate(sine) : cosine);
  };
  return visit(e);
}

/** a cos(frequency t) + b sin(frequency t). */
export function oscillation(c: Context, frequency: Element, a: Element, b: Element): ExponentialPolynomial {
  const turned = multiplyElements(c, c.field.i, b);
  const half = (x: Element): Element => multiplyElements(c, x, Q.HALF);
  return addModes(c, [], [
    { re: Q.ZERO, im: frequency, polynomial: [half(addElements(c, a, negateElement(c, turned)))] },
    { re: Q.ZERO, im: negateElement(c, frequency), polynomial: [half(addElements(c, a, turned))] },
  ]);
}

/** In real form: exp(a t) t^m cos(b t) and sin(b t), as a tree in t. */
export function treeOf(c: Context, modes: ExponentialPolynomial, t: Expression): Expression {
  const parts: Expression[] = [];
  const done = new Set<Mode>();
  const monomial = (value: Element, power: number, factors: readonly Expression[]): void => {
    const tree = c.field.toExpression(value);
    if (tree.kind === 'number' && Q.isZero(tree.value)) return;
    const all = [...(power === 0 ? [] : [power === 1 ? t : build.power(t, power)]), ...factors];
    const negative = tree.kind === 'negation' ? tree.operand : tree.kind === 'number' && tree.value.num < 0n ? build.number(Q.negate(tree.value)) : null;
    const size = negative ?? tree;
    const product = build.isOneNumber(size) && all.length > 0 ? build.product(...all) : build.product(size, ...all);
    parts.push(negative ? build.negation(product) : product);
  };
  const times = (rate: Element): Expression => {
    const tree = c.field.toExpression(rate);
    return build.isOneNumber(tree) ? t : build.product(tree, t);
  };
  for (const mode of modes) {
    if (done.has(mode)) continue;
    done.add(mode);
    const growth = isRational(mode.re) && mode.re.num === 0n ? [] : [build.power(build.constant('e'), signed(c, mode.re, times))];
    if (isRational(mode.im) && mode.im.num === 0n) {
      mode.polynomial.forEach((value, k) => monomial(value, k, growth));
      continue;
    }
    const back = negateElement(c, mode.im);
    const partner = modes.find((m) => !done.has(m) && sameElement(c, m.re, mode.re) && sameElement(c, m.im, back));
    if (partner) done.add(partner);
    const forward = isNegative(c, mode.im) ? partner?.polynomial : mode.polynomial;
    const backward = isNegative(c, mode.im) ? mode.polynomial : partner?.polynomial;
    const frequency = isNegative(c, mode.im) ? back : mode.im;
    const cosine = addPolynomials(c, forward ?? [], backward ?? []);
    const sine = scalePolynomial(c, addPolynomials(c, forward ?? [], scalePolynomial(c, backward ?? [], Q.MINUS_ONE)), c.field.i);
    const angle = times(frequency);
    for (let k = 0; k < Math.max(cosine.length, sine.length); k += 1) {
      monomial(cosine[k] ?? Q.ZERO, k, [...growth, build.call('cos', angle)]);
      monomial(sine[k] ?? Q.ZERO, k, [...growth, build.call('sin', angle)]);
    }
  }
  return build.sum(...parts);
}

const signed = (c: Context, rate: Element, times: (rate: Element) => Expression): Expression => (isNegative(c, rate) ? build.negation(times(negateElement(c, rate))) : times(rate));

function isNegative(c: Context, a: Element): boolean {
  if (isRational(a)) return a.num < 0n;
  const sign = c.field.sign(a);
  if (sign === 1 || sign === -1) return sign === -1;
  return c.field.toExpression(a).kind === 'negation';
}
