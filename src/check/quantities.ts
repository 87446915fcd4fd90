/**
 * Quantities of the trade that documents print by name only. Their definitions stand here so that a claim such as T = 2 pi sqrt(L/g) (1 + ...) can be confirmed;
 * since a name may mean something else elsewhere, such a definition never makes a claim fail.
 */
import { build, type Expression } from '../expression/index.ts';

export interface Quantity {
  /** In words, for the reason that is shown. */
  readonly title: string;
  readonly value: Expression;
  readonly variable: string;
}

const { call, difference, number, power, product, quotient, squareRoot, symbol } = build;

/** Readings of a name, given the symbols of the printed side. Sources: common practice; the pendulum's period 4 sqrt(L/g) K(sin(theta_0/2)) as in DLMF 22.19(i) (from memory). */
export function quantitiesNamed(name: string, symbols: readonly string[]): readonly Quantity[] {
  const pick = (...names: readonly string[]): string | null => names.find((n) => symbols.includes(n)) ?? null;
  const out: Quantity[] = [];
  const base = name.replace(/_.*$|\(.*$/, '').replace(/^\\(?:mathrm|text|mathit)\{(.*)\}$/, '$1');
  const length = pick('L', '\\ell', 'l');
  const gravity = pick('g');
  const amplitude = pick('\\theta_0', '\\theta_{0}', '\\alpha', '\\theta', '\\phi_0', '\\theta_m', '\\theta_{max}', '\\phi', 'A');
  if (base === 'T' && length !== null && gravity !== null && amplitude !== null) {
    const modulus = call('sin', quotient(symbol(amplitude), number(2)));
    out.push({ title: 'the period of a pendulum of this amplitude', value: product(number(4), squareRoot(quotient(symbol(length), symbol(gravity))), call('ellipticK', modulus)), variable: amplitude });
  }
  const bessel = /^([JYIKj])_?\{?([0-9])\}?\((\w+)\)$/.exec(name);
  if (bessel?.[1] !== undefined && bessel[3] !== undefined && symbols.includes(bessel[3])) out.push({ title: 'the Bessel function', value: call(`bessel${bessel[1].toUpperCase()}`, number(Number(bessel[2])), symbol(bessel[3])), variable: bessel[3] });
  const speed = pick('v', 'u');
  const light = pick('c');
  if (speed !== null && light !== null) {
    const factor = power(difference(number(1), quotient(power(symbol(speed), 2), power(symbol(light), 2))), quotient(number(-1), number(2)));
    if (base === '\\gamma') out.push({ title: 'the Lorentz factor', value: factor, variable: speed });
    const mass = pick('m_0', 'm', 'M', 'm_{0}', 'm_e');
    if (mass !== null) {
      const rest = product(symbol(mass), power(symbol(light), 2));
      if (/^(?:KE|K|T|E|E_k|E_\{k\}|E_K|E_\{kin\}|E_kin)$/.test(name) || base === 'KE') out.push({ title: 'the relativistic kinetic energy', value: product(rest, difference(factor, number(1))), variable: speed });
      if (base === 'E') out.push({ title: 'the relativistic energy', value: product(rest, factor), variable: speed });
    }
  }
  return out;
}
