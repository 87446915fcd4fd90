/** Values of trees in double complex arithmetic by mathjs (an independent library), for comparison only. */
import { all, create, type Complex } from 'mathjs';
import { Q, type Expression } from '../../src/expression/index.ts';

const math = create(all ?? {}, {});
const complex = (re: number, im = 0): Complex => math.complex(re, im);

/** NaN where the oracle has no value. */
export function value(e: Expression, at: Readonly<Record<string, number>>): Complex {
  const inner = (x: Expression): Complex => value(x, at);
  const call = (name: 'sqrt' | 'exp' | 'log' | 'sin' | 'cos' | 'tan' | 'sinh' | 'cosh' | 'tanh' | 'asin' | 'acos' | 'atan' | 'asinh' | 'acosh' | 'atanh', x: Expression): Complex => math.complex((math[name] as (z: Complex) => Complex)(inner(x)));
  switch (e.kind) {
    case 'number':
      return complex(Q.toDouble(e.value));
    case 'constant':
      return e.name === 'pi' ? complex(Math.PI) : e.name === 'e' ? complex(Math.E) : e.name === 'i' ? complex(0, 1) : e.name === 'eulerGamma' ? complex(0.5772156649015329) : complex(NaN);
    case 'symbol':
      return complex(at[e.name] ?? NaN);
    case 'sum':
      return e.terms.map(inner).reduce((a, b) => math.add(a, b) as Complex);
    case 'product':
      return e.factors.map(inner).reduce((a, b) => math.multiply(a, b) as Complex);
    case 'quotient':
      return math.divide(inner(e.numerator), inner(e.denominator)) as Complex;
    case 'negation':
      return math.unaryMinus(inner(e.operand)) as Complex;
    case 'power': {
      const base = inner(e.base);
      const exponent = inner(e.exponent);
      if (e.exponent.kind === 'number' && e.exponent.value.den === 1n) return math.complex(math.pow(base, Number(e.exponent.value.num)) as never);
      if (base.re === 0 && base.im === 0) return exponent.re > 0 ? complex(0) : complex(NaN);
      // The principal value by its definition; on the cut from above.
      const log = complex(Math.log(Math.hypot(base.re, base.im)), Math.atan2(Math.abs(base.im) < 1e-13 * Math.abs(base.re) ? 0 : base.im, base.re));
      return math.exp(math.multiply(exponent, log) as Complex) as Complex;
    }
    case 'root': {
      const base = inner(e.radicand).re;
      const n = e.degree.kind === 'number' ? Q.toDouble(e.degree.value) : NaN;
      return complex(Math.sign(base) * Math.abs(base) ** (1 / n));
    }
    case 'call': {
      const [x] = e.args;
      if (!x) return complex(NaN);
      switch (e.function) {
        case 'abs': {
          const z = inner(x);
          return complex(Math.hypot(z.re, z.im));
        }
        case 'log': {
          const z = inner(x);
          return complex(Math.log(Math.hypot(z.re, z.im)), Math.atan2(Math.abs(z.im) < 1e-13 * Math.abs(z.re) ? 0 : z.im, z.re));
        }
        case 'atan': {
          // On its cuts libraries differ by the side that they take.
          const z = inner(x);
          return Math.abs(z.re) < 1e-12 && Math.abs(z.im) >= 1 ? complex(NaN) : call('atan', x);
        }
        case 'sqrt':
        case 'exp':
        case 'sin':
        case 'cos':
        case 'tan':
        case 'sinh':
        case 'cosh':
        case 'tanh':
        case 'asin':
        case 'acos':
        case 'asinh':
        case 'acosh':
        case 'atanh':
          return call(e.function, x);
        default:
          return complex(NaN);
      }
    }
    default:
      return complex(NaN);
  }
}

export const isFinite = (z: Complex): boolean => Number.isFinite(z.re) && Number.isFinite(z.im);

/** |a - b| against the size of both and of what was added on the way. */
export function close(a: Complex, b: Complex, tolerance: number, scale = 1): boolean {
  return Math.hypot(a.re - b.re, a.im - b.im) <= tolerance * Math.max(scale, Math.hypot(a.re, a.im), Math.hypot(b.re, b.im));
}
