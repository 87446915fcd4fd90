/** From algorithms at a working precision to enclosures at the precision asked for: precision is raised while digits cancel, wide arguments go through a bound of the derivative. */
import { build, type Expression } from '../../expression/index.ts';
import { type Ball, complex, complexBallTrees, type ComplexBall, evaluateTree, real, realBallTrees } from '../../rigorous/index.ts';
import type { FunctionDescription } from '../description.ts';
import { complexKit, type Kit, realKit } from './kit.ts';

/** An algorithm on sets of either kind. Null: not defined, or out of reach at this precision. */
export interface Algorithm {
  readonly real?: (kit: Kit<Ball>, args: readonly Ball[]) => Ball | null;
  readonly complex?: (kit: Kit<ComplexBall>, args: readonly ComplexBall[]) => ComplexBall | null;
  /** False where the closed-form derivative is not to be used for wide arguments. */
  readonly slope?: boolean;
}

/** All algorithms by id, for derivatives that need companions. */
const ALGORITHMS = new Map<string, Algorithm>();

const MOST_BITS = 60_000;

/** Bits that the argument itself knows; Infinity for exact ones. */
const argumentBits = (x: Ball): number => (x.rad === 0n ? Infinity : Math.max(0, real.relativeAccuracy(x)));

/** Raises the working precision until the result has the bits asked for, or the argument, which knows `limit` bits, allows no more. */
function adaptive<T>(attempt: (bits: number) => T | null, accuracy: (value: T) => number, precision: number, limit: number, check: (() => void) | undefined): T | null {
  const wanted = Math.min(precision, limit + 24);
  let bits = wanted + 16;
  let best: T | null = null;
  let bestAccuracy = -Infinity;
  for (let round = 0; round < 12 && bits <= Math.min(MOST_BITS, 40 * (precision + 64)); round++) {
    check?.();
    const value = attempt(bits);
    if (value === null) {
      if (round >= (limit < Infinity ? 1 : 2)) return best;
      bits = 2 * bits;
      continue;
    }
    const got = accuracy(value);
    if (got >= wanted || got === Infinity) return value;
    if (limit === Infinity && got < 8) {
      // Nothing but rounding is left: the digits that cancel are not even known yet.
      if (best === null) best = value;
      bits = 2 * bits;
      continue;
    }
    if (best !== null && got <= bestAccuracy + 2) return best;
    best = value;
    bestAccuracy = got;
    // A wide argument: the loss is its own unless it is out of all proportion.
    if (limit < precision && got > limit - 12) return best;
    if (limit < precision && round >= 1) return best;
    bits += Math.max(16, wanted - got + 16);
  }
  return best;
}

const complexAccuracy = (z: ComplexBall): number => {
  const size = Math.max(real.exponentOf(z.re), real.exponentOf(z.im));
  const error = Math.max(z.re.rad === 0n ? -Infinity : real.exponentOf(real.radius(z.re)), z.im.rad === 0n ? -Infinity : real.exponentOf(real.radius(z.im)));
  return size === -Infinity ? Infinity : size - error;
};

function realDirect(id: string, args: readonly Ball[], precision: number, check?: () => void): Ball | null {
  const algorithm = ALGORITHMS.get(id);
  if (!algorithm?.real) return null;
  const { real: f } = algorithm;
  const limit = Math.min(...args.map(argumentBits));
  const value = adaptive((bits) => f(realKit(bits, check), args), real.relativeAccuracy, precision, limit, check);
  return value && real.round(value, precision + 8);
}
function complexDirect(id: string, args: readonly ComplexBall[], precision: number, check?: () => void): ComplexBall | null {
  const algorithm = ALGORITHMS.get(id);
  const limit = Math.min(...args.flatMap((z) => [argumentBits(z.re), argumentBits(z.im)]));
  const f = algorithm?.complex;
  const onLine = args.every((z) => z.im.mid === 0n && z.im.rad === 0n);
  if (!f) return null;
  const value = adaptive((bits) => f(complexKit(bits, check, onLine), args), complexAccuracy, precision, limit, check);
  return value && complex.round(value, precision + 8);
}

