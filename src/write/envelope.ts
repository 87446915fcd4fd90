/** A real positive function without zeros near the point that a scale factor is O of: oscillating factors are replaced by 1, the rest by its modulus. */
import { build, type Expression } from '../expression/index.ts';

const modulus = (e: Expression): Expression => build.call('abs', e);
const isOscillating = (e: Expression): boolean => e.kind === 'call' && (e.function === 'sin' || e.function === 'cos');

function oscillates(e: Expression): boolean {
  switch (e.kind) {
    case 'sum':
      return e.terms.some(oscillates);
    case 'product':
      return e.factors.some(oscillates);
    case 'quotient':
      return oscillates(e.numerator);
    case 'negation':
      return oscillates(e.operand);
    case 'power':
      return oscillates(e.base);
    default:
      return isOscillating(e);
  }
}

export function envelope(e: Expression): Expression {
  if (!oscillates(e)) return e.kind === 'number' ? build.number(e.value.num < 0n ? { num: -e.value.num, den: e.value.den } : e.value) : modulus(e);
  switch (e.kind) {
    case 'sum':
      return build.sum(...e.terms.map(envelope));
    case 'product':
      return build.product(...e.factors.map(envelope));
    case 'quotient':
      return build.quotient(envelope(e.numerator), modulus(e.denominator));
    case 'negation':
      return envelope(e.operand);
    case 'power':
      return e.exponent.kind === 'number' && e.exponent.value.num > 0n ? build.power(envelope(e.base), e.exponent) : modulus(e);
    default:
      return build.number(1);
  }
}
