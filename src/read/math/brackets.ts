/** What stands between brackets, braces and bars. */
import { build, type Expression } from '../../expression/index.ts';
import { applyKnown, bracketArguments, opensBracket } from './calls.ts';
import { isName } from './facts.ts';
import { commandName, wordName } from './functionNames.ts';
import { order } from './names.ts';
import { deeper, fail, isCommand, isMark, named, next, node, peek, type State } from './state.ts';
import type { Token } from './tokens.ts';
import { between, isOperatorPair } from './vectors.ts';

/** A braced group: its content, without the braces in the span. */
export function group(p: State): Expression {
  return deeper(p, () => {
    const from = p.at;
    const close = p.match[from] ?? -1;
    if (close === from + 1) {
      // `{}` only shifts the next index: `{}_2F_1`.
      p.at += 2;
      if (isMark(peek(p), '_') || peek(p).kind === 'sub') return hypergeometric(p, from);
      if (p.grammar.startsFactor(p)) return p.grammar.atom(p);
      return fail(p, 'These braces are empty; write what belongs in them.', p.tokens[from]);
    }
    // `{\cal O}(x^3)`
    if (close === from + 2 && /^[Oo]$/.test(p.tokens[from + 1]?.text ?? '') && p.tokens[from + 1]?.kind !== 'mark' && isMark(p.tokens[close + 1], '(')) {
      p.at = close + 1;
      return order(p, from, p.tokens[from + 1]?.text === 'o');
    }
    // `{\sin} x`, `\mathop{\mathrm{sech}} x`: braces around the name of a function alone.
    const inner = p.tokens[from + 1];
    const known = close === from + 2 && inner ? (inner.kind === 'word' ? wordName(inner.text) : inner.kind === 'command' && !isName(inner) ? commandName(inner.text) : null) : null;
    if (known) {
      p.at = close + 1;
      return applyKnown(p, from, known);
    }
    next(p);
    const bars = p.bars;
    p.bars = 0;
    const value = infix(p, from, close) ?? p.grammar.relation(p);
    while (peek(p).kind === 'space') next(p);
    if (p.at !== close) fail(p, `${named(peek(p)).replace(/^./, (c) => c.toUpperCase())} is not understood here; remove it or add an operator.`);
    p.bars = bars;
    next(p);
    return value;
  });
}

/** `{a \over b}` and `{n \choose k}`: what stands between token `open` and token `close`, if such a sign divides it. */
export function infix(p: State, open: number, close: number): Expression | null {
  for (let k = open + 1; k < close; k += 1) {
    const skip = p.match[k] ?? -1;
    if (skip > k) {
      k = skip;
      continue;
    }
    const t = p.tokens[k] as Token;
    if (!isCommand(t, 'over', 'choose')) continue;
    const above = p.grammar.sum(p);
    if (p.at !== k) fail(p, `${named(peek(p))} is not understood here; remove it or add an operator.`);
    next(p);
    const below = p.grammar.sum(p);
    return node(p, Math.max(open, 0), t.text === 'over' ? { kind: 'quotient', numerator: above, denominator: below } : { kind: 'call', function: 'binomial', args: [above, below], written: '\\choose' });
  }
  return null;
}

/** A bracket that holds one quantity. */
export function bracket(p: State): Expression {
  const from = p.at;
  const close = p.match[from] ?? -1;
  const args = bracketArguments(p);
  const [only] = args;
  if (args.length === 1 && only) return only;
  const open = p.tokens[from]?.text;
  if ((open === '[' || open === '\\{') && isOperatorPair(args)) return node(p, from, { kind: 'vector', operation: open === '[' ? 'commutator' : 'anticommutator', args });
  if (args.length === 0) return fail(p, 'These brackets are empty; write what belongs in them.', p.tokens[from]);
  return fail(p, 'A list in brackets is not a quantity; write the name of the function before it.', p.tokens[close]);
}

