/** Local models of expression trees. */
import { type Expression, type Rational, rationalOf } from '../expression/index.ts';
import { build, dependsOn, freeSymbols, Q, sameExpression } from '../expression/index.ts';
import type { ElementaryName, RealArithmetic } from './arithmetic.ts';
import { type EnclosableFunction, evaluateTree, isElementaryName, type TreeArithmetic } from './enclose.ts';
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
  readonly call?: (id: string, args: readonly Expression[], models: readonly Model<T>[], isConstant: (e: Expression) => boolean) => Model<T> | null;
  /** An identity for a call that suits the place of its arguments; what it returns is modelled instead. */
  readonly rewrite?: (id: string, args: readonly Expression[], models: readonly Model<T>[]) => Expression | null;
  /** An equal tree in which what cancels symbolically is gone: exponents that grow are added through it. */
  readonly simplify?: (e: Expression) => Expression;
  readonly check?: () => void;
  /** Functions being modelled through their derivatives, to end circles. */
  readonly deriving?: ReadonlySet<string>;
}

/** sum over j of (log s)^j times model j, on (0, 1]. */
export type LogModel<T> = readonly Model<T>[];

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
        return degree === null || radicand === null || !Q.isInteger(degree) || degree.num < 1n ? null : one(root(radicand, Number(degree.num)));
      }
      case 'call':
        return call(node.function, node.args, node);
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
    if (id === 'abs' || id === 'sign') return one(signed(id, first));
    if (id === 'max' || id === 'min') return one(extreme(id, models));
    const described = context.describe?.(id);
    if (id === 'atan2' && models[1]) return one(angle(first, models[1]));
    if (described?.definition) return visit(described.definition(args));
    const rewritten = context.rewrite?.(id, args, models);
    if (rewritten) return visit(rewritten);
    return one(byDerivative(id, args, models, node) ?? context.call?.(id, args, models, isConstant) ?? null);
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

/** c log u - c log v as c log(u/v), wherever two terms of a sum go together so; null where none do. */
function joinedLogarithms(terms: readonly Expression[]): Expression | null {
  interface Part {
    readonly negative: boolean;
    readonly others: Expression;
    readonly argument: Expression;
  }
  const partOf = (e: Expression): Part | null => {
    if (e.kind === 'negation') {
      const inner = partOf(e.operand);
      return inner && { ...inner, negative: !inner.negative };
    }
    if (e.kind === 'call') return e.function === 'log' && e.args[0] ? { negative: false, others: build.number(1), argument: e.args[0] } : null;
    if (e.kind !== 'product') return null;
    const index = e.factors.findIndex((factor) => factor.kind === 'call' && factor.function === 'log');
    const factor = e.factors[index];
    if (factor?.kind !== 'call' || !factor.args[0]) return null;
    let negative = false;
    const others = e.factors.filter((_, k) => k !== index).map((other) => {
      const minus = other.kind === 'number' && other.value.num < 0n;
      if (minus) negative = !negative;
      return other.kind === 'number' && minus ? build.number(Q.negate(other.value)) : other;
    });
    return { negative, others: build.product(...others.filter((other) => !build.isOneNumber(other))), argument: factor.args[0] };
  };
  const rest = [...terms];
  for (const [i, one] of terms.entries()) {
    const first = partOf(one);
    if (!first) continue;
    for (const other of terms.slice(i + 1)) {
      const second = partOf(other);
      if (!second || first.negative === second.negative || !sameExpression(first.others, second.others)) continue;
      const [above, below] = first.negative ? [second, first] : [first, second];
      const joined = build.product(first.others, build.call('log', build.quotient(above.argument, below.argument)));
      return build.sum(joined, ...rest.filter((term) => term !== one && term !== other));
    }
  }
  return null;
}

/** The argument of the first exponential in a sum of exponentials and other terms. */
function growingExponent(e: Expression): Expression | null {
  switch (e.kind) {
    case 'sum':
      return first(e.terms);
    case 'product':
      return first(e.factors);
    case 'negation':
      return growingExponent(e.operand);
    case 'power':
      return e.base.kind === 'constant' && e.base.name === 'e' ? e.exponent : null;
    case 'call':
      return ['exp', 'expm1', 'sinh', 'cosh'].includes(e.function) ? (e.args[0] ?? null) : null;
    default:
      return null;
  }
}
function first(members: readonly Expression[]): Expression | null {
  for (const member of members) {
    const found = growingExponent(member);
    if (found) return found;
  }
  return null;
}

