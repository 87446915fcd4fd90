/** Solutions at a singular point: power series by undetermined coefficients for given values, Frobenius solutions for linear equations. */
import type { Element } from '../../algebra/types.ts';
import { build, type Expression, Q, substitute } from '../../expression/index.ts';
import { type Budget, Declined } from '../../outcome.ts';
import { type Context, finiteStream, isRational, isZero, type Multi, multiplyElements, Series, unnamed } from '../../series/index.ts';
import { evaluate } from '../evaluate.ts';
import type { ExpansionProblem } from '../expansion.ts';
import { type OpenSide, openSide } from '../open-side.ts';
import { bind } from '../session.ts';
import { falling, type RegularSolution } from './initial-value.ts';
import { divideElements } from './operator.ts';
import { type DifferentialStatement, slot } from './statement.ts';
import { Taylor } from './taylor.ts';

const TRIAL = "coefficient'";

/** The first coefficient of the equation that a trial coefficient enters, with all before it. */
interface Entry {
  readonly exponent: number;
  readonly coefficient: Element;
}

/** One equation with a polynomial and one trial coefficient more put in for its unknown. */
class Trial {
  constructor(
    private readonly side: OpenSide,
    private readonly tree: Expression,
    private readonly name: string,
    private readonly order: number,
  ) {}

  private polynomial(known: readonly Element[], derivative: number): Multi {
    const c = this.side.context;
    const terms = known.flatMap((a, k) => {
      const value = k < derivative ? Q.ZERO : multiplyElements(c, a, Q.rational(falling(k, derivative)));
      return isRational(value) && value.num === 0n ? [] : [{ exponent: Q.rational(k - derivative), coefficient: value }];
    });
    return terms.length === 0 ? Q.ZERO : new Series(c.scale.local, finiteStream(terms), unnamed);
  }

  /** Coefficients of the equation up to the power, by power. */
  private *coefficients(known: readonly Element[]): Generator<Entry> {
    const { context: c, session } = this.side;
    c.budget.check();
    const slots = Array.from({ length: this.order + 1 }, (_, k) => [slot(this.name, k), this.polynomial(known, k)] as const);
    const value = declinedPlainly(() => evaluate(bind(session, slots), this.tree));
    if (!(value instanceof Series)) {
      yield { exponent: 0, coefficient: value };
      return;
    }
    if (value.element.kind !== 'local') throw notAPowerSeries();
    for (let k = 0; ; k += 1) {
      const term = declinedPlainly(() => value.stream.at(k));
      if (!term) return;
      if (term.coefficient instanceof Series || !isRational(term.exponent) || term.exponent.den !== 1n || term.order) throw notAPowerSeries();
      // A condition on the trial coefficient, or another value on the left side: the equation is not analytic in the solution.
      if (c.notes.sided || [...c.field.needed].some((a) => a.includes(TRIAL))) throw notAPowerSeries();
      yield { exponent: Number(term.exponent.num), coefficient: term.coefficient };
    }
  }

  /** Where the coefficient of h^k enters first; `limit` is the last power looked at. Powers before it are told to `before`. */
  entry(known: readonly Element[], k: number, limit: number, before: (e: Entry) => void): Entry | null {
    const c = this.side.context;
    const padded = [...known, ...Array.from({ length: k - known.length }, () => Q.ZERO), c.field.fromExpression(build.symbol(TRIAL))];
    for (const e of this.coefficients(padded)) {
      if (e.exponent > limit) return null;
      if (!isRational(e.coefficient) && c.field.parameters(e.coefficient).includes(TRIAL)) return e;
      before(e);
    }
    return null;
  }
}

/** A question about the trial coefficient is none that an assumption could answer. */
function declinedPlainly<T>(body: () => T): T {
  try {
    return body();
  } catch (error) {
    if (error instanceof Declined && error.about.includes(TRIAL)) throw notAPowerSeries();
    throw error;
  }
}

const notAPowerSeries = (): Declined => new Declined('no-expansion', 'At this singular point of the equation the solution with these values is no power series; choose a regular point.');

/**
 * The solution that is a power series at a singular point, coefficient after coefficient: h^k enters the equation first at the power k + shift and is solved for there.
 * Where it does not enter, it is free (given by an initial value, else a constant) if that coefficient of the equation vanishes.
 * Declines where logarithms or other powers would be needed. O(n^3) operations for n coefficients.
 */
