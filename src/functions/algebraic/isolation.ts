/**
 * All zeros of a polynomial with integer coefficients in disjoint discs, and each zero to any precision.
 * The disc |z - z_i| <= n |p(z_i)/p'(z_i)| holds a zero (Henrici, Applied and Computational Complex Analysis 1, 6.4, from memory); n disjoint ones hold one each.
 */
import { type Ball, type ComplexBall, complex, real } from '../../rigorous/index.ts';

export interface RootDisc {
  readonly centre: ComplexBall;
  /** Exact. */
  readonly radius: Ball;
  /** The zero in it is real. */
  readonly real: boolean;
}

type Point = ComplexBall;

const FIRST_BITS = 96;
const MOST_BITS = 3200;
const MOST_ROUNDS = 400;
const PRIME = 2n ** 61n - 1n;
const BOUND_BITS = 48;
const MOST_KEPT = 200;

const known = new Map<string, readonly RootDisc[] | null>();

/**
 * Discs around the zeros of c_n x^n + ... + c_0 (highest first, c_n not 0): real zeros in increasing order, then the others by real part, of equal real parts by imaginary part.
 * Null where zeros coincide or could not be told apart. Cost: about n^2 operations for each digit gained three times over.
 */
export function isolateRoots(coefficients: readonly bigint[], check: () => void = () => undefined): readonly RootDisc[] | null {
  const key = coefficients.join(' ');
  const before = known.get(key);
  if (before !== undefined) return before;
  let found: readonly RootDisc[] | null = null;
  let points = onCircle(coefficients);
  for (let bits = FIRST_BITS; isSquareFree(coefficients) && bits <= MOST_BITS && !found; bits *= 2) {
    points = approach(coefficients, points, bits, check);
    found = certified(coefficients, points, bits);
  }
  if (known.size >= MOST_KEPT) known.clear();
  known.set(key, found ? inOrder(found) : null);
  return known.get(key) ?? null;
}

/** The zero in the disc to about `precision` bits; null where Newton's iteration left it. */
export function refineRoot(coefficients: readonly bigint[], disc: RootDisc, precision: number): ComplexBall | null {
  let z = disc.centre;
  const wanted = precision + 16;
  for (let bits = 64, round = 0; round < 40; round += 1) {
    const a = complex.arithmetic(bits + 32);
    const { value, slope } = valueAndSlope(coefficients, z, bits + 32);
    const step = a.divide(value, slope);
    if (!step) return null;
    z = complex.midpoint(complex.round(a.subtract(z, complex.midpoint(step)), bits + 32));
    if (disc.real) z = { re: z.re, im: real.ZERO };
    const small = real.exponentOf(complex.absolute(step, BOUND_BITS)) < real.exponentOf(complex.absolute(z, BOUND_BITS)) - bits / 2 + 4;
    if (bits >= wanted && small) break;
    if (small) bits = Math.min(wanted, 2 * bits);
  }
  const radius = radiusAt(coefficients, z, precision + 48);
  if (!radius) return null;
  const reach = real.absoluteUpper(real.add(real.absoluteUpper(complex.absolute(complex.subtract(z, disc.centre, BOUND_BITS), BOUND_BITS)), radius, BOUND_BITS));
  const inside = real.compare(reach, disc.radius) === -1 || real.exponentOf(disc.radius) < -4 * wanted;
  const ball = complex.withRadius(z, radius);
  if (!inside) return real.compare(radius, disc.radius) === -1 ? null : around(disc);
  return disc.real ? complex.fromReal(ball.re) : ball;
}

const around = (disc: RootDisc): ComplexBall => (disc.real ? complex.fromReal(real.withRadius(disc.centre.re, disc.radius)) : complex.withRadius(disc.centre, disc.radius));

function valueAndSlope(coefficients: readonly bigint[], z: Point, bits: number): { readonly value: ComplexBall; readonly slope: ComplexBall } {
  const a = complex.arithmetic(bits);
  let value: ComplexBall = a.zero;
  let slope: ComplexBall = a.zero;
  for (const c of coefficients) {
    slope = a.add(a.multiply(slope, z), value);
    value = a.add(a.multiply(value, z), a.fromInteger(c));
  }
  return { value, slope };
}

/** n |p/p'|, rounded up. */
function radiusAt(coefficients: readonly bigint[], z: Point, bits: number): Ball | null {
  const { value, slope } = valueAndSlope(coefficients, z, bits);
  const below = real.absoluteLower(complex.absolute(slope, BOUND_BITS));
  const quotient = real.isPositive(below) ? real.divide(real.absoluteUpper(complex.absolute(value, BOUND_BITS)), below, BOUND_BITS) : null;
  return quotient && real.absoluteUpper(real.multiply(real.fromInteger(coefficients.length - 1), quotient, BOUND_BITS));
}

/** Starting points on a circle that holds all zeros (Fujiwara's bound), turned out of symmetry with the real axis. */
function onCircle(coefficients: readonly bigint[]): Point[] {
  const n = coefficients.length - 1;
  const size = (c: bigint): number => (c < 0n ? -c : c).toString(2).length;
  const top = size(coefficients[0] as bigint);
  let exponent = -Infinity;
  for (let k = 1; k <= n; k += 1) if (coefficients[k] !== 0n) exponent = Math.max(exponent, (size(coefficients[k] as bigint) + 1 - top) / k);
  const whole = Math.floor(exponent);
  const radius = 2 ** (exponent - whole);
  return Array.from({ length: n }, (_, k) => {
    const angle = (2 * Math.PI * k) / n + 0.4;
    const at = (x: number): Ball => real.scaleByPowerOfTwo(real.fromDouble(radius * x), whole);
    return { re: at(Math.cos(angle)), im: at(Math.sin(angle)) };
  });
}