/** e times e^-u with the growth of e^u, e^u - 1, sinh u, cosh u taken out. */
function timesDecay(e: Expression, u: Expression, decay: Expression): Expression | null {
  const half = build.number({ num: 1n, den: 2n });
  const one = build.number(1);
  const isThis = (x: Expression | undefined): boolean => x !== undefined && sameExpression(x, u);
  switch (e.kind) {
    case 'sum': {
      const terms = e.terms.map((term) => timesDecay(term, u, decay));
      return terms.every((term) => term !== null) ? build.sum(...terms) : null;
    }
    case 'negation': {
      const inner = timesDecay(e.operand, u, decay);
      return inner && build.negation(inner);
    }
    case 'product': {
      const index = e.factors.findIndex((factor) => growingExponent(factor) !== null);
      const factor = e.factors[index];
      const inner = factor && timesDecay(factor, u, decay);
      return factor === undefined ? build.product(e, decay) : (inner ?? null) && build.product(...e.factors.filter((_, k) => k !== index), inner ?? one);
    }
    case 'power':
      if (e.base.kind === 'constant' && e.base.name === 'e' && isThis(e.exponent)) return one;
      return build.product(e, decay);
    case 'call': {
      if (!isThis(e.args[0])) return build.product(e, decay);
      const square = build.product(decay, decay);
      if (e.function === 'exp') return one;
      if (e.function === 'expm1') return build.difference(one, decay);
      if (e.function === 'sinh') return build.product(half, build.difference(one, square));
      return e.function === 'cosh' ? build.product(half, build.sum(one, square)) : build.product(e, decay);
    }
    default:
      return build.product(e, decay);
  }
}

interface LogArithmetic<T> {
  add(f: LogModel<T>, g: LogModel<T>): LogModel<T>;
  multiply(f: LogModel<T>, g: LogModel<T>): LogModel<T> | null;
  each(f: LogModel<T>, map: (g: Model<T>) => Model<T> | null): LogModel<T> | null;
  power(f: LogModel<T>, q: Rational): LogModel<T> | null;
  elementary(name: ElementaryName, f: LogModel<T>): LogModel<T> | null;
}

/** Beyond this power of log s a model is refused. */
const MOST_LOGS = 24;

/** Enclosure of s^v (log s)^j on (0, 1]: the extreme is (j/(v e))^j, with the sign of (-1)^j; null for v <= 0 < j. */
export function logPowerRange<T>(r: RealArithmetic<T>, v: number, j: number): T | null {
  if (j === 0) return v === 0 ? r.one : v > 0 ? r.union(r.zero, r.one) : null;
  if (v <= 0) return null;
  const base = r.divide(r.fromInteger(j), r.multiply(r.fromInteger(v), r.constant('e')));
  const extreme = base === null ? null : r.powerInteger(base, j);
  if (extreme === null) return null;
  return r.union(r.zero, j % 2 === 0 ? extreme : r.negate(extreme));
}

/** Enclosure over (0, 1]; null where a component does not vanish fast enough to tame its logarithm. */
export function logRange<T>(r: RealArithmetic<T>, f: LogModel<T>): T | null {
  let total = r.zero;
  for (const [j, g] of f.entries()) {
    if (g.coefficients.length === 0 && r.isZero(g.tail)) continue;
    const weight = logPowerRange(r, g.valuation, j);
    if (weight === null) return null;
    total = r.add(total, r.multiply(weight, g.range));
  }
  return total;
}

