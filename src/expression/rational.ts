/** Exact rational numbers on BigInt, always reduced, denominator positive. */
export interface Rational {
  readonly num: bigint;
  /** Always at least 1, and coprime to `num`. */
  readonly den: bigint;
}

export const ZERO: Rational = { num: 0n, den: 1n };
export const ONE: Rational = { num: 1n, den: 1n };
export const MINUS_ONE: Rational = { num: -1n, den: 1n };
export const HALF: Rational = { num: 1n, den: 2n };

const WORD = 0x1fffffffffffffn;

/** Greatest common divisor, never negative. Numbers that fit a double are reduced in double arithmetic, which is exact below 2^53. */
export function gcd(a: bigint, b: bigint): bigint {
  let x = a < 0n ? -a : a;
  let y = b < 0n ? -b : b;
  while (y > WORD) {
    [x, y] = [y, x % y];
  }
  if (y === 0n) return x;
  let small = Number(y);
  let rest = Number(x % y);
  while (rest !== 0) {
    [small, rest] = [rest, small % rest];
  }
  return BigInt(small);
}

/** num/den in lowest terms. Throws a RangeError for den = 0: callers decide about division by zero first. */
export function rational(num: bigint | number, den: bigint | number = 1n): Rational {
  let n = BigInt(num);
  let d = BigInt(den);
  if (d === 0n) throw new RangeError('a rational with denominator zero');
  if (d < 0n) {
    n = -n;
    d = -d;
  }
  if (d === 1n) return { num: n, den: d };
  const common = gcd(n, d);
  return common === 1n ? { num: n, den: d } : { num: n / common, den: d / common };
}

export const add = (a: Rational, b: Rational): Rational =>
  a.den === b.den ? rational(a.num + b.num, a.den) : rational(a.num * b.den + b.num * a.den, a.den * b.den);
export const subtract = (a: Rational, b: Rational): Rational => add(a, negate(b));
export const multiply = (a: Rational, b: Rational): Rational => rational(a.num * b.num, a.den * b.den);
export const divide = (a: Rational, b: Rational): Rational => rational(a.num * b.den, a.den * b.num);
export const negate = (a: Rational): Rational => ({ num: -a.num, den: a.den });
export const absolute = (a: Rational): Rational => (a.num < 0n ? negate(a) : a);
export const reciprocal = (a: Rational): Rational => rational(a.den, a.num);

export const isZero = (a: Rational): boolean => a.num === 0n;
export const isOne = (a: Rational): boolean => a.num === 1n && a.den === 1n;
export const isInteger = (a: Rational): boolean => a.den === 1n;
export const equal = (a: Rational, b: Rational): boolean => a.num === b.num && a.den === b.den;
export const signOf = (a: Rational): -1 | 0 | 1 => (a.num > 0n ? 1 : a.num < 0n ? -1 : 0);

/** Sign of a - b. */
export function compare(a: Rational, b: Rational): -1 | 0 | 1 {
  const left = a.num * b.den;
  const right = b.num * a.den;
  return left < right ? -1 : left > right ? 1 : 0;
}

/** a^n for an integer n; a must not be zero when n is negative. */
export function power(a: Rational, n: number | bigint): Rational {
  const exponent = BigInt(n);
  return exponent >= 0n ? { num: a.num ** exponent, den: a.den ** exponent } : rational(a.den ** -exponent, a.num ** -exponent);
}

/** Largest integer not above a. */
export function floor(a: Rational): bigint {
  const quotient = a.num / a.den;
  return a.num < 0n && quotient * a.den !== a.num ? quotient - 1n : quotient;
}

/** The exact value of a decimal such as `6.02e23`, `.5`, `21.`; null if the text is not one, or its exponent is beyond ±100000. */
export function fromDecimal(text: string): Rational | null {
  const match = /^([+-]?)(\d*)(?:\.(\d*))?(?:[eE]([+-]?\d+))?$/.exec(text);
  if (!match) return null;
  const [, sign, whole = '', fraction = '', exponentText] = match;
  if (whole === '' && fraction === '') return null;
  const exponent = exponentText === undefined ? 0 : Number(exponentText);
  if (!(Math.abs(exponent) <= 100000)) return null;
  const digits = BigInt(whole + fraction);
  const shift = exponent - fraction.length;
  const value = shift >= 0 ? rational(digits * 10n ** BigInt(shift)) : rational(digits, 10n ** BigInt(-shift));
  return sign === '-' ? negate(value) : value;
}

/** The exact value of a finite double. */
export function fromDouble(value: number): Rational {
  if (!Number.isFinite(value)) throw new RangeError('not a finite number');
  let exponent = 0;
  let scaled = value;
  while (!Number.isInteger(scaled)) {
    scaled *= 2;
    exponent += 1;
  }
  return rational(BigInt(scaled), 1n << BigInt(exponent));
}

/** A double near a, for drawing and ordering only: never part of a proof. Correct to a few ulp over the whole double range. */
export function toDouble(a: Rational): number {
  if (a.num === 0n) return 0;
  const bits = (v: bigint): number => (v < 0n ? -v : v).toString(2).length;
  const shift = 64 - (bits(a.num) - bits(a.den));
  const quotient = shift >= 0 ? (a.num << BigInt(shift)) / a.den : a.num / (a.den << BigInt(-shift));
  const direct = Number(quotient);
  return shift > 1000 ? (direct * 2 ** -1000) * 2 ** (1000 - shift) : direct * 2 ** -shift;
}

/** `3`, `-1/2`. */
export const toText = (a: Rational): string => (a.den === 1n ? `${a.num}` : `${a.num}/${a.den}`);
