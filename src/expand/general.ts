/**
 * The general term of a series of hypergeometric type: f = sum over k >= 0 of coefficient(k) t^(step k + offset).
 * Built from the form of the function only: classical series whose coefficients obey a first-order recurrence in k, with a monomial for their argument, times monomials, and sums of those with equal powers.
 * Sources: DLMF 16.2.1 (pFq), 19.5.1, 19.5.2 (K, E), 4.19, 4.33, 4.38, 4.24, 4.6 (elementary), 7.6.1 (erf), 6.6.5 (Si), 10.2.2 and 10.25.2 (Bessel), 25.12.10 (polylogarithm), from memory.
 */
import { build, dependsOn, type Expression, Q, type Rational } from '../expression/index.ts';
import { type Budget, Declined } from '../outcome.ts';
import { type Context, exactOf, isRational, Series } from '../series/index.ts';
import { evaluate } from './evaluate.ts';
import type { Expansion, ExpansionProblem } from './expansion.ts';
import { openSide } from './open-side.ts';

interface Pattern {
  /** In the index. */
  readonly coefficient: Expression;
  readonly step: Rational;
  readonly offset: Rational;
}

/** coefficient * t^power. */
interface Monomial {
  readonly coefficient: Expression;
  readonly power: Rational;
}

interface Search {
  readonly c: Context;
  readonly k: Expression;
  /** The tree as a finite sum of at most two monomials; null if it is not one. */
  readonly monomials: (e: Expression) => readonly Monomial[] | null;
}

const { number, product, quotient, sum, power, call, difference } = build;
const one = number(1);
const isOne = (e: Expression): boolean => e.kind === 'number' && Q.isOne(e.value);
const times = (...factors: readonly Expression[]): Expression => product(...factors.filter((f) => !isOne(f)));
const raised = (base: Expression, exponent: Expression): Expression => (isOne(base) ? one : power(base, exponent));

/** The general term in the index (`k`, or the next free letter), to be summed from index 0 on without end; undefined where none was proved. */
export function generalTerm(problem: ExpansionProblem, found: Expansion, budget: Budget): Expression | undefined {
  const direction = problem.point === 'inf' ? 'inf' : 'right';
  if (problem.variable.kind !== 'symbol' || problem.point === '-inf' || found.side === 'left' || found.left || found.prefactor || found.exact || found.divergent || found.oscillating) return undefined;
  const letter = ['k', 'j', 'm', 'n', 'l'].find((name) => !dependsOn(problem.function, name) && !(typeof problem.point === 'object' && dependsOn(problem.point, name)));
  if (!letter) return undefined;
  try {
    const side = openSide(problem, direction, budget);
    const k = build.symbol(letter);
    const search: Search = {
      c: side.context,
      k,
      monomials: (e) => monomialsOf(side.context, evaluate(side.session, e)),
    };
    const p = pattern(search, side.fromVariable(problem.function));
    if (!p) return undefined;
    const exponent = index(k, p.step, p.offset);
    return times(side.toVariable(p.coefficient), raised(found.local, exponent));
  } catch (error) {
    // The expansion itself is there already: it is not lost when the time is up.
    if (error instanceof Declined) return undefined;
    throw error;
  }
}

function monomialsOf(c: Context, m: ReturnType<typeof evaluate>): readonly Monomial[] | null {
  if (!(m instanceof Series)) return [{ coefficient: exactOf(c, m), power: Q.ZERO }];
  if (m.element !== c.scale.local) return null;
  const result: Monomial[] = [];
  for (let n = 0; n < 3; n += 1) {
    const term = m.stream.at(n);
    if (!term) return result;
    if (term.order || term.coefficient instanceof Series || !isRational(term.exponent)) return null;
    result.push({ coefficient: exactOf(c, term.coefficient), power: term.exponent });
  }
  return null;
}

/** step k + offset. */
function index(k: Expression, step: Rational, offset: Rational): Expression {
  const linear = Q.isOne(step) ? k : product(number(step), k);
  return Q.isZero(offset) ? linear : Q.signOf(offset) > 0 ? sum(linear, number(offset)) : difference(linear, number(Q.negate(offset)));
}

