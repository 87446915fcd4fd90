/** Zeros of polynomials with integer coefficients as numbers: polynomialRoot(index, c_n, ..., c_0), indexed from 1, the real ones first in increasing order. */
import type { Expression } from '../../expression/index.ts';
import { type ComplexBall, complex, real } from '../../rigorous/index.ts';
import type { FunctionDescription } from '../description.ts';
import { names } from '../naming.ts';
import { isolateRoots, refineRoot } from './isolation.ts';

export { isolateRoots, refineRoot, type RootDisc } from './isolation.ts';

const MOST_DEGREE = 24;

/** Index and coefficients (highest first); null where they are no integers or the index is out of range. */
export function rootArguments(args: readonly Expression[]): { readonly index: number; readonly coefficients: readonly bigint[] } | null {
  const integers = args.map(integerOf);
  const [index, ...coefficients] = integers;
  if (index === undefined || index === null || coefficients.some((c) => c === null) || coefficients[0] === 0n) return null;
  return index >= 1n && index < BigInt(args.length - 1) ? { index: Number(index), coefficients: coefficients as bigint[] } : null;
}

function integerOf(e: Expression): bigint | null {
  if (e.kind === 'number') return e.value.den === 1n ? e.value.num : null;
  const inner = e.kind === 'negation' ? integerOf(e.operand) : null;
  return inner === null ? null : -inner;
}

/** The zero of the given index (from 1) to about `precision` bits. */
export function rootBall(coefficients: readonly bigint[], index: number, precision: number, check?: () => void): ComplexBall | null {
  const disc = isolateRoots(coefficients, check)?.[index - 1];
  return disc ? refineRoot(coefficients, disc, precision) : null;
}

function enclosed(args: readonly ComplexBall[], precision: number, check?: () => void): ComplexBall | null {
  const integers: bigint[] = [];
  for (const z of args) {
    const whole = complex.isReal(z) && real.isExact(z.re) ? real.nearestInteger(z.re) : null;
    if (whole === null || real.compare(real.fromInteger(whole), z.re) !== 0) return null;
    integers.push(whole);
  }
  const [index = 0n, ...coefficients] = integers;
  return coefficients[0] === 0n || index < 1n || index >= BigInt(integers.length - 1) ? null : rootBall(coefficients, Number(index), precision, check);
}

/** The polynomial in the letter, by the texts of its coefficients. */
function polynomialText(coefficients: readonly string[], letter: string, power: (k: number) => string): string {
  const n = coefficients.length - 1;
  let text = '';
  coefficients.forEach((raw, i) => {
    const whole = /^[({\s]*([-−]?\d+)[)}\s]*$/.exec(raw)?.[1];
    const c = whole?.replace('−', '-') ?? (/^\\?[A-Za-z]+$/.test(raw) ? `${raw} ` : `(${raw})`);
    if (c === '0') return;
    const negative = c.startsWith('-');
    const size = negative ? c.slice(1) : c;
    const k = n - i;
    const body = k === 0 ? size : `${size === '1' ? '' : size}${k === 1 ? letter : power(k)}`;
    text += text === '' ? `${negative ? '-' : ''}${body}` : ` ${negative ? '-' : '+'} ${body}`;
  });
  return text;
}

/** Two starts close to the zero, for the secant method; the first digits alone where they do not tell it apart. */
function startsOf(coefficients: readonly bigint[], index: number): readonly [string, string] | null {
  const ball = rootBall(coefficients, index, 80);
  if (!ball) return null;
  const digits = (x: ComplexBall['re']): string => real.toDouble(x).toPrecision(17).replace(/e\+?(-?\d+)$/, 'e$1');
  const near = (x: ComplexBall['re']): string => (real.toDouble(x) * (1 + 1e-9)).toPrecision(17).replace(/e\+?(-?\d+)$/, 'e$1');
  const written = (f: typeof digits): string => (complex.isReal(ball) ? f(ball.re) : `${f(ball.re)}${real.isNegative(ball.im) ? '-' : '+'}${f(real.absolute(ball.im))}*I`);
  return [written(digits), written(near)];
}

function mpmathText(args: readonly string[]): string {
  const integers = args.map((a) => /^\(*(-?\d+)\)*$/.exec(a)?.[1]);
  if (integers.includes(undefined)) return `polyroots([${args.slice(1).join(',')}])[${args[0] ?? ''}-1]`;
  const [index = 1n, ...coefficients] = integers.map((a) => BigInt(a ?? 0));
  const starts = startsOf(coefficients, Number(index));
  if (!starts) return `polyroots([${coefficients.join(',')}])[${index - 1n}]`;
  const n = coefficients.length - 1;
  const terms = coefficients.flatMap((c, i) => (c === 0n ? [] : [`${c}${i < n ? `*t${i < n - 1 ? `**${n - i}` : ''}` : ''}`]));
  return `findroot(lambda t: ${terms.join('+').replace(/\+-/g, '-').replace(/(^|[+-])1\*/g, '$1')}, (${starts.join(', ')}))`;
}

const descriptions: readonly FunctionDescription[] = [
  {
    id: 'polynomialRoot',
    title: 'zero of a polynomial (index from 1, real zeros first; coefficients, highest first)',
    arity: [3, MOST_DEGREE + 2],
    names: names({
      latex: ['\\operatorname{root}'],
      latexForm: ([index = '1', ...coefficients]) => `\\operatorname{root}_{${index}}\\left(${polynomialText(coefficients, 'z', (k) => `z^{${k}}`)}\\right)`,
      unicodeForm: ([index = '1', ...coefficients]) => `root_${index}(${polynomialText(coefficients, 'z', (k) => `z^${k}`)})`,
      mpmath: mpmathText,
    }),
    derivative: () => null,
    enclose: enclosed,
    encloseReal: (args, precision, check) => {
      const ball = enclosed(args.map(complex.fromReal), precision, check);
      return ball && complex.isReal(ball) ? ball.re : null;
    },
    source: 'zeros in disjoint discs: Henrici, Applied and Computational Complex Analysis 1, 6.4 (from memory)',
  },
];

export const algebraicFunctions = descriptions;
