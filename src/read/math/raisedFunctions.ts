/** `f^{-1}(x)` is the inverse function, `\phi^2(t)` the square of `\phi(t)`: exponents between a function's name and its argument. */
import type { Expression } from '../../expression/index.ts';
import { bracketArguments } from './calls.ts';
import { FUNCTION_LETTER, isName } from './facts.ts';
import { exponentOf } from './grammar.ts';
import { deeper, isMark, next, node, peek, type State } from './state.ts';

/** The application with its exponent, an inverse function being one of its own name; null where the name is no function here (nothing is consumed then). `applies` tells whether a bracket at the place read holds arguments. */
export function raisedFunction(p: State, from: number, base: string, index: string, applies: () => boolean): Expression | null {
  const full = index === '' ? base : `${base}_${index}`;
  if (!isMark(peek(p), '^') || p.options.symbols.has(full)) return null;
  const start = p.at;
  const behind = p.tokens[start + 1]?.kind === 'open' ? (p.match[start + 1] ?? -1) + 1 : start + 2;
  const opens = p.tokens[behind];
  const single = p.match[behind] === behind + 2 && isName(p.tokens[behind + 1]);
  if (behind <= start + 1 || behind >= p.end || !opens || !isMark(opens, '(')) return null;
  if (!p.options.functions.has(full) && !p.facts.surelyFunctions.has(full) && !p.facts.applied.has(full) && !FUNCTION_LETTER.test(base)) return null;
  p.at = behind;
  const isFunction = applies();
  p.at = start;
  if (!isFunction) return null;
  next(p);
  const exponent = deeper(p, () => exponentOf(p));
  const value = wholeNumber(exponent);
  if (value === null || value < -1n || value === 0n || !(single || (value === -1n && FUNCTION_LETTER.test(base)))) {
    p.at = start;
    return null;
  }
  const args = bracketArguments(p);
  const applied = node(p, from, { kind: 'apply', name: value === -1n ? `${full}^{-1}` : full, args, derivatives: args.map(() => 0) });
  return value === -1n || value === 1n ? applied : node(p, from, { kind: 'power', base: applied, exponent });
}

function wholeNumber(e: Expression): bigint | null {
  if (e.kind === 'negation') {
    const value = wholeNumber(e.operand);
    return value === null ? null : -value;
  }
  return e.kind === 'number' && e.value.den === 1n ? e.value.num : null;
}
