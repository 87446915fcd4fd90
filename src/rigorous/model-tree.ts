/** Local models of expression trees. */
import type { Expression, Rational } from '../expression/index.ts';
import { build, dependsOn, freeSymbols, Q } from '../expression/index.ts';
import type { RealArithmetic } from './arithmetic.ts';
import { type EnclosableFunction, evaluateTree, isElementaryName, rationalOf, type TreeArithmetic } from './enclose.ts';
import type { Model, ModelArithmetic } from './model.ts';

/** What models need of a function's description beyond enclosures. */
export interface ModellableFunction extends EnclosableFunction {
  readonly derivative?: (args: readonly Expression[], index: number) => Expression | null;
}

export interface ModelTreeContext<T> {
  readonly m: ModelArithmetic<T>;
  readonly trees: TreeArithmetic<T>;
  /** The real operations, where T is real. */
  readonly real: RealArithmetic<T> | null;
  readonly describe?: (id: string) => ModellableFunction | null | undefined;
  /** Models of the symbols. */
  readonly environment: ReadonlyMap<string, Model<T>>;
  /** Proof that a tree has the value zero at s = 0, where its enclosure there contains zero but is not exactly zero. */
  readonly vanishes?: (e: Expression) => boolean;
  /** A model of a call that is not elementary and has no definition, from its argument models: supplied by the room that knows the function. */
  readonly call?: (id: string, args: readonly Expression[], models: readonly Model<T>[]) => Model<T> | null;
  readonly check?: () => void;
}