/** sum of a(k) u^(s k + d) with u = coefficient * t^power. */
function inArgument(s: Search, u: Monomial, a: Expression, step: number, offset: number): Pattern | null {
  if (Q.signOf(u.power) <= 0) return null;
  const exponent = index(s.k, Q.rational(step), Q.rational(offset));
  return {
    coefficient: times(raised(u.coefficient, exponent), a),
    step: Q.multiply(u.power, Q.rational(step)),
    offset: Q.multiply(u.power, Q.rational(offset)),
  };
}

const scaled = (p: Pattern | null, by: Monomial): Pattern | null => p && { coefficient: times(by.coefficient, p.coefficient), step: p.step, offset: Q.add(p.offset, by.power) };

function pattern(s: Search, e: Expression): Pattern | null {
  s.c.budget.check();
  switch (e.kind) {
    case 'negation':
      return scaled(pattern(s, e.operand), { coefficient: number(-1), power: Q.ZERO });
    case 'product':
      return ofProduct(s, e.factors);
    case 'quotient':
      return ofProduct(s, [e.numerator, power(e.denominator, -1)]);
    case 'sum': {
      const parts = e.terms.map((t) => pattern(s, t));
      const [first] = parts;
      if (!first || !parts.every((p) => p && Q.equal(p.step, first.step) && Q.equal(p.offset, first.offset))) return null;
      return { ...first, coefficient: sum(...parts.flatMap((p) => (p ? [p.coefficient] : []))) };
    }
    case 'power':
      if (e.base.kind === 'constant' && e.base.name === 'e') return exponentialOf(s, e.exponent);
      return binomialOf(s, e.base, e.exponent);
    case 'root':
      return binomialOf(s, e.radicand, quotient(one, e.degree));
    case 'call':
      return ofCall(s, e.function, e.args);
    default:
      return null;
  }
}

/** One series, or an exponential times a sine or cosine, times monomials. */
function ofProduct(s: Search, factors: readonly Expression[]): Pattern | null {
  const series: Expression[] = [];
  let front: Monomial = { coefficient: one, power: Q.ZERO };
  for (const f of factors) {
    const monomials = s.monomials(f);
    const [only] = monomials ?? [];
    if (monomials?.length === 1 && only) {
      front = { coefficient: times(front.coefficient, only.coefficient), power: Q.add(front.power, only.power) };
      continue;
    }
    series.push(f);
  }
  const [first, second] = series;
  if (series.length > 2 || !first) return null;
  return scaled(second ? (wave(s, first, second) ?? wave(s, second, first)) : pattern(s, first), front);
}

/** e^(a u) sin(b u) and e^(a u) cos(b u) for real a, b: imaginary and real part of the sum of (a + b i)^k u^k/k!. */
function wave(s: Search, growth: Expression, circular: Expression): Pattern | null {
  const exponent = growth.kind === 'power' && growth.base.kind === 'constant' && growth.base.name === 'e' ? growth.exponent : growth.kind === 'call' && growth.function === 'exp' ? growth.args[0] : undefined;
  const argument = circular.kind === 'call' && (circular.function === 'sin' || circular.function === 'cos') ? circular.args[0] : undefined;
  if (!exponent || !argument || circular.kind !== 'call') return null;
  const [u, v] = [s.monomials(exponent), s.monomials(argument)].map((m) => (m?.length === 1 ? m[0] : undefined));
  if (!u || !v || !Q.equal(u.power, v.power)) return null;
  const { field } = s.c;
  const [a, b] = [field.fromExpression(u.coefficient), field.fromExpression(v.coefficient)];
  const side = field.sign(a);
  if ((side !== 1 && side !== -1) || field.isReal(b) !== 'yes') return null;
  const size = field.power(field.add(field.multiply(a, a), field.multiply(b, b)), Q.HALF);
  const turn = field.call('atan', [field.divide(b, a)]);
  const angle = field.toExpression(side === 1 ? turn : field.add(field.fromExpression(build.constant('pi')), turn));
  return inArgument(s, { coefficient: one, power: u.power }, quotient(product(power(field.toExpression(size), s.k), call(circular.function, product(s.k, angle))), call('factorial', s.k)), 1, 0);
}

