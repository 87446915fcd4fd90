/** Operators with a bound or differentiated name: integrals, sums and products over an index, limits, derivatives. */
import { build, type Expression } from '../../expression/index.ts';
import { isName, nameText } from './facts.ts';
import { relationOf } from './grammar.ts';
import { deeper, fail, isCommand, isMark, next, node, peek, type State, within } from './state.ts';
import type { Token } from './tokens.ts';

interface Limits {
  readonly below: Expression | null;
  readonly above: Expression | null;
}

function limits(p: State): Limits {
  let below: Expression | null = null;
  let above: Expression | null = null;
  for (;;) {
    const t = peek(p);
    if (isMark(t, '_') && below === null) {
      next(p);
      below = signedArgument(p);
    } else if (isMark(t, '^') && above === null) {
      next(p);
      above = signedArgument(p);
    } else if (t.kind === 'sub' || t.kind === 'super') {
      next(p);
      const value: Expression = /^\d+$/.test(t.text) ? build.number(BigInt(t.text)) : build.symbol(t.text);
      if (t.kind === 'sub') below = value;
      else above = value;
    } else return { below, above };
  }
}
/** A limit: a TeX argument, or in passing a bare signed number (`\int_-1^1`). */
function signedArgument(p: State): Expression {
  const from = p.at;
  if (isMark(peek(p), '-')) {
    next(p);
    const operand = p.grammar.texArgument(p);
    return node(p, from, { kind: 'negation', operand });
  }
  return p.grammar.texArgument(p);
}

/** d or upright d directly before a name. */
const isDifferential = (p: State, k: number): boolean => {
  const d = p.tokens[k];
  const v = p.tokens[k + 1];
  if (!d || !v || d.text !== 'd' || (d.kind !== 'letter' && d.kind !== 'word')) return false;
  const name = isMark(v, '^') ? p.tokens[k + 2 + (p.tokens[k + 2]?.kind === 'open' ? (p.match[k + 2] ?? k) - k - 1 : 1)] : v;
  return isName(name) || isCommand(v, 'vec', 'mathbf', 'boldsymbol', 'tilde', 'bar');
};

/** The differential that belongs to the integral sign at `from`: first at the same level (nested signs skipped), else in the numerator of a fraction at that level. */
function findDifferential(p: State, from: number, limit: number): { readonly at: number; readonly nested: boolean } | null {
  let signs = 0;
  let inFraction: number | null = null;
  let end = limit;
  for (let k = from; k < end; k += 1) {
    const t = p.tokens[k] as Token;
    if (t.kind === 'end' || t.kind === 'close' || isMark(t, ')', ']', '\\}', 'r|', '\\\\') || (relationOf(t) !== null && !isMark(t, '~'))) end = k;
    if (end === k) break;
    if (isCommand(t, 'int')) signs += 1;
    else if (isDifferential(p, k)) {
      if (signs === 0) return { at: k, nested: false };
      signs -= 1;
    } else {
      const skip = p.match[k] ?? -1;
      if (skip > k) {
        if (inFraction === null && signs === 0 && t.kind === 'open') {
          for (let inner = k + 1; inner < skip; inner += 1) {
            if (isDifferential(p, inner) && isCommand(p.tokens[k - 1], 'frac', 'dfrac', 'tfrac')) {
              inFraction = inner;
              break;
            }
            const deep = p.match[inner] ?? -1;
            if (deep > inner) inner = deep;
          }
        }
        k = skip;
      }
    }
  }
  return inFraction === null ? null : { at: inFraction, nested: true };
}

export function integral(p: State): Expression {
  return deeper(p, () => {
    const from = p.at;
    const sign = next(p);
    const { below, above } = limits(p);
    while (peek(p).kind === 'space') next(p);
    const found = findDifferential(p, p.at, p.tokens.length);
    if (!found) return fail(p, 'The variable of this integral is missing; write it as dx behind the integrand.', sign);
    const { at } = found;
    const bound = p.tokens[at + 1];
    const boundName = bound && isName(bound) ? nameText(bound) : '';
    p.bound.push(boundName);
    let body: Expression;
    let variable: Expression;
    if (found.nested) {
      p.differentials.add(at);
      body = p.grammar.factorRun(p);
      variable = nameOnly({ ...p, at: at + 1 });
    } else if (at === p.at) {
      next(p);
      variable = p.grammar.atom(p);
      while (peek(p).kind === 'space') next(p);
      body = p.grammar.startsFactor(p) ? p.grammar.factorRun(p) : node(p, from, build.number(1));
    } else {
      body = within(p, at, () => p.grammar.sum(p));
      while (peek(p).kind === 'space') next(p);
      if (p.at !== at) fail(p, 'The integrand is not understood up to its differential; add brackets or an operator.');
      next(p);
      variable = p.grammar.atom(p);
    }
    p.bound.pop();
    if (variable.kind !== 'symbol') return fail(p, 'The variable of this integral is not a single symbol; substitute one first.', p.tokens[at]);
    if ((below === null) !== (above === null)) return fail(p, 'This integral has only one limit; write both, or none for an antiderivative.', sign);
    return node(p, from, { kind: 'integral', body, variable, ...(below && above ? { lower: below, upper: above } : {}) });
  });
}

