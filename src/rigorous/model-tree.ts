/** Local models of expression trees. */
import { build, dependsOn, type Expression, freeSymbols, type IntegralNode, Q, rationalOf, walk } from '../expression/index.ts';
import type { RealArithmetic } from './arithmetic.ts';
import { type EnclosableFunction, evaluateTree, isElementaryName, type TreeArithmetic } from './enclose.ts';
import { logArithmetic, type LogModel } from './log-model.ts';
import { realOperations } from './model-real.ts';
import { growingExponent, joinedLogarithms, timesDecay } from './model-rewriting.ts';
import type { Model, ModelArithmetic } from './model.types.ts';

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
  readonly call?: (id: string, args: readonly Expression[], models: readonly Model<T>[], isConstant: (e: Expression) => boolean) => Model<T> | null;
  /** An identity for a call that suits the place of its arguments; what it returns is modelled instead. */
  readonly rewrite?: (id: string, args: readonly Expression[], models: readonly Model<T>[]) => Expression | null;
  /** The model of a definite integral whose body or limits vary, in the environment of the symbols beside it. */
  readonly integral?: (node: IntegralNode, environment: ReadonlyMap<string, Model<T>>) => Model<T> | null;
  /** An equal tree in which what cancels symbolically is gone: exponents that grow are added through it. */
  readonly simplify?: (e: Expression) => Expression;
  readonly check?: () => void;
  /** Functions being modelled through their derivatives, to end circles. */
  readonly deriving?: ReadonlySet<string>;
}

/** The local model of a tree without logarithms of s; null where it cannot be enclosed on the domain (a singularity inside, an unknown function). */
export function modelOfTree<T>(e: Expression, context: ModelTreeContext<T>): Model<T> | null {
  const value = logModelOfTree(e, context);
  return value !== null && value.length === 1 ? (value[0] ?? null) : null;
}

