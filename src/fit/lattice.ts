/** Closest lattice points, for rounding all coefficients of a polynomial together instead of one by one (Brisebarre & Chevillard, ARITH 18, 2007). */

import { Q } from '../expression/index.ts';

export type Vector = readonly bigint[];

const dot = (a: Vector, b: Vector): bigint => a.reduce((sum, x, i) => sum + x * (b[i] ?? 0n), 0n);
const minus = (a: Vector, b: Vector, factor: bigint): bigint[] => a.map((x, i) => x - factor * (b[i] ?? 0n));
const roundDivide = (a: bigint, b: bigint): bigint => {
  const doubled = 2n * a + b;
  const quotient = doubled / (2n * b);
  return doubled < 0n && quotient * 2n * b !== doubled ? quotient - 1n : quotient;
};

/**
 * An LLL-reduced basis (delta = 3/4) of the lattice spanned by integer vectors, by the all-integer algorithm
 * (Cohen, A Course in Computational Algebraic Number Theory, algorithm 2.6.7; cited from memory).
 * The vectors must be linearly independent. Cost is polynomial: n^4 log B for n vectors with entries below B.
 */
export function reduceBasis(input: readonly Vector[]): bigint[][] {
  const b = input.map((v) => [...v]);
  const n = b.length;
  // d[i]: Gram determinants, d[0] = 1; lambda[i][j] = d[j+1] mu[i][j].
  const d: bigint[] = [1n];
  const lambda: bigint[][] = b.map(() => new Array<bigint>(n).fill(0n));
  const row = (i: number): bigint[] => b[i] as bigint[];
  const lam = (i: number, j: number): bigint => (lambda[i] as bigint[])[j] as bigint;
  const det = (i: number): bigint => d[i] as bigint;
  let known = -1;
  const orthogonalise = (k: number): void => {
    for (let j = 0; j <= k; j += 1) {
      let u = dot(row(k), row(j));
      for (let i = 0; i < j; i += 1) u = (det(i + 1) * u - lam(k, i) * lam(j, i)) / det(i);
      if (j < k) (lambda[k] as bigint[])[j] = u;
      else d[k + 1] = u;
    }
    if (det(k + 1) === 0n) throw new RangeError('the vectors of a lattice basis must be independent');
  };
  const reduce = (k: number, l: number): void => {
    if (2n * (lam(k, l) < 0n ? -lam(k, l) : lam(k, l)) <= det(l + 1)) return;
    const q = roundDivide(lam(k, l), det(l + 1));
    b[k] = minus(row(k), row(l), q);
    (lambda[k] as bigint[])[l] = lam(k, l) - q * det(l + 1);
    for (let i = 0; i < l; i += 1) (lambda[k] as bigint[])[i] = lam(k, i) - q * lam(l, i);
  };
  const swap = (k: number): void => {
    [b[k], b[k - 1]] = [row(k - 1), row(k)];
    for (let j = 0; j < k - 1; j += 1) [(lambda[k] as bigint[])[j], (lambda[k - 1] as bigint[])[j]] = [lam(k - 1, j), lam(k, j)];
    const l = lam(k, k - 1);
    const next = (det(k - 1) * det(k + 1) + l * l) / det(k);
    for (let i = k + 1; i <= known; i += 1) {
      const t = lam(i, k);
      (lambda[i] as bigint[])[k] = (det(k + 1) * lam(i, k - 1) - l * t) / det(k);
      (lambda[i] as bigint[])[k - 1] = (next * t + l * lam(i, k)) / det(k + 1);
    }
    d[k] = next;
  };
  orthogonalise(0);
  known = 0;
  for (let k = 1; k < n; ) {
    if (k > known) {
      known = k;
      orthogonalise(k);
    }
    reduce(k, k - 1);
    const l = lam(k, k - 1);
    if (4n * (det(k + 1) * det(k - 1) + l * l) < 3n * det(k) * det(k)) {
      swap(k);
      k = Math.max(1, k - 1);
    } else {
      for (let j = k - 2; j >= 0; j -= 1) reduce(k, j);
      k += 1;
    }
  }
  return b;
}

/** A lattice vector near `target` by nearest planes on a reduced basis (Babai 1986). Coordinates are integers; the Gram-Schmidt data are exact rationals scaled by `d`. */
export function nearestPlane(basis: readonly Vector[], target: Vector): bigint[] {
  const n = basis.length;
  // Gram-Schmidt over the rationals as integer vectors with one denominator each.
  const star: { readonly vector: bigint[]; readonly scale: bigint; readonly norm: bigint }[] = [];
  for (let i = 0; i < n; i += 1) {
    let vector = [...(basis[i] as Vector)];
    let scale = 1n;
    for (const s of star) {
      // vector/scale - ((basis_i . s.vector) / s.norm) * s.vector, both with integer entries.
      const projection = dot(basis[i] as Vector, s.vector);
      vector = vector.map((x, j) => x * s.norm - projection * scale * (s.vector[j] as bigint));
      scale *= s.norm;
      const common = vector.reduce((g, x) => Q.gcd(g, x), scale);
      if (common > 1n) {
        vector = vector.map((x) => x / common);
        scale /= common;
      }
    }
    star.push({ vector, scale, norm: dot(vector, vector) });
  }
  let rest = [...target];
  const result = new Array<bigint>(target.length).fill(0n);
  for (let i = n - 1; i >= 0; i -= 1) {
    const s = star[i] as (typeof star)[number];
    // Coordinate of rest along b_i*: (rest . v) scale / norm, with b_i* = v / scale.
    const q = roundDivide(dot(rest, s.vector) * s.scale, s.norm);
    const b = basis[i] as Vector;
    rest = minus(rest, b, q);
    for (let j = 0; j < result.length; j += 1) result[j] = (result[j] as bigint) + q * (b[j] as bigint);
  }
  return result;
}