/** Descriptions as the derivative trees see them: direct evaluation, no derivatives of derivatives. */
const companion = (check: (() => void) | undefined) => (id: string) => ({
  encloseReal: (args: readonly Ball[], precision: number): Ball | null => realDirect(id, args, precision, check),
  enclose: (args: readonly ComplexBall[], precision: number): ComplexBall | null => complexDirect(id, args, precision, check),
});

const SLOPE_BITS = 48;
const place = (i: number): string => `\\argument_${i}`;

/** The description with its enclosures. */
function withEnclosure(description: FunctionDescription, algorithm: Algorithm): FunctionDescription {
  const { id, derivative } = description;
  ALGORITHMS.set(id, algorithm);
  const slopes = new Map<number, Expression | null>();
  const slope = (count: number, index: number): Expression | null => {
    const key = index * 64 + count;
    let tree = slopes.get(key);
    if (tree === undefined) {
      tree = derivative?.(Array.from({ length: count }, (_, i) => build.symbol(place(i))), index) ?? null;
      slopes.set(key, tree);
    }
    return tree;
  };

  const encloseReal = (args: readonly Ball[], precision: number, check?: () => void): Ball | null => {
    const direct = realDirect(id, args, precision, check);
    const last = args.length - 1;
    const x = args[last];
    if (!x || x.rad === 0n || algorithm.slope === false || args.slice(0, -1).some((arg) => arg.rad !== 0n)) return direct;
    const tree = slope(args.length, last);
    if (!tree || direct === null) return direct;
    const middle = realDirect(id, [...args.slice(0, -1), real.midpoint(x)], Math.min(precision, argumentBits(x) + 32), check);
    if (middle === null) return direct;
    const steep = evaluateTree(tree, new Map(args.map((arg, i) => [place(i), arg])), realBallTrees(SLOPE_BITS), companion(check));
    if (steep === null) return direct;
    const byMean = real.withRadius(middle, real.absoluteUpper(real.multiply(real.radius(x), steep, SLOPE_BITS)));
    return real.intersection(direct, byMean, precision) ?? direct;
  };

  const enclose = (args: readonly ComplexBall[], precision: number, check?: () => void): ComplexBall | null => {
    const direct = complexDirect(id, args, precision, check);
    const last = args.length - 1;
    const z = args[last];
    if (!z || complex.isExact(z) || direct === null || algorithm.slope === false || args.slice(0, -1).some((arg) => !complex.isExact(arg))) return direct;
    const tree = slope(args.length, last);
    if (!tree) return direct;
    const middle = complexDirect(id, [...args.slice(0, -1), complex.midpoint(z)], precision, check);
    if (middle === null) return direct;
    const steep = evaluateTree(tree, new Map(args.map((arg, i) => [place(i), arg])), complexBallTrees(SLOPE_BITS, true), companion(check));
    if (steep === null) return direct;
    // |f(z) - f(m)| <= |z - m| sup |f'|: the rectangle is convex.
    const reach = real.absoluteUpper(complex.absolute({ re: real.radius(z.re), im: real.radius(z.im) }, SLOPE_BITS));
    const error = real.absoluteUpper(real.multiply(reach, real.absoluteUpper(complex.absolute(steep, SLOPE_BITS)), SLOPE_BITS));
    const byMean = complex.withRadius(middle, error);
    const re = real.intersection(direct.re, byMean.re, precision);
    const im = real.intersection(direct.im, byMean.im, precision);
    return re && im ? { re, im } : direct;
  };
  return {
    ...description,
    ...(algorithm.real ? { encloseReal } : {}),
    ...(algorithm.complex ? { enclose } : {}),
  };
}

/** Every description of a list whose id has an algorithm gets its enclosures. */
export const enclosed = (descriptions: readonly FunctionDescription[], algorithms: Readonly<Record<string, Algorithm>>): readonly FunctionDescription[] =>
  descriptions.map((d) => {
    const algorithm = algorithms[d.id];
    return algorithm ? withEnclosure(d, algorithm) : d;
  });