export function indexed(p: State): Expression {
  return deeper(p, () => {
    const from = p.at;
    const sign = next(p);
    const { below, above } = limits(p);
    while (peek(p).kind === 'space') next(p);
    let index: Expression | null = null;
    let lower: Expression | null = null;
    let upper = above;
    if (below?.kind === 'relation' && below.sides.length === 2) {
      const [left, right] = below.sides;
      if (left?.kind === 'symbol' && right) {
        index = left;
        if (below.relations[0] === '=') lower = right;
        else if (below.relations[0] === '>=') {
          lower = right;
          upper ??= build.constant('infinity');
        } else if (below.relations[0] === '>') {
          lower = build.sum(right, build.number(1));
          upper ??= build.constant('infinity');
        }
      }
    }
    if (below?.kind === 'relation' && below.sides.length === 2 && below.sides[0]?.kind === 'constant') return fail(p, 'The index of this sum reads as a constant; choose another letter.', sign);
    if (!index || !lower || !upper) return fail(p, 'The range of this sum is not understood; write it as \\sum_{k=1}^{n}.', sign);
    const boundName = index.kind === 'symbol' ? index.name : '';
    p.bound.push(boundName);
    if (!p.grammar.startsFactor(p) && !isMark(peek(p), '-', '+')) fail(p, 'There is nothing to sum over; write the general term.', sign);
    const body = p.grammar.factorRun(p);
    p.bound.pop();
    return node(p, from, { kind: sign.text === 'sum' ? 'indexedSum' : 'indexedProduct', body, index, lower, upper });
  });
}

export function limit(p: State): Expression {
  return deeper(p, () => {
    const from = p.at;
    const sign = next(p);
    if (!isMark(peek(p), '_')) fail(p, 'The limit does not say what tends where; write it as \\lim_{x\\to 0}.', sign);
    next(p);
    const below = p.grammar.texArgument(p);
    if (below.kind !== 'relation' || below.relations[0] !== 'to') return fail(p, 'The limit does not say what tends where; write it as \\lim_{x\\to 0}.', sign);
    const [variable, target] = below.sides;
    if (!variable || !target) return fail(p, 'The limit does not say what tends where; write it as \\lim_{x\\to 0}.', sign);
    const body = p.grammar.factorRun(p);
    return node(p, from, { kind: 'limit', body, variable, target });
  });
}

