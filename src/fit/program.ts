/** What a machine computes for one argument: named steps in order, then the result. The proof and the emitted code are both made from it. */
import { build, type Expression, Q, type Rational } from '../expression/index.ts';
import { polynomialForm, type PolynomialForm, type PolynomialTerm, type Step, strided } from '../write/index.ts';
import { binaryExponent, type FloatFormat, powerOfTwo } from './format.ts';

export type Program = PolynomialForm;
export type { Step };

/** In which format operations round, and in which the result is handed over (JavaScript computes in binary64 and rounds once to binary32). */
export interface Arithmetic {
  readonly operations: FloatFormat;
  readonly result: FloatFormat;
}

export interface PolynomialProgramShape {
  readonly form: 'horner' | 'estrin';
  readonly fma: boolean;
  /** c1 u + (rest): the leading term is added last, so that only its own rounding is left where the rest is small. */
  readonly leadingApart: boolean;
}

/** Names for steps that are not the variable's. */
const stepName = (wanted: string, variable: string): string => (variable.startsWith(wanted) ? `${wanted}${wanted}` : wanted);

/** The polynomial in u = x - centre. */
export function polynomialProgram(terms: readonly PolynomialTerm[], variable: string, centre: Rational, shape: PolynomialProgramShape): Program {
  const x = build.symbol(variable);
  const shifted = !Q.isZero(centre);
  const offset = stepName('t', variable);
  const argument = shifted ? build.symbol(offset) : x;
  const first: Step[] = shifted ? [{ name: offset, value: build.sum(x, build.number(Q.negate(centre))) }] : [];
  const prefix = stepName('u', variable);
  const kept = terms.filter((t) => !Q.isZero(t.value));
  if (shape.leadingApart && canStandApart(kept)) {
    const constant = kept[0]?.power === 0 ? kept[0] : null;
    const [lead, ...rest] = constant ? kept.slice(1) : kept;
    const form = apartForm(lead, rest, argument, shape, prefix);
    const result = constant ? build.sum(build.number(constant.value), form.result) : form.result;
    return { steps: [...first, ...form.steps], result };
  }
  const form = polynomialForm(kept, argument, shape, prefix);
  return { steps: [...first, ...form.steps], result: form.result };
}

/** The first two terms are words of one leading coefficient: the first word's part is added last, so that neither the coefficient nor the sum before it rounds at its size. */
export function twoWordProgram(terms: readonly PolynomialTerm[], variable: string, centre: Rational, { form, fma }: Pick<PolynomialProgramShape, 'form' | 'fma'>): Program {
  const [high, ...rest] = terms;
  const inner = polynomialProgram(rest, variable, centre, { form, fma, leadingApart: false });
  if (!high) return inner;
  const argument = Q.isZero(centre) ? build.symbol(variable) : build.symbol(stepName('t', variable));
  const factors = Array.from({ length: high.power }, () => argument);
  const first = build.number(high.value);
  if (high.power === 0) return { steps: inner.steps, result: build.sum(first, inner.result) };
  return { steps: inner.steps, result: fma ? build.call('fma', build.product(...factors), first, inner.result) : build.sum(build.product(...factors, first), inner.result) };
}

/** Whether the leading power has a coefficient that multiplies exactly, so that it can be added last. */
export function canStandApart(terms: readonly PolynomialTerm[]): boolean {
  const kept = terms.filter((t) => !Q.isZero(t.value));
  const [lead, ...rest] = kept[0]?.power === 0 ? kept.slice(1) : kept;
  if (!lead || rest.length === 0) return false;
  const exact = Q.equal(Q.absolute(lead.value), powerOfTwo(binaryExponent(lead.value)));
  return exact && (lead.power === 1 || (kept[0]?.power === 0 && lead.power === 2)) && rest.every((t) => (t.power - lead.power) % lead.power === 0 || lead.power === 1);
}

/** lead u + u v (rest), v the common power: the product is small against the leading term, which is exact. */
function apartForm(lead: PolynomialTerm | undefined, rest: readonly PolynomialTerm[], argument: Expression, shape: PolynomialProgramShape, prefix: string): PolynomialForm {
  if (!lead) return polynomialForm(rest, argument, shape, prefix);
  const { lowest, stride } = strided(rest);
  const scale = (e: Expression): Expression => (Q.isOne(lead.value) ? e : Q.equal(lead.value, Q.MINUS_ONE) ? build.negation(e) : build.product(build.number(lead.value), e));
  // In powers of u = x^2 where they are all even, or where the step x^2 exists already.
  if (lead.power === 2 || (stride === 2 && lowest === 3)) {
    const u = build.symbol(prefix);
    const inner = polynomialForm(rest.map((t) => ({ power: (t.power - lowest) / 2, value: t.value })), u, shape, prefix);
    const factors = lead.power === 2 ? Array.from({ length: lowest / 2 }, () => u) : [argument, u];
    const product = build.isOneNumber(inner.result) ? build.product(...factors) : build.product(...factors, inner.result);
    return { steps: [{ name: prefix, value: build.product(argument, argument) }, ...inner.steps], result: sumWith(scale(lead.power === 2 ? u : argument), product, shape.fma) };
  }
  const form = polynomialForm(rest, argument, shape, prefix);
  return { steps: form.steps, result: sumWith(scale(argument), form.result, shape.fma) };
}

/** head + product, fused where the last factor of the product allows it. */
function sumWith(head: Expression, product: Expression, fma: boolean): Expression {
  if (!fma || product.kind !== 'product' || product.factors.length < 2) return build.sum(head, product);
  const factors = [...product.factors];
  const last = factors.pop();
  return last ? build.call('fma', build.product(...factors), last, head) : build.sum(head, product);
}

export interface Operations {
  readonly multiplications: number;
  readonly additions: number;
  readonly fused: number;
}

/** Operations of one evaluation, each step counted once. */
export function countOperations({ steps, result }: Program): Operations {
  let [multiplications, additions, fused] = [0, 0, 0];
  const visit = (e: Expression): void => {
    if (e.kind === 'sum') {
      additions += e.terms.length - 1;
      e.terms.forEach(visit);
    } else if (e.kind === 'product') {
      multiplications += e.factors.length - 1;
      e.factors.forEach(visit);
    } else if (e.kind === 'quotient') {
      multiplications += 1;
      visit(e.numerator);
      visit(e.denominator);
    } else if (e.kind === 'negation') visit(e.operand);
    else if (e.kind === 'call') {
      if (e.function === 'fma') fused += 1;
      e.args.forEach(visit);
    }
  };
  for (const step of steps) visit(step.value);
  visit(result);
  return { multiplications, additions, fused };
}
