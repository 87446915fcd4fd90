/** Special functions that are written with a letter: `J_0(x)`, `\Gamma(x)`, `\psi'(x)`, `W_{-1}(x)`, `E(k)`. */
import { build, type Expression } from '../../expression/index.ts';
import { bracketArguments, derivativeOfCall, opensBracket } from './calls.ts';
import { exponentOf } from './grammar.ts';
import { deeper, isMark, next, node, peek, type State } from './state.ts';

/** letter -> function with its subscript as first argument. */
const WITH_INDEX: Readonly<Record<string, string>> = { J: 'besselJ', Y: 'besselY', I: 'besselI', K: 'besselK', E: 'expIntegralE' };
const PLAIN: Readonly<Record<string, { readonly id: string; readonly arity: readonly number[] }>> = {
  '\\Gamma': { id: 'gamma', arity: [1] },
  '\\zeta': { id: 'zeta', arity: [1] },
  '\\psi': { id: 'digamma', arity: [1] },
  W: { id: 'lambertW', arity: [1] },
  K: { id: 'ellipticK', arity: [1] },
  E: { id: 'ellipticE', arity: [1] },
  F: { id: 'ellipticF', arity: [2] },
};

/** The call, its name already read up to subscript and primes; null where the letter is no special function here. */
export function letterFunction(p: State, from: number, base: string, index: string, primes: number): Expression | null {
  const start = p.at;
  let exponent: Expression | null = null;
  const known = index === '' ? PLAIN[base] !== undefined : WITH_INDEX[base] !== undefined || base === 'W';
  if (!known) return null;
  if (isMark(peek(p), '^')) {
    next(p);
    exponent = deeper(p, () => exponentOf(p));
  }
  while (peek(p).kind === 'space') next(p);
  if (!opensBracket(peek(p))) {
    p.at = start;
    return null;
  }
  if (index === '' && !base.startsWith('\\') && !holdsOneThing(p)) {
    p.at = start;
    return null;
  }
  const args = bracketArguments(p);
  let call: Expression | null = null;
  if (index === '') {
    const entry = PLAIN[base];
    if (entry && entry.arity.includes(args.length)) {
      if (entry.id === 'digamma' && primes > 0) call = { kind: 'call', function: 'polygamma', args: [build.number(primes), ...args], written: base };
      else call = primes > 0 ? derivativeOfCall(p, from, entry.id, base, args, primes) : { kind: 'call', function: entry.id, args, written: base };
    }
  } else if (base === 'W') {
    const branch = /^\{?(-?\d)\}?$/.exec(index);
    if (branch && args.length === 1) call = { kind: 'call', function: 'lambertW', args: [build.number(Number(branch[1])), ...args], written: base };
  } else {
    const id = WITH_INDEX[base];
    if (id && args.length === 1) call = { kind: 'call', function: id, args: [indexExpression(index), ...args], written: base };
  }
  if (!call) {
    p.at = start;
    return null;
  }
  const placed = node(p, from, call);
  return exponent ? node(p, from, { kind: 'power', base: placed, exponent }) : placed;
}

/** A capital letter before a bracket is the special function only if no sum stands in the bracket. */
function holdsOneThing(p: State): boolean {
  const close = p.match[p.at] ?? -1;
  for (let k = p.at + 1; k < close; k += 1) {
    const skip = p.match[k] ?? -1;
    if (skip > k) k = skip;
    else if (k > p.at + 1 && (p.tokens[k]?.text === '+' || p.tokens[k]?.text === '-') && p.tokens[k]?.kind === 'mark') return false;
  }
  return close > p.at + 1;
}

function indexExpression(index: string): Expression {
  const bare = index.replace(/^\{|\}$/g, '');
  const number = /^(-?)(\d+)$/.exec(bare);
  if (number) return number[1] ? build.negation(build.number(BigInt(number[2] ?? 0))) : build.number(BigInt(number[2] ?? 0));
  const ratio = /^(-?)(\d+)\/(\d+)$/.exec(bare);
  if (ratio) {
    const value = build.quotient(build.number(BigInt(ratio[2] ?? 0)), build.number(BigInt(ratio[3] ?? 1)));
    return ratio[1] ? build.negation(value) : value;
  }
  return build.symbol(bare);
}
