/** Polynomials that programs already hold: which function one approximates, whether it is a truncated expansion or fitted, and its true error, proved. */
import { boundDifference, polynomialOf } from '../bound/index.ts';
import { expand } from '../expand/index.ts';
import { build, type Expression, Q, type Rational, rationalOf } from '../expression/index.ts';
import { allFunctions, describe } from '../functions/index.ts';
import { type Budget, Declined } from '../outcome.ts';
import { encloseReal, real } from '../rigorous/index.ts';
import { roundToFormat, type FloatFormat } from '../write/index.ts';

export interface PolynomialQuestion {
  /** Exact, lowest power first. */
  readonly coefficients: readonly Rational[];
  readonly variable: string;
  /** What a comment or the other branch says it approximates, in the same variable. */
  readonly named?: Expression;
  /** Where it is used, as far as the file says. */
  readonly interval?: { readonly low: Rational; readonly high: Rational };
  readonly measure?: 'absolute' | 'relative';
  /** The largest error that a remark promises. */
  readonly stated?: Rational;
  /** Of the literals; a coefficient that is a Taylor coefficient rounded to it, or to the digits written, is one. */
  readonly format?: FloatFormat;
}

export interface PolynomialReport {
  readonly function: Expression;
  readonly origin: 'named' | 'recognised';
  readonly kind: 'taylor' | 'fitted';
  readonly interval: { readonly low: Rational; readonly high: Rational };
  /** The interval was not given. */
  readonly proposed: boolean;
  readonly measure: 'absolute' | 'relative';
  /** lower <= sup |f - p| <= upper over the interval, both proved. */
  readonly error: { readonly lower: Rational; readonly upper: Rational };
  /** The largest interval of the same shape, a fraction of the one above, on which the stated error is kept; null where none was proved or nothing is stated. */
  readonly goodTo: { readonly low: Rational; readonly high: Rational } | null;
  readonly verdict: 'holds' | 'fails' | 'undecided' | null;
}

const PI = Q.rational(355n, 113n);
const half = (q: Rational): Rational => Q.divide(q, Q.rational(2));
const both = (q: Rational): readonly [Rational, Rational] => [Q.negate(q), q];
/** Intervals that approximations are commonly made for; pi is a rational near it. */
const USUAL: readonly (readonly [Rational, Rational])[] = [both(PI), [Q.ZERO, PI], both(half(PI)), [Q.ZERO, half(PI)], both(Q.ONE), [Q.ZERO, Q.ONE], both(half(half(PI))), [Q.ONE, Q.rational(2)], both(Q.HALF)];
const SAMPLES = 16;
const SAMPLE_BITS = 64;
/** A function is recognised where the error is below this share of its size, and this many times below that of any other. */
const SHARE = 0.08;
const DISTINCT = 4;
const FAMILIES = ['exp', 'exp2', 'log', 'log1p', 'log2', 'expm1', 'sin', 'cos', 'tan', 'asin', 'acos', 'atan', 'sinh', 'cosh', 'tanh', 'asinh', 'acosh', 'atanh', 'sqrt', 'inverseSqrt', 'erf', 'gamma', 'logistic', 'sinc'];

/** Throws Declined with `undecided` where no function is named and none is recognised, or no error can be proved. */
export function reportPolynomial(question: PolynomialQuestion, budget: Budget): PolynomialReport {
  const { coefficients, variable, named, stated } = question;
  if (coefficients.length < 2) throw new Declined('bad-request', 'A constant approximates no function; choose a polynomial of degree 1 or more.');
  const found = named ? { function: named, interval: question.interval ?? bestInterval(named, question, budget) } : recognised(question, budget);
  if (!found) throw new Declined('undecided', 'No elementary function is near this polynomial on the usual intervals; name the function in a comment beside it.');
  const measure = question.measure ?? 'absolute';
  const p = polynomialOf(coefficients.map((value, power) => ({ power, value })), variable, Q.ZERO);
  const errorOn = ({ low, high }: { readonly low: Rational; readonly high: Rational }): { readonly lower: Rational; readonly upper: Rational } | null => {
    const through = Q.compare(low, Q.ZERO) <= 0 && Q.compare(Q.ZERO, high) <= 0 ? { through: Q.ZERO } : {};
    const result = boundDifference({ function: found.function, approximation: p, variable, low, high, measure, ...through, budget });
    return result.ok ? { lower: result.value.lower, upper: result.value.upper } : null;
  };
  const error = errorOn(found.interval);
  if (!error) throw new Declined('undecided', 'The error of this polynomial could not be bounded on the interval; the function may be singular there. Give a smaller interval.');
  const verdict = stated ? (Q.compare(error.upper, stated) <= 0 ? 'holds' : Q.compare(error.lower, stated) > 0 ? 'fails' : 'undecided') : null;
  return {
    function: found.function,
    origin: named ? 'named' : 'recognised',
    kind: isTaylor(found.function, question, budget) ? 'taylor' : 'fitted',
    interval: found.interval,
    proposed: question.interval === undefined,
    measure,
    error,
    goodTo: stated && verdict !== 'holds' ? largestGood(found.interval, stated, errorOn) : stated ? found.interval : null,
    verdict,
  };
}

