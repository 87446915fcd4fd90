/**
 * Whether a remainder is monotone in a parameter: then its largest size over the parameter's range is at an end of that range, whatever x is.
 * With f = sum + R the derivative R_c is what the differentiated sum leaves of f_c, and (R/f)_c = (R_c f - R f_c)/f^2; divided by its power of s each is proved to keep one sign.
 */
import { build, type Expression } from '../expression/index.ts';
import type { Expansion } from '../expand/index.ts';
import { differentiate } from '../functions/index.ts';
import { Declined } from '../outcome.ts';
import { denominatorOf, isPowerSum, type Local, localModel, remainderAtPoint } from './local.ts';
import { type Ball, real } from '../rigorous/index.ts';
import type { Numbers, ParameterBalls } from './numbers.ts';
import type { Segment } from './region.ts';
import type { Measure } from './types.ts';

const EXTRA = 14;
const PIECES = 16;
/** Halvings of a parameter's range. */
const DEEPEST = 6;

/** For every x of the segments and all values of the parameters in their boxes; false means not proved. Only segments that start at the point of expansion are looked at. `numbersIn` makes numbers with other boxes. */
export function isMonotoneIn<T>(name: string, segments: readonly Segment[], measure: Measure, variable: string, boxes: ParameterBalls, numbersIn: (boxes: ParameterBalls) => Numbers<T>, check: () => void): boolean {
  return segments.every((segment) => {
    const varied = segment.atPoint && isPowerSum(segment.expansion) ? variedIn(segment.expansion, name) : null;
    if (varied === null) return false;
    const signOn = (range: Ball, depth: number): 1 | -1 | 0 => {
      const sign = slopeSign(segment, varied, measure, variable, numbersIn(new Map([...boxes, [name, range] as const])), check);
      if (sign !== 0 || depth === 0) return sign;
      // Parts with one sign are one way up or down.
      const middle = real.midpoint(range);
      const first = signOn(real.fromEnds(real.lowerEnd(range), middle, 128), depth - 1);
      return first !== 0 && first === signOn(real.fromEnds(middle, real.upperEnd(range), 128), depth - 1) ? first : 0;
    };
    const range = boxes.get(name);
    return range !== undefined && signOn(range, DEEPEST) !== 0;
  });
}

/** The sign of the remainder's derivative with respect to a parameter, over its power of s; 0 where it was not proved to have one. */
function slopeSign<T>(segment: Segment, varied: Expansion, measure: Measure, variable: string, n: Numbers<T>, check: () => void): 1 | -1 | 0 {
  const { r } = n;
  const { expansion } = segment;
  const q = denominatorOf(expansion);
  if (q === null) return 0;
  try {
    const length = 2 * expansion.terms.length + EXTRA;
    const local = localModel(segment, n, variable, length, q, check);
    const slope = local && localModel({ ...segment, expansion: varied }, n, variable, length, q, check);
    const [R, Rc] = [local && only(remainderAtPoint(local, expansion, n)), slope && only(remainderAtPoint(slope, varied, n))];
    const [f, fc] = [local && only(local.f), slope && only(slope.f)];
    if (!local || !R || !Rc || !f || !fc) return 0;
    const { m } = local;
    // What is divided by must have no zero: its power of s apart.
    if (measure === 'relative' && r.containsZero(f.range)) return 0;
    const numerator = measure === 'absolute' ? Rc : m.subtract(m.multiply(Rc, f), m.multiply(R, fc));
    return signOfModel(numerator, n);
  } catch (error) {
    if (error instanceof Declined && error.failure.code !== 'over-budget') return 0;
    throw error;
  }
}

/** The sign of c_0 + c_1 s + ... + s^m rho on [0, 1], by its range or by pieces of it. */
function signOfModel<T>(g: Local<T>['leaf'], { r, unitRight }: Numbers<T>): 1 | -1 | 0 {
  const known = r.isPositive(g.range) ? 1 : r.isNegative(g.range) ? -1 : 0;
  if (known !== 0) return known;
  let sign: 1 | -1 | 0 = 0;
  for (let k = 0; k < PIECES; k += 1) {
    const s = r.divideInteger(r.add(r.fromInteger(k), unitRight), PIECES);
    const value = g.coefficients.reduceRight((sum, c) => r.add(c, r.multiply(s, sum)), g.tail);
    const here = r.isPositive(value) ? 1 : r.isNegative(value) ? -1 : 0;
    if (here === 0 || (sign !== 0 && here !== sign)) return 0;
    sign = here;
  }
  return sign;
}
const only = <T>(parts: Local<T>['f'] | null): Local<T>['f'][number] | null => (parts?.length === 1 ? (parts[0] ?? null) : null);

/** The expansion with function and coefficients differentiated with respect to the symbol; null where one of them cannot be. */
function variedIn(expansion: Expansion, name: string): Expansion | null {
  const slope = differentiate(expansion.function, name);
  const terms: Expansion['terms'][number][] = [];
  for (const term of expansion.terms) {
    const coefficient: Expression | null = term.coefficient.kind === 'number' ? build.number(0) : differentiate(term.coefficient, name);
    if (coefficient === null) return null;
    terms.push({ ...term, coefficient });
  }
  return slope && { ...expansion, function: slope, terms };
}
