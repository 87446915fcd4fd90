/**
 * Taylor coefficients of expressions along a solution, found one order after the other: coefficient k needs those up to k of what stands inside, and no more.
 * Source: Moore, Interval Analysis, 1966, ch. 11 (recursive generation of Taylor coefficients) (from memory).
 */
import type { Element } from '../../algebra/types.ts';
import { build, type Expression, freeSymbols, Q, structureKey } from '../../expression/index.ts';
import { describe } from '../../functions/index.ts';
import { Declined } from '../../outcome.ts';
import { add, addElements, type Context, isRational, isZero, monomial, multiplyElements, negateElement, Series } from '../../series/index.ts';
import { evaluate } from '../evaluate.ts';
import type { OpenSide } from '../open-side.ts';
import { bind } from '../session.ts';
import { divideElements } from './operator.ts';

/** The point is singular: there the equation has no solution as a power series with freely chosen values. */
export class Singular extends Error {}

/** Memoised coefficients of h^0, h^1, ... */
export class Taylor {
  private readonly known: Element[];
  constructor(
    private readonly next: (k: number) => Element,
    given: readonly Element[] = [],
  ) {
    this.known = [...given];
  }

  at(k: number): Element {
    while (this.known.length <= k) this.known.push(this.next(this.known.length));
    return this.known[k] as Element;
  }
}

const constant = (value: Element): Taylor => new Taylor(() => Q.ZERO, [value]);
const isNull = (e: Element): boolean => isRational(e) && e.num === 0n;

/** Functions whose derivatives are rational in themselves and each other, everywhere analytic: their coefficients follow from f(u)' = f'(u) u'. */
const ENTIRE = new Set(['sin', 'cos', 'sinh', 'cosh', 'exp', 'erf', 'erfc', 'airyAi', 'airyBi']);
const MOST_POWER = 64n;

/** Expressions in the variable (around the side's point, h = variable - point) and in symbols that stand for Taylor series. */
export class TaylorRoom {
  private readonly nodes = new Map<string, Taylor>();
  private readonly c: Context;
  constructor(
    private readonly side: OpenSide,
    private readonly variable: string,
    private readonly series: ReadonlyMap<string, Taylor>,
  ) {
    this.c = side.context;
  }

  of(e: Expression): Taylor {
    const key = structureKey(e);
    let found = this.nodes.get(key);
    if (!found) {
      found = this.build(e);
      this.nodes.set(key, found);
    }
    return found;
  }

  private build(e: Expression): Taylor {
    const symbols = freeSymbols(e);
    if (!symbols.some((s) => this.series.has(s))) return symbols.includes(this.variable) ? this.ofVariable(e) : constant(this.c.field.fromExpression(e));
    switch (e.kind) {
      case 'symbol':
        return this.series.get(e.name) as Taylor;
      case 'sum': {
        const parts = e.terms.map((t) => this.of(t));
        return new Taylor((k) => parts.reduce<Element>((total, p) => addElements(this.c, total, p.at(k)), Q.ZERO));
      }
      case 'negation': {
        const inner = this.of(e.operand);
        return new Taylor((k) => negateElement(this.c, inner.at(k)));
      }
      case 'product':
        return e.factors.map((f) => this.of(f)).reduce((a, b) => this.product(a, b));
      case 'quotient':
        return this.quotient(this.of(e.numerator), this.of(e.denominator));
      case 'power':
        return this.power(e.base, e.exponent);
      case 'root':
        return this.realRoot(e.degree, e.radicand);
      case 'call':
        return this.call(e.function, e.args);
      default:
        throw new Declined('no-expansion', 'The unknown function stands inside an integral, a sum or another operator, which is not solved; differentiate the equation until only derivatives are left.');
    }
  }

  /** What holds the variable alone is expanded by the rules for every function; it must be analytic at the point. */
  private ofVariable(e: Expression): Taylor {
    const { context: c, session } = this.side;
    const sided = c.notes.sided;
    const value = evaluate(session, this.side.fromVariable(e));
    return this.read(value instanceof Series ? value : constant(value), sided);
  }

