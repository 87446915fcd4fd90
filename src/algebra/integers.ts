/** Factoring of integers far enough for radicals and logarithms. */
import { Q } from '../expression/index.ts';

/** base^exponent, bases pairwise coprime, none a perfect power; primes unless too large to factor quickly. */
export interface IntegerFactor {
  readonly base: bigint;
  readonly exponent: number;
}

const TRIAL_LIMIT = 1000n;

function powerModulo(base: bigint, exponent: bigint, modulus: bigint): bigint {
  let r = 1n;
  let b = base % modulus;
  for (let e = exponent; e > 0n; e >>= 1n) {
    if (e & 1n) r = (r * b) % modulus;
    b = (b * b) % modulus;
  }
  return r;
}

/** Miller-Rabin with the bases that decide every n below 3.3e24 (Sorenson and Webster 2015); above that a "prime" only stays unsplit, which is never wrong here. */
function isLikelyPrime(n: bigint): boolean {
  const bases = [2n, 3n, 5n, 7n, 11n, 13n, 17n, 19n, 23n, 29n, 31n, 37n, 41n];
  if (n < 2n) return false;
  for (const p of bases) if (n % p === 0n) return n === p;
  let d = n - 1n;
  let s = 0;
  while ((d & 1n) === 0n) {
    d >>= 1n;
    s += 1;
  }
  return bases.every((a) => {
    let x = powerModulo(a, d, n);
    if (x === 1n || x === n - 1n) return true;
    for (let i = 1; i < s; i += 1) {
      x = (x * x) % n;
      if (x === n - 1n) return true;
    }
    return false;
  });
}

/** Largest r with r^k <= n, for n >= 0. */
export function integerRoot(n: bigint, k: number): bigint {
  if (n < 2n) return n;
  const K = BigInt(k);
  let x = 1n << BigInt(Math.ceil(n.toString(2).length / k));
  for (;;) {
    const y = ((K - 1n) * x + n / x ** (K - 1n)) / K;
    if (y >= x) return x;
    x = y;
  }
}

function perfectPower(n: bigint): { readonly root: bigint; readonly exponent: number } {
  const bits = n.toString(2).length;
  for (let k = bits; k >= 2; k -= 1) {
    const r = integerRoot(n, k);
    if (r > 1n && r ** BigInt(k) === n) return { root: r, exponent: k };
  }
  return { root: n, exponent: 1 };
}

/** A proper divisor by Pollard's rho (Brent's form), or null after a bounded search. */
function properDivisor(n: bigint): bigint | null {
  for (let c = 1n; c <= 2n; c += 1n) {
    let x = 2n;
    let y = 2n;
    let product = 1n;
    for (let i = 1; i <= 30000; i += 1) {
      x = (x * x + c) % n;
      y = (y * y + c) % n;
      y = (y * y + c) % n;
      product = (product * (x > y ? x - y : y - x)) % n;
      if (i % 64 === 0 || product === 0n) {
        const g = Q.gcd(product, n);
        if (g === n) break;
        if (g > 1n) return g;
      }
    }
  }
  return null;
}

const cache = new Map<bigint, readonly IntegerFactor[]>();

/** Factors of n >= 1. Numbers of more than 200 bits are only searched for small factors and perfect powers. */
export function factorInteger(n: bigint): readonly IntegerFactor[] {
  const known = cache.get(n);
  if (known) return known;
  const found = new Map<bigint, number>();
  const put = (p: bigint, e: number): void => void found.set(p, (found.get(p) ?? 0) + e);
  let rest = n;
  for (let p = 2n; p < TRIAL_LIMIT && p * p <= rest; p += p === 2n ? 1n : 2n) {
    while (rest % p === 0n) {
      put(p, 1);
      rest /= p;
    }
  }
  const open: { n: bigint; e: number }[] = rest > 1n ? [{ n: rest, e: 1 }] : [];
  for (let part = open.pop(); part; part = open.pop()) {
    const bits = part.n.toString(2).length;
    if (part.n < TRIAL_LIMIT * TRIAL_LIMIT) {
      put(part.n, part.e);
      continue;
    }
    const power = bits < 4000 ? perfectPower(part.n) : { root: part.n, exponent: 1 };
    if (power.exponent > 1) {
      open.push({ n: power.root, e: part.e * power.exponent });
      continue;
    }
    const divisor = bits > 200 || isLikelyPrime(part.n) ? null : properDivisor(part.n);
    if (divisor === null) put(part.n, part.e);
    else open.push({ n: divisor, e: part.e }, { n: part.n / divisor, e: part.e });
  }
  const result = [...found].map(([base, exponent]) => ({ base, exponent })).sort((a, b) => (a.base < b.base ? -1 : 1));
  if (cache.size > 5000) cache.clear();
  cache.set(n, result);
  return result;
}
