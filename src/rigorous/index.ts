export type { Ball, ComplexBall, Interval } from './ball.types.ts';
