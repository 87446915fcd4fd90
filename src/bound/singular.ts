/** Where no bound exists: finds the place, and proves by a local model there (or by a change of sign) that the remainder is unbounded. */
import { build, type Expression, Q, substitute } from '../expression/index.ts';
import { type Model, modelArithmetic } from '../rigorous/index.ts';
import { exactNear } from './exactNear.ts';
import { logModelOf, middleModel, modelOf } from './local.ts';
import type { Numbers } from './numbers.ts';
import type { PieceTask } from './pieces.ts';
import { isExactlyZero } from './region.ts';
import type { Measure } from './types.ts';

/** A proven place near x at which the remainder (or its ratio to f) is unbounded within the task's piece; null where none was proved. */
export function provenPlace<T>(x: T, task: PieceTask<T>, width: number, n: Numbers<T>, variable: string, measure: Measure): Expression | null {
  const { r } = n;
  const middle = r.toDouble(x);
  for (const place of exactNear(middle, Math.max(width, Math.abs(middle) * 1e-12))) {
    const p = n.value(place);
    if (p === null) continue;
    // Inside the task, its ends included.
    if (r.isNegative(r.subtract(p, task.x0)) || r.isPositive(r.subtract(p, task.x1))) continue;
    for (const direction of [1, -1]) {
      for (const [h, q] of [[2 ** -6, 1], [2 ** -12, 1], [2 ** -6, 2], [2 ** -6, 3]] as const) {
        // x = p +- h s^q: roots of the distance have power series in s.
        const m = modelArithmetic(r, n.unitRight, 10, true, r);
        const step = r.fromRational(Q.fromDouble(direction * h));
        const leaf = m.polynomial([p, ...Array.from({ length: q - 1 }, () => r.zero), step]);
        const vanishes = (e: Expression): boolean => isExactlyZero(substitute(e, variable, place), []);
        const f = logModelOf(task.expansion.function, n, m, variable, leaf, vanishes);
        const s = f && modelOf(task.sum, n, m, variable, leaf, vanishes);
        const [main, ...logs] = f ?? [];
        if (!main || !s) continue;
        const difference = m.subtract(main, s);
        if (logs.length > 0) {
          if (measure === 'absolute' && growsLikeLogarithm(r, [difference, ...logs])) return place;
          continue;
        }
        const g = measure === 'absolute' ? difference : m.divide(difference, main);
        const lead = g?.coefficients[0];
        if (g && g.valuation < 0 && lead !== undefined && !r.containsZero(lead)) return place;
      }
    }
  }
  return measure === 'relative' ? (zeroBySign(task, middle, width, n, variable) ?? poleBySign(task, middle, width, n, variable)) : poleBySign(task, middle, width, n, variable);
}

/** The least power of s has a negative exponent, or exponent zero with a logarithm, and a coefficient that is not zero at its highest logarithm. */
function growsLikeLogarithm<T>(r: Numbers<T>['r'], f: readonly Model<T>[]): boolean {
  const present = f.map((g, j) => ({ g, j })).filter(({ g }) => g.coefficients.length > 0);
  const least = Math.min(...present.map(({ g }) => g.valuation));
  const top = present.filter(({ g }) => g.valuation === least).pop();
  const lead = top?.g.coefficients[0];
  return top !== undefined && lead !== undefined && !r.containsZero(lead) && (least < 0 || (least === 0 && top.j > 0));
}

/** The place to 15 digits. */
const decimalPlace = (x: number): Expression => build.number(Q.fromDecimal(x.toPrecision(15)) ?? Q.fromDouble(x));

/** f changes sign on a small piece while f - sum does not vanish there: the ratio is unbounded. The place is given to 15 digits. */
function zeroBySign<T>(task: PieceTask<T>, middle: number, width: number, n: Numbers<T>, variable: string): Expression | null {
  const { r } = n;
  const spread = Math.max(width, Math.abs(middle) * 1e-9, 1e-12);
  const [a, b] = [r.fromRational(Q.fromDouble(middle - spread)), r.fromRational(Q.fromDouble(middle + spread))];
  if (r.isNegative(r.subtract(a, task.x0)) || r.isPositive(r.subtract(b, task.x1))) return null;
  const at = (x: T): T | null => n.value(task.expansion.function, new Map([[variable, x]]));
  const [fa, fb, all] = [at(a), at(b), at(r.union(a, b))];
  if (fa === null || fb === null || all === null) return null;
  const changes = (r.isPositive(fa) && r.isNegative(fb)) || (r.isNegative(fa) && r.isPositive(fb));
  if (!changes) return null;
  // f - sum by its own model on the piece: the two nearly cancel.
  const models = middleModel(task.expansion, task.sum, a, b, n, variable, 10, () => undefined);
  const rest = models && models.m.rangeOf(models.remainder);
  return rest !== null && !r.containsZero(rest) ? decimalPlace(middle) : null;
}

/** A denominator changes sign on a small piece where what it divides has no zero and the rest is bounded: f has a pole there, which a bounded sum leaves. */
function poleBySign<T>(task: PieceTask<T>, middle: number, width: number, n: Numbers<T>, variable: string): Expression | null {
  const { r } = n;
  const spread = Math.max(width, Math.abs(middle) * 1e-9, 1e-12);
  const [a, b] = [r.fromRational(Q.fromDouble(middle - spread)), r.fromRational(Q.fromDouble(middle + spread))];
  if (r.isNegative(r.subtract(a, task.x0)) || r.isPositive(r.subtract(b, task.x1))) return null;
  const over = (e: Expression, x: T): T | null => n.value(e, new Map([[variable, x]]));
  const whole = r.union(a, b);
  const bounded = (e: Expression): boolean => over(e, whole) !== null;
  const nonzero = (e: Expression): boolean => {
    const value = over(e, whole);
    return value !== null && !r.containsZero(value);
  };
  const changesSign = (e: Expression): boolean => {
    const [fa, fb] = [over(e, a), over(e, b)];
    return fa !== null && fb !== null && bounded(e) && ((r.isPositive(fa) && r.isNegative(fb)) || (r.isNegative(fa) && r.isPositive(fb)));
  };
  const others = (list: readonly Expression[], k: number): readonly Expression[] => list.filter((_, i) => i !== k);
  const hasPole = (e: Expression): boolean => {
    switch (e.kind) {
      case 'negation':
        return hasPole(e.operand);
      case 'quotient':
        return (changesSign(e.denominator) && nonzero(e.numerator)) || (nonzero(e.denominator) && hasPole(e.numerator));
      case 'product':
        return e.factors.some((factor, k) => hasPole(factor) && others(e.factors, k).every(nonzero));
      case 'sum':
        return e.terms.some((term, k) => hasPole(term) && others(e.terms, k).every(bounded));
      case 'power':
        return e.exponent.kind === 'number' ? e.exponent.value.num < 0n && changesSign(e.base) : e.exponent.kind === 'negation' && e.exponent.operand.kind === 'number' && e.exponent.operand.value.num > 0n && changesSign(e.base);
      case 'call': {
        const [arg] = e.args;
        return arg !== undefined && e.function === 'tan' && changesSign(build.call('cos', arg)) && nonzero(build.call('sin', arg));
      }
      default:
        return false;
    }
  };
  return hasPole(task.expansion.function) && bounded(task.sum) ? decimalPlace(middle) : null;
}