export function powerSeriesSolution(statement: DifferentialStatement, given: (derivative: number) => Expression | null, about: Pick<ExpansionProblem, 'variable' | 'point' | 'assumptions'>, budget: Budget): RegularSolution {
  const [equation] = statement.equations;
  const [unknown] = statement.unknowns;
  if (!equation || !unknown || statement.unknowns.length !== 1 || statement.equations.length !== 1) throw new Declined('no-expansion', 'The system is singular at this point; write it as one equation, or choose another point.');
  const side = openSide(about, 'right', budget);
  const c = side.context;
  const { order, name } = unknown;
  const trial = new Trial(side, side.fromVariable(equation), name, order);
  const known: Element[] = [];
  const initial = (k: number): Element | null => {
    const value = k < order ? given(k) : null;
    return value ? multiplyElements(c, c.field.fromExpression(value), Q.divide(Q.ONE, Q.rational(factorial(k)))) : null;
  };
  const first = initial(0);
  if (!first) throw new Declined('needs-assumption', `The point is singular for this equation; give the value of the solution there.`);
  known.push(first);
  const shift = shiftOf(c, trial, known, order);
  let resonances = 0;
  const next = (k: number): Element => {
    if (known[k] !== undefined) return known[k];
    const target = k + shift;
    const rests: Element[] = [];
    const entry = trial.entry(known, k, target, (e) => {
      if (isZero(c, e.coefficient)) return;
      if (e.exponent === target) rests.push(e.coefficient);
      else throw new Declined('no-expansion', 'The values given contradict the equation at its singular point; correct them.');
    });
    const wanted = initial(k);
    if (entry && entry.exponent < target) throw new Declined('no-expansion', 'The equation is too degenerate at this point and these values; choose another point.');
    if (!entry) {
      if (rests.length > 0) throw new Declined('no-expansion', `The solution with these values has logarithms of the distance from the point at power ${k}, or does not exist; choose a regular point.`);
      resonances += 1;
      if (resonances > order) throw notAPowerSeries();
      if (wanted) return wanted;
      return c.field.fromExpression({ kind: 'apply', name, args: [about.point as Expression], derivatives: [k] });
    }
    const value = solveLinear(c, entry.coefficient);
    if (wanted && !isZero(c, c.field.subtract(value, wanted))) throw new Declined('no-expansion', `At its singular point the equation itself determines the ${ordinal(k)} derivative, and the value given for it is another; leave that value out or correct it.`);
    return value;
  };
  const own = new Taylor((k) => {
    const value = next(k);
    known[k] = value;
    return value;
  }, known);
  return { side, series: new Map([[name, own]]) };
}

/** What is added to the power of a coefficient to get the power at which it enters. */
function shiftOf(c: Context, trial: Trial, known: readonly Element[], order: number): number {
  const shifts: number[] = [];
  for (let k = order + 1; k <= 2 * order + 2; k += 1) {
    const entry = trial.entry(known, k, k + order + 8, () => undefined);
    if (!entry) continue;
    solveLinear(c, entry.coefficient);
    shifts.push(entry.exponent - k);
  }
  const least = Math.min(...shifts);
  // A linear recursion has at most as many exceptional powers as the order.
  if (shifts.filter((s) => s === least).length < 2) throw new Declined('no-expansion', 'The equation is too degenerate at this point and these values; choose another point.');
  return least;
}

function solveLinear(c: Context, coefficient: Element): Element {
  const tree = c.field.toExpression(coefficient);
  const at = (value: number): Element => c.field.fromExpression(substitute(tree, TRIAL, build.number(value)));
  const [zero, one, two] = [at(0), at(1), at(2)];
  const slope = c.field.subtract(one, zero);
  if (!isZero(c, c.field.subtract(c.field.subtract(two, one), slope))) throw new Declined('no-expansion', 'The coefficients of the solution solve equations of higher degree at this singular point; choose a regular point.');
  return c.field.negate(divideElements(c, zero, slope));
}

const factorial = (k: number): bigint => (k <= 1 ? 1n : BigInt(k) * factorial(k - 1));
const ordinal = (k: number): string => ['zeroth', 'first', 'second', 'third'][k] ?? `${k}th`;
