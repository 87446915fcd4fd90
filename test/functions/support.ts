/** Numbers for tests of descriptions: trees evaluated in balls with every function of the registry. */
import { build, type Expression, Q, type Rational } from '../../src/expression/index.ts';
import { describe as description, type LocalForm } from '../../src/functions/index.ts';
import { type Ball, type ComplexBall, complex, enclose, encloseReal, real } from '../../src/rigorous/index.ts';

export const rational = (text: string): Rational => {
  const [top = '', bottom] = text.split('/');
  const numerator = Q.fromDecimal(top);
  const denominator = bottom === undefined ? Q.ONE : Q.fromDecimal(bottom);
  if (!numerator || !denominator) throw new Error(`no rational: ${text}`);
  return Q.divide(numerator, denominator);
};
export const tree = (text: string): Expression => build.number(rational(text));
export const ball = (q: Rational, precision: number): Ball => real.fromRational(q, precision);

export function valueOf(e: Expression, precision: number, environment: ReadonlyMap<string, Ball> = new Map()): Ball | null {
  return encloseReal(e, environment, precision, description);
}
export function complexValueOf(e: Expression, precision: number, environment: ReadonlyMap<string, ComplexBall> = new Map()): ComplexBall | null {
  return enclose(e, environment, precision, description);
}
/** The function itself at rational arguments. */
export function functionAt(id: string, args: readonly Rational[], precision: number): Ball | null {
  return valueOf(build.call(id, ...args.map((q) => build.number(q))), precision);
}

/** A local form with its series cut after `terms` coefficients. */
export function truncated(form: LocalForm, terms: number, environment: ReadonlyMap<string, ComplexBall>, precision: number): ComplexBall | null {
  const full = new Map(environment);
  for (const [name, formal] of Object.entries(form.formals)) {
    const argument = complexValueOf(formal.argument, precision, environment);
    if (!argument) return null;
    let sum = complex.ZERO;
    for (let k = Math.min(terms, formal.length ?? terms) - 1; k >= 0; k--) {
      const c = formal.coefficient(k);
      const coefficient = 'kind' in c ? complexValueOf(c, precision) : complex.fromRational(c, precision);
      if (!coefficient) return null;
      sum = complex.add(complex.multiply(sum, argument, precision), coefficient, precision);
    }
    full.set(name, sum);
  }
  return complexValueOf(withoutOrder(form.body), precision, full);
}
function withoutOrder(e: Expression): Expression {
  return e.kind === 'sum' ? build.sum(...e.terms.filter((t) => t.kind !== 'order')) : e;
}
export const log2 = (x: Ball): number => real.exponentOf(x);
