/** Identities at one node of a tree: sums by pairs of terms, calls by their argument, quotients by what stands above and below. */
import { build, type Expression, Q, type Rational } from '../expression/index.ts';
import { conjugateSum, DIFFERENCES, type Rewritten, secondDifference } from './differences.ts';
import { callOf, commonFactors, coreOf, exponentOf, expressionOf, factorsOf, type Normal, ONE, radicandOf, same, scaled, squareBase, type Term, termsOf } from './patterns.ts';

const { product, quotient, sum, difference, power, call } = build;

export function rewritesAt(e: Expression, normal: Normal): readonly Rewritten[] {
  switch (e.kind) {
    case 'sum':
      return sumRewrites(e, normal);
    case 'call':
      return callRewrites(e.function, e.args, normal);
    case 'power':
      return powerRewrites(e, normal);
    case 'quotient':
      return quotientRewrites(e.numerator, e.denominator, normal);
    default:
      return [];
  }
}

const MOST_TERMS = 8;

function sumRewrites(e: Expression, normal: Normal): readonly Rewritten[] {
  const terms = termsOf(e);
  if (terms.length > MOST_TERMS) return [];
  const found: Rewritten[] = [];
  for (let i = 0; i < terms.length; i += 1) {
    for (let j = i + 1; j < terms.length; j += 1) {
      const [a, b] = [terms[i], terms[j]];
      if (!a || !b) continue;
      const others = terms.filter((_, k) => k !== i && k !== j);
      for (const { tree, identity } of pairRewrites(a, b, normal)) found.push({ tree: others.length === 0 ? tree : sum(tree, ...others.map(expressionOf)), identity });
      found.push(...triples(a, b, others, normal));
    }
  }
  return found;
}

function pairRewrites(a: Term, b: Term, normal: Normal): readonly Rewritten[] {
  const found: Rewritten[] = [];
  const parts = commonFactors(a.factors, b.factors);
  const [first, second] = [build.product(...parts.a), build.product(...parts.b)];
  const opposite = Q.equal(a.coefficient, Q.negate(b.coefficient));
  const wrap = (coefficient: Rational, tree: Expression): Expression => {
    const inner = factorsOf(tree);
    const whole = Q.multiply(coefficient, inner.coefficient);
    const factors = [...parts.common, ...inner.factors];
    return factors.length === 0 ? build.number(whole) : scaled(whole, build.product(...factors));
  };
  const [x, y, front]: readonly [Expression, Expression, Rational] = opposite
    ? [first, second, a.coefficient]
    : [expressionOf({ coefficient: Q.absolute(a.coefficient), factors: parts.a }), expressionOf({ coefficient: Q.absolute(b.coefficient), factors: parts.b }), Q.rational(a.coefficient.num < 0n ? -1 : 1)];
  const minus = Q.signOf(a.coefficient) !== Q.signOf(b.coefficient);
  for (const rule of minus ? DIFFERENCES : [conjugateSum]) {
    const result = rule(x, y, normal);
    if (result) found.push({ tree: wrap(front, result.tree), identity: result.identity });
  }
  return found;
}

function triples(a: Term, b: Term, others: readonly Term[], normal: Normal): readonly Rewritten[] {
  if (!Q.equal(a.coefficient, b.coefficient)) return [];
  const at = others.findIndex((t) => t.factors.length === 0 && Q.equal(t.coefficient, Q.multiply(a.coefficient, Q.rational(-2))));
  const result = at < 0 ? null : secondDifference(coreOf(a), coreOf(b), normal);
  if (!result) return [];
  const rest = others.filter((_, k) => k !== at);
  const inner = factorsOf(result.tree);
  const tree = scaled(Q.multiply(a.coefficient, inner.coefficient), build.product(...inner.factors));
  return [{ tree: rest.length === 0 ? tree : sum(tree, ...rest.map(expressionOf)), identity: result.identity }];
}

