/** The series branch of a guard: a truncated expansion in Horner form, its coefficients rounded to the format, and the proof of its whole error. */
import { expand } from '../expand/index.ts';
import { build, type Expression, Q, type Rational, rationalOf } from '../expression/index.ts';
import { describe } from '../functions/index.ts';
import type { Budget } from '../outcome.ts';
import { encloseReal, interval, real } from '../rigorous/index.ts';
import { binaryExponent, polynomialForm, type PolynomialTerm, powerOfTwo, roundToFormat, type Step, termTree, toPlain } from '../write/index.ts';
import { type ExactOrders, PieceModels } from './pieces.ts';
import { near, type Scanner, type Side } from './region.ts';
import type { Machine } from './roundoff.ts';

export interface SeriesForm {
  readonly terms: number;
  /** With named steps, for a function body. */
  readonly steps: readonly Step[];
  readonly result: Expression;
  /** The same as one tree. */
  readonly tree: Expression;
}

export interface SeriesTerms {
  readonly powers: readonly number[];
  /** Rounded to the format. */
  readonly coefficients: readonly Rational[];
  /** The exact terms as written. */
  readonly texts: readonly string[];
}

const COEFFICIENT_BITS = 256;
const MOST_POWER = 80;

/** The first terms at the point, as far as they are whole powers with real coefficients of the format; null where the expansion is of another kind. `exact` where they are all there are. */
export function seriesTerms(f: Expression, variable: string, { point, direction }: Pick<Side, 'point'> & { readonly direction: 1 | -1 | 'both' }, count: number, { format }: Machine, budget: Budget): (SeriesTerms & { readonly exact: boolean }) | null {
  const found = expand({ function: f, variable: build.symbol(variable), point: build.number(point), side: direction === 'both' ? direction : direction > 0 ? 'right' : 'left', terms: count, assumptions: [] }, budget);
  if (!found.ok || found.value.prefactor || found.value.left || found.value.terms.length === 0 || found.value.divergent) return null;
  const powers: number[] = [];
  const coefficients: Rational[] = [];
  const texts: string[] = [];
  for (const term of found.value.terms) {
    const power = rationalOf(term.power);
    if (term.log !== 0 || term.scale || !power || power.den !== 1n || power.num > BigInt(MOST_POWER) || power.num < -8n) break;
    const exact = rationalOf(term.coefficient);
    const ball = exact ? null : encloseReal(term.coefficient, new Map(), COEFFICIENT_BITS, describe);
    const value = exact ?? (ball && real.lower(real.midpoint(ball)));
    const rounded = value && roundToFormat(value, format.name);
    if (!rounded || Q.isZero(rounded)) break;
    powers.push(Number(power.num));
    // The distance on the left is a - x.
    coefficients.push(direction === -1 && power.num % 2n !== 0n ? Q.negate(rounded) : rounded);
    texts.push(toPlain(termTree(found.value, term)));
  }
  return powers.length === 0 ? null : { powers, coefficients, texts, exact: found.value.exact && powers.length === found.value.terms.length };
}

/** Names for the offset from the point and its powers, kept clear of the variable. */
const stepName = (wanted: string, variable: string): string => (variable === wanted ? `${wanted}${wanted}` : wanted);

export function seriesForm({ powers, coefficients }: SeriesTerms, terms: number, variable: string, point: Rational): SeriesForm {
  const x = build.symbol(variable);
  const shifted = !Q.isZero(point);
  const offset = stepName('t', variable);
  const argument = shifted ? build.symbol(offset) : x;
  const first: Step[] = shifted ? [{ name: offset, value: build.sum(x, build.number(Q.negate(point))) }] : [];
  const lowest = Math.min(0, ...powers);
  const list: PolynomialTerm[] = powers.slice(0, terms).map((power, k) => ({ power: power - lowest, value: coefficients[k] ?? Q.ZERO }));
  const form = polynomialForm(list, argument, { form: 'horner', fma: false }, stepName('u', variable));
  const steps = [...first, ...form.steps];
  const result = lowest < 0 ? build.quotient(form.result, lowest === -1 ? argument : build.product(...Array.from({ length: -lowest }, () => argument))) : form.result;
  return { terms, steps, result, tree: inlined(steps, result) };
}

