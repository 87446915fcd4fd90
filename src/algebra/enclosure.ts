/** Balls around elements, with the parameters at chosen rational values. A ball proves non-zero, never zero. */
import type { Rational } from '../expression/index.ts';
import type { FunctionDescription } from '../functions/description.ts';
import { rootBall } from '../functions/index.ts';
import { complex, type ComplexArithmetic, ELEMENTARY, type ElementaryName } from '../rigorous/index.ts';
import type { Ball, ComplexBall } from '../rigorous/index.ts';
import { exponentToRational, isWhole, type Exponent } from './exponent.ts';
import type { Kernel, KernelTable } from './kernel.ts';
import type { Monomial } from './monomial.ts';
import { isOnePolynomial, type Polynomial } from './polynomial.ts';
import { partsOf } from './quotientParts.ts';
import type { Element } from './types.ts';

export interface Evaluator {
  /** Null where a kernel has no enclosure there (a pole, a cut that the ball meets, a function without one). */
  element(a: Element): ComplexBall | null;
}

const isElementary = (id: string): id is ElementaryName => (ELEMENTARY as readonly string[]).includes(id);

/** One evaluator serves one precision (bits) and one choice of parameter values; kernels are evaluated once. */
export function createEvaluator(
  table: KernelTable,
  describe: (id: string) => FunctionDescription | null | undefined,
  precision: number,
  parameter: (name: string) => Rational | { readonly re: Rational; readonly im: Rational },
): Evaluator {
  const c: ComplexArithmetic<Ball> = complex.arithmetic(precision);
  const values = new Map<number, ComplexBall | null>();

  const kernelValue = (k: Kernel): ComplexBall | null => {
    const known = values.get(k.index);
    if (known !== undefined) return known;
    const value = compute(k);
    values.set(k.index, value);
    return value;
  };

  function compute(k: Kernel): ComplexBall | null {
    const { shape } = k;
    switch (shape.kind) {
      case 'parameter': {
        const v = parameter(shape.name);
        return 're' in v ? { re: c.fromRational(v.re).re, im: c.fromRational(v.im).re } : c.fromRational(v);
      }
      case 'constant':
        return c.constant(shape.name);
      case 'imaginary':
        return c.i;
      case 'integer':
        return c.fromInteger(shape.value);
      case 'radicand':
        return element(shape.base);
      case 'exp':
        return element(shape.unit);
      case 'power': {
        const base = element(shape.base);
        const log = base && !c.containsZero(base) ? c.log(base) : null;
        const unit = element(shape.unit);
        return log && unit ? c.multiply(unit, log) : null;
      }
      case 'log': {
        const inner = element(shape.argument);
        return inner && !c.containsZero(inner) ? c.log(inner) : null;
      }
      case 'abs': {
        const inner = element(shape.argument);
        return inner ? c.fromReal(c.modulus(inner)) : null;
      }
      case 'cosine': {
        const angle = c.multiply(c.fromRational(shape.angle), c.constant('pi'));
        const cosine = c.cos(angle);
        return cosine ? c.add(cosine, cosine) : null;
      }
      case 'algebraic': {
        const zero = rootBall(shape.coefficients, shape.index, precision, table.check);
        return zero && c.multiply(c.fromInteger(shape.coefficients[0] ?? 1n), zero);
      }
      case 'apply':
        return null;
      case 'call': {
        const args: ComplexBall[] = [];
        for (const a of shape.args) {
          const v = element(a);
          if (!v) return null;
          args.push(v);
        }
        const [first] = args;
        if (args.length === 1 && first) {
          if (shape.id === 'abs') return c.fromReal(c.modulus(first));
          if (isElementary(shape.id)) return c[shape.id](first);
        }
        const description = describe(shape.id);
        if (!description) return null;
        if (description.encloseReal && args.every((z) => complex.isReal(z))) {
          const real = description.encloseReal(
            args.map((z) => z.re),
            precision,
            table.check,
          );
          if (real) return c.fromReal(real);
        }
        return description.enclose?.(args, precision, table.check) ?? null;
      }
    }
  }

  function kernelPower(k: Kernel, e: Exponent): ComplexBall | null {
    const v = kernelValue(k);
    if (!v) return null;
    // Of exp and power kernels the value kept is the exponent's unit.
    if (k.shape.kind === 'exp' || k.shape.kind === 'power') return c.exp(c.multiply(c.fromRational(exponentToRational(e)), v));
    return isWhole(e) ? c.powerInteger(v, e) : c.powerRational(v, exponentToRational(e));
  }
  function monomial(m: Monomial): ComplexBall | null {
    let result = c.one;
    for (let i = 0; i < m.kernels.length; i += 1) {
      const factor = kernelPower(table.kernels[m.kernels[i] as number] as Kernel, m.exponents[i] as Exponent);
      if (!factor) return null;
      result = c.multiply(result, factor);
    }
    return result;
  }
  function polynomial(f: Polynomial): ComplexBall | null {
    let sum = c.zero;
    for (const t of f) {
      const m = monomial(t.monomial);
      if (!m) return null;
      sum = c.add(sum, c.multiply(c.fromInteger(t.coefficient), m));
    }
    return sum;
  }
  function element(a: Element): ComplexBall | null {
    table.check();
    const parts = partsOf(a);
    const outside = monomial(parts.monomial);
    if (!outside) return null;
    let result: ComplexBall = c.multiply(c.fromRational(parts.content), outside);
    if (!isOnePolynomial(parts.numerator)) {
      const numerator = polynomial(parts.numerator);
      if (!numerator) return null;
      result = c.multiply(result, numerator);
    }
    for (const f of parts.denominator) {
      const base = polynomial(f.polynomial);
      const power = base ? c.powerInteger(base, f.exponent) : null;
      const quotient: ComplexBall | null = power ? c.divide(result, power) : null;
      if (!quotient) return null;
      result = quotient;
    }
    return result;
  }
  return { element };
}
