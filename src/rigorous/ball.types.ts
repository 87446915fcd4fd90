/** Numbers that enclose. Every operation returns a set that contains the true result for every choice of the inputs within theirs. */

/** Real ball: { x : |x - mid * 2^exp| <= rad * 2^exp }. */
export interface Ball {
  readonly mid: bigint;
  /** Never negative. */
  readonly rad: bigint;
  readonly exp: number;
}
/** Rectangle re + i im. */
export interface ComplexBall {
  readonly re: Ball;
  readonly im: Ball;
}
/** Closed interval of doubles, outward rounded; ends may be infinite. */
export interface Interval {
  readonly lo: number;
  readonly hi: number;
}
