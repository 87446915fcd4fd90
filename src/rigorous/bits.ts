/** Integers as strings of bits: lengths, rounding shifts, roots. */

const float = new Float64Array(1);
const words = new Uint32Array(float.buffer);
const HIGH = new Uint8Array(new Uint32Array([1]).buffer)[0] === 1 ? 1 : 0;

export const magnitude = (x: bigint): bigint => (x < 0n ? -x : x);

/** A number n with |x| < 2^n, at most one more than the least such n; 0 for x = 0. */
export function bitLength(x: bigint): number {
  if (x === 0n) return 0;
  const value = Number(x);
  if (Number.isFinite(value)) {
    float[0] = value;
    return (((words[HIGH] ?? 0) >>> 20) & 0x7ff) - 1022;
  }
  return (x < 0n ? -x : x).toString(16).length * 4;
}

/** x * 2^n rounded towards minus infinity; n may be negative. */
export const shiftFloor = (x: bigint, n: number): bigint => (n >= 0 ? x << BigInt(n) : x >> BigInt(-n));

/** x * 2^n rounded towards plus infinity; n may be negative. */
export const shiftCeil = (x: bigint, n: number): bigint => (n >= 0 ? x << BigInt(n) : -(-x >> BigInt(-n)));

/** Quotient rounded towards minus infinity; b > 0. */
export function divideFloor(a: bigint, b: bigint): bigint {
  const quotient = a / b;
  return a < 0n && quotient * b !== a ? quotient - 1n : quotient;
}

/** Quotient rounded towards plus infinity; b > 0. */
export const divideCeil = (a: bigint, b: bigint): bigint => -divideFloor(-a, b);

/** Largest integer whose square is at most x; x >= 0. Newton's iteration from above, which decreases until it is done. */
export function squareRootFloor(x: bigint): bigint {
  if (x < 2n) return x;
  const bits = bitLength(x);
  let guess: bigint;
  if (bits <= 1000) {
    // A double seed carries 50 bits; one part in 2^48 more keeps it above the root.
    const seed = BigInt(Math.ceil(Math.sqrt(Number(x))));
    guess = seed + (seed >> 48n) + 1n;
  } else {
    const half = BigInt(Math.floor(bits / 4));
    guess = (squareRootFloor(x >> (2n * half)) + 1n) << half;
  }
  for (;;) {
    const next = (guess + x / guess) >> 1n;
    if (next >= guess) return guess;
    guess = next;
  }
}

/** Largest integer whose n-th power is at most x; x >= 0, n >= 1. */
export function rootFloor(x: bigint, n: number): bigint {
  if (n === 1 || x < 2n) return x;
  if (n === 2) return squareRootFloor(x);
  const degree = BigInt(n);
  let guess = 1n << BigInt(Math.ceil(bitLength(x) / n));
  for (;;) {
    const next = ((degree - 1n) * guess + x / guess ** (degree - 1n)) / degree;
    if (next >= guess) return guess;
    guess = next;
  }
}