function callRewrites(id: string, args: readonly Expression[], normal: Normal): readonly Rewritten[] {
  const [u] = args;
  if (!u || args.length !== 1) return [];
  switch (id) {
    case 'log': {
      if (u.kind === 'quotient') {
        const { numerator, denominator } = u;
        return [
          { tree: call('log1p', quotient(normal.tidy(difference(numerator, denominator)), denominator)), identity: 'log(p/q) = log1p((p - q)/q)' },
          { tree: difference(call('log', numerator), call('log', denominator)), identity: 'log(p/q) = log p - log q' },
        ];
      }
      if (u.kind === 'symbol') return [{ tree: call('log1p', difference(u, ONE)), identity: 'log(u) = log1p(u - 1)' }];
      const radicand = radicandOf(u);
      if (radicand) return [{ tree: quotient(call('log', radicand), build.number(2)), identity: 'log(sqrt(u)) = log(u)/2' }];
      return u.kind === 'sum' || u.kind === 'call' || u.kind === 'power' ? [{ tree: call('log1p', normal.tidy(difference(u, ONE))), identity: 'log(1 + u) = log1p(u)' }] : [];
    }
    case 'acos':
      return [
        // Doubling is exact where halving would lose the digits of the smallest arguments.
        { tree: product(build.number(2), call('asin', quotient(build.squareRoot(normal.tidy(product(build.number(2), difference(ONE, u)))), build.number(2)))), identity: 'acos(u) = 2 asin(sqrt(2 (1 - u))/2)', everywhere: true },
        { tree: call('atan2', build.squareRoot(product(difference(ONE, u), sum(ONE, u))), u), identity: 'acos(u) = atan2(sqrt((1 - u)(1 + u)), u)' },
      ];
    case 'acosh': {
      const above = normal.tidy(difference(u, ONE));
      return [{ tree: call('log1p', sum(above, product(build.squareRoot(above), build.squareRoot(sum(above, build.number(2)))))), identity: 'acosh(1 + u) = log1p(u + sqrt(u) sqrt(u + 2))', everywhere: true }];
    }
    case 'asin':
      return [{ tree: call('atan2', u, build.squareRoot(product(difference(ONE, u), sum(ONE, u)))), identity: 'asin(u) = atan2(u, sqrt((1 - u)(1 + u)))' }];
    case 'sqrt':
      return rootRewrites(u);
    default:
      return [];
  }
}

function powerRewrites(e: Extract<Expression, { kind: 'power' }>, _normal: Normal): readonly Rewritten[] {
  const u = radicandOf(e);
  return u ? rootRewrites(u) : [];
}

/** sqrt(p^2 + q^2) = hypot(p, q). */
function rootRewrites(u: Expression): readonly Rewritten[] {
  if (u.kind !== 'sum' || u.terms.length !== 2) return [];
  const bases = u.terms.map(squareBase);
  const [p, q] = bases;
  return p && q ? [{ tree: call('hypot', p, q), identity: 'sqrt(p^2 + q^2) = hypot(p, q)' }] : [];
}

function quotientRewrites(top: Expression, bottom: Expression, normal: Normal): readonly Rewritten[] {
  const found: Rewritten[] = [];
  const [n, d] = [factorsOf(top), factorsOf(bottom)];
  // g^2 ... / (h^2 ...): the quotient is squared, which underflows later and rounds the same.
  const square = n.factors.findIndex((f) => f.kind === 'power' && squareBase(f) !== null);
  const g = n.factors[square];
  const h = squareBase(build.product(...d.factors));
  if (g && h && d.factors.length > 0) {
    const others = n.factors.filter((_, k) => k !== square);
    const base = squareBase(g) ?? g;
    const inner = power(quotient(base, h), 2);
    found.push({ tree: scaled(Q.divide(n.coefficient, d.coefficient), others.length === 0 ? inner : product(...others, inner)), identity: 'g^2/h^2 = (g/h)^2' });
  }
  // A quotient above or below.
  const [first] = n.factors;
  if (first?.kind === 'quotient' && n.factors.length === 1) {
    const below = normal.tidy(product(first.denominator, bottom));
    const above = scaled(n.coefficient, first.numerator);
    found.push({ tree: quotient(above, below.kind === 'product' || below.kind === 'power' ? product(first.denominator, bottom) : below), identity: '(a/b)/c = a/(b c)' });
    if (same(scaled(Q.ONE, first.numerator), bottom) || normal.isZero(difference(first.numerator, bottom))) found.push({ tree: scaled(n.coefficient, quotient(ONE, first.denominator)), identity: '(a/b)/a = 1/b' });
  }
  const [above, below] = [exponentialPair(top, -1), exponentialPair(bottom, 1)];
  if (above && below && same(above, below)) found.push({ tree: call('tanh', normal.tidy(quotient(above, build.number(2)))), identity: '(exp(u) - 1)/(exp(u) + 1) = tanh(u/2)' });
  return found;
}

/** u where the sum is exp(u) + sign, or exp(u/2) + sign exp(-u/2). */
function exponentialPair(e: Expression, sign: 1 | -1): Expression | null {
  if (sign < 0) {
    const only = callOf(e, 'expm1');
    if (only) return only;
  }
  const terms = termsOf(e);
  const [a, b] = terms;
  if (terms.length !== 2 || !a || !b) return null;
  for (const [x, y] of [[a, b], [b, a]] as const) {
    const u = exponentOf(coreOf(x));
    if (u && x.factors.length > 0 && Q.isOne(x.coefficient) && y.factors.length === 0 && Q.equal(y.coefficient, Q.rational(sign))) return u;
  }
  return null;
}

