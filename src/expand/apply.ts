/** Unspecified functions f(x + h): Taylor's formula in all arguments, with derivatives of f at the limits as coefficients. */
import { type ApplyNode, Q } from '../expression/index.ts';
import { Declined } from '../outcome.ts';
import { exactOf, growth, integralTail, levels, type Multi, type ScaleElement, Series, Stream, streamIn, sumOf, withExact } from '../series/index.ts';
import type { Evaluate, Session } from './session.ts';

export function evaluateApply(s: Session, e: ApplyNode, evaluate: Evaluate): Multi {
  const c = s.context;
  const args = e.args.map((a) => evaluate(s, a));
  if (args.some((a) => growth(c, a) === 'large')) throw new Declined('no-expansion', `The behaviour of the unspecified function ${e.name} at infinity is not known; choose a finite point.`);
  const derivatives = e.args.map((_, k) => e.derivatives[k] ?? 0);
  return withExact(applied(s, e.name, derivatives, args, new Map()), () => ({ ...e, args: args.map((a) => exactOf(c, a)) }));
}

/** The partial derivative of f at the arguments; `known` shares equal derivatives at these arguments. */
function applied(s: Session, name: string, derivatives: readonly number[], args: readonly Multi[], known: Map<string, Multi>): Multi {
  const c = s.context;
  const key = derivatives.join(',');
  const found = known.get(key);
  if (found !== undefined) return found;
  const element = args.reduce<ScaleElement | null>((best, a) => (a instanceof Series && (best === null || a.element.rank > best.rank) ? a.element : best), null);
  if (element === null) return c.field.fromExpression({ kind: 'apply', name, args: args.map((a) => exactOf(c, a)), derivatives });
  const parts = args.map((a) => (a instanceof Series && a.element === element ? levels(c, a) : { base: a, rest: null }));
  const start = applied(s, name, derivatives, parts.map((p) => p.base ?? Q.ZERO), new Map());
  let definition: Stream | null = null;
  const define = (): Stream => {
    const slopes = parts.flatMap((p, k) => {
      if (!p.rest) return [];
      const next = derivatives.map((d, i) => (i === k ? d + 1 : d));
      const derivative = applied(s, name, next, args, known);
      return [new Series(element, integralTail(c, Q.ZERO, p.rest, streamIn(derivative, element)), () => ({ kind: 'dots' }))];
    });
    return streamIn(sumOf(c, slopes), element);
  };
  const result = new Series(
    element,
    new Stream((k) => {
      if (k === 0) return { exponent: Q.ZERO, coefficient: start };
      definition ??= define();
      return definition.at(k);
    }),
    () => ({ kind: 'apply', name, args: args.map((a) => exactOf(c, a)), derivatives }),
  );
  known.set(key, result);
  return result;
}

