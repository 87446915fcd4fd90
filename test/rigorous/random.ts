/** A small seeded generator (xorshift128+ by Vigna 2014, in BigInt-free 32-bit form): tests that fail can be run again. */
import type { Ball } from '../../src/rigorous/index.ts';

export function generator(seed: number): () => number {
  let a = seed >>> 0 || 1;
  let b = (seed * 2654435761) >>> 0 || 2;
  return () => {
    a ^= a << 13;
    a ^= a >>> 17;
    a ^= a << 5;
    b = (Math.imul(b, 1664525) + 1013904223) >>> 0;
    return (((a >>> 0) ^ b) >>> 0) / 2 ** 32;
  };
}

/** An exact dyadic number of magnitude between 2^low and 2^high with `bits` random bits. */
export function dyadic(random: () => number, low: number, high: number, bits = 60): Ball {
  let mid = 1n;
  for (let i = 1; i < bits; i += 1) mid = (mid << 1n) | (random() < 0.5 ? 1n : 0n);
  const exp = Math.floor(low + (high - low) * random()) - bits + 1;
  return { mid: random() < 0.5 ? mid : -mid, rad: 0n, exp };
}

/** A random exact number inside the ball, its ends included. */
export function inside(random: () => number, x: Ball): Ball {
  const which = random();
  if (which < 0.1) return { mid: x.mid - x.rad, rad: 0n, exp: x.exp };
  if (which < 0.2) return { mid: x.mid + x.rad, rad: 0n, exp: x.exp };
  const part = BigInt(Math.floor((2 * random() - 1) * 2 ** 40));
  return { mid: (x.mid << 40n) + x.rad * part, rad: 0n, exp: x.exp - 40 };
}