/** e^(c + u) = e^c sum of u^k/k!. */
function exponentialOf(s: Search, exponent: Expression): Pattern | null {
  const parts = s.monomials(exponent);
  const constant = parts?.find((m) => Q.isZero(m.power));
  const moving = parts?.filter((m) => !Q.isZero(m.power)) ?? [];
  const [u] = moving;
  if (moving.length !== 1 || !u) return null;
  const series = inArgument(s, u, quotient(one, call('factorial', s.k)), 1, 0);
  return constant ? scaled(series, { coefficient: power(build.constant('e'), constant.coefficient), power: Q.ZERO }) : series;
}

/** (p + q t^m)^alpha = p^alpha sum of binomial(alpha, k) (q/p)^k t^(m k) for p > 0. */
function binomialOf(s: Search, base: Expression, exponent: Expression): Pattern | null {
  const fixed = s.monomials(exponent);
  const alpha = fixed?.length === 1 && fixed[0] && Q.isZero(fixed[0].power) ? fixed[0].coefficient : null;
  if (!alpha) return null;
  const parts = s.monomials(base);
  if (!parts) {
    // The reciprocal of a reciprocal, 1/sqrt(...) and the like.
    const inner = base.kind === 'power' ? { base: base.base, exponent: base.exponent } : base.kind === 'root' ? { base: base.radicand, exponent: quotient(one, base.degree) } : base.kind === 'call' && base.function === 'sqrt' && base.args[0] ? { base: base.args[0], exponent: number(Q.HALF) } : null;
    const whole = alpha.kind === 'number' && alpha.value.den === 1n;
    if (!inner || !whole) return null;
    if (inner.base.kind === 'constant' && inner.base.name === 'e') return exponentialOf(s, product(alpha, inner.exponent));
    return binomialOf(s, inner.base, product(alpha, inner.exponent));
  }
  const [p, u] = parts;
  if (parts.length !== 2 || !p || !u || !Q.isZero(p.power)) return null;
  const { field } = s.c;
  const start = field.fromExpression(p.coefficient);
  if (field.sign(start) !== 1 && !(alpha.kind === 'number' && alpha.value.den === 1n && field.isZero(start) === 'no')) return null;
  const ratio: Monomial = { coefficient: field.toExpression(field.divide(field.fromExpression(u.coefficient), start)), power: u.power };
  const front: Monomial = { coefficient: isOne(p.coefficient) ? one : field.toExpression(field.power(start, field.fromExpression(alpha))), power: Q.ZERO };
  if (alpha.kind === 'number' && Q.equal(alpha.value, Q.MINUS_ONE)) {
    const opposite = field.toExpression(field.negate(field.fromExpression(ratio.coefficient)));
    return scaled(inArgument(s, { coefficient: opposite, power: u.power }, one, 1, 0), front);
  }
  return scaled(inArgument(s, ratio, call('binomial', alpha, s.k), 1, 0), front);
}

