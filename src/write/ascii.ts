/** What the exact strings of the protocol and mpmath text have in common. */
import { type ConstantName, type Expression, Q } from '../expression/index.ts';
import { atom, Binding, type Dialect, enclosed, type Piece } from './linear.ts';

const CONSTANTS: Readonly<Record<ConstantName, string>> = { pi: 'pi', e: 'exp(1)', i: 'I', eulerGamma: 'euler', catalan: 'catalan', glaisher: 'glaisher', infinity: 'inf' };

export const ASCII: Pick<Dialect, 'minus' | 'times' | 'spaceAroundSum' | 'dividesLast' | 'number' | 'constant'> = {
  minus: '-',
  times: '*',
  spaceAroundSum: true,
  dividesLast: true,
  number: (value) => (value.den === 1n ? atom(`${value.num}`) : { text: `${value.num}/${value.den}`, binding: Binding.Product }),
  constant: (name) => atom(CONSTANTS[name]),
};

/** Powers with the given sign; those of e by `exp`, square roots by `sqrt`. */
export const asciiPower =
  (sign: '^' | '**'): Dialect['power'] =>
  (base: Expression, exponent: Expression, write: (e: Expression) => Piece): Piece => {
    if (base.kind === 'constant' && base.name === 'e') return atom(`exp(${write(exponent).text})`);
    if (exponent.kind === 'number' && Q.equal(exponent.value, Q.HALF)) return atom(`sqrt(${write(base).text})`);
    return { text: `${enclosed(write(base), Binding.Atom)}${sign}${enclosed(write(exponent), Binding.Atom)}`, binding: Binding.Power };
  };
