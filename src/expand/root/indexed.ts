/** The n-th root of an equation with a tangent or cotangent: tan u = f has the roots of u - arctan f = n pi, one for each whole n. */
import { build, dependsOn, type Expression, sameExpression, walk } from '../../expression/index.ts';

/** The angle u and f with tan u = f; the root with the index n solves u = n pi + arctan f. Null where there is no such form: the equation is linear in one tangent, cotangent, or in sine and cosine of one argument. */
export function indexedEquation(f: Expression, unknown: string): { readonly argument: Expression; readonly tangent: Expression } | null {
  const argument = angleOf(f, unknown);
  if (!argument) return null;
  const found = linear(f, argument);
  if (!found) return null;
  const { sine, cosine, tangent, cotangent, rest } = found;
  const zero = (e: Expression | null): boolean => e === null;
  let value: Expression | null = null;
  if (tangent && zero(sine) && zero(cosine) && zero(cotangent)) value = rest ? build.negation(build.quotient(rest, tangent)) : build.number(0);
  else if (cotangent && zero(sine) && zero(cosine) && zero(tangent)) value = rest && build.negation(build.quotient(cotangent, rest));
  else if (sine && cosine && zero(tangent) && zero(cotangent) && zero(rest)) value = build.negation(build.quotient(cosine, sine));
  return value && { argument, tangent: value };
}

const CIRCULAR = new Set(['sin', 'cos', 'tan', 'cot']);

/** The one argument of circular functions that holds the unknown. */
function angleOf(f: Expression, unknown: string): Expression | null {
  let found: Expression | null = null;
  for (const node of walk(f)) {
    const [a] = node.kind === 'call' && CIRCULAR.has(node.function) ? node.args : [];
    if (!a || !dependsOn(a, unknown)) continue;
    if (found && !sameExpression(found, a)) return null;
    found = a;
  }
  return found;
}

interface Linear {
  readonly sine: Expression | null;
  readonly cosine: Expression | null;
  readonly tangent: Expression | null;
  readonly cotangent: Expression | null;
  readonly rest: Expression | null;
}

/** Coefficients, free of circular functions of the argument; null where a term is not linear in them. */
function linear(f: Expression, argument: Expression): Linear | null {
  const parts: Record<'sin' | 'cos' | 'tan' | 'cot' | 'rest', Expression[]> = { sin: [], cos: [], tan: [], cot: [], rest: [] };
  const isCircular = (e: Expression): e is Extract<Expression, { kind: 'call' }> => e.kind === 'call' && CIRCULAR.has(e.function) && e.args[0] !== undefined && sameExpression(e.args[0], argument);
  const holds = (e: Expression): boolean => [...walk(e)].some(isCircular);
  const visit = (e: Expression, front: readonly Expression[]): boolean => {
    if (e.kind === 'sum') return e.terms.every((t) => visit(t, front));
    if (e.kind === 'negation') return visit(e.operand, [build.number(-1), ...front]);
    if (!holds(e)) {
      parts.rest.push(build.product(...front, e));
      return true;
    }
    if (isCircular(e)) {
      parts[e.function as 'sin' | 'cos' | 'tan' | 'cot'].push(front.length > 0 ? build.product(...front) : build.number(1));
      return true;
    }
    if (e.kind === 'quotient' && !holds(e.denominator)) return visit(e.numerator, [...front, build.power(e.denominator, -1)]);
    if (e.kind !== 'product') return false;
    const circular = e.factors.filter(holds);
    const [only] = circular;
    return circular.length === 1 && only !== undefined && visit(only, [...front, ...e.factors.filter((g) => g !== only)]);
  };
  if (!visit(f, [])) return null;
  const total = (list: readonly Expression[]): Expression | null => (list.length === 0 ? null : build.sum(...list));
  return { sine: total(parts.sin), cosine: total(parts.cos), tangent: total(parts.tan), cotangent: total(parts.cot), rest: total(parts.rest) };
}