/** By halving: the largest of 1/16 .. 15/16 of the interval (about 0, or from its lower end) on which the error is proved to be kept. */
function largestGood({ low, high }: { readonly low: Rational; readonly high: Rational }, stated: Rational, errorOn: (i: { readonly low: Rational; readonly high: Rational }) => { readonly upper: Rational } | null): { readonly low: Rational; readonly high: Rational } | null {
  const centre = Q.compare(low, Q.ZERO) < 0 && Q.compare(Q.ZERO, high) < 0 ? Q.ZERO : low;
  const part = (k: number): { readonly low: Rational; readonly high: Rational } => {
    const scale = (end: Rational): Rational => Q.add(centre, Q.multiply(Q.subtract(end, centre), Q.rational(k, 16)));
    return { low: scale(low), high: scale(high) };
  };
  let [good, bad] = [0, 16];
  while (bad - good > 1) {
    const middle = (good + bad) >> 1;
    const error = errorOn(part(middle));
    if (error && Q.compare(error.upper, stated) <= 0) good = middle;
    else bad = middle;
  }
  return good === 0 ? null : part(good);
}

interface Closeness {
  readonly worst: number;
  readonly size: number;
}

/** Largest difference and size at sampled arguments: for choices only. */
function closeness(f: Expression, { coefficients, variable }: PolynomialQuestion, [low, high]: readonly [Rational, Rational], budget: Budget): Closeness | null {
  let [worst, size] = [0, 0];
  for (let k = 0; k <= SAMPLES; k += 1) {
    budget.check();
    const x = Q.add(low, Q.multiply(Q.subtract(high, low), Q.rational(2 * k + 1, 2 * SAMPLES + 2)));
    const value = encloseReal(f, new Map([[variable, real.fromRational(x, SAMPLE_BITS)]]), SAMPLE_BITS, describe);
    if (!value) return null;
    const y = real.toDouble(value);
    const p = coefficients.reduceRight((total, c) => total * Q.toDouble(x) + Q.toDouble(c), 0);
    worst = Math.max(worst, Math.abs(y - p));
    size = Math.max(size, Math.abs(y));
  }
  return { worst, size };
}

function bestInterval(f: Expression, question: PolynomialQuestion, budget: Budget): { readonly low: Rational; readonly high: Rational } {
  for (const usual of USUAL) {
    const near = closeness(f, question, usual, budget);
    if (near && near.worst <= SHARE * near.size) return { low: usual[0], high: usual[1] };
  }
  return { low: Q.rational(-1, 2), high: Q.HALF };
}

function recognised(question: PolynomialQuestion, budget: Budget): { readonly function: Expression; readonly interval: { readonly low: Rational; readonly high: Rational } } | null {
  const x = build.symbol(question.variable);
  const known = allFunctions().filter((f) => FAMILIES.includes(f.id) && f.arity === 1);
  const list: Expression[] = known.flatMap((f) => [build.call(f.id, x), build.quotient(build.call(f.id, x), x)]);
  let best: { readonly function: Expression; readonly interval: readonly [Rational, Rational]; readonly score: number } | null = null;
  for (const interval of question.interval ? [[question.interval.low, question.interval.high] as const] : USUAL) {
    const scores = list
      .map((f) => ({ f, near: closeness(f, question, interval, budget) }))
      .flatMap(({ f, near }) => (near && near.size > 0 ? [{ f, score: near.worst / near.size }] : []))
      .sort((a, b) => a.score - b.score);
    const [first, second] = scores;
    if (!first || first.score > SHARE || (second && second.score < DISTINCT * first.score)) continue;
    // The widest interval with a clear answer: the usual ones come widest first.
    if (!best || first.score < best.score / 64) best = { function: first.f, interval, score: first.score };
  }
  return best && { function: best.function, interval: { low: best.interval[0], high: best.interval[1] } };
}

/** Every coefficient is the one of the expansion at 0, rounded to the format or to a relative 2^-20 where the format is not known. */
function isTaylor(f: Expression, { coefficients, variable, format }: PolynomialQuestion, budget: Budget): boolean {
  const found = expand({ function: f, variable: build.symbol(variable), point: build.number(0), side: 'both', order: Q.rational(coefficients.length), assumptions: [] }, budget);
  if (!found.ok || found.value.prefactor || found.value.left) return false;
  const exact = new Map<number, Rational>();
  for (const term of found.value.terms) {
    const power = rationalOf(term.power);
    const ball = encloseReal(term.coefficient, new Map(), 256, describe);
    if (!power || power.den !== 1n || power.num < 0n || term.log !== 0 || term.scale || !ball) return false;
    exact.set(Number(power.num), real.lower(real.midpoint(ball)));
  }
  return coefficients.every((c, k) => {
    const value = exact.get(k) ?? Q.ZERO;
    if (Q.isZero(value)) return Q.isZero(c);
    if (format) {
      const [a, b] = [roundToFormat(value, format), roundToFormat(c, format)];
      if (a && b && Q.equal(a, b)) return true;
    }
    return Q.compare(Q.absolute(Q.subtract(c, value)), Q.multiply(Q.absolute(value), Q.rational(1n, 1n << 20n))) <= 0;
  });
}
