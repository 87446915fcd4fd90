/** Inverse functions of increasing real functions, certified by signs and a slope (interval Newton: Moore 1966). */
import { type Ball, real } from '../../rigorous/index.ts';
import { type Kit, realKit } from './kit.ts';

const SEARCH_BITS = 60;
/** Sign of f(y) - x where decided. */
function side(f: (kit: Kit<Ball>, y: Ball) => Ball | null, kit: Kit<Ball>, y: Ball, x: Ball): -1 | 0 | 1 | null {
  const value = f(kit, y);
  return value === null ? null : real.compare(value, x);
}

/**
 * The y with f(y) = x, f increasing with derivative `slope`, somewhere between the two numbers of `range`.
 * Null where the signs at the ends do not prove that there is one.
 */
export function inverseOfIncreasing(kit: Kit<Ball>, f: (kit: Kit<Ball>, y: Ball) => Ball | null, slope: (kit: Kit<Ball>, y: Ball) => Ball | null, x: Ball, range: readonly [number | Ball, number | Ball]): Ball | null {
  const { a, precision } = kit;
  let [low, high] = range.map((end) => (typeof end === 'number' ? real.fromInteger(end) : end)) as [Ball, Ball];
  const middleOf = (p: Ball, r: Ball): Ball => real.midpoint(real.round(real.scaleByPowerOfTwo(real.add(p, r, precision), -1), precision));
  if (x.rad !== 0n) {
    const first = inverseOfIncreasing(kit, f, slope, real.lowerEnd(x), range);
    const last = inverseOfIncreasing(kit, f, slope, real.upperEnd(x), range);
    return first && last && real.fromEnds(first, last, precision);
  }
  const target = x;
  if (side(f, kit, low, target) !== -1 || side(f, kit, high, target) !== 1) return null;
  let search = realKit(Math.min(SEARCH_BITS, precision), kit.check);
  // Bisection until the bracket is narrow relative to its place, or signs cannot be told apart.
  for (let i = 0; i < 400; i++) {
    kit.check();
    const middle = middleOf(low, high);
    const width = real.exponentOf(real.subtract(high, low, SEARCH_BITS));
    if (width < real.exponentOf(middle) - 24 || width < -4 * precision) break;
    const sign = side(f, search, middle, target);
    if (sign === -1) low = middle;
    else if (sign === 1) high = middle;
    else if (search !== kit) search = kit;
    else {
      const value = f(kit, middle);
      if (value?.rad === 0n && real.compare(value, target) === 0) return middle;
      break;
    }
  }
  let bracket = real.fromEnds(low, high, precision);
  // Newton on the bracket: y = m - (f(m) - x)/f'(Y) holds for the root of every x in the ball.
  for (let i = 0; i < 40; i++) {
    const m = real.midpoint(real.round(bracket, precision));
    const value = f(kit, m);
    const steep = slope(kit, bracket);
    if (value === null || steep === null || !real.isPositive(steep)) return null;
    const change = a.divide(a.subtract(value, target), steep);
    if (change === null) return null;
    const next = real.intersection(bracket, a.subtract(m, change), precision + 8);
    if (next === null) return null;
    const better = next.rad === 0n || real.exponentOf(real.radius(next)) < real.exponentOf(real.radius(bracket)) - 1;
    bracket = next;
    if (!better) break;
  }
  return bracket;
}
