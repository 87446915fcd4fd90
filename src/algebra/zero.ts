/** The three-valued zero test: normal form, independence of kernels, balls at rising precision. */
import { Q, type Rational } from '../expression/index.ts';
import type { FunctionDescription } from '../functions/description.ts';
import { complex, real, type ComplexBall } from '../rigorous/index.ts';
import { isRealAlgebraicShape } from './algebraicSign.ts';
import type { AssumptionStore } from './assumptions.ts';
import { createEvaluator, type Evaluator } from './enclosure.ts';
import type { Kernel, KernelTable } from './kernel.ts';
import { allKernels, kernelsOf } from './kernelsOf.ts';
import { elementFromPolynomial, elementKey } from './quotient.ts';
import { isQuotient } from './quotientParts.ts';
import { NEGATIVE, POSITIVE, type SignSet } from './signs.ts';
import { cannotVanish, variesByOneKernel } from './variation.ts';
import { isOnePolynomial } from './polynomial.ts';
import type { Element, Truth } from './types.ts';

export interface ZeroTest {
  isZero(a: Element): Truth;
  /** A ball around a at the given precision, parameters at sample number `sample`; null where none was found. */
  enclose(a: Element, precision: number, sample?: number): ComplexBall | null;
}

const PRECISIONS = [64, 128, 320, 800, 2000] as const;
/** Numerators and denominators of the values that parameters take, spread so that no small relation holds among them. */
const SAMPLE_COUNT = 4;

export function createZeroTest(table: KernelTable, describe: (id: string) => FunctionDescription | null | undefined, facts: AssumptionStore, signOf: (k: Kernel) => SignSet, deepZero: (a: Element) => boolean, refuted: (a: Element) => boolean): ZeroTest {
  const differs = (a: Element): boolean => {
    const [x, y] = [test.enclose(a, 64, 0), test.enclose(a, 64, 2)];
    return x !== null && y !== null && !complex.overlaps(x, y);
  };
  const neverIdenticallyZero = (k: Kernel): boolean => {
    if (k.shape.kind !== 'log' && k.shape.kind !== 'call') return true;
    const s = signOf(k);
    return s === POSITIVE || s === NEGATIVE || cannotVanish(table, facts, k, differs);
  };
  const answers = new Map<string, Truth>();
  const evaluators = new Map<string, Evaluator>();

  const evaluator = (precision: number, sample: number): Evaluator => {
    const key = `${precision} ${sample}`;
    let known = evaluators.get(key);
    if (!known) {
      known = createEvaluator(table, describe, precision, (name) => sampleOf(facts, name, sample));
      evaluators.set(key, known);
    }
    return known;
  };

  const test: ZeroTest = {
    enclose: (a, precision, sample = 0) => evaluator(precision, sample).element(a),
    isZero(a) {
      if (!isQuotient(a)) return a.num === 0n ? 'yes' : 'no';
      if (isOnePolynomial(a.numerator)) {
        if (a.monomial.kernels.every((k) => neverIdenticallyZero(table.kernels[k] as Kernel))) return 'no';
      } else {
        const kernels = [...kernelsOf(a)].map((k) => table.kernels[k] as Kernel);
        if (isIndependentSet(kernels) && a.monomial.kernels.every((k) => neverIdenticallyZero(table.kernels[k] as Kernel))) return 'no';
      }
      const key = elementKey(a);
      const known = answers.get(key);
      if (known) return known;
      const answer = decide(a);
      if (answers.size > 20000) answers.clear();
      answers.set(key, answer);
      return answer;
    },
  };

  function decide(a: Element): Truth {
    if (isQuotient(a) && (a.monomial.kernels.length > 0 || a.denominator.length > 0) && !isOnePolynomial(a.numerator) && a.monomial.kernels.every((k) => neverIdenticallyZero(table.kernels[k] as Kernel))) {
      // Only the sum can vanish.
      return test.isZero(elementFromPolynomial(table, a.numerator));
    }
    if (variesByOneKernel(table, facts, a) || refuted(a)) return 'no';
    const parameters = [...allKernels(table, a)].some((k) => (table.kernels[k] as Kernel).shape.kind === 'parameter');
    const samples = parameters ? SAMPLE_COUNT : 1;
    let looksZero = false;
    for (const precision of PRECISIONS) {
      for (let sample = 0; sample < samples; sample += 1) {
        const ball = test.enclose(a, precision, sample);
        if (ball && !complex.containsZero(ball)) return 'no';
        if (ball) looksZero = true;
      }
      // Small already at modest precision: a proof by normal form is more likely than a proof of the contrary.
      if (precision === 128 && deepZero(a)) return 'yes';
      if (!looksZero && precision >= 320) break;
    }
    return 'undecided';
  }
  return test;
}

