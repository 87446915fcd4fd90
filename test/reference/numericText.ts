/** Evaluates the protocol's `numeric` texts (Python expressions in the names of mpmath) with complex balls of any precision. */
import { build, type Expression, Q } from '../../src/expression/index.ts';
import { fromDecimal } from '../../src/expression/rational.ts';
import { describe as describeFunction } from '../../src/functions/index.ts';
import { type ComplexBall, enclose, real } from '../../src/rigorous/index.ts';

/** mpmath's names -> ids of descriptions, where the order of arguments is the same. */
const NAMES: Readonly<Record<string, string>> = {
  log: 'log', exp: 'exp', sin: 'sin', cos: 'cos', tan: 'tan', sinh: 'sinh', cosh: 'cosh', tanh: 'tanh', asin: 'asin', acos: 'acos', atan: 'atan',
  asinh: 'asinh', acosh: 'acosh', atanh: 'atanh', gamma: 'gamma', loggamma: 'logGamma', stieltjes: 'stieltjes', fabs: 'abs', sign: 'sign',
  besselj: 'besselJ', bessely: 'besselY', besseli: 'besselI', besselk: 'besselK', erf: 'erf', polylog: 'polylog', airyai: 'airyAi', airybi: 'airyBi', ei: 'expIntegralEi', erfc: 'erfc', beta: 'beta', hyp2f1: 'hypergeometric2F1', ellipk: 'ellipticKParameter', ellipe: 'ellipticEParameter',
};
const CONSTANTS: Readonly<Record<string, Expression>> = {
  pi: build.constant('pi'), euler: build.constant('eulerGamma'), catalan: build.constant('catalan'), glaisher: build.constant('glaisher'), I: build.constant('i'),
};

export function readNumericText(text: string): Expression {
  const tokens = text.match(/\d+\.?\d*(?:[eE][+-]?\d+)?|\.\d+|[A-Za-z_]\w*|\*\*|[-+*/(),]/g) ?? [];
  if (tokens.join('') !== text.replace(/\s+/g, '')) throw new Error(`not a numeric text: ${text}`);
  let at = 0;
  const take = (token: string): boolean => {
    if (tokens[at] !== token) return false;
    at += 1;
    return true;
  };
  const expect = (token: string): void => {
    if (!take(token)) throw new Error(`expected ${token} at token ${at} of ${text}`);
  };
  const sum = (): Expression => {
    const terms = [product()];
    for (;;) {
      if (take('+')) terms.push(product());
      else if (take('-')) terms.push(build.negation(product()));
      else return build.sum(...terms);
    }
  };
  const product = (): Expression => {
    let left = unary();
    for (;;) {
      if (take('*')) left = build.product(left, unary());
      else if (take('/')) left = build.quotient(left, unary());
      else return left;
    }
  };
  const unary = (): Expression => (take('-') ? build.negation(unary()) : take('+') ? unary() : power());
  const power = (): Expression => {
    const base = atom();
    return take('**') ? build.power(base, unary()) : base;
  };
  const atom = (): Expression => {
    if (take('(')) {
      const inner = sum();
      expect(')');
      return inner;
    }
    const token = tokens[at] ?? '';
    at += 1;
    const value = fromDecimal(token);
    if (value) return build.number(value);
    if (!take('(')) return CONSTANTS[token] ?? build.symbol(token);
    const args: Expression[] = [];
    do args.push(sum());
    while (take(','));
    expect(')');
    const [first = build.number(0), second] = args;
    if (token === 'sqrt') return build.squareRoot(first);
    if (token === 'zeta') return second ? build.call('hurwitzZeta', first, second) : build.call('zeta', first);
    if (token === 'psi' || token === 'polygamma') return build.call('polygamma', first, second ?? first);
    if (token === 'lambertw') return build.call('lambertW', second ?? build.number(0), first);
    if (token === 'digamma') return build.call('digamma', first);
    const id = NAMES[token];
    if (id === undefined) throw new Error(`the name ${token} is not known here`);
    return build.call(id, ...args);
  };
  const all = sum();
  if (at !== tokens.length) throw new Error(`unread rest in ${text}`);
  return all;
}

export type Value = string | readonly [string, string];

export function ballOf(value: Value, bits: number): ComplexBall {
  const part = (text: string) => {
    // The reader of decimals refuses exponents beyond 100000; values of Gamma at 1e5 need them.
    const [mantissa = '', exponent = '0'] = text.split('e');
    const exact = fromDecimal(mantissa);
    if (!exact) throw new Error(`not a decimal: ${text}`);
    const shift = 10n ** BigInt(Math.abs(Number(exponent)));
    return real.fromRational(Number(exponent) < 0 ? Q.divide(exact, Q.rational(shift)) : Q.multiply(exact, Q.rational(shift)), bits);
  };
  return typeof value === 'string' ? { re: part(value), im: real.ZERO } : { re: part(value[0]), im: part(value[1]) };
}

export function evaluateNumericText(text: string, symbols: ReadonlyMap<string, ComplexBall>, bits: number): ComplexBall {
  const value = enclose(readNumericText(text), symbols, bits, describeFunction);
  if (!value) throw new Error(`no value: ${text}`);
  return value;
}
