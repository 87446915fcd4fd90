/** Rigorous enclosures of Barnes G and its logarithm through the derivative of the Hurwitz zeta function. */
import { real } from '../../rigorous/index.ts';
import { exactInteger, type Kit } from '../enclosure/kit.ts';
import type { Algorithm } from '../enclosure/wrap.ts';
import { factorial } from '../sequences.ts';
import { zetaDerivative } from '../zeta/enclosure.ts';
import { logGamma, reciprocalGamma } from './enclosure.ts';

/** log G(x) = (x-1) log Gamma(x) - zeta'(-1,x) + zeta'(-1) (Vardi 1988; follows from DLMF 5.17.4 and 25.11). */
function logBarnesG<T>(kit: Kit<T>, x: T): T | null {
  const { a } = kit;
  if (kit.isReal && !real.isPositive(kit.realPart(x))) return null;
  const n = kit.isReal ? exactInteger(kit.realPart(x), 400) : null;
  if (n !== null) return a.log(a.fromInteger(superfactorial(n)));
  const logarithm = logGamma(kit, x);
  const own = zetaDerivative(kit, 1, a.fromInteger(-1), x);
  const one = zetaDerivative(kit, 1, a.fromInteger(-1), a.one);
  if (logarithm === null || own === null || one === null) return null;
  return a.add(a.subtract(a.multiply(a.subtract(x, a.one), logarithm), own), one);
}
/** G(n), the product of the factorials below n - 1. */
function superfactorial(n: number): bigint {
  let product = 1n;
  for (let j = 2; j < n - 1; j++) product *= factorial(j);
  return product;
}
/** Entire: downward by G(x) = G(x+1)/Gamma(x). */
function barnesG<T>(kit: Kit<T>, x: T): T | null {
  const { a } = kit;
  if (real.isPositive(kit.realPart(x))) {
    const value = logBarnesG(kit, x);
    return value === null ? null : a.exp(value);
  }
  if (real.toDouble(kit.realPart(x)) < -60) return null;
  const above = barnesG(kit, a.add(x, a.one));
  const inverse = reciprocalGamma(kit, x);
  return above === null || inverse === null ? null : a.multiply(above, inverse);
}

export const barnesAlgorithms: Readonly<Record<string, Algorithm>> = {
  logBarnesG: { real: (kit, [x]) => (x ? logBarnesG(kit, x) : null), complex: (kit, [x]) => (x ? logBarnesG(kit, x) : null) },
  barnesG: { real: (kit, [x]) => (x ? barnesG(kit, x) : null), complex: (kit, [x]) => (x ? barnesG(kit, x) : null) },
};
