/** Suprema over intervals of parameters too. */
import type { Expression } from '../expression/index.ts';
import { type Ball, real } from '../rigorous/index.ts';
import type { ParameterBalls } from './numbers.ts';

/** What a bound over a box of parameters consists of. */
export interface Result {
  /** Null: no finite bound. */
  readonly upper: Ball | null;
  readonly lower: Ball;
  readonly steps: readonly string[];
  readonly place?: Expression;
  /** The place is proven to be one where the remainder is unbounded. */
  readonly unbounded?: boolean;
  readonly method: string;
}

const MOST_BOXES = 64;
const BOX_SLACK = 1.0008;
/** Parameters of which all choices of ends are tried. */
const MOST_CORNER_NAMES = 3;

/** The supremum over the parameters too: lower bounds at the corners of their box, upper bounds on halves of it where the two differ. */
export function overParameters(parameters: ParameterBalls, start: Result | null, solve: (box: ParameterBalls) => Result | null): Result | null {
  let lower = start?.lower ?? real.ZERO;
  for (const corner of cornersOf(parameters)) {
    const at = solve(corner);
    if (at !== null) lower = real.maximum(lower, at.lower);
  }
  const open: { readonly box: ParameterBalls; readonly result: Result | null }[] = [{ box: parameters, result: start }];
  const worse = (a: Result | null, b: Result | null): boolean => (a?.upper ? b !== null && (b.upper === null || real.compare(b.upper, a.upper) === 1) : false);
  for (let count = 1; count < MOST_BOXES; count += 1) {
    let worst = 0;
    for (let k = 1; k < open.length; k += 1) if (worse(open[worst]?.result ?? null, open[k]?.result ?? null)) worst = k;
    const item = open[worst];
    if (!item) break;
    const { result } = item;
    if (result?.upper && real.compare(result.upper, real.multiply(lower, real.fromDouble(BOX_SLACK), 64)) !== 1) break;
    const [name, ball] = [...item.box].reduce((a, b) => (real.compare(real.radius(b[1]), real.radius(a[1])) === 1 ? b : a));
    const middle = real.midpoint(ball);
    const halves = [real.fromEnds(real.lowerEnd(ball), middle, 128), real.fromEnds(middle, real.upperEnd(ball), 128)].map((part) => new Map([...item.box, [name, part] as const]));
    const [left, right] = halves.map((box) => ({ box, result: solve(box) }));
    if (!left || !right) break;
    open[worst] = left;
    open.push(right);
  }
  let upper: Ball | null = real.ZERO;
  for (const { result } of open) upper = upper === null || !result?.upper ? null : real.maximum(upper, real.upperEnd(result.upper));
  const shown = start ?? open.find(({ result }) => result !== null)?.result ?? null;
  return shown === null ? null : { ...shown, upper: upper === null ? null : real.upperEnd(upper), lower, steps: [...shown.steps, `Parameters: ${open.length} boxes.`] };
}

/** Where the remainder is monotone in each parameter: upper bounds at the outer ends of the ranges, lower bounds at ends that belong to them; null where one of them has no bound. */
export function atCorners(parameters: ParameterBalls, solve: (box: ParameterBalls) => Result | null): Result | null {
  if (parameters.size > MOST_CORNER_NAMES) return null;
  const outer = [...parameters].reduce<readonly ParameterBalls[]>((corners, [name, ball]) => corners.flatMap((corner) => [real.lowerEnd(ball), real.upperEnd(ball)].map((end) => new Map([...corner, [name, end] as const]))), [new Map()]);
  let [upper, lower]: [Ball, Ball] = [real.ZERO, real.ZERO];
  let worst: Result | null = null;
  for (const corner of outer) {
    const result = solve(corner);
    if (!result?.upper) return null;
    if (worst === null || real.compare(result.upper, upper) === 1) worst = result;
    upper = real.maximum(upper, real.upperEnd(result.upper));
  }
  for (const corner of cornersOf(parameters)) lower = real.maximum(lower, solve(corner)?.lower ?? real.ZERO);
  return worst && { ...worst, upper: real.upperEnd(upper), lower, steps: [...worst.steps, `Parameters: the derivative of the remainder with respect to ${[...parameters.keys()].join(', ')} keeps its sign, so that its largest values are at the ends of the ranges.`] };
}

/** Up to 8 choices of both ends of every parameter. */
function cornersOf(parameters: ParameterBalls): readonly ParameterBalls[] {
  let corners: Map<string, Ball>[] = [new Map()];
  for (const [name, ball] of parameters) {
    if (corners.length >= 8) {
      corners = corners.map((corner) => new Map([...corner, [name, real.midpoint(ball)] as const]));
      continue;
    }
    // The ball sticks out by the rounding of its radius; its ends are drawn in by more than that, so that they are values of the parameter.
    const inset = real.fromDouble(1 - 2 ** -24);
    const half = real.multiply(real.radius(ball), inset, 80);
    const ends = [real.subtract(real.midpoint(ball), half, 128), real.add(real.midpoint(ball), half, 128)].map(real.midpoint);
    corners = corners.flatMap((corner) => ends.map((end) => new Map([...corner, [name, end] as const])));
  }
  return corners;
}
