/** Nodes and weights of Gauss's quadrature on [-1, 1], enclosed. */
import { type Ball, real } from '../rigorous/index.ts';

export interface GaussRule {
  readonly nodes: readonly Ball[];
  readonly weights: readonly Ball[];
}

const rules = new Map<string, GaussRule | null>();

/** The rule with n nodes (DLMF 3.5(v)): zeros of P_n by Newton's interval test, weights 2/((1 - x^2) P_n'(x)^2). Null where a zero could not be told from its neighbours. Cost n^2, kept. */
export function gaussLegendre(n: number, precision: number): GaussRule | null {
  const key = `${n}|${precision}`;
  const known = rules.get(key);
  if (known !== undefined) return known;
  const rule = found(n, precision + 2 * n + 24, precision + 8);
  rules.set(key, rule);
  return rule;
}

function found(n: number, work: number, kept: number): GaussRule | null {
  const nodes: Ball[] = [];
  const weights: Ball[] = [];
  for (let i = 0; i < n; i += 1) {
    // The largest first: x_i is near cos(pi (i + 3/4)/(n + 1/2)); only the test below proves where it is.
    let x = real.fromDouble(Math.cos((Math.PI * (i + 0.75)) / (n + 0.5)));
    for (let step = 0; step < 8; step += 1) {
      const { value, slope } = legendre(n, x, work);
      const change = slope && real.divide(value, slope, work);
      if (!change) return null;
      x = real.midpoint(real.subtract(x, change, work));
      if (real.exponentOf(change) < 8 - work / 2) break;
    }
    const spread = real.scaleByPowerOfTwo(real.ONE, -kept - 8);
    const around = real.withRadius(x, spread);
    const { value } = legendre(n, x, work);
    const { slope } = legendre(n, around, work);
    const step = slope && !real.containsZero(slope) ? real.divide(value, slope, work) : null;
    const image = step && real.subtract(x, step, work);
    if (!image || !slope || !real.containsBall(around, image)) return null;
    const { slope: atNode } = legendre(n, image, work);
    const divisor = atNode && real.multiply(real.subtract(real.ONE, real.multiply(image, image, work), work), real.multiply(atNode, atNode, work), work);
    const weight = divisor && real.divide(real.fromInteger(2), divisor, work);
    // Each zero once: they fall with i.
    const before = nodes[i - 1];
    if (!weight || (before && real.compare(before, image) !== 1)) return null;
    nodes.push(image);
    weights.push(weight);
  }
  return { nodes: nodes.map((x) => real.round(x, kept)), weights: weights.map((w) => real.round(w, kept)) };
}

/** P_n and its derivative n (P_(n-1) - x P_n)/(1 - x^2) (DLMF 18.9.1, 18.9.17). */
function legendre(n: number, x: Ball, work: number): { readonly value: Ball; readonly slope: Ball | null } {
  let [before, value] = [real.ONE, x];
  for (let k = 1; k < n; k += 1) {
    const next = real.subtract(real.multiply(real.fromInteger(2 * k + 1), real.multiply(x, value, work), work), real.multiply(real.fromInteger(k), before, work), work);
    [before, value] = [value, real.divide(next, real.fromInteger(k + 1), work) ?? real.ZERO];
  }
  const numerator = real.multiply(real.fromInteger(n), real.subtract(before, real.multiply(x, value, work), work), work);
  return { value, slope: real.divide(numerator, real.subtract(real.ONE, real.multiply(x, x, work), work), work) };
}
