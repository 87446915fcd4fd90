/**
 * Models of asymptotic series at infinity whose remainder after any number of terms (from the one named on) lies between zero and the first term left out:
 * log Gamma and psi for z > 0 (DLMF 5.11(ii)), erfc for x > 0 (7.12(i)), E_p for p, x > 0 (8.20(i), 6.12(i)), K_nu for x > 0 from l >= |nu| - 1/2 on (10.40(ii)), Ai for x > 0 (9.7(iii)).
 */
import { type Expression, Q, type Rational } from '../expression/index.ts';
import { type Model, type ModelArithmetic, rationalOf, real } from '../rigorous/index.ts';
import type { Numbers } from './numbers.ts';
import { ENVELOPES, type EnvelopeName } from './rewrite.ts';

interface Envelope {
  /** Exact coefficient of z^-k. */
  readonly coefficient: (k: number) => Rational;
  /** The first k from which the remainder is enclosed by the next term. */
  readonly from: number;
  /** z in terms of the argument: power of it, and a factor. */
  readonly power: Rational;
  readonly factor: Rational;
}

const isEnvelope = (id: string): id is EnvelopeName => (ENVELOPES as readonly string[]).includes(id);

function envelopeOf(id: EnvelopeName, args: readonly Expression[]): Envelope | null {
  const plain = { power: Q.ONE, factor: Q.ONE };
  switch (id) {
    case 'enveloping log gamma':
      // sum B_2k/(2k(2k-1) z^(2k-1)).
      return { ...plain, from: 1, coefficient: (k) => (k % 2 === 0 ? Q.ZERO : Q.divide(real.bernoulliNumber(k + 1), Q.rational(BigInt(k + 1) * BigInt(k)))) };
    case 'enveloping digamma':
      return { ...plain, from: 1, coefficient: (k) => (k % 2 === 1 || k === 0 ? Q.ZERO : Q.negate(Q.divide(real.bernoulliNumber(k), Q.rational(k)))) };
    case 'enveloping erfc': {
      const list: Rational[] = [Q.ONE];
      return { from: 1, power: Q.rational(2), factor: Q.ONE, coefficient: (k) => grow(list, k, (c, j) => Q.negate(Q.multiply(c, Q.rational(2 * j - 1, 2)))) };
    }
    case 'enveloping exponential integral': {
      const p = args[0] && rationalOf(args[0]);
      if (!p || p.num <= 0n) return null;
      const list: Rational[] = [Q.ONE];
      return { ...plain, from: 1, coefficient: (k) => grow(list, k, (c, j) => Q.negate(Q.multiply(c, Q.add(p, Q.rational(j - 1))))) };
    }
    case 'enveloping Bessel K': {
      const order = args[0] && rationalOf(args[0]);
      if (!order) return null;
      const four = Q.multiply(Q.rational(4), Q.multiply(order, order));
      const list: Rational[] = [Q.ONE];
      const size = Q.toDouble(Q.absolute(order));
      // a_k = a_(k-1) (4 nu^2 - (2k-1)^2)/(8k).
      return { ...plain, from: Math.max(1, Math.ceil(size - 0.5 + 1e-9)), coefficient: (k) => grow(list, k, (c, j) => Q.divide(Q.multiply(c, Q.subtract(four, Q.rational((2 * j - 1) * (2 * j - 1)))), Q.rational(8 * j))) };
    }
    case 'enveloping Airy': {
      // u_k = u_(k-1) (6k-5)(6k-3)(6k-1)/(216 k (2k-1)), DLMF 9.7.2; signs alternate in zeta = 2/3 x^(3/2).
      const list: Rational[] = [Q.ONE];
      return {
        from: 1,
        power: Q.rational(3, 2),
        factor: Q.rational(2, 3),
        coefficient: (k) => grow(list, k, (c, j) => Q.negate(Q.divide(Q.multiply(c, Q.rational((6 * j - 5) * (6 * j - 3) * (6 * j - 1))), Q.rational(216 * j * (2 * j - 1))))),
      };
    }
  }
}

function grow(list: Rational[], k: number, next: (c: Rational, j: number) => Rational): Rational {
  while (list.length <= k) list.push(next(list[list.length - 1] ?? Q.ONE, list.length));
  return list[k] ?? Q.ZERO;
}

/** The series cut where its terms are smallest at the near end of the domain, with its remainder as a tail. */
export function envelopeModel<T>(id: string, args: readonly Expression[], models: readonly Model<T>[], n: Numbers<T>, m: ModelArithmetic<T>): Model<T> | null {
  if (!isEnvelope(id)) return null;
  const { r } = n;
  const envelope = envelopeOf(id, args);
  const u = models[models.length - 1];
  if (envelope === null || u === undefined || u.valuation >= 0 || !r.isPositive(u.range)) return null;
  const raised = m.powerRational(u, envelope.power);
  const z = raised && m.scale(raised, r.fromRational(envelope.factor));
  const inverse = z && m.powerInteger(z, -1);
  if (!inverse) return null;
  // Least z on the domain decides how many terms help.
  const least = r.toDouble(r.lowerEnd(r.divide(r.one, m.rangeOf(inverse) ?? r.one) ?? r.one));
  let cut = envelope.from;
  let smallest = Infinity;
  for (let k = envelope.from; k <= m.length; k += 1) {
    const c = envelope.coefficient(k);
    if (c.num === 0n) continue;
    const size = Math.log(Math.abs(Q.toDouble(c))) - k * Math.log(Math.max(1e-9, least));
    if (size < smallest) {
      smallest = size;
      cut = k;
    }
  }
  // At least as many terms as the model keeps coefficients: the orders asked for must be there, however large the remainder.
  const vz = inverse.valuation;
  const wanted = Math.ceil(m.length / vz);
  cut = Math.max(cut, Math.min(wanted, cut + 2));
  while (envelope.coefficient(cut).num === 0n) cut += 1;
  let sum: Model<T> = m.constant(r.zero);
  for (let k = cut - 1; k >= 0; k -= 1) sum = m.add(m.constant(r.fromRational(envelope.coefficient(k))), m.multiply(sum, inverse));
  const last = m.powerInteger({ valuation: vz, coefficients: [], tail: inverse.range, range: inverse.range }, cut);
  if (last === null) return null;
  const tail = r.multiply(last.range, r.multiply(r.fromRational(envelope.coefficient(cut)), r.union(r.zero, r.one)));
  return m.add(sum, { valuation: vz * cut, coefficients: [], tail, range: tail });
}