function ofCall(s: Search, id: string, args: readonly Expression[]): Pattern | null {
  const { k } = s;
  const last = args[args.length - 1];
  if (!last) return null;
  if (id === 'exp') return exponentialOf(s, last);
  if (id === 'sqrt') return binomialOf(s, last, number(Q.HALF));
  const parts = s.monomials(last);
  if (id === 'log') {
    const [p, u] = parts ?? [];
    return parts?.length === 2 && p && u && Q.isZero(p.power) && isOne(p.coefficient) ? inArgument(s, u, quotient(raised(number(-1), k), sum(k, one)), 1, 1) : null;
  }
  const [u] = parts ?? [];
  if (parts?.length !== 1 || !u) return null;
  const sign = power(number(-1), k);
  const odd = sum(product(number(2), k), one);
  const factorial = (e: Expression): Expression => call('factorial', e);
  const central = quotient(factorial(product(number(2), k)), product(power(number(4), k), power(factorial(k), 2), odd));
  if (args.length === 1) {
    switch (id) {
      case 'sin':
        return inArgument(s, u, quotient(sign, factorial(odd)), 2, 1);
      case 'cos':
        return inArgument(s, u, quotient(sign, factorial(product(number(2), k))), 2, 0);
      case 'sinh':
        return inArgument(s, u, quotient(one, factorial(odd)), 2, 1);
      case 'cosh':
        return inArgument(s, u, quotient(one, factorial(product(number(2), k))), 2, 0);
      case 'log1p':
        return inArgument(s, u, quotient(sign, sum(k, one)), 1, 1);
      case 'atan':
        return inArgument(s, u, quotient(sign, odd), 2, 1);
      case 'atanh':
        return inArgument(s, u, quotient(one, odd), 2, 1);
      case 'asin':
        return inArgument(s, u, central, 2, 1);
      case 'asinh':
        return inArgument(s, u, times(sign, central), 2, 1);
      case 'erf':
        return inArgument(s, u, quotient(product(number(2), sign), product(call('sqrt', build.constant('pi')), factorial(k), odd)), 2, 1);
      case 'sinIntegral':
        return inArgument(s, u, quotient(sign, product(odd, factorial(odd))), 2, 1);
      case 'ellipticK':
        return inArgument(s, u, product(quotient(build.constant('pi'), number(2)), power(centralBinomial(k), 2)), 2, 0);
      case 'ellipticKParameter':
        return inArgument(s, u, product(quotient(build.constant('pi'), number(2)), power(centralBinomial(k), 2)), 1, 0);
      case 'ellipticE':
        return inArgument(s, u, quotient(product(build.constant('pi'), power(centralBinomial(k), 2)), product(number(2), difference(one, product(number(2), k)))), 2, 0);
      case 'ellipticEParameter':
        return inArgument(s, u, quotient(product(build.constant('pi'), power(centralBinomial(k), 2)), product(number(2), difference(one, product(number(2), k)))), 1, 0);
      default:
        return null;
    }
  }
  if (id === 'hypergeometric') return hypergeometricOf(s, u, args);
  if (id === 'kummerM' && args.length === 3) return hypergeometricOf(s, u, [one, one, ...args]);
  const [parameter] = args;
  if (args.length !== 2 || !parameter) return null;
  if ((id === 'besselJ' || id === 'besselI') && parameter.kind === 'number' && parameter.value.den === 1n && parameter.value.num >= 0n) {
    const n = Number(parameter.value.num);
    const half: Monomial = { coefficient: s.c.field.toExpression(s.c.field.multiply(s.c.field.fromExpression(u.coefficient), Q.HALF)), power: u.power };
    const below = n === 0 ? power(factorial(k), 2) : product(factorial(k), factorial(sum(k, number(n))));
    return inArgument(s, half, quotient(id === 'besselJ' ? sign : one, below), 2, n);
  }
  if (id === 'polylog') {
    const order = s.monomials(parameter);
    return order?.length === 1 && order[0] && Q.isZero(order[0].power) ? inArgument(s, u, quotient(one, power(sum(k, one), order[0].coefficient)), 1, 1) : null;
  }
  return null;
}

/** (2k)!/(4^k k!^2) = (1/2)_k/k!. */
const centralBinomial = (k: Expression): Expression => quotient(call('factorial', product(number(2), k)), product(power(number(4), k), power(call('factorial', k), 2)));

/** pFq(a; b; u) = sum of (a_1)_k ... (a_p)_k/((b_1)_k ... (b_q)_k k!) u^k (DLMF 16.2.1); (1)_k = k!. */
function hypergeometricOf(s: Search, u: Monomial, args: readonly Expression[]): Pattern | null {
  const [above, below] = args;
  if (above?.kind !== 'number' || below?.kind !== 'number') return null;
  const p = Number(above.value.num);
  const parameters = args.slice(2, -1);
  if (parameters.length !== p + Number(below.value.num)) return null;
  const constants = parameters.map((a) => {
    const parts = s.monomials(a);
    return parts?.length === 1 && parts[0] && Q.isZero(parts[0].power) ? parts[0].coefficient : null;
  });
  if (constants.some((a) => a === null)) return null;
  const factorial = call('factorial', s.k);
  const rising = (a: Expression | null): Expression => (a === null || isOne(a) ? factorial : call('pochhammer', a, s.k));
  const [top, bottom] = [constants.slice(0, p), constants.slice(p)];
  // One (1)_k above takes the k! below.
  const spare = top.findIndex((a) => a !== null && isOne(a));
  const numerator = top.filter((_, j) => j !== spare).map(rising);
  const denominator = [...bottom.map(rising), ...(spare < 0 ? [factorial] : [])];
  return inArgument(s, u, denominator.length === 0 ? product(...numerator) : quotient(product(...numerator), product(...denominator)), 1, 0);
}