  private read(value: Series | Taylor, sided: boolean): Taylor {
    if (value instanceof Taylor) return value;
    const { c } = this;
    if (value.element.kind !== 'local') throw new Singular();
    let index = 0;
    return new Taylor((k) => {
      for (;;) {
        const term = value.stream.at(index);
        if (!term) return Q.ZERO;
        if (term.coefficient instanceof Series || !isRational(term.exponent) || term.exponent.den !== 1n || term.exponent.num < 0n) {
          if (!(term.coefficient instanceof Series) && isZero(c, term.coefficient)) {
            index += 1;
            continue;
          }
          throw new Singular();
        }
        if (term.order) throw new Declined('no-expansion', 'An O-term in the equation leaves its later terms unknown; ask for fewer terms.');
        if (c.notes.sided !== sided) throw new Declined('no-expansion', 'A function in the equation is not analytic at the point (it differs on the two sides); choose another point.');
        if (term.exponent.num > BigInt(k)) return Q.ZERO;
        index += 1;
        if (term.exponent.num === BigInt(k)) return term.coefficient;
      }
    });
  }

  private product(a: Taylor, b: Taylor): Taylor {
    const { c } = this;
    return new Taylor((k) => {
      c.budget.check();
      let total: Element = Q.ZERO;
      for (let j = 0; j <= k; j += 1) {
        const x = a.at(j);
        if (isNull(x)) continue;
        total = addElements(c, total, multiplyElements(c, x, b.at(k - j)));
      }
      return total;
    });
  }

  private quotient(a: Taylor, b: Taylor): Taylor {
    const { c } = this;
    const q: Taylor = new Taylor((k) => {
      c.budget.check();
      const first = b.at(0);
      if (k === 0 && isZero(c, first)) throw new Singular();
      let total = a.at(k);
      for (let j = 0; j < k; j += 1) total = addElements(c, total, negateElement(c, multiplyElements(c, q.at(j), b.at(k - j))));
      return divideElements(c, total, first);
    });
    return q;
  }

  private power(base: Expression, exponent: Expression): Taylor {
    const { c } = this;
    if (base.kind === 'constant' && base.name === 'e') return this.call('exp', [exponent]);
    const moves = freeSymbols(exponent).some((s) => s === this.variable || this.series.has(s));
    if (moves) return this.call('exp', [build.product(exponent, build.call('log', base))]);
    const a = this.of(base);
    const alpha = c.field.fromExpression(exponent);
    if (isRational(alpha) && alpha.den === 1n && alpha.num >= 0n && alpha.num <= MOST_POWER) {
      if (alpha.num === 0n) return constant(Q.ONE);
      let result = a;
      for (let k = 1n; k < alpha.num; k += 1n) result = this.product(result, a);
      return result;
    }
    return this.generalPower(a, alpha);
  }

  /** a0 k p_k = sum over j = 1..k of (alpha j - (k - j)) a_j p_(k-j). */
  private generalPower(a: Taylor, alpha: Element): Taylor {
    const { c } = this;
    const p: Taylor = new Taylor((k) => {
      const first = a.at(0);
      if (k === 0) {
        if (isZero(c, first)) throw new Declined('no-expansion', 'A power or root in the equation is not analytic at the initial value, so that the solution need not be unique; choose another point.');
        return c.field.power(first, alpha);
      }
      let total: Element = Q.ZERO;
      for (let j = 1; j <= k; j += 1) {
        const weight = addElements(c, multiplyElements(c, alpha, Q.rational(j)), Q.rational(j - k));
        total = addElements(c, total, multiplyElements(c, weight, multiplyElements(c, a.at(j), p.at(k - j))));
      }
      return divideElements(c, total, multiplyElements(c, first, Q.rational(k)));
    });
    return p;
  }

