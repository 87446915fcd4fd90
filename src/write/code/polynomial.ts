/** Polynomials in the form in which a machine evaluates them: Horner or Estrin, in x or in a power of x, with or without fused multiply-add. */
import { build, mapChildren, Q, type Expression, type Rational } from '../../expression/index.ts';
import { attempt, type Outcome } from '../../outcome.ts';
import { roundToFormat, type FloatFormat } from '../float.ts';
import { codeWriter } from './expression.ts';
import type { Code, CodeOptions } from './options.ts';

export interface PolynomialTerm {
  readonly power: number;
  readonly value: Rational;
}

export interface PolynomialShape {
  readonly form: 'horner' | 'estrin';
  readonly fma: boolean;
}

/** A name that is computed before the result, in order; the result uses the names. */
export interface Step {
  readonly name: string;
  readonly value: Expression;
}
export interface PolynomialForm {
  readonly steps: readonly Step[];
  readonly result: Expression;
}

const greatestCommonDivisor = (a: number, b: number): number => (b === 0 ? a : greatestCommonDivisor(b, a % b));

/** The polynomial as x^lowest * P(x^stride): lowest power, common stride of the powers (1 for a single term), coefficients of P without gaps. */
export function strided(terms: readonly PolynomialTerm[]): { readonly lowest: number; readonly stride: number; readonly coefficients: readonly Rational[] } {
  const kept = terms.filter((t) => !Q.isZero(t.value)).sort((a, b) => a.power - b.power);
  const lowest = kept[0]?.power ?? 0;
  const stride = kept.reduce((g, t) => greatestCommonDivisor(g, t.power - lowest), 0) || 1;
  const count = kept.length === 0 ? 0 : ((kept.at(-1)?.power ?? lowest) - lowest) / stride + 1;
  const coefficients: Rational[] = Array.from({ length: count }, () => Q.ZERO);
  for (const t of kept) coefficients[(t.power - lowest) / stride] = t.value;
  return { lowest, stride, coefficients };
}

/**
 * The evaluation as one tree, each operation a node: what is proved about the tree holds for the code written from it. Powers must be non-negative integers.
 * Horner: c0 + u*(c1 + u*(...)), times x^lowest, u = x^stride written out in place.
 */
export function polynomialTree(terms: readonly PolynomialTerm[], argument: Expression, shape: PolynomialShape): Expression {
  const { steps, result } = polynomialForm(terms, argument, shape);
  return steps.reduceRight((tree, step) => replaceSymbol(tree, step.name, step.value), result);
}

/** The evaluation with named intermediate powers `u`, `u2`, `u4` (or names made from `prefix`), for a function body. */
export function polynomialForm(terms: readonly PolynomialTerm[], argument: Expression, shape: PolynomialShape, prefix = 'u'): PolynomialForm {
  const { lowest, stride, coefficients } = strided(terms);
  const steps: Step[] = [];
  let base = argument;
  if (stride > 1 && coefficients.length > 1) {
    steps.push({ name: prefix, value: powerProduct(argument, stride) });
    base = build.symbol(prefix);
  }
  const inner = shape.form === 'estrin' ? estrin(coefficients, base, shape.fma, steps, prefix) : horner(coefficients, base, shape.fma);
  if (lowest === 0) return { steps, result: inner };
  const front = powerProduct(argument, lowest);
  if (build.isOneNumber(inner)) return { steps, result: front };
  return { steps, result: front.kind === 'product' ? build.product(...front.factors, inner) : build.product(front, inner) };
}

const multiplyAdd = (a: Expression, b: Expression, c: Expression, fma: boolean): Expression => (fma ? build.call('fma', a, b, c) : build.sum(c, build.product(...(a.kind === 'product' ? a.factors : [a]), b)));

function horner(coefficients: readonly Rational[], base: Expression, fma: boolean): Expression {
  const highest = coefficients.at(-1);
  if (!highest) return build.number(0);
  let tree: Expression = build.number(highest);
  for (let i = coefficients.length - 2; i >= 0; i -= 1) {
    const c = coefficients[i] ?? Q.ZERO;
    tree = Q.isZero(c) ? build.product(...(base.kind === 'product' ? base.factors : [base]), tree) : multiplyAdd(base, tree, build.number(c), fma);
  }
  return tree;
}

/** Pairs are joined level by level: (c0 + c1 u) + (c2 + c3 u) u^2, then u^4, ... */
function estrin(coefficients: readonly Rational[], base: Expression, fma: boolean, steps: Step[], prefix: string): Expression {
  let level: Expression[] = coefficients.map((c) => build.number(c));
  if (level.length === 0) return build.number(0);
  let factor = base;
  let exponent = 1;
  while (level.length > 1) {
    const next: Expression[] = [];
    for (let i = 0; i < level.length; i += 2) {
      const [low, high] = [level[i], level[i + 1]];
      if (low && high) next.push(isZeroNumber(low) ? build.product(factor, high) : multiplyAdd(factor, high, low, fma));
      else if (low) next.push(low);
    }
    level = next;
    if (level.length > 1) {
      exponent *= 2;
      const name = `${prefix}${exponent}`;
      steps.push({ name, value: build.product(factor, factor) });
      factor = build.symbol(name);
    }
  }
  return level[0] ?? build.number(0);
}

const isZeroNumber = (e: Expression): boolean => e.kind === 'number' && Q.isZero(e.value);

/** x^n as a product from the left. */
function powerProduct(x: Expression, n: number): Expression {
  return build.product(...Array.from({ length: n }, () => x));
}

function replaceSymbol(e: Expression, name: string, value: Expression): Expression {
  if (e.kind === 'symbol') return e.name === name ? value : e;
  if (e.kind === 'sum') return { ...e, terms: e.terms.map((t) => replaceSymbol(t, name, value)) };
  if (e.kind === 'product') return { ...e, factors: e.factors.map((f) => replaceSymbol(f, name, value)) };
  if (e.kind === 'call') return { ...e, args: e.args.map((a) => replaceSymbol(a, name, value)) };
  return e;
}

/** One expression in a language. Coefficients that are not floats of the format are rounded to the nearest. */
export function polynomialCode(terms: readonly PolynomialTerm[], argument: Expression, options: CodeOptions & Partial<PolynomialShape>): Outcome<Code> {
  return attempt(() => {
    const writer = codeWriter(options);
    const { text } = writer.write(roundLiterals(polynomialTree(terms, argument, { form: options.form ?? 'horner', fma: options.fma ?? false }), writer.format));
    return { text, imports: [...writer.imports] };
  });
}

function roundLiterals(e: Expression, format: FloatFormat): Expression {
  if (e.kind !== 'number') return mapChildren(e, (child) => roundLiterals(child, format));
  const rounded = roundToFormat(e.value, format);
  return rounded ? build.number(rounded) : e;
}