/** Parameters, pi, radicals of integers and i are algebraically independent but for their relations, which the normal form applies. */
const isIndependent = (k: Kernel): boolean =>
  k.shape.kind === 'parameter' || k.shape.kind === 'integer' || k.shape.kind === 'imaginary' || k.shape.kind === 'apply' || (k.shape.kind === 'constant' && k.shape.name === 'pi');

/** One algebraic number beside them is reduced by its minimal polynomial; with i only a real one, and with radicals none, for the field may hold them already. */
function isIndependentSet(kernels: readonly Kernel[]): boolean {
  const numbers = kernels.filter((k) => k.shape.kind === 'algebraic');
  const others = kernels.filter((k) => k.shape.kind !== 'algebraic');
  if (!others.every(isIndependent)) return false;
  const [only] = numbers;
  if (!only || only.shape.kind !== 'algebraic') return true;
  const inImaginary = others.some((k) => k.shape.kind === 'imaginary');
  return numbers.length === 1 && !others.some((k) => k.shape.kind === 'integer') && !(inImaginary && !isRealAlgebraicShape(only.shape));
}

/** A value of the parameter that its own assumptions allow; different for every name and sample. */
function sampleOf(facts: AssumptionStore, name: string, sample: number): Rational | { readonly re: Rational; readonly im: Rational } {
  let hash = 2166136261 ^ (sample * 40503);
  for (let i = 0; i < name.length; i += 1) hash = Math.imul(hash ^ name.charCodeAt(i), 16777619) >>> 0;
  hash >>>= 0;
  const { lower, upper } = facts.boundsOf(name);
  if (facts.isInteger(name)) {
    const offset = BigInt(5 + (hash % 23));
    if (lower && upper) {
      const low = -Q.floor(Q.negate(lower));
      const span = Q.floor(upper) - low + 1n;
      return Q.rational(low + (span > 0n ? offset % span : 0n));
    }
    if (lower) return Q.rational(Q.floor(lower) + offset);
    if (upper) return Q.rational(Q.floor(upper) - offset);
    return Q.rational(offset);
  }
  const part = Q.rational(1 + (hash % 99991), 100003);
  if (lower && upper) return Q.add(lower, Q.multiply(part, Q.subtract(upper, lower)));
  const positive = Q.add(Q.rational(1, 3), Q.multiply(Q.rational(2), part));
  if (lower) return Q.add(lower, positive);
  if (upper) return Q.subtract(upper, positive);
  if (facts.isComplex(name)) return { re: Q.subtract(positive, Q.ONE), im: Q.rational(1 + ((hash >>> 7) % 9973), 9901) };
  const sign = facts.signOf(name);
  if ((sign & (POSITIVE | NEGATIVE)) === NEGATIVE) return Q.negate(positive);
  // Signs differ from sample to sample: all positive, all negative, mixed.
  const negative = sample === 1 || (sample > 1 && nameBit(name, sample) === 1);
  return negative && (sign & NEGATIVE) !== 0 ? Q.negate(positive) : positive;
}

/** A bit that depends on the name and the sample only; different for neighbouring letters in one of samples 2 and 3. */
function nameBit(name: string, sample: number): number {
  let sum = 0;
  for (let i = 0; i < name.length; i += 1) sum += name.charCodeAt(i) * (2 * i + 1);
  return (sum >>> (sample - 2)) & 1;
}

/** The sign of a ball's real part, null while it contains zero or the ball is not real. */
export function signOfBall(z: ComplexBall): -1 | 1 | null {
  if (real.isPositive(z.re)) return 1;
  if (real.isNegative(z.re)) return -1;
  return null;
}