function inlined(steps: readonly Step[], result: Expression): Expression {
  const values = new Map<string, Expression>();
  const visit = (e: Expression): Expression => {
    switch (e.kind) {
      case 'symbol':
        return values.get(e.name) ?? e;
      case 'sum':
        return { ...e, terms: e.terms.map(visit) };
      case 'product':
        return { ...e, factors: e.factors.map(visit) };
      case 'quotient':
        return { ...e, numerator: visit(e.numerator), denominator: visit(e.denominator) };
      case 'negation':
        return { ...e, operand: visit(e.operand) };
      default:
        return e;
    }
  };
  for (const step of steps) values.set(step.name, visit(step.value));
  return visit(result);
}

const MODEL_LENGTH = 40;

interface Reached {
  readonly reach: Rational;
  readonly models: PieceModels;
  readonly quotients: Map<Expression, { readonly valuation: number; readonly sizes: readonly number[] } | null>;
}

/** Truncation and rounded coefficients at distances up to `reach`, for many numbers of terms. */
export class Truncation {
  readonly reach: Rational;
  readonly #f: Expression;
  readonly #make: (reach: Rational) => PieceModels;
  readonly #reached = new Map<string, Reached>();

  constructor(f: Expression, variable: string, side: Side, reach: Rational, orders: ExactOrders, budget: Budget) {
    this.reach = reach;
    this.#f = f;
    this.#make = (to) => new PieceModels(variable, near(side, to, 0), orders, budget, { length: MODEL_LENGTH, precision: 320 });
  }

  get usable(): boolean {
    return this.#upTo(this.reach).models.of(this.#f) !== null;
  }

  #upTo(h: Rational): Reached {
    // Far inside the reach one model serves all.
    const inner = Q.multiply(this.reach, powerOfTwo(-6));
    const reach = halfStepAbove(Q.compare(h, inner) < 0 ? inner : h, this.reach);
    const key = Q.toText(reach);
    let found = this.#reached.get(key);
    if (!found) this.#reached.set(key, (found = { reach, models: this.#make(reach), quotients: new Map() }));
    return found;
  }

  /** sup |f - p| / |f| over distances up to h <= reach. */
  bound(p: Expression, h: Rational): number {
    const { reach, models, quotients } = this.#upTo(h);
    let found = quotients.get(p);
    if (found === undefined) {
      const { m } = models;
      const [f, q] = [models.of(this.#f), models.of(p)];
      const quotient = f && q && m.divide(m.subtract(f, q), f);
      found = quotient ? { valuation: quotient.valuation, sizes: [...quotient.coefficients, quotient.tail].map((c) => interval.size(interval.fromBall(c))) } : null;
      quotients.set(p, found);
    }
    if (!found || found.valuation < 0) return Infinity;
    const s = interval.up(Q.toDouble(Q.divide(h, reach)));
    let total = 0;
    for (let k = found.sizes.length - 1; k >= 0; k -= 1) total = interval.up((found.sizes[k] ?? 0) + interval.up(total * s));
    for (let k = 0; k < found.valuation; k += 1) total = interval.up(total * s);
    return total;
  }
}

/** The least of 2^e and 3 * 2^(e - 1) that is at least h; not beyond the limit. */
function halfStepAbove(h: Rational, limit: Rational): Rational {
  const e = binaryExponent(h);
  const steps = [powerOfTwo(e), Q.multiply(Q.rational(3), powerOfTwo(e - 1)), powerOfTwo(e + 1)];
  const step = steps.find((x) => Q.compare(x, h) >= 0) ?? limit;
  return Q.compare(step, limit) < 0 ? step : limit;
}

/** Rounding of the series for every distance up to h. */
export const evaluationBound = (form: SeriesForm, side: Side, h: Rational, scanner: Scanner): number => scanner.bound(form.tree, near(side, h, 0)) ?? Infinity;
