/** Real solutions of transcendental equations for constants: those that Lambert's W gives in full, and proof that there is only one. */
import type { Element } from '../../algebra/types.ts';
import { build, dependsOn, type Expression, Q, type Rational } from '../../expression/index.ts';
import { differentiate } from '../../functions/index.ts';
import { Declined } from '../../outcome.ts';
import type { Context } from '../../series/index.ts';

/** coefficient * y^power * e^(rate y). */
interface Piece {
  readonly coefficient: Element;
  readonly power: number;
  readonly rate: Element;
}

/**
 * All real solutions y of p e^(b y) (y + s) + q e^(r y) = 0 with constants, b != r: with z = (r - b)(y + s), -z e^(-z) = (r - b) (q/p) e^(-(r - b) s) (DLMF 4.13.1).
 * Null where the equation is not of this form, or where a sign that decides the number of solutions is not known.
 */
export function lambertSolutions(c: Context, equation: Expression, unknown: string): Element[] | null {
  const pieces = piecesOf(c, equation, unknown);
  if (!pieces) return null;
  const { field } = c;
  const linear = pieces.filter((p) => p.power === 1);
  const [main] = linear;
  if (!main || linear.length !== 1 || pieces.some((p) => p.power > 1)) return null;
  const rates = pieces.map((p) => ({ ...p, rate: field.subtract(p.rate, main.rate) }));
  const constants = rates.filter((p) => p.power === 0 && field.isZero(p.rate) === 'yes');
  const others = rates.filter((p) => p.power === 0 && field.isZero(p.rate) === 'no');
  const [other] = others;
  if (!other || constants.length + others.length !== pieces.length - 1 || others.some((o) => field.isZero(field.subtract(o.rate, other.rate)) !== 'yes')) return null;
  const total = (list: readonly Piece[]): Element => list.reduce<Element>((sum, p) => field.add(sum, p.coefficient), Q.ZERO);
  const shift = field.divide(total(constants), main.coefficient);
  const scale = field.divide(total(others), main.coefficient);
  const rate = other.rate;
  // y + s = -scale e^(rate y), so that w = -rate (y + s) solves w e^w = rate scale e^(-rate s).
  const argument = field.multiply(field.multiply(rate, scale), field.exp(field.negate(field.multiply(rate, shift))));
  if ([argument, shift, rate].some((e) => field.isReal(e) !== 'yes')) return null;
  // Where y = 0 is a solution, its w is rate scale, on the branch that -1 tells.
  const plain = field.isZero(field.add(scale, shift)) === 'yes' ? field.compare(field.multiply(rate, scale), Q.MINUS_ONE) : null;
  const solution = (branch: 0 | -1): Element => {
    if ((plain === 1 && branch === 0) || (plain === -1 && branch === -1)) return Q.ZERO;
    const w = field.fromExpression(build.call('lambertW', build.number(branch), field.toExpression(argument)));
    return field.negate(field.add(shift, field.divide(w, rate)));
  };
  const sign = field.sign(argument);
  if (sign === 1) return [solution(0)];
  if (sign !== -1) return null;
  const edge = field.negate(field.exp(Q.MINUS_ONE));
  if (field.isZero(field.subtract(argument, edge)) === 'yes') return [field.subtract(field.divide(Q.ONE, rate), shift)];
  const order = field.compare(argument, edge);
  if (order === -1) return [];
  return order === 1 ? [solution(0), solution(-1)] : null;
}

/** The equation's left side as a sum of such pieces; null where it is none. */
function piecesOf(c: Context, e: Expression, unknown: string): Piece[] | null {
  const { field } = c;
  if (!dependsOn(e, unknown)) return [{ coefficient: field.fromExpression(e), power: 0, rate: Q.ZERO }];
  const all = (parts: readonly (Piece[] | null)[]): Piece[] | null => (parts.some((p) => p === null) ? null : parts.flatMap((p) => p ?? []));
  const times = (a: Piece[] | null, b: Piece[] | null): Piece[] | null =>
    a && b && a.length * b.length <= 64 ? a.flatMap((x) => b.map((y) => ({ coefficient: field.multiply(x.coefficient, y.coefficient), power: x.power + y.power, rate: field.add(x.rate, y.rate) }))) : null;
  switch (e.kind) {
    case 'symbol':
      return [{ coefficient: Q.ONE, power: 1, rate: Q.ZERO }];
    case 'negation':
      return times(piecesOf(c, e.operand, unknown), [{ coefficient: Q.MINUS_ONE, power: 0, rate: Q.ZERO }]);
    case 'sum':
      return all(e.terms.map((t) => piecesOf(c, t, unknown)));
    case 'product':
      return e.factors.map((f) => piecesOf(c, f, unknown)).reduce(times);
    case 'quotient':
      return times(piecesOf(c, e.numerator, unknown), dependsOn(e.denominator, unknown) ? powered(piecesOf(c, e.denominator, unknown), field) : piecesOf(c, build.power(e.denominator, -1), unknown));
    case 'power': {
      if (e.base.kind === 'constant' && e.base.name === 'e') return exponentialPiece(c, e.exponent, unknown);
      const times_ = e.exponent.kind === 'number' && e.exponent.value.den === 1n ? e.exponent.value.num : 0n;
      const base = piecesOf(c, e.base, unknown);
      if (times_ === -1n) return powered(base, field);
      return times_ === 2n ? times(base, base) : null;
    }
    case 'call':
      return e.function === 'exp' && e.args[0] ? exponentialPiece(c, e.args[0], unknown) : null;
    default:
      return null;
  }
}

