export type { Ball, ComplexBall, Interval } from './ball.types.ts';
export * as real from './real.ts';