/** The local model of a tree; null where it cannot be enclosed on the domain (a singularity inside, an unknown function). */
export function modelOfTree<T>(e: Expression, context: ModelTreeContext<T>): Model<T> | null {
  const { m, trees, environment } = context;
  const { a } = m;
  const known = new Map<Expression, Model<T> | null>();
  const varying = [...environment.keys()];
  const isConstant = (node: Expression): boolean => {
    if (varying.length === 1) return !dependsOn(node, varying[0] ?? '');
    const free = freeSymbols(node);
    return !varying.some((name) => free.includes(name));
  };
  const visit = (node: Expression): Model<T> | null => {
    const seen = known.get(node);
    if (seen !== undefined) return seen;
    context.check?.();
    const value = settle(node, compute(node));
    known.set(node, value);
    return value;
  };
  /** An undecided leading zero is settled by the proof of vanishing, where there is one. */
  const settle = (node: Expression, value: Model<T> | null): Model<T> | null => {
    if (value === null || !context.vanishes) return value;
    const lead = value.coefficients[0];
    if (lead === undefined || value.valuation !== 0 || a.isZero(lead) || !a.containsZero(lead) || !context.vanishes(node)) return value;
    return withoutLead(value);
  };
  const withoutLead = (value: Model<T>): Model<T> => {
    const rest = m.polynomial([a.zero, ...value.coefficients.slice(1)]);
    const length = value.coefficients.length;
    return a.isZero(value.tail) ? rest : m.add(rest, { valuation: length, coefficients: [], tail: value.tail, range: value.tail });
  };
  const constantOf = (node: Expression): Model<T> | null => {
    const value = evaluateTree(node, new Map(), trees, context.describe);
    return value === null ? null : m.constant(value);
  };
  const compute = (node: Expression): Model<T> | null => {
    if (node.kind === 'symbol') return environment.get(node.name) ?? null;
    if (isConstant(node)) return constantOf(node);
    switch (node.kind) {
      case 'negation': {
        const value = visit(node.operand);
        return value && m.negate(value);
      }
      case 'sum': {
        let total: Model<T> | null = null;
        for (const term of node.terms) {
          const value = visit(term);
          if (value === null) return null;
          total = total === null ? value : m.add(total, value);
        }
        return total;
      }
      case 'product': {
        let total: Model<T> | null = null;
        for (const factor of node.factors) {
          const value = visit(factor);
          if (value === null) return null;
          total = total === null ? value : m.multiply(total, value);
        }
        return total;
      }
      case 'quotient': {
        const [numerator, denominator] = [visit(node.numerator), visit(node.denominator)];
        return numerator && denominator && m.divide(numerator, denominator);
      }
      case 'power':
        return power(node.base, node.exponent);
      case 'root': {
        const degree = rationalOf(node.degree);
        const radicand = visit(node.radicand);
        return degree === null || radicand === null || !Q.isInteger(degree) || degree.num < 1n ? null : root(radicand, Number(degree.num));
      }
      case 'call':
        return call(node.function, node.args, node);
      default:
        return null;
    }
  };
  const root = (radicand: Model<T>, degree: number): Model<T> | null => {
    const q: Rational = { num: 1n, den: BigInt(degree) };
    const lead = radicand.coefficients[0];
    if (context.real && degree % 2 === 1 && lead !== undefined && context.real.isNegative(lead)) {
      // The real root: on the left half line -(-u)^(1/n). A power of s that is not a whole multiple of n leaves no such form on both sides.
      const value = m.powerRational(m.negate(radicand), q);
      return value && m.negate(value);
    }
    return m.powerRational(radicand, q);
  };
  const power = (base: Expression, exponent: Expression): Model<T> | null => {
    if (base.kind === 'constant' && base.name === 'e') {
      const value = visit(exponent);
      return value && m.elementary('exp', value);
    }
    const value = visit(base);
    if (value === null) return null;
    const q = rationalOf(exponent);
    if (q !== null) return Math.abs(Number(q.num)) > 1e6 ? null : m.powerRational(value, q);
    if (isConstant(exponent)) {
      const y = evaluateTree(exponent, new Map(), trees, context.describe);
      return y === null ? null : m.power(value, y);
    }
    // u^w = exp(w log u).
    const [w, logarithm] = [visit(exponent), m.elementary('log', value)];
    return w && logarithm && m.elementary('exp', m.multiply(w, logarithm));
  };
  const call = (id: string, args: readonly Expression[], node: Expression): Model<T> | null => {
    const models: Model<T>[] = [];
    for (const arg of args) {
      const value = visit(arg);
      if (value === null) return null;
      models.push(value);
    }
    const [first] = models;
    if (first === undefined) return null;
    if (models.length === 1 && isElementaryName(id)) return m.elementary(id, first);
    if (id === 'abs' || id === 'sign') return signed(id, first);
    if (id === 'max' || id === 'min') return extreme(id, models);
    const described = context.describe?.(id);
    if (id === 'atan2' && models[1]) return angle(first, models[1]);
    if (described?.definition) return visit(described.definition(args));
    return context.call?.(id, args, models) ?? byDerivative(id, args, models, node);
  };
  const signOnDomain = (f: Model<T>): 1 | -1 | null => {
    const r = context.real;
    if (r === null || f.coefficients.length === 0) return null;
    // s^v keeps its sign for even v, and on [0, 1] for every v.
    if (f.valuation % 2 !== 0 && !r.isNonNegative(m.domain)) return null;
    return r.isPositive(f.range) ? 1 : r.isNegative(f.range) ? -1 : null;
  };
  const signed = (id: 'abs' | 'sign', f: Model<T>): Model<T> | null => {
    const sign = signOnDomain(f);
    if (sign === null) return null;
    if (id === 'sign') return m.constant(a.fromInteger(sign));
    return sign > 0 ? f : m.negate(f);
  };
  const extreme = (id: 'max' | 'min', models: readonly Model<T>[]): Model<T> | null => {
    let best: Model<T> | null = null;
    for (const candidate of models) {
      if (best === null) {
        best = candidate;
        continue;
      }
      const sign = signOnDomain(m.subtract(candidate, best));
      if (sign === null) return null;
      if (sign > 0 === (id === 'max')) best = candidate;
    }
    return best;
  };
  const angle = (y: Model<T>, x: Model<T>): Model<T> | null => {
    // In the right half plane atan(y/x); elsewhere the quarter turns are added where y keeps its sign.
    if (signOnDomain(x) === 1) {
      const quotient = m.divide(y, x);
      return quotient && m.elementary('atan', quotient);
    }
    const sign = signOnDomain(y);
    const quotient = sign === null ? null : m.divide(x, y);
    const value = quotient === null ? null : m.elementary('atan', quotient);
    return sign === null || value === null ? null : m.subtract(m.constant(a.multiply(a.fromInteger(sign), a.divideInteger(a.constant('pi'), 2))), value);
  };

  /** A function of one varying argument whose derivative can be modelled: f(u) = f(u(0)) + int f'(P) dP. */
  const deriving = new Set<string>();
  const byDerivative = (id: string, args: readonly Expression[], models: readonly Model<T>[], node: Expression): Model<T> | null => {
    const description = context.describe?.(id);
    const index = models.findIndex((_, k) => !isConstant(args[k] ?? node));
    const varyingCount = args.filter((arg) => !isConstant(arg)).length;
    const argument = models[index];
    if (!description?.derivative || varyingCount !== 1 || argument === undefined || deriving.has(id)) return null;
    const u = m.regular(argument);
    if (u === null) return null;
    const place = 'argument of the function';
    const slopeTree = description.derivative(args.map((arg, k) => (k === index ? build.symbol(place) : arg)), index);
    if (slopeTree === null) return null;
    const inner = (argumentModel: Model<T>): Model<T> | null => modelOfTree(slopeTree, { ...context, environment: new Map([[place, argumentModel]]), vanishes: undefined, call: context.call });
    deriving.add(id);
    const constants = args.map((arg, k) => (k === index ? (u.coefficients[0] ?? a.zero) : evaluateTree(arg, new Map(), trees, context.describe)));
    const complete = constants.flatMap((c) => (c === null ? [] : [c]));
    const start = complete.length === constants.length ? valueAt(id, args, index, complete) : null;
    const slope = start === null || mentions(slopeTree, id) ? null : inner(m.polynomialPart(u));
    const whole = slope === null || a.isZero(u.tail) ? null : inner({ valuation: 0, coefficients: [a.union(u.range, m.polynomialPart(u).range)], tail: a.zero, range: a.union(u.range, m.polynomialPart(u).range) });
    deriving.delete(id);
    return start === null || slope === null ? null : m.integrate(u, start, slope, whole && m.rangeOf(whole));
  };
  const valueAt = (id: string, args: readonly Expression[], index: number, values: readonly T[]): T | null => {
    const names = args.map((_, k) => `argument ${k}`);
    return evaluateTree(build.call(id, ...args.map((arg, k) => (k === index ? build.symbol(names[k] ?? '') : arg))), new Map(values.flatMap((v, k) => (k === index ? [[names[k] ?? '', v] as const] : []))), trees, context.describe);
  };
  return visit(e);
}

function mentions(e: Expression, id: string): boolean {
  const stack: Expression[] = [e];
  for (let node = stack.pop(); node !== undefined; node = stack.pop()) {
    if (node.kind === 'call') {
      if (node.function === id) return true;
      stack.push(...node.args);
    } else if (node.kind === 'sum') stack.push(...node.terms);
    else if (node.kind === 'product') stack.push(...node.factors);
    else if (node.kind === 'quotient') stack.push(node.numerator, node.denominator);
    else if (node.kind === 'negation') stack.push(node.operand);
    else if (node.kind === 'power') stack.push(node.base, node.exponent);
    else if (node.kind === 'root') stack.push(node.radicand);
  }
  return false;
}
