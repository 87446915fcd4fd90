/** The two kinds of numbers that bounds are computed in: double intervals first, balls where digits cancel. */
import type { Expression } from '../expression/index.ts';
import { describe } from '../functions/index.ts';
import { type Ball, ballArithmetic, evaluateTree, type Interval, interval, intervalArithmetic, intervalTrees, real, type RealArithmetic, realBallTrees, type TreeArithmetic } from '../rigorous/index.ts';

export interface Numbers<T> {
  readonly r: RealArithmetic<T>;
  readonly trees: TreeArithmetic<T>;
  /** Bits, about. */
  readonly precision: number;
  /** [0, 1] and [-1, 1]. */
  readonly unitRight: T;
  readonly unitBoth: T;
  readonly toBall: (x: T) => Ball | null;
  readonly fromBall: (x: Ball) => T;
  /** Symbols with known sets: parameters under interval assumptions. */
  readonly parameters: ReadonlyMap<string, T>;
  /** Some of them are ranges of a parameter, not values known to full precision. */
  readonly wide: boolean;
  /** The tree for all parameter values; null where undefined. */
  readonly value: (e: Expression, extra?: ReadonlyMap<string, T>) => T | null;
}

export type ParameterBalls = ReadonlyMap<string, Ball>;

function numbers<T>(base: Omit<Numbers<T>, 'parameters' | 'value' | 'wide'>, parameters: ParameterBalls): Numbers<T> {
  const own = new Map([...parameters].map(([name, ball]) => [name, base.fromBall(ball)] as const));
  const value = (e: Expression, extra?: ReadonlyMap<string, T>): T | null => evaluateTree(e, extra ? new Map([...own, ...extra]) : own, base.trees, describe);
  return { ...base, parameters: own, wide: parameters.size > 0, value };
}

export const doubles = (parameters: ParameterBalls): Numbers<Interval> =>
  numbers(
    {
      r: intervalArithmetic,
      trees: intervalTrees,
      precision: 53,
      unitRight: { lo: 0, hi: 1 },
      unitBoth: { lo: -1, hi: 1 },
      toBall: (x) => interval.toBall(x),
      fromBall: interval.fromBall,
    },
    parameters,
  );

export const ballNumbers = (precision: number, parameters: ParameterBalls): Numbers<Ball> =>
  numbers(
    {
      r: ballArithmetic(precision),
      trees: realBallTrees(precision),
      precision,
      unitRight: { mid: 1n, rad: 1n, exp: -1 },
      unitBoth: { mid: 0n, rad: 1n, exp: 0 },
      toBall: (x) => x,
      fromBall: (x) => real.round(x, precision),
    },
    parameters,
  );

/** The same numbers with further symbols, each evaluated once. */
export function withValues<T>(n: Numbers<T>, values: ReadonlyMap<string, T>): Numbers<T> {
  const own = new Map([...n.parameters, ...values]);
  return { ...n, parameters: own, value: (e, extra) => evaluateTree(e, extra ? new Map([...own, ...extra]) : own, n.trees, describe) };
}