/** Aberth's iteration (Math. Comp. 27, 1973): all zeros at once; only guesses, which `certified` proves. */
function approach(coefficients: readonly bigint[], start: readonly Point[], bits: number, check: () => void): Point[] {
  const a = complex.arithmetic(bits);
  const points = [...start];
  const settled = points.map(() => false);
  for (let round = 0; round < MOST_ROUNDS && settled.includes(false); round += 1) {
    check();
    points.forEach((z, i) => {
      if (settled[i]) return;
      const { value, slope } = valueAndSlope(coefficients, z, bits);
      // Rounding hides what is left: these digits give no more.
      if (complex.containsZero(value)) {
        settled[i] = true;
        return;
      }
      const newton = a.divide(complex.midpoint(value), complex.midpoint(slope));
      if (!newton) {
        points[i] = complex.midpoint(a.add(z, a.fromRational({ num: BigInt(i + 1), den: 64n })));
        return;
      }
      let pull: ComplexBall = a.zero;
      points.forEach((w, j) => {
        const part = j === i ? null : a.divide(a.one, complex.midpoint(a.subtract(z, w)));
        if (part) pull = complex.midpoint(a.add(pull, part));
      });
      const step = a.divide(complex.midpoint(newton), complex.midpoint(a.subtract(a.one, a.multiply(newton, pull))));
      if (!step) return;
      points[i] = complex.midpoint(complex.round(a.subtract(z, step), bits));
      settled[i] = real.exponentOf(complex.absolute(step, BOUND_BITS)) < real.exponentOf(complex.absolute(z, BOUND_BITS)) - bits + 12;
    });
  }
  return points;
}

/** Whether p and p' have no common factor modulo a prime: then they have none at all. (The converse may fail for a discriminant divisible by it.) */
function isSquareFree(coefficients: readonly bigint[]): boolean {
  const reduced = (p: readonly bigint[]): bigint[] => {
    const residues = p.map((c) => ((c % PRIME) + PRIME) % PRIME);
    const first = residues.findIndex((c) => c !== 0n);
    return first < 0 ? [] : residues.slice(first);
  };
  const n = coefficients.length - 1;
  let [a, b] = [reduced(coefficients), reduced(coefficients.slice(0, n).map((c, i) => c * BigInt(n - i)))];
  while (b.length > 1) {
    let rest = a;
    while (rest.length >= b.length) {
      const [top = 0n, lead = 1n] = [rest[0], b[0]];
      rest = reduced(rest.map((c, i) => c * lead - top * (b[i] ?? 0n)));
    }
    [a, b] = [b, rest];
  }
  return b.length === 1;
}

function certified(coefficients: readonly bigint[], points: readonly Point[], bits: number): RootDisc[] | null {
  const discs: RootDisc[] = [];
  for (const z of points) {
    const radius = radiusAt(coefficients, z, bits + 32);
    if (!radius) return null;
    const touches = real.compare(real.absolute(z.im), radius) !== 1;
    const centre = touches ? complex.fromReal(z.re) : z;
    const own = touches ? radiusAt(coefficients, centre, bits + 32) : radius;
    if (!own) return null;
    // A wider disc than proven, so that later approximations are seen to lie in it.
    discs.push({ centre, radius: own, real: touches });
  }
  const gap = (i: number, j: number): Ball => real.absoluteLower(complex.absolute(complex.subtract((discs[i] as RootDisc).centre, (discs[j] as RootDisc).centre, bits), BOUND_BITS));
  const widened: RootDisc[] = [];
  for (let i = 0; i < discs.length; i += 1) {
    const disc = discs[i] as RootDisc;
    let room = disc.real ? null : real.absoluteLower(disc.centre.im);
    for (let j = 0; j < discs.length; j += 1) {
      if (j === i) continue;
      const distance = gap(i, j);
      const both = real.add(disc.radius, (discs[j] as RootDisc).radius, BOUND_BITS);
      if (real.compare(both, distance) !== -1) return null;
      room = room === null || real.compare(distance, room) === -1 ? distance : room;
    }
    // A quarter of the way to the next one (and to the axis): still disjoint.
    const wide = room === null ? disc.radius : real.absoluteLower(real.scaleByPowerOfTwo(real.round(room, BOUND_BITS), -2));
    if (room !== null && real.compare(disc.radius, wide) !== -1) return null;
    widened.push({ ...disc, radius: room === null ? real.absoluteUpper(real.add(disc.radius, real.ONE, BOUND_BITS)) : wide });
  }
  return widened;
}

function inOrder(discs: readonly RootDisc[]): RootDisc[] {
  const compare = (x: Ball, y: Ball): number => {
    // Equal to far more digits than the discs are wide: equal real parts of a conjugate pair, or of pairs that share one.
    const difference = real.subtract(x, y, FIRST_BITS);
    if (real.exponentOf(difference) < Math.max(real.exponentOf(x), real.exponentOf(y)) - FIRST_BITS / 2) return 0;
    return real.isNegative(difference) ? -1 : 1;
  };
  return [...discs].sort((p, q) => {
    if (p.real !== q.real) return p.real ? -1 : 1;
    return compare(p.centre.re, q.centre.re) || compare(p.centre.im, q.centre.im);
  });
}