/** The local model of a tree, powers of log s included (only on the one-sided domain). */
export function logModelOfTree<T>(e: Expression, context: ModelTreeContext<T>): LogModel<T> | null {
  const { m, trees, environment } = context;
  const logs = logArithmetic(m, context.real);
  const { a } = m;
  const reals = realOperations(m, context.real);
  const known = new Map<Expression, LogModel<T> | null>();
  const varying = [...environment.keys()];
  const isConstant = (node: Expression): boolean => {
    if (varying.length === 1) return !dependsOn(node, varying[0] ?? '');
    const free = freeSymbols(node);
    return !varying.some((name) => free.includes(name));
  };
  const visit = (node: Expression): LogModel<T> | null => {
    const seen = known.get(node);
    if (seen !== undefined) return seen;
    context.check?.();
    const value = settle(node, compute(node));
    known.set(node, value);
    return value;
  };
  /** An undecided leading zero is settled by the proof of vanishing, where there is one. */
  const settle = (node: Expression, value: LogModel<T> | null): LogModel<T> | null => {
    const [only] = value ?? [];
    if (value === null || value.length !== 1 || only === undefined || !context.vanishes) return value;
    const lead = only.coefficients[0];
    if (lead === undefined || only.valuation !== 0 || a.isZero(lead) || !a.containsZero(lead) || !context.vanishes(node)) return value;
    return [withoutLead(only)];
  };
  const withoutLead = (value: Model<T>): Model<T> => {
    const rest = m.polynomial([a.zero, ...value.coefficients.slice(1)]);
    const length = value.coefficients.length;
    return a.isZero(value.tail) ? rest : m.add(rest, { valuation: length, coefficients: [], tail: value.tail, range: value.tail });
  };
  const constantOf = (node: Expression): LogModel<T> | null => {
    const value = evaluateTree(node, new Map(), trees, context.describe);
    return value === null ? null : [m.constant(value)];
  };
  const pure = (value: LogModel<T> | null): Model<T> | null => (value !== null && value.length === 1 ? (value[0] ?? null) : null);
  const one = (value: Model<T> | null): LogModel<T> | null => (value === null ? null : [value]);
  const compute = (node: Expression): LogModel<T> | null => {
    if (node.kind === 'symbol') {
      const leaf = environment.get(node.name);
      return leaf ? [leaf] : null;
    }
    if (isConstant(node)) return constantOf(node);
    switch (node.kind) {
      case 'negation': {
        const value = visit(node.operand);
        return value && value.map((f) => m.negate(f));
      }
      case 'sum': {
        const joined = unbounded ? joinedLogarithms(node.terms) : null;
        return joined ? visit(joined) : fold(node.terms, (x, y) => logs.add(x, y));
      }
      case 'product':
        return withExponents(node) ?? fold(node.factors, (x, y) => logs.multiply(x, y));
      case 'quotient': {
        const together = withExponents(node);
        if (together !== null) return together;
        const [numerator, denominator] = [visit(node.numerator), visit(node.denominator)];
        if (denominator === null) return withoutGrowth(node.numerator, node.denominator);
        if (numerator === null) return null;
        const divisor = pure(denominator);
        if (divisor !== null) return logs.each(numerator, (f) => m.divide(f, divisor));
        const inverse = logs.power(denominator, { num: -1n, den: 1n });
        return inverse && logs.multiply(numerator, inverse);
      }
      case 'power':
        return power(node.base, node.exponent);
      case 'root': {
        const degree = rationalOf(node.degree);
        const radicand = pure(visit(node.radicand));
        return degree === null || radicand === null || !Q.isInteger(degree) || degree.num < 1n ? null : one(reals.root(radicand, Number(degree.num)));
      }
      case 'call':
        return call(node.function, node.args, node);
      case 'integral':
        return one(context.integral?.(node, environment) ?? null);
      default:
        return null;
    }
  };
  /** A product with several exponentials of unbounded arguments: the arguments are added first, so that what cancels between them does. Null where there are not two of them. */
  const withExponents = (node: Expression): LogModel<T> | null => {
    const exponents: { readonly model: LogModel<T>; readonly tree: Expression }[] = [];
    const others: { readonly factor: LogModel<T>; readonly below: boolean }[] = [];
    let grows = 0;
    const take = (e: Expression, below: boolean): boolean => {
      if (e.kind === 'product') return e.factors.every((factor) => take(factor, below));
      if (e.kind === 'quotient') return take(e.numerator, below) && take(e.denominator, !below);
      const exponent = e.kind === 'power' && e.base.kind === 'constant' && e.base.name === 'e' ? e.exponent : e.kind === 'call' && e.function === 'exp' ? (e.args[0] ?? null) : null;
      if (exponent !== null && !isConstant(exponent)) {
        const u = visit(exponent);
        if (u === null) return false;
        if (u.some((f) => f.valuation < 0)) grows += 1;
        exponents.push(below ? { model: u.map((f) => m.negate(f)), tree: build.negation(exponent) } : { model: u, tree: exponent });
        return true;
      }
      if (e.kind === 'call' && context.rewrite && !isConstant(e)) {
        const models: Model<T>[] = [];
        for (const arg of e.args) {
          const f = pure(visit(arg));
          if (f === null) return false;
          models.push(f);
        }
        const rewritten = models.some((f) => f.valuation < 0) ? context.rewrite(e.function, e.args, models) : null;
        if (rewritten) return take(rewritten, below);
      }
      const factor = visit(e);
      if (factor === null) return false;
      others.push({ factor, below });
      return true;
    };
    if (!unbounded || !take(node, false) || grows < 2) return null;
    let total: LogModel<T> | null = [m.constant(a.zero)];
    for (const u of exponents) total = logs.add(total, u.model);
    // What cancels only in exact terms leaves a coefficient about zero at a negative power.
    const undecided = total.some((f) => f.valuation < 0 && f.coefficients[0] !== undefined && a.containsZero(f.coefficients[0]));
    if (undecided && context.simplify) total = visit(context.simplify(build.sum(...exponents.map((u) => openAtInfinity(u.tree)))));
    if (total === null) return null;
    let result: LogModel<T> | null = logs.elementary('exp', total);
    for (const { factor, below } of others) {
      const part: LogModel<T> | null = below ? logs.power(factor, { num: -1n, den: 1n }) : factor;
      result = result && part && logs.multiply(result, part);
    }
    return result;
  };
  /** A tree of sums, products and negations with its calls of unbounded arguments rewritten. */
  const openAtInfinity = (e: Expression): Expression => {
    switch (e.kind) {
      case 'sum':
        return build.sum(...e.terms.map(openAtInfinity));
      case 'product':
        return build.product(...e.factors.map(openAtInfinity));
      case 'negation':
        return build.negation(openAtInfinity(e.operand));
      case 'call': {
        const models: Model<T>[] = [];
        for (const arg of e.args) {
          const f = pure(visit(arg));
          if (f === null) return e;
          models.push(f);
        }
        return (models.some((f) => f.valuation < 0) ? context.rewrite?.(e.function, e.args, models) : null) ?? e;
      }
      default:
        return e;
    }
  };
  /** Only where a symbol itself grows without bound are products taken apart. */
  const unbounded = [...environment.values()].some((leaf) => leaf.valuation < 0);
  /** N/D where D is a sum with e^u, u growing: N e^-u / (D e^-u), the second computed term by term. */
  const withoutGrowth = (numerator: Expression, denominator: Expression): LogModel<T> | null => {
    const u = growingExponent(denominator);
    const model = u && pure(visit(u));
    if (!u || !model || model.valuation >= 0) return null;
    const factor = build.call('exp', build.negation(u));
    const scaled = timesDecay(denominator, u, factor);
    return scaled && visit(build.quotient(build.product(numerator, factor), scaled));
  };
  const fold = (members: readonly Expression[], combine: (x: LogModel<T>, y: LogModel<T>) => LogModel<T> | null): LogModel<T> | null => {
    let total: LogModel<T> | null = null;
    for (const member of members) {
      const value = visit(member);
      if (value === null) return null;
      total = total === null ? value : combine(total, value);
      if (total === null) return null;
    }
    return total;
  };
  const power = (base: Expression, exponent: Expression): LogModel<T> | null => {
    if (base.kind === 'constant' && base.name === 'e') {
      const value = visit(exponent);
      return value && logs.elementary('exp', value);
    }
    const value = visit(base);
    if (value === null) return null;
    const q = rationalOf(exponent);
    if (q !== null) return Math.abs(Number(q.num)) > 1e6 ? null : logs.power(value, q);
    if (isConstant(exponent)) {
      const y = evaluateTree(exponent, new Map(), trees, context.describe);
      const u = pure(value);
      return y === null || u === null ? null : one(m.power(u, y));
    }
    // u^w = exp(w log u).
    const [w, logarithm] = [visit(exponent), logs.elementary('log', value)];
    const product = w && logarithm && logs.multiply(w, logarithm);
    return product && logs.elementary('exp', product);
  };
  const call = (id: string, args: readonly Expression[], node: Expression): LogModel<T> | null => {
    const values: LogModel<T>[] = [];
    for (const arg of args) {
      const value = visit(arg);
      if (value === null) return null;
      values.push(value);
    }
    const [only] = values;
    if (only !== undefined && values.length === 1 && isElementaryName(id)) {
      const value = logs.elementary(id, only);
      // At a pole of tan the zero of cos can be settled by the proof of vanishing.
      if (value === null && id === 'tan' && args[0]) return visit(build.quotient(build.call('sin', args[0]), build.call('cos', args[0])));
      return value;
    }
    const models: Model<T>[] = [];
    for (const value of values) {
      const f = pure(value);
      if (f === null) return null;
      models.push(f);
    }
    const [first] = models;
    if (first === undefined) return null;
    if (id === 'abs' || id === 'sign') return one(reals.signed(id, first));
    if (id === 'max' || id === 'min') return one(reals.extreme(id, models));
    const described = context.describe?.(id);
    if (id === 'atan2' && models[1]) return one(reals.angle(first, models[1]));
    if (described?.definition) return visit(described.definition(args));
    const rewritten = context.rewrite?.(id, args, models);
    if (rewritten) return visit(rewritten);
    return one(byDerivative(id, args, models, node) ?? context.call?.(id, args, models, isConstant) ?? null);
  };

  /** A function of one varying argument whose derivative can be modelled: f(u) = f(u(0)) + int f'(P) dP. */
  const byDerivative = (id: string, args: readonly Expression[], models: readonly Model<T>[], node: Expression): Model<T> | null => {
    const description = context.describe?.(id);
    const index = models.findIndex((_, k) => !isConstant(args[k] ?? node));
    const varyingCount = args.filter((arg) => !isConstant(arg)).length;
    const argument = models[index];
    if (!description?.derivative || varyingCount !== 1 || argument === undefined || context.deriving?.has(id)) return null;
    const u = m.regular(argument);
    if (u === null) return null;
    const place = 'argument of the function';
    const slopeTree = description.derivative(args.map((arg, k) => (k === index ? build.symbol(place) : arg)), index);
    if (slopeTree === null) return null;
    const inner = (argumentModel: Model<T>): Model<T> | null => modelOfTree(slopeTree, { ...context, environment: new Map([[place, argumentModel]]), vanishes: undefined, deriving: new Set([...(context.deriving ?? []), id]) });
    const constants = args.map((arg, k) => (k === index ? (u.coefficients[0] ?? a.zero) : evaluateTree(arg, new Map(), trees, context.describe)));
    const complete = constants.flatMap((c) => (c === null ? [] : [c]));
    const start = complete.length === constants.length ? valueAt(id, args, index, complete) : null;
    const slope = start === null || mentions(slopeTree, id) ? null : inner(m.polynomialPart(u));
    const whole = slope === null || a.isZero(u.tail) ? null : inner({ valuation: 0, coefficients: [a.union(u.range, m.polynomialPart(u).range)], tail: a.zero, range: a.union(u.range, m.polynomialPart(u).range) });
    return start === null || slope === null ? null : m.integrate(u, start, slope, whole && m.rangeOf(whole));
  };
  const valueAt = (id: string, args: readonly Expression[], index: number, values: readonly T[]): T | null => {
    const names = args.map((_, k) => `argument ${k}`);
    return evaluateTree(build.call(id, ...args.map((arg, k) => (k === index ? build.symbol(names[k] ?? '') : arg))), new Map(values.flatMap((v, k) => (k === index ? [[names[k] ?? '', v] as const] : []))), trees, context.describe);
  };
  return visit(e);
}

const mentions = (e: Expression, id: string): boolean => [...walk(e)].some((node) => node.kind === 'call' && node.function === id);