  private realRoot(degree: Expression, radicand: Expression): Taylor {
    const { c } = this;
    const a = this.of(radicand);
    const alpha = divideElements(c, Q.ONE, c.field.fromExpression(degree));
    if (c.field.sign(a.at(0)) === -1) {
      const positive = this.generalPower(new Taylor((k) => negateElement(c, a.at(k))), alpha);
      return new Taylor((k) => negateElement(c, positive.at(k)));
    }
    return this.generalPower(a, alpha);
  }

  private call(id: string, args: readonly Expression[]): Taylor {
    const { c } = this;
    const description = describe(id);
    if (!description) throw new Declined('unknown-function', `The function ${id} is not known; write it with known functions.`);
    const moving = args.flatMap((a, i) => (freeSymbols(a).some((s) => s === this.variable || this.series.has(s)) ? [i] : []));
    const [index] = moving;
    if (index === undefined || moving.length > 1) {
      if (description.definition) return this.of(description.definition(args));
      throw new Declined('no-expansion', `The function ${description.title} of the unknown in several of its arguments is not solved for; rewrite the equation.`);
    }
    if (description.definition && !ENTIRE.has(id)) return this.of(description.definition(args));
    const inner = this.of(args[index] as Expression);
    if (id === 'log') return this.logarithm(inner);
    const slope = ENTIRE.has(id) ? (id === 'exp' ? build.call(id, ...args) : (description.derivative?.(args, index) ?? null)) : null;
    if (slope) {
      return new Taylor((k) => {
        if (k === 0) return id === 'exp' ? c.field.exp(inner.at(0)) : c.field.call(id, args.map((a) => this.of(a).at(0)));
        const rate = this.of(slope);
        let total: Element = Q.ZERO;
        for (let j = 1; j <= k; j += 1) {
          const x = inner.at(j);
          if (!isNull(x)) total = addElements(c, total, multiplyElements(c, multiplyElements(c, x, Q.rational(j)), rate.at(k - j)));
        }
        return multiplyElements(c, total, Q.rational(1, k));
      });
    }
    return this.composed(id, args, index, inner);
  }

  private logarithm(a: Taylor): Taylor {
    const { c } = this;
    const l: Taylor = new Taylor((k) => {
      const first = a.at(0);
      if (k === 0) {
        if (isZero(c, first)) throw new Declined('no-expansion', 'A logarithm in the equation is singular at the initial value; choose another point.');
        return c.field.log(first);
      }
      let total = multiplyElements(c, a.at(k), Q.rational(k));
      for (let j = 1; j < k; j += 1) total = addElements(c, total, negateElement(c, multiplyElements(c, multiplyElements(c, l.at(j), Q.rational(j)), a.at(k - j))));
      return divideElements(c, total, multiplyElements(c, first, Q.rational(k)));
    });
    return l;
  }

  /** f(u) = sum over j of f^(j)(u_0)/j! (u - u_0)^j, with the coefficients of f at u_0 from its own expansion there. */
  private composed(id: string, args: readonly Expression[], index: number, inner: Taylor): Taylor {
    const { c } = this;
    const offset = new Taylor((k) => (k === 0 ? Q.ZERO : inner.at(k)));
    const powers: Taylor[] = [constant(Q.ONE), offset];
    let outer: Taylor | null = null;
    const outerAt = (j: number): Element => {
      if (!outer) {
        const { session } = this.side;
        const sided = c.notes.sided;
        const hidden = "argument'";
        const value = add(c, inner.at(0), monomial(c, c.scale.local, Q.ONE));
        const tree = build.call(id, ...args.map((a, i) => (i === index ? build.symbol(hidden) : a)));
        const found = evaluate(bind(session, [[hidden, value]]), tree);
        outer = this.read(found instanceof Series ? found : constant(found), sided);
      }
      return outer.at(j);
    };
    return new Taylor((k) => {
      c.budget.check();
      let total: Element = Q.ZERO;
      for (let j = 0; j <= k; j += 1) {
        while (powers.length <= j) powers.push(this.product(powers[powers.length - 1] as Taylor, offset));
        const x = (powers[j] as Taylor).at(k);
        if (!isNull(x)) total = addElements(c, total, multiplyElements(c, outerAt(j), x));
      }
      return total;
    });
  }
}
