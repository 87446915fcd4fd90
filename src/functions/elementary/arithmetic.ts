/** Library names for arithmetic, absolute value, sign and rounding. */
import { build, type Expression, Q, type Rational, rationalOf } from '../../expression/index.ts';
import type { FunctionDescription } from '../description.ts';
import { everywhere, names } from '../naming.ts';

const { call, number, power, product, quotient, squareRoot, sum } = build;
const one = (args: readonly Expression[]): Expression => args[0] ?? number(0);
const square = (e: Expression): Expression => power(e, 2);
const rounded =
  (rule: (q: Rational) => bigint) =>
  (args: readonly Expression[]): Expression | null => {
    const q = rationalOf(one(args));
    return q && number(rule(q));
  };
const ceiling = (q: Rational): bigint => -Q.floor(Q.negate(q));

export const arithmetic: readonly FunctionDescription[] = [
  {
    id: 'abs',
    title: 'absolute value',
    arity: 1,
    parity: 'even',
    names: names({
      latex: ['\\abs', '\\operatorname{abs}'],
      latexForm: (args) => `\\left|${args[0] ?? ''}\\right|`,
      unicodeForm: (args) => `|${args[0] ?? ''}|`,
      mpmath: 'fabs',
      code: everywhere('abs', { c: ['fabs', 'abs'], cpp: ['abs', 'fabs'], python: ['abs', 'fabs', 'absolute'], fortran: ['abs', 'dabs'], swift: ['abs', 'fabs'] }),
    }),
    derivative: (args) => call('sign', one(args)),
    value: (args) => {
      const q = rationalOf(one(args));
      return q && number(Q.absolute(q));
    },
    domain: 'smooth except at 0',
  },
  {
    id: 'sign',
    title: 'sign',
    arity: 1,
    parity: 'odd',
    names: names({
      latex: ['\\operatorname{sgn}', '\\sgn', '\\operatorname{sign}', '\\sign', '\\operatorname{sg}'],
      plain: ['sgn', 'signum'],
      mpmath: 'sign',
      code: { python: 'sign', javascript: 'sign', rust: 'signum', java: 'signum', csharp: 'Sign', julia: 'sign', matlab: 'sign', r: 'sign', glsl: 'sign', hlsl: 'sign', kotlin: 'sign', swift: [] },
    }),
    derivative: () => number(0),
    value: (args) => {
      const q = rationalOf(one(args));
      return q && number(Q.signOf(q));
    },
    domain: 'x is not 0',
  },
  {
    id: 'hypot',
    title: 'hypotenuse, sqrt(x^2 + y^2)',
    arity: [1, 16],
    names: names({
      latex: [],
      latexForm: (args) => `\\sqrt{${args.map((a) => `(${a})^2`).join(' + ')}}`,
      unicodeForm: (args) => `√(${args.map((a) => `(${a})²`).join(' + ')})`,
      mpmath: (args) => `sqrt(${args.map((a) => `(${a})**2`).join('+')})`,
      code: { c: 'hypot', cpp: 'hypot', python: 'hypot', javascript: 'hypot', rust: 'hypot', java: 'hypot', go: 'Hypot', julia: 'hypot', fortran: 'hypot', matlab: 'hypot', kotlin: 'hypot', swift: 'hypot' },
    }),
    definition: (args) => squareRoot(sum(...args.map(square))),
  },
  {
    id: 'fma',
    title: 'fused multiply-add, a b + c',
    arity: 3,
    names: names({
      latex: [],
      latexForm: ([a = '', b = '', c = '']) => `(${a} \\cdot ${b} + ${c})`,
      unicodeForm: ([a = '', b = '', c = '']) => `(${a}·${b} + ${c})`,
      mpmath: ([a = '', b = '', c = '']) => `((${a})*(${b})+(${c}))`,
      code: { c: 'fma', cpp: 'fma', python: 'fma', rust: 'mul_add', java: 'fma', csharp: 'FusedMultiplyAdd', go: 'FMA', julia: ['fma', 'muladd'], glsl: 'fma', hlsl: ['mad', 'fma'], swift: 'fma' },
    }),
    definition: ([a = number(0), b = number(0), c = number(0)]) => sum(product(a, b), c),
  },
  {
    id: 'inverseSqrt',
    title: 'reciprocal square root',
    arity: 1,
    names: names({
      latex: [],
      latexForm: (args) => `\\frac{1}{\\sqrt{${args[0] ?? ''}}}`,
      unicodeForm: (args) => `1/√(${args[0] ?? ''})`,
      mpmath: (args) => `(1/sqrt(${args[0] ?? ''}))`,
      code: { glsl: 'inversesqrt', hlsl: 'rsqrt', cpp: 'rsqrt', c: 'rsqrt', csharp: 'ReciprocalSqrtEstimate', python: 'rsqrt' },
    }),
    definition: (args) => quotient(number(1), squareRoot(one(args))),
    domain: 'x > 0',
  },
  {
    id: 'floor',
    title: 'floor',
    arity: 1,
    names: names({ latex: ['\\operatorname{floor}'], latexForm: (args) => `\\lfloor ${args[0] ?? ''} \\rfloor`, mpmath: 'floor', code: everywhere('floor') }),
    derivative: () => number(0),
    value: rounded(Q.floor),
    domain: 'x is not an integer',
  },
  {
    id: 'ceil',
    title: 'ceiling',
    arity: 1,
    names: names({ latex: ['\\operatorname{ceil}'], latexForm: (args) => `\\lceil ${args[0] ?? ''} \\rceil`, plain: ['ceiling'], mpmath: 'ceil', code: everywhere('ceil', { fortran: 'ceiling', csharp: 'Ceiling', r: 'ceiling' }) }),
    derivative: () => number(0),
    value: rounded(ceiling),
    domain: 'x is not an integer',
  },
  {
    id: 'trunc',
    title: 'truncation towards zero',
    arity: 1,
    names: names({ latex: ['\\operatorname{trunc}'], mpmath: (args) => `(sign(${args[0] ?? ''})*floor(fabs(${args[0] ?? ''})))`, code: { c: 'trunc', cpp: 'trunc', python: ['trunc', 'fix'], javascript: 'trunc', rust: 'trunc', csharp: 'Truncate', go: 'Trunc', julia: 'trunc', fortran: 'aint', matlab: 'fix', r: 'trunc', glsl: 'trunc', hlsl: 'trunc', kotlin: 'truncate', swift: 'trunc' } }),
    derivative: () => number(0),
    value: rounded((q) => (q.num < 0n ? ceiling(q) : Q.floor(q))),
    domain: 'x is not an integer other than 0',
  },
  {
    id: 'min',
    title: 'minimum',
    arity: [1, 64],
    names: names({ latex: ['\\min'], mpmath: 'min', code: everywhere('min', { c: 'fmin', cpp: ['min', 'fmin'], python: ['min', 'minimum', 'fmin'], fortran: ['min', 'dmin1', 'amin1'], r: ['min', 'pmin'], swift: ['min', 'fmin'] }) }),
    value: extreme(-1),
  },
  {
    id: 'max',
    title: 'maximum',
    arity: [1, 64],
    names: names({ latex: ['\\max'], mpmath: 'max', code: everywhere('max', { c: 'fmax', cpp: ['max', 'fmax'], python: ['max', 'maximum', 'fmax'], fortran: ['max', 'dmax1', 'amax1'], r: ['max', 'pmax'], swift: ['max', 'fmax'] }) }),
    value: extreme(1),
  },
];

function extreme(sign: 1 | -1): (args: readonly Expression[]) => Expression | null {
  return (args) => {
    let best: Rational | null = null;
    for (const arg of args) {
      const q = rationalOf(arg);
      if (!q) return null;
      if (!best || Q.compare(q, best) * sign > 0) best = q;
    }
    return best && number(best);
  };
}