/** `\frac{d}{dx} f`, `\frac{d^2 y}{dx^2}`, `\frac{\partial f}{\partial x}`; null if the fraction is none, with nothing consumed. */
export function derivative(p: State): Expression | null {
  const from = p.at;
  const open = from + 1;
  const close = p.match[open] ?? -1;
  if (p.tokens[open]?.kind !== 'open' || close < 0) return null;
  const sign = p.tokens[open + 1] as Token;
  const isD = (t: Token | undefined): boolean => t !== undefined && ((t.text === 'd' && (t.kind === 'letter' || t.kind === 'word')) || isCommand(t, 'partial'));
  if (!isD(sign)) return null;
  const below = close + 1;
  const belowEnd = p.match[below] ?? -1;
  if (p.tokens[below]?.kind !== 'open' || belowEnd < 0 || !isD(p.tokens[below + 1])) return null;
  let times = 1;
  let body = open + 2;
  const exponent = (k: number, end: number): { count: number; next: number } | null => {
    if (!isMark(p.tokens[k], '^')) return null;
    const first = p.tokens[k + 1];
    const last = first?.kind === 'open' ? (p.match[k + 1] ?? -1) : k + 1;
    const digits = p.tokens.slice(first?.kind === 'open' ? k + 2 : k + 1, first?.kind === 'open' ? last : last + 1);
    if (last < 0 || last >= end || !digits.every((t) => t.kind === 'digit') || digits.length === 0 || digits.length > 3) return null;
    return { count: Number(digits.map((t) => t.text).join('')), next: last + 1 };
  };
  const raised = exponent(body, close);
  if (raised) {
    times = raised.count;
    body = raised.next;
  }
  // The denominators: dx, dx^2, \partial x \partial y.
  const variables: { variable: Expression; times: number }[] = [];
  const inner: State = { ...p, at: below + 1 };
  while (inner.at < belowEnd) {
    while (peek(inner).kind === 'space') next(inner);
    if (!isD(peek(inner))) return null;
    next(inner);
    if (!isName(peek(inner))) return null;
    const variable = nameOnly(inner);
    const power = exponent(inner.at, belowEnd);
    if (power) inner.at = power.next;
    if (!power && isMark(p.tokens[inner.at], '^')) fail(p, 'A derivative of symbolic order is not read; write a number for the order.', sign);
    variables.push({ variable, times: power?.count ?? 1 });
    while (peek(inner).kind === 'space') next(inner);
  }
  if (variables.reduce((total, v) => total + v.times, 0) !== times || times < 1) return null;
  let operand: Expression;
  if (body < close) {
    p.at = body;
    operand = within(p, close, () => p.grammar.sum(p));
    if (p.at !== close) {
      p.at = from;
      return null;
    }
    p.at = belowEnd + 1;
  } else {
    p.at = belowEnd + 1;
    while (peek(p).kind === 'space' || isMark(peek(p), 'left.')) next(p);
    if (!p.grammar.startsFactor(p)) fail(p, 'There is nothing to differentiate; write the function behind the derivative sign.', p.tokens[belowEnd]);
    operand = isMark(peek(p), '(', '[', '\\{') ? p.grammar.factor(p) : p.grammar.factorRun(p);
  }
  // What is differentiated is a function of these variables: `\frac{dy}{dt}` is y'(t), not the derivative of a constant.
  let value: Expression = operand.kind === 'symbol' && !variables.some((v) => v.variable.kind === 'symbol' && v.variable.name === operand.name) ? { kind: 'apply', name: operand.name, args: variables.map((v) => v.variable), derivatives: variables.map(() => 0), span: operand.span } : operand;
  for (const v of [...variables].reverse()) value = node(p, from, { kind: 'derivative', body: value, variable: v.variable, times: v.times });
  return value;
}

/** What is differentiated is a function of the variables: `\frac{dy}{dt}` is y'(t), not the derivative of a constant. */
function asFunctionOf(operand: Expression, variables: readonly Expression[]): Expression {
  if (operand.kind !== 'symbol' || variables.some((v) => v.kind === 'symbol' && v.name === operand.name)) return operand;
  return { kind: 'apply', name: operand.name, args: variables, derivatives: variables.map(() => 0), span: operand.span };
}

/** `\dv{f}{x}`, `\dv[2]{f}{x}`, `\dv{x} f`: a widespread package's short forms of derivatives. */
export function shortDerivative(p: State): Expression {
  const from = p.at;
  const sign = next(p);
  let times = 1;
  if (isMark(peek(p), '[')) {
    const close = p.match[p.at] ?? -1;
    const digits = p.tokens.slice(p.at + 1, close).map((t) => t.text).join('');
    if (!/^[1-9]\d?$/.test(digits)) fail(p, 'A derivative of symbolic order is not read; write a number for the order.', sign);
    times = Number(digits);
    p.at = close + 1;
  }
  const first = p.grammar.texArgument(p);
  const second = peek(p).kind === 'open' ? p.grammar.texArgument(p) : null;
  const variable = second ?? first;
  if (variable.kind !== 'symbol') return fail(p, 'The variable of this derivative is not a single symbol; write it as \\frac{d}{dx}.', sign);
  const body = second ? first : isMark(peek(p), '(', '[', '\\{') ? p.grammar.factor(p) : p.grammar.factorRun(p);
  return node(p, from, { kind: 'derivative', body: asFunctionOf(body, [variable]), variable, times });
}

/** A name with its subscript, exponents left alone. */
function nameOnly(p: State): Expression {
  const from = p.at;
  let end = from + 1;
  if (isMark(p.tokens[end], '_')) {
    const close = p.tokens[end + 1]?.kind === 'open' ? (p.match[end + 1] ?? end + 1) : end + 1;
    end = close + 1;
  }
  const value = within(p, end, () => p.grammar.atom(p));
  p.at = end;
  return value;
}
