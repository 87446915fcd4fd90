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

/** Below this many bits plain remainders beat Lehmer's steps (measured on a 2-core machine). */
const LEHMER_FROM = 1n << 160n;
const TWO_LEVELS_FROM = 4096;
const HALF_WORD = 0x4000000;

const bitLength = (v: bigint): number => {
  const hex = v.toString(16);
  return 4 * (hex.length - 1) + (32 - Math.clz32(parseInt(hex[0] ?? '0', 16)));
};

/** a, b, c, d with ad - bc = 1 or -1: (x, y) becomes (ax + by, cx + dy). */
type Step<T> = readonly [T, T, T, T];

/** Euclid's quotients of two leading parts below 2^53, as long as the cofactors stay below 2^26. Null where not even one quotient is safe. */
function leadingStep(x: number, y: number): Step<number> | null {
  let [a, b, c, d] = [1, 0, 0, 1];
  let u = x;
  let v = y;
  while (v >= HALF_WORD) {
    const q = Math.floor(u / v);
    const nextC = a - q * c;
    const nextD = b - q * d;
    if (Math.abs(nextC) > HALF_WORD || Math.abs(nextD) > HALF_WORD) break;
    [a, c] = [c, nextC];
    [b, d] = [d, nextD];
    [u, v] = [v, u - q * v];
  }
  return b === 0 ? null : [a, b, c, d];
}

/** (x, y) after one of Lehmer's steps, larger first: leading parts give the quotients. Any such matrix keeps the gcd, so that a quotient spoilt by truncation costs time only. */
function lehmerStep(x: bigint, y: bigint, bits: number): readonly [bigint, bigint, Step<number> | null] {
  const shift = BigInt(Math.max(0, bits - 53));
  const step = leadingStep(Number(x >> shift), Number(y >> shift));
  if (!step) return [y, x % y, null];
  const [a, b, c, d] = [BigInt(step[0]), BigInt(step[1]), BigInt(step[2]), BigInt(step[3])];
  return [a * x + b * y, c * x + d * y, step];
}

const absoluteValue = (v: bigint): bigint => (v < 0n ? -v : v);

/** The product of Lehmer's steps on the leading `size` bits, down to about half of them. */
function blockStep(x: bigint, y: bigint, bits: number, size: number): Step<bigint> | null {
  const shift = BigInt(bits - size);
  let u = x >> shift;
  let v = y >> shift;
  let [a, b, c, d] = [1n, 0n, 0n, 1n];
  let length = size;
  while (length > size / 2 + 32 && v > 0n) {
    const [p, q, step] = lehmerStep(u, v, length);
    if (step) {
      const [e, f, g, h] = [BigInt(step[0]), BigInt(step[1]), BigInt(step[2]), BigInt(step[3])];
      [a, b, c, d] = [e * a + f * c, e * b + f * d, g * a + h * c, g * b + h * d];
    } else {
      const quotient = u / v;
      [a, b, c, d] = [c, d, a - quotient * c, b - quotient * d];
    }
    u = p;
    v = q;
    if (u < 0n) [u, a, b] = [-u, -a, -b];
    if (v < 0n) [v, c, d] = [-v, -c, -d];
    if (u < v) [u, v, a, b, c, d] = [v, u, c, d, a, b];
    length = bitLength(u);
  }
  return b === 0n ? null : [a, b, c, d];
}

/** Lehmer's algorithm (Knuth, TAOCP 2, 4.5.2), in two levels for very long numbers. */
function longGcd(a: bigint, b: bigint): bigint {
  let [x, y] = a >= b ? [a, b] : [b, a];
  while (y >= LEHMER_FROM) {
    const bits = bitLength(x);
    const block = bits > TWO_LEVELS_FROM ? blockStep(x, y, bits, 1024) : null;
    let p: bigint;
    let q: bigint;
    if (block) {
      p = block[0] * x + block[1] * y;
      q = block[2] * x + block[3] * y;
    } else [p, q] = lehmerStep(x, y, bits);
    p = absoluteValue(p);
    q = absoluteValue(q);
    [x, y] = p >= q ? [p, q] : [q, p];
  }
  return shortGcd(x, y);
}

function shortGcd(a: bigint, b: bigint): bigint {
  let x = a;
  let y = b;
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

/** Greatest common divisor, never negative. Numbers that fit a double are reduced in double arithmetic, which is exact below 2^53; long ones by Lehmer's steps. */
export function gcd(a: bigint, b: bigint): bigint {
  const x = absoluteValue(a);
  const y = absoluteValue(b);
  return x >= LEHMER_FROM && y >= LEHMER_FROM ? longGcd(x, y) : shortGcd(x, y);
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
