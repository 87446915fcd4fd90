/**
 * Oscillation at infinity: a tree as A(x) + sum of B_j(x) cos phi_j(x) + C_j(x) sin phi_j(x) with local models A, B_j, C_j and phases that grow without bound.
 * |B cos phi + C sin phi| <= sqrt(B^2 + C^2) bounds the far part of an interval, where the waves themselves have no model.
 */
import { build, type Expression, Q } from '../expression/index.ts';
import { type Model, type ModelArithmetic } from '../rigorous/index.ts';
import { exactNear } from './exactNear.ts';
import { modelOf } from './local.ts';
import type { Numbers } from './numbers.ts';
import { isExactlyZero } from './region.ts';
import { oscillatingForm } from './rewrite.ts';

interface Wave<T> {
  /** Index into the shared list of phases. */
  readonly phase: number;
  readonly cos: Model<T>;
  readonly sin: Model<T>;
}
interface Waves<T> {
  readonly plain: Model<T>;
  readonly waves: readonly Wave<T>[];
}

const MOST_PHASES = 8;

/** sup |difference of the two trees| over the domain, from above; null where one of them is not of this shape or the difference is not known to be bounded. */
export function waveDifference<T>(f: Expression, sum: Expression, n: Numbers<T>, m: ModelArithmetic<T>, variable: string, leaf: Model<T>, check: () => void): T | null {
  const { r } = n;
  const phases: Expression[] = [];
  const nothing = m.constant(r.zero);
  const model = (e: Expression): Model<T> | null => modelOf(e, n, m, variable, leaf, undefined, check);
  const plain = (value: Model<T> | null): Waves<T> | null => value && { plain: value, waves: [] };
  const map = (w: Waves<T>, change: (g: Model<T>) => Model<T>): Waves<T> => ({ plain: change(w.plain), waves: w.waves.map((v) => ({ phase: v.phase, cos: change(v.cos), sin: change(v.sin) })) });
  const add = (a: Waves<T>, b: Waves<T>): Waves<T> => {
    const waves = [...a.waves];
    for (const v of b.waves) {
      const k = waves.findIndex((w) => w.phase === v.phase);
      const known = waves[k];
      if (known) waves[k] = { phase: v.phase, cos: m.add(known.cos, v.cos), sin: m.add(known.sin, v.sin) };
      else waves.push(v);
    }
    return { plain: m.add(a.plain, b.plain), waves };
  };
  const multiply = (a: Waves<T> | null, b: Waves<T> | null): Waves<T> | null => {
    if (a === null || b === null) return null;
    if (a.waves.length > 0 && b.waves.length > 0) return null;
    const [wave, factor] = a.waves.length > 0 ? [a, b.plain] : [b, a.plain];
    return map(wave, (g) => m.multiply(g, factor));
  };
  /** cos and sin of a phase, through a phase already known that differs from it by an exact constant, or up to sign. */
  const turned = (phase: Expression): readonly [Waves<T>, Waves<T>] | null => {
    for (const [index, known] of phases.entries()) {
      for (const sign of [1, -1] as const) {
        const constant = constantBetween(phase, sign > 0 ? known : build.negation(known), variable, n);
        const value = constant && n.value(constant);
        if (!value) continue;
        // cos(s phi + d) = cos d cos phi - s sin d sin phi; sin(s phi + d) = sin d cos phi + s cos d sin phi.
        const [c, s] = [r.cos(value), r.sin(value)];
        if (c === null || s === null) return null;
        const wave = (cos: T, sin: T): Waves<T> => ({ plain: nothing, waves: [{ phase: index, cos: m.constant(cos), sin: m.constant(sign > 0 ? sin : r.negate(sin)) }] });
        return [wave(c, r.negate(s)), wave(s, c)];
      }
    }
    if (phases.length >= MOST_PHASES) return null;
    phases.push(phase);
    const one = m.constant(r.one);
    const phaseIndex = phases.length - 1;
    return [
      { plain: nothing, waves: [{ phase: phaseIndex, cos: one, sin: nothing }] },
      { plain: nothing, waves: [{ phase: phaseIndex, cos: nothing, sin: one }] },
    ];
  };
  const visit = (e: Expression): Waves<T> | null => {
    check();
    switch (e.kind) {
      case 'negation': {
        const value = visit(e.operand);
        return value && map(value, (g) => m.negate(g));
      }
      case 'sum': {
        let total: Waves<T> | null = { plain: nothing, waves: [] };
        for (const term of e.terms) {
          const value: Waves<T> | null = visit(term);
          if (value === null) return plain(model(e));
          total = add(total, value);
        }
        return total;
      }
      case 'product': {
        let total: Waves<T> | null = { plain: m.constant(r.one), waves: [] };
        for (const factor of e.factors) total = multiply(total, visit(factor));
        return total ?? plain(model(e));
      }
      case 'quotient': {
        const [numerator, denominator] = [visit(e.numerator), model(e.denominator)];
        const inverse = denominator && m.divide(m.constant(r.one), denominator);
        return inverse && numerator ? map(numerator, (g) => m.multiply(g, inverse)) : plain(model(e));
      }
      case 'call': {
        const argument = e.args[e.args.length - 1];
        const u = argument && model(argument);
        if (argument && u && u.valuation < 0) {
          if (e.function === 'cos') return turned(argument)?.[0] ?? null;
          if (e.function === 'sin') return turned(argument)?.[1] ?? null;
          const sign = r.isPositive(u.range) ? 1 : r.isNegative(u.range) ? -1 : null;
          const form = sign && oscillatingForm(e.function, e.args, sign);
          if (form) return visit(form);
        }
        return plain(model(e));
      }
      default:
        return plain(model(e));
    }
  };
  const [first, second] = [visit(f), visit(sum)];
  if (first === null || second === null) return null;
  const difference = add(first, map(second, (g) => m.negate(g)));
  const size = (g: Model<T>): T | null => {
    const range = g.coefficients.length === 0 && r.isZero(g.tail) ? r.zero : m.rangeOf(g);
    return range && r.upperEnd(r.absolute(range));
  };
  let total = size(difference.plain);
  for (const { cos, sin } of difference.waves) {
    const [c, s] = [size(cos), size(sin)];
    const amplitude = c === null || s === null ? null : r.sqrt(r.add(r.square(c), r.square(s)));
    if (total === null || amplitude === null) return null;
    total = r.add(total, amplitude);
  }
  return total && r.upperEnd(total);
}

/** The exact constant a - b, proved by the field; null where the two differ by more than a constant, or by one of no usual shape. */
function constantBetween<T>(a: Expression, b: Expression, variable: string, n: Numbers<T>): Expression | null {
  const difference = build.difference(a, b);
  const value = n.value(difference, new Map([[variable, n.r.fromRational(Q.rational(37, 8))]]));
  if (value === null) return null;
  const near = n.r.toDouble(value);
  if (Math.abs(near) > 100) return null;
  return exactNear(near, 1e-9).find((constant) => isExactlyZero(build.difference(difference, constant), [{ kind: 'relation', left: build.symbol(variable), relation: '>', right: build.number(0) }])) ?? null;
}
