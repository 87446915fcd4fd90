/**
 * Models of asymptotic series at infinity with proven remainders. Between zero and the first term left out (from the number of terms named on):
 * log Gamma and psi for z > 0 (DLMF 5.11(ii)), polygamma for z > 0 (t/(e^t - 1) is enveloped by its series for t > 0, as each of its partial fractions is; Watson's integral keeps that),
 * erfc for x > 0 (7.12(i)), E_p for p, x > 0 (8.20(i), 6.12(i)), Gamma(a, x) from n >= a - 1 on (8.11(i)), K_nu for x > 0 from l >= |nu| - 1/2 on (10.40(ii)), Ai for x > 0 (9.7(iii)),
 * the two series of J and Y from l >= nu/2 - 1/4 and nu/2 - 3/4 on, l >= 1 (10.17(iii)), the auxiliary functions f and g of Si, Ci (6.12(ii)) and of the Fresnel integrals (7.12(ii)).
 * Of either sign: Ei for x > 0, 1 + chi(n+1) times the next term (6.12(i)); I_nu for x > 0, 2 chi(l) exp(|nu^2 - 1/4| chi(1)/x) times it (10.40(iii) on ph z = pi, from memory),
 * the series of 2x F(x), F Dawson's integral, sqrt(e (n + 3/2)) times it: F = x/(2 sqrt pi) PV int_0^inf e^-u u^(-1/2)/(x^2 - u) du leaves int e^-u u^(n-1/2)/(x^2 - u) du, of which the principal value is
 * the mean over the rays at +-theta, where |x^2 - u| >= x^2 sin theta; tan^2 theta = 1/(n + 1/2). The series of log G(z+1) that DLMF 5.17.5 ends with is int_0^inf (t/(e^t - 1) - ...) e^(-zt)/t^3 dt and thus enveloping
 * (Ferreira & Lopez, J. Approx. Theory 109 (2001)).
 * Here chi(n) < sqrt(pi (n+1)/2) (9.7(i) and the quotient of Gamma functions half a unit apart).
 */
import { type Expression, Q, type Rational, rationalOf } from '../expression/index.ts';
import { type Model, type ModelArithmetic, real } from '../rigorous/index.ts';
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
  readonly scale?: 'pi';
  /** Set where the remainder may have either sign: its size over the first term left out, number k, for arguments z >= least. */
  readonly either?: (k: number, least: number) => number;
}

/** An upper bound of chi(n), rounded generously. */
const chi = (n: number): number => 1.001 * Math.sqrt((3.1416 * (n + 1)) / 2);

const isEnvelope = (id: string): id is EnvelopeName => (ENVELOPES as readonly string[]).includes(id);