function logArithmetic<T>(m: ModelArithmetic<T>, r: RealArithmetic<T> | null): LogArithmetic<T> {
  const { a } = m;
  const zeroModel = m.constant(a.zero);
  const isNothing = (f: Model<T>): boolean => f.coefficients.length === 0 && a.isZero(f.tail);
  const trim = (f: Model<T>[]): LogModel<T> => {
    while (f.length > 1 && isNothing(f[f.length - 1] ?? zeroModel)) f.pop();
    return f;
  };
  const at = (f: LogModel<T>, j: number): Model<T> => f[j] ?? zeroModel;
  const add = (f: LogModel<T>, g: LogModel<T>): LogModel<T> => trim(Array.from({ length: Math.max(f.length, g.length) }, (_, j) => m.add(at(f, j), at(g, j))));
  const multiply = (f: LogModel<T>, g: LogModel<T>): LogModel<T> | null => {
    if (f.length === 1 && g.length === 1) return [m.multiply(at(f, 0), at(g, 0))];
    if (f.length + g.length > MOST_LOGS) return null;
    const result: Model<T>[] = Array.from({ length: f.length + g.length - 1 }, () => zeroModel);
    for (let i = 0; i < f.length; i += 1) for (let j = 0; j < g.length; j += 1) result[i + j] = m.add(result[i + j] ?? zeroModel, m.multiply(at(f, i), at(g, j)));
    return trim(result);
  };
  const each = (f: LogModel<T>, map: (g: Model<T>) => Model<T> | null): LogModel<T> | null => {
    const result: Model<T>[] = [];
    for (const g of f) {
      const value = isNothing(g) ? zeroModel : map(g);
      if (value === null) return null;
      result.push(value);
    }
    return trim(result);
  };

  /**
   * phi(g + d) = sum_(k<K) phi_k(g) d^k + phi_K(xi) d^K, phi_k = phi^(k)/k!, for d with logarithms that tends to zero: K makes the last part smaller than every coefficient kept.
   * `derivative(k, x)` gives phi_k at a model, `range(k, x)` over a set.
   */
  const compose = (g: Model<T>, d: LogModel<T>, derivative: (k: number) => Model<T> | null, range: (k: number, over: T) => T | null): LogModel<T> | null => {
    if (r === null) return null;
    const least = Math.min(...d.filter((f) => !isNothing(f)).map((f) => f.valuation));
    const base = m.rangeOf(g);
    const spread = logRange(r, d);
    if (!(least > 0) || base === null || spread === null) return null;
    const count = Math.min(12, Math.max(2, Math.ceil(m.length / least)));
    let total: LogModel<T> = [zeroModel];
    let power: LogModel<T> = [m.constant(a.one)];
    for (let k = 0; k < count; k += 1) {
      const factor = derivative(k);
      const term = factor && multiply([factor], power);
      const next = multiply(power, d);
      if (term === null || next === null) return null;
      total = add(total, term);
      power = next;
    }
    const last = range(count, a.union(base, a.add(base, spread)));
    if (last === null) return null;
    return add(total, power.map((f) => (isNothing(f) ? f : { valuation: f.valuation, coefficients: [], tail: a.multiply(last, f.range), range: a.multiply(last, f.range) })));
  };
  const split = (f: LogModel<T>): readonly [Model<T>, LogModel<T>] => [at(f, 0), [zeroModel, ...f.slice(1)]];
  const factorial = (k: number): number => {
    let value = 1;
    for (let i = 2; i <= k; i += 1) value *= i;
    return value;
  };
  const over = (x: T | null, n: number): T | null => (x === null ? null : a.divideInteger(x, n));
  const shift = (f: Model<T>, by: number): Model<T> => (isNothing(f) ? f : { ...f, valuation: f.valuation + by });

  const power = (f: LogModel<T>, q: Rational): LogModel<T> | null => {
    if (f.length === 1) {
      const value = m.powerRational(at(f, 0), q);
      return value === null ? null : [value];
    }
    if (q.den === 1n && q.num > 0n && q.num <= 8n) {
      let result: LogModel<T> | null = f;
      for (let k = 1n; k < q.num && result !== null; k += 1n) result = multiply(result, f);
      return result;
    }
    const [g, d] = split(f);
    const v = g.valuation;
    const lead = Number(q.num) * v;
    if (isNothing(g) || lead % Number(q.den) !== 0) return null;
    const [g0, d0] = [shift(g, -v), d.map((x) => shift(x, -v))];
    const exponent = a.fromRational(q);
    let binomial = a.one;
    const binomials: T[] = [binomial];
    for (let k = 1; k <= MOST_LOGS; k += 1) {
      binomial = a.divideInteger(a.multiply(binomial, a.subtract(exponent, a.fromInteger(k - 1))), k);
      binomials.push(binomial);
    }
    const lowered = (k: number): Rational => ({ num: q.num - BigInt(k) * q.den, den: q.den });
    const value = compose(
      g0,
      d0,
      (k) => {
        const raised = m.powerRational(g0, lowered(k));
        return raised && m.scale(raised, binomials[k] ?? a.zero);
      },
      (k, x) => {
        const raised = a.powerRational(x, lowered(k));
        return raised === null ? null : a.multiply(raised, binomials[k] ?? a.zero);
      },
    );
    return value && value.map((x) => shift(x, lead / Number(q.den)));
  };

  /** The integer c of a term c log s without further factor: e^(c log s) = s^c. */
  const wholePower = (f: LogModel<T>): number => {
    const term = at(f, 1);
    const lead = term.coefficients[0];
    if (r === null || isNothing(term) || term.valuation !== 0 || lead === undefined) return 0;
    const floor = r.floor(r.midpoint(lead));
    return floor !== null && a.isZero(a.subtract(lead, a.fromInteger(floor))) ? Number(floor) : 0;
  };
  /** asinh, acosh and log1p of an argument that grows without bound: by the logarithm. */
  const logarithmic = (name: ElementaryName, f: Model<T>): LogModel<T> | null => {
    if (r === null || !r.isNonNegative(m.domain)) return null;
    if (name === 'log1p') return elementary('log', [m.add(m.constant(a.one), f)]);
    const negative = r.isNegative(f.range);
    if (!negative && !r.isPositive(f.range)) return null;
    if (name !== 'asinh' && (name !== 'acosh' || negative)) return null;
    const u = negative ? m.negate(f) : f;
    const square = m.multiply(u, u);
    const root = m.powerRational(m.add(square, m.constant(a.fromInteger(name === 'asinh' ? 1 : -1))), { num: 1n, den: 2n });
    const value = root && elementary('log', [m.add(u, root)]);
    return value && negative ? value.map((x) => m.negate(x)) : value;
  };
  const elementary = (name: ElementaryName, f: LogModel<T>): LogModel<T> | null => {
    if (f.length === 1) {
      const only = at(f, 0);
      if (name === 'log' && only.valuation !== 0) {
        // log(s^v g) = v log s + log g, s in (0, 1].
        if (r === null || !r.isNonNegative(m.domain)) return null;
        const rest = m.elementary('log', shift(only, -only.valuation));
        return rest && [rest, m.constant(a.fromInteger(only.valuation))];
      }
      const value = m.elementary(name, only) ?? m.elementaryAtInfinity(name, only);
      if (value !== null) return [value];
      return only.valuation < 0 ? logarithmic(name, only) : null;
    }
    const whole = name === 'exp' ? wholePower(f) : 0;
    if (whole !== 0) {
      const value = elementary('exp', add(f, [zeroModel, m.constant(a.fromInteger(-whole))]));
      return value && value.map((x) => shift(x, whole));
    }
    const [g, d] = split(f);
    switch (name) {
      case 'exp':
      case 'expm1': {
        const e = m.elementary('exp', g);
        const value = e && compose(g, d, (k) => m.scale(e, a.divideInteger(a.one, factorial(k))), (k, x) => over(a.exp(x), factorial(k)));
        return value && name === 'expm1' ? add(value, [m.constant(a.fromInteger(-1))]) : value;
      }
      case 'log': {
        const v = g.valuation;
        if (isNothing(g)) return null;
        const [g0, d0] = [shift(g, -v), d.map((x) => shift(x, -v))];
        const inverse = m.powerInteger(g0, -1);
        const value = compose(
          g0,
          d0,
          (k) => {
            if (k === 0) return m.elementary('log', g0);
            const raised = inverse && m.powerInteger(inverse, k);
            return raised && m.scale(raised, a.divideInteger(a.fromInteger(k % 2 === 1 ? 1 : -1), k));
          },
          (k, x) => {
            const raised = a.powerInteger(x, -k);
            return raised === null ? null : a.divideInteger(k % 2 === 1 ? raised : a.negate(raised), k);
          },
        );
        return value && (v === 0 ? value : add(value, [zeroModel, m.constant(a.fromInteger(v))]));
      }
      case 'sqrt':
        return power(f, { num: 1n, den: 2n });
      case 'sin':
      case 'cos': {
        // Derivatives run through sin, cos, -sin, -cos.
        const [s, c] = [m.elementary('sin', g), m.elementary('cos', g)];
        if (s === null || c === null) return null;
        const start = name === 'sin' ? 0 : 1;
        const cycle = [s, c, m.negate(s), m.negate(c)];
        const ranges = (x: T): readonly (T | null)[] => {
          const [u, w] = [a.sin(x), a.cos(x)];
          return [u, w, u === null ? null : a.negate(u), w === null ? null : a.negate(w)];
        };
        return compose(
          g,
          d,
          (k) => m.scale(cycle[(start + k) % 4] ?? s, a.divideInteger(a.one, factorial(k))),
          (k, x) => over(ranges(x)[(start + k) % 4] ?? null, factorial(k)),
        );
      }
      case 'tan': {
        const [s, c] = [elementary('sin', f), elementary('cos', f)];
        const inverse = c && power(c, { num: -1n, den: 1n });
        return s && inverse && multiply(s, inverse);
      }
      case 'sinh':
      case 'cosh':
      case 'tanh': {
        const e = elementary('exp', f);
        const back = elementary('exp', f.map((x) => m.negate(x)));
        const half = a.divideInteger(a.one, 2);
        if (e === null || back === null) return null;
        const s = add(e, back.map((x) => m.negate(x))).map((x) => m.scale(x, half));
        const c = add(e, back).map((x) => m.scale(x, half));
        if (name !== 'tanh') return name === 'sinh' ? s : c;
        const inverse = power(c, { num: -1n, den: 1n });
        return inverse && multiply(s, inverse);
      }
      case 'log1p':
        return elementary('log', add([m.constant(a.one)], f));
      default:
        return null;
    }
  };
  return { add, multiply, each, power, elementary };
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