/** `|x|`, and the norm where a vector stands between the bars. */
export function bars(p: State): Expression {
  return deeper(p, () => {
    const from = p.at;
    const open = next(p);
    const closer = open.text === 'l|' ? ['r|'] : ['|'];
    const before = p.bars;
    p.bars = open.text === 'l|' ? 0 : before + 1;
    const value = p.grammar.sum(p);
    while (peek(p).kind === 'space') next(p);
    if (!isMark(peek(p), ...closer)) fail(p, 'The bar opened here is never closed; close it with |.', open);
    next(p);
    p.bars = before;
    return node(p, from, between(value, '|'));
  });
}

/** `\begin{cases} a & x < 0 \\ b & \text{otherwise} \end{cases}`. */
export function cases(p: State): Expression {
  return deeper(p, () => {
    const from = p.at;
    const close = p.match[from] ?? -1;
    next(p);
    const branches: { condition: Expression | null; value: Expression }[] = [];
    const gap = (): void => {
      while (peek(p).kind === 'space' || peek(p).kind === 'text' || isMark(peek(p), ',', '.', ';', ':')) next(p);
    };
    while (p.at < close) {
      gap();
      if (isMark(peek(p), '\\\\')) {
        next(p);
        continue;
      }
      if (p.at >= close) break;
      const value = p.grammar.sum(p);
      gap();
      let condition: Expression | null = null;
      if (isMark(peek(p), '&')) {
        next(p);
        gap();
        if (p.at < close && !isMark(peek(p), '\\\\')) condition = p.grammar.relation(p);
      }
      gap();
      branches.push({ condition, value });
      if (p.at < close && !isMark(peek(p), '\\\\')) fail(p, `${named(peek(p)).replace(/^./, (c) => c.toUpperCase())} is not understood in this case; write value & condition.`);
    }
    p.at = close;
    next(p);
    if (branches.length === 0) fail(p, 'This list of cases is empty; write value & condition.', p.tokens[from]);
    if (isMark(peek(p), 'right.')) next(p);
    return node(p, from, { kind: 'piecewise', branches });
  });
}

/** Between two delimiter commands: \lvert..\rvert, \lfloor..\rfloor. */
export function fenced(p: State, closer: string, wrap: (value: Expression) => Expression): Expression {
  return deeper(p, () => {
    const from = p.at;
    const open = next(p);
    const value = p.grammar.sum(p);
    if (!isCommand(peek(p), closer)) fail(p, `\\${open.text} is never closed; close it with \\${closer}.`, open);
    next(p);
    return node(p, from, wrap(value));
  });
}

/** `{}_2F_1(a,b;c;x)`: the braces are read, the subscript follows. */
function hypergeometric(p: State, from: number): Expression {
  const sub = next(p);
  const upper = sub.kind === 'sub' ? sub.text : next(p).text;
  if (!isMark(peek(p), '(') && !/^F$/.test(peek(p).text)) fail(p, 'A subscript stands here without a symbol it could belong to; remove it or write the symbol.');
  next(p);
  const mark = next(p);
  const lower = mark.kind === 'sub' ? mark.text : next(p).text;
  if (!/^\d$/.test(upper) || !/^\d$/.test(lower)) fail(p, 'The numbers of parameters of this hypergeometric function are not understood; write them as digits.', sub);
  while (peek(p).kind === 'space') next(p);
  if (!opensBracket(peek(p))) fail(p, 'The arguments of the hypergeometric function are missing; write them in brackets.');
  const args = bracketArguments(p);
  const wanted = Number(upper) + Number(lower) + 1;
  if (args.length !== wanted) fail(p, `This hypergeometric function needs ${wanted} arguments; ${args.length} are given.`, p.tokens[from]);
  return node(p, from, { kind: 'call', function: 'hypergeometric', args: [build.number(Number(upper)), build.number(Number(lower)), ...args], written: `{}_${upper}F_${lower}` });
}