function envelopeOf(id: EnvelopeName, args: readonly Expression[]): Envelope | null {
  const plain = { power: Q.ONE, factor: Q.ONE };
  switch (id) {
    case 'enveloping log gamma':
      // sum B_2k/(2k(2k-1) z^(2k-1)).
      return { ...plain, from: 1, coefficient: (k) => (k % 2 === 0 ? Q.ZERO : Q.divide(real.bernoulliNumber(k + 1), Q.rational(BigInt(k + 1) * BigInt(k)))) };
    case 'enveloping digamma':
      return { ...plain, from: 1, coefficient: (k) => (k % 2 === 1 || k === 0 ? Q.ZERO : Q.negate(Q.divide(real.bernoulliNumber(k), Q.rational(k)))) };
    case 'enveloping polygamma': {
      // B_2k (2k+n-1)!/(2k)! z^(-2k), k >= 1.
      const order = Number(args[0] && rationalOf(args[0])?.num);
      return { ...plain, from: 1, coefficient: (k) => (k % 2 === 1 || k === 0 ? Q.ZERO : Q.multiply(real.bernoulliNumber(k), risingFrom(k + 1, order - 1))) };
    }
    case 'enveloping incomplete gamma': {
      const a = args[0] && rationalOf(args[0]);
      if (!a) return null;
      const list: Rational[] = [Q.ONE];
      return { ...plain, from: Math.max(1, Math.ceil(Q.toDouble(a) - 1 + 1e-9)), coefficient: (k) => grow(list, k, (c, j) => Q.multiply(c, Q.subtract(a, Q.rational(j)))) };
    }
    case 'enveloping Ei': {
      const list: Rational[] = [Q.ONE];
      return { ...plain, from: 1, coefficient: (k) => grow(list, k, (c, j) => Q.multiply(c, Q.rational(j))), either: (k) => 1 + chi(k + 2) };
    }
    case 'enveloping Bessel I':
    case 'enveloping Bessel P':
    case 'enveloping Bessel Q': {
      const order = args[0] && rationalOf(args[0]);
      if (!order) return null;
      const list: Rational[] = [Q.ONE];
      const a = (k: number): Rational => grow(list, k, (c, j) => hankelStep(order, c, j));
      const size = Q.toDouble(Q.absolute(order));
      if (id === 'enveloping Bessel I') {
        const reach = Math.abs(size * size - 0.25) * 1.0001;
        return { ...plain, from: 1, coefficient: (k) => (k % 2 === 0 ? a(k) : Q.negate(a(k))), either: (k, least) => 2.001 * chi(k) * growth((reach * 1.5708) / Math.max(least, 1e-9)) };
      }
      const odd = id === 'enveloping Bessel Q';
      const pairs = Math.max(1, Math.ceil(size / 2 - (odd ? 0.75 : 0.25) + 1e-9));
      return { ...plain, from: 2 * pairs + (odd ? 1 : 0), coefficient: (k) => (k % 2 === (odd ? 0 : 1) ? Q.ZERO : k % 4 < 2 ? a(k) : Q.negate(a(k))) };
    }
    case 'enveloping sine integral f':
    case 'enveloping sine integral g': {
      // (-1)^k (2k)!/x^(2k+1), (-1)^k (2k+1)!/x^(2k+2).
      const parity = id === 'enveloping sine integral f' ? 1 : 0;
      const list: Rational[] = [Q.ONE];
      const factorial = (k: number): Rational => grow(list, k, (c, j) => Q.multiply(c, Q.rational(j)));
      return { ...plain, from: 2 + (1 - parity), coefficient: (k) => (k === 0 || k % 2 !== parity ? Q.ZERO : Math.floor((k - 1) / 2) % 2 === 0 ? factorial(k - 1) : Q.negate(factorial(k - 1))) };
    }
    case 'enveloping Fresnel f':
    case 'enveloping Fresnel g': {
      // In z = pi x^2: (-1)^k (1 3 ... (4k-1))/z^(2k), (-1)^k (1 3 ... (4k+1))/z^(2k+1).
      const parity = id === 'enveloping Fresnel f' ? 0 : 1;
      const list: Rational[] = [Q.ONE];
      const odd = (k: number): Rational => grow(list, k, (c, j) => Q.multiply(c, Q.rational(2 * j - 1)));
      return { power: Q.rational(2), factor: Q.ONE, scale: 'pi', from: 1 + parity, coefficient: (k) => (k % 2 !== parity ? Q.ZERO : Math.floor(k / 2) % 2 === 0 ? odd(k) : Q.negate(odd(k))) };
    }
    case 'enveloping Dawson': {
      // sum (2k-1)!!/(2x^2)^k.
      const list: Rational[] = [Q.ONE];
      return { from: 1, power: Q.rational(2), factor: Q.ONE, coefficient: (k) => grow(list, k, (c, j) => Q.multiply(c, Q.rational(2 * j - 1, 2))), either: (k) => 1.65 * Math.sqrt(k + 1.5) };
    }
    case 'enveloping Barnes G':
      // sum B_(2k+2)/(2k(2k+1)(2k+2) z^(2k)), k >= 1.
      return { ...plain, from: 1, coefficient: (k) => (k === 0 || k % 2 === 1 ? Q.ZERO : Q.divide(real.bernoulliNumber(k + 2), Q.rational(k * (k + 1) * (k + 2)))) };
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
      const list: Rational[] = [Q.ONE];
      const size = Q.toDouble(Q.absolute(order));
      return { ...plain, from: Math.max(1, Math.ceil(size - 0.5 + 1e-9)), coefficient: (k) => grow(list, k, (c, j) => hankelStep(order, c, j)) };
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

/** a_k from a_(k-1): a_k = a_(k-1) (4 nu^2 - (2k-1)^2)/(8k) (DLMF 10.17.1). */
const hankelStep = (order: Rational, previous: Rational, k: number): Rational =>
  Q.divide(Q.multiply(previous, Q.subtract(Q.multiply(Q.rational(4), Q.multiply(order, order)), Q.rational((2 * k - 1) * (2 * k - 1)))), Q.rational(8 * k));

/** n (n+1) ... , `count` factors. */
function risingFrom(n: number, count: number): Rational {
  let product = 1n;
  for (let i = 0; i < count; i += 1) product *= BigInt(n + i);
  return Q.rational(product);
}

/** An upper bound of e^y for y >= 0: (1 - y/m)^-m with m > y. */
function growth(y: number): number {
  const m = 64 * Math.ceil(1 + y);
  return 1.0001 * (1 - y / m) ** -m;
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
  const z = raised && m.scale(raised, envelope.scale === 'pi' ? r.constant('pi') : r.fromRational(envelope.factor));
  const inverse = z && m.powerInteger(z, -1);
  if (!inverse) return null;
  // Least z on the domain decides how many terms help.
  const largest = m.rangeOf(inverse);
  const nearest = largest && r.divide(r.one, r.upperEnd(largest));
  if (!nearest) return null;
  const least = r.toDouble(r.lowerEnd(nearest)) * (1 - 1e-12);
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
  // A series that ends is the function.
  for (let zeros = 0; zeros < 3 && envelope.coefficient(cut).num === 0n; zeros += 1) cut += 1;
  let sum: Model<T> = m.constant(r.zero);
  for (let k = cut - 1; k >= 0; k -= 1) sum = m.add(m.constant(r.fromRational(envelope.coefficient(k))), m.multiply(sum, inverse));
  const last = m.powerInteger({ valuation: vz, coefficients: [], tail: inverse.range, range: inverse.range }, cut);
  if (last === null) return null;
  const size = envelope.either ? r.fromRational(Q.fromDouble(envelope.either(cut, least))) : r.one;
  const share = r.union(envelope.either ? r.negate(size) : r.zero, size);
  const tail = r.multiply(last.range, r.multiply(r.fromRational(envelope.coefficient(cut)), share));
  return m.add(sum, { valuation: vz * cut, coefficients: [], tail, range: tail });
}
