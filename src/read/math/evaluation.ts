/** Values at a place behind a bar: `\left.\frac{dy}{dx}\right|_{x=0}`, `y'|_{x=0}`. */
import { type Expression, mapChildren, markedName, substitute } from '../../expression/index.ts';
import { fail, isMark, named, next, node, peek, type State } from './state.ts';

/** From `\left.` on. */
export function evaluated(p: State): Expression {
  const from = p.at;
  const open = next(p);
  const value = p.grammar.sum(p);
  while (peek(p).kind === 'space') next(p);
  if (!isMark(peek(p), 'r|')) fail(p, 'The invisible bracket opened here is never closed by a bar; close it with \\right|.', open);
  next(p);
  return atPlace(p, from, value);
}

/** The bar is read; what follows says where: `_{x=0}`. */
export function atPlace(p: State, from: number, value: Expression): Expression {
  if (!isMark(peek(p), '_')) fail(p, `The place of evaluation is missing behind the bar, before ${named(peek(p))}; write it as |_{x=0}.`);
  const mark = next(p);
  const place = p.grammar.texArgument(p);
  const [variable, point] = place.kind === 'relation' && place.sides.length === 2 && place.relations[0] === '=' ? place.sides : [];
  if (variable?.kind !== 'symbol' || !point) return fail(p, 'The place of evaluation is not understood; write it as |_{x=0}.', mark);
  const { name } = variable;
  const at = (e: Expression): Expression => {
    if (e.kind === 'derivative') {
      if (e.variable.kind !== 'symbol' || e.variable.name !== name) return fail(p, 'The place of evaluation names another variable than the derivative; write the value with the variable of the derivative.', mark);
      if (e.body.kind !== 'apply' || e.body.args.length !== 1) return fail(p, 'The derivative of a formula at a place is not read; carry it out first.', mark);
      return { kind: 'apply', name: e.body.name, args: [point], derivatives: [(e.body.derivatives[0] ?? 0) + e.times], span: e.span };
    }
    const marked = e.kind === 'symbol' ? markedName(e.name) : null;
    if (marked) return { kind: 'apply', name: marked.name, args: [point], derivatives: [marked.derivative], span: e.span };
    return e.kind === 'symbol' ? e : mapChildren(e, at);
  };
  const whole: Expression = value.kind === 'symbol' && value.name !== name && !markedName(value.name) ? { kind: 'apply', name: value.name, args: [point], derivatives: [0] } : substitute(at(value), name, point);
  return node(p, from, { ...whole });
}