/** The reciprocal of one exponential. */
function powered(pieces: Piece[] | null, field: Context['field']): Piece[] | null {
  const [only] = pieces ?? [];
  return only && pieces?.length === 1 && only.power === 0 ? [{ coefficient: field.divide(Q.ONE, only.coefficient), power: 0, rate: field.negate(only.rate) }] : null;
}

function exponentialPiece(c: Context, exponent: Expression, unknown: string): Piece[] | null {
  const pieces = piecesOf(c, exponent, unknown);
  if (!pieces || pieces.some((p) => p.power > 1 || c.field.isZero(p.rate) !== 'yes')) return null;
  const part = (power: number): Element => pieces.filter((p) => p.power === power).reduce<Element>((sum, p) => c.field.add(sum, p.coefficient), Q.ZERO);
  return [{ coefficient: c.field.exp(part(0)), power: 0, rate: part(1) }];
}

/** Entire, or analytic on the whole real line. */
const SMOOTH = new Set(['exp', 'sin', 'cos', 'sinh', 'cosh', 'tanh', 'atan', 'asinh', 'erf']);

/** Whether the function of the unknown is proved to increase, or to fall, on the whole real line, so that it takes each value once. */
export function isMonotone(c: Context, e: Expression, unknown: string): boolean {
  if (!isSmooth(e, unknown)) return false;
  const slope = differentiate(e, unknown);
  if (!slope) return false;
  try {
    const plain = c.field.toExpression(c.field.fromExpression(slope));
    return [plain, build.negation(plain)].some((s) => s.kind !== 'number' && isNonNegative(distributed(s))) || (plain.kind === 'number' && !Q.isZero(plain.value));
  } catch (error) {
    if (error instanceof Declined && error.failure.code !== 'over-budget') return false;
    throw error;
  }
}

function isSmooth(e: Expression, unknown: string): boolean {
  if (!dependsOn(e, unknown)) return true;
  switch (e.kind) {
    case 'symbol':
      return true;
    case 'negation':
      return isSmooth(e.operand, unknown);
    case 'sum':
      return e.terms.every((t) => isSmooth(t, unknown));
    case 'product':
      return e.factors.every((f) => isSmooth(f, unknown));
    case 'quotient':
      return !dependsOn(e.denominator, unknown) && isSmooth(e.numerator, unknown);
    case 'power':
      return e.base.kind === 'constant' ? isSmooth(e.exponent, unknown) : e.exponent.kind === 'number' && e.exponent.value.den === 1n && e.exponent.value.num > 0n && isSmooth(e.base, unknown);
    case 'call':
      return SMOOTH.has(e.function) && e.args.every((a) => isSmooth(a, unknown));
    default:
      return false;
  }
}

/** A negation of a sum as a sum. */
function distributed(e: Expression): Expression {
  if (e.kind !== 'negation') return e;
  const inner = e.operand;
  if (inner.kind === 'sum') return build.sum(...inner.terms.map((t) => distributed(build.negation(t))));
  if (inner.kind === 'negation') return inner.operand;
  return inner.kind === 'number' ? build.number(Q.negate(inner.value)) : e;
}

/** By form, for real values: sums of squares and positive functions, and numbers that outweigh sines and cosines. */
function isNonNegative(e: Expression): boolean {
  switch (e.kind) {
    case 'number':
      return Q.signOf(e.value) >= 0;
    case 'constant':
      return e.name !== 'i' && e.name !== 'infinity';
    case 'product':
      return e.factors.every(isNonNegative);
    case 'quotient':
      return isNonNegative(e.numerator) && isNonNegative(e.denominator);
    case 'power':
      return (e.exponent.kind === 'number' && e.exponent.value.den === 1n && e.exponent.value.num % 2n === 0n) || (e.base.kind === 'constant' && isNonNegative(e.base));
    case 'call':
      return e.function === 'exp' || e.function === 'cosh';
    case 'sum': {
      let room = Q.ZERO;
      for (const t of e.terms) {
        const wave = waveSize(t);
        if (wave) room = Q.subtract(room, wave);
        else if (t.kind === 'number') room = Q.add(room, t.value);
        else if (!isNonNegative(t)) return false;
      }
      return Q.signOf(room) >= 0;
    }
    default:
      return false;
  }
}

/** |c| of c sin(...) or c cos(...). */
function waveSize(e: Expression): Rational | null {
  if (e.kind === 'negation') return waveSize(e.operand);
  if (e.kind === 'call') return e.function === 'sin' || e.function === 'cos' ? Q.ONE : null;
  if (e.kind === 'product' && e.factors.length === 2) {
    const [a, b] = e.factors;
    const inner = a?.kind === 'number' && b ? waveSize(b) : null;
    return inner && a?.kind === 'number' ? Q.multiply(Q.absolute(a.value), inner) : null;
  }
  if (e.kind === 'quotient' && e.denominator.kind === 'number') {
    const inner = waveSize(e.numerator);
    return inner && Q.divide(inner, Q.absolute(e.denominator.value));
  }
  return null;
}
