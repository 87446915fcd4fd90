/** The arrangement of one term of an expansion as a person writes it: sign in front, one fraction, numbers before constants before symbols, positive powers on their own side of the bar. */
import { build, type Expression, Q, type Rational, sameExpression } from '../expression/index.ts';
import { type Factors, factorsOf, NO_FACTORS } from './factors.ts';

/** Operators, their traces, derivatives along a direction, and sums of them: they follow the fraction that multiplies them. */
export function standsBehind(e: Expression): boolean {
  switch (e.kind) {
    case 'vector':
      return e.operation !== 'symbol' && e.operation !== 'norm' && e.operation !== 'dot' && e.operation !== 'cross' && e.operation !== 'tuple';
    case 'power':
      return e.base.kind === 'vector' && standsBehind(e.base);
    case 'sum':
      return e.terms.some(standsBehind);
    case 'product':
      return e.factors.some(standsBehind);
    case 'quotient':
      return standsBehind(e.numerator);
    case 'negation':
      return standsBehind(e.operand);
    default:
      return false;
  }
}

/** Equal neighbours of a product together. */
export function runs(factors: readonly Expression[]): readonly { readonly factor: Expression; readonly count: number }[] {
  const found: { factor: Expression; count: number }[] = [];
  for (const factor of factors) {
    const last = found[found.length - 1];
    if (last && sameExpression(last.factor, factor)) last.count += 1;
    else found.push({ factor, count: 1 });
  }
  return found;
}

/** Where a factor goes in a printed product: numbers, roots of numbers, constants, symbols, then the rest; sums and functions last. */
function rank(e: Expression): number {
  if (standsBehind(e) || (e.kind === 'vector' && (e.operation === 'symbol' || e.operation === 'cross'))) return 6;
  const base = e.kind === 'power' && !(e.base.kind === 'constant' && e.base.name === 'e') ? e.base : e;
  switch (base.kind) {
    case 'number':
      return e.kind === 'power' ? 1 : 0;
    case 'root':
      return base.radicand.kind === 'number' ? 1 : 3;
    case 'constant':
      return base.name === 'i' ? 2.5 : 2;
    case 'symbol':
      return 3;
    case 'product':
      return e.kind === 'power' && base.factors.every((f) => f.kind === 'number' || f.kind === 'constant') ? 1 : 4;
    case 'sum':
      return 5;
    default:
      return 4;
  }
}

/**
 * The tree of a monomial. `last` are the powers of the variable: with `inside` they join the one fraction bar (at the end of the numerator, or of the denominator where they are inverted),
 * with `outside` they follow the coefficient's own fraction.
 */
export function arrange(factors: Factors, last: Factors = NO_FACTORS, placement: 'inside' | 'outside' = 'inside'): Expression {
  const negative = factors.negative !== last.negative;
  const apart = placement === 'outside' && last.numerator.length > 0 && last.denominator.length === 0 && Q.isOne(last.coefficient);
  const magnitude = apart ? beside(oneFraction(factors, NO_FACTORS), oneFraction(last, NO_FACTORS)) : oneFraction(factors, last);
  return negative ? build.negation(magnitude) : magnitude;
}

function beside(front: Expression, back: Expression): Expression {
  if (build.isOneNumber(front)) return back;
  return build.product(...(front.kind === 'product' ? front.factors : [front]), ...(back.kind === 'product' ? back.factors : [back]));
}

function oneFraction(factors: Factors, last: Factors): Expression {
  const ordered = (list: readonly Expression[]): Expression[] => [...list].sort((a, b) => rank(a) - rank(b));
  const coefficient = Q.multiply(factors.coefficient, last.coefficient);
  const [numerator, denominator] = collectPowers([...ordered(factors.numerator), ...last.numerator], [...ordered(factors.denominator), ...last.denominator]);
  return inside(coefficient, mergePowers(numerator), mergePowers(denominator));
}

/** x^p x^q = x^(p+q) and 1/x^q = x^(-q) for principal values: a symbol that occurs more than once gets one power, on the side of the bar where it is positive. */
function collectPowers(numerator: readonly Expression[], denominator: readonly Expression[]): readonly [readonly Expression[], readonly Expression[]] {
  const totals = new Map<string, { count: number; exponent: Rational; base: Expression }>();
  const part = (f: Expression): { base: Expression; exponent: Rational } | null =>
    f.kind === 'symbol' ? { base: f, exponent: Q.ONE } : f.kind === 'power' && f.base.kind === 'symbol' && f.exponent.kind === 'number' ? { base: f.base, exponent: f.exponent.value } : null;
  const nameOf = (f: Expression): string | null => {
    const base = part(f)?.base;
    return base?.kind === 'symbol' ? base.name : null;
  };
  const count = (f: Expression, sign: 1 | -1): void => {
    const p = part(f);
    const name = nameOf(f);
    if (!p || name === null) return;
    const known = totals.get(name);
    const exponent = Q.add(known?.exponent ?? Q.ZERO, sign === 1 ? p.exponent : Q.negate(p.exponent));
    totals.set(name, { count: (known?.count ?? 0) + 1, exponent, base: p.base });
  };
  for (const f of numerator) count(f, 1);
  for (const f of denominator) count(f, -1);
  if (![...totals.values()].some((t) => t.count > 1)) return [numerator, denominator];
  const place = (list: readonly Expression[], sign: 1 | -1): Expression[] => {
    const placed = new Set<string>();
    return list.flatMap((f) => {
      const name = nameOf(f);
      const total = name === null ? undefined : totals.get(name);
      if (name === null || !total || total.count === 1) return [f];
      if (placed.has(name) || Q.signOf(total.exponent) !== sign) return [];
      placed.add(name);
      const exponent = sign === 1 ? total.exponent : Q.negate(total.exponent);
      return [Q.isOne(exponent) ? total.base : build.power(total.base, exponent)];
    });
  };
  const [above, below] = [place(numerator, 1), place(denominator, -1)];
  for (const [name, total] of totals) {
    const side = Q.signOf(total.exponent);
    if (total.count === 1 || side === 0) continue;
    const list = side === 1 ? above : below;
    if (list.some((f) => nameOf(f) === name)) continue;
    const exponent = Q.absolute(total.exponent);
    list.push(Q.isOne(exponent) ? total.base : build.power(total.base, exponent));
  }
  return [above, below];
}

function withNumber(value: bigint, factors: readonly Expression[]): Expression {
  return build.product(...(value === 1n && factors.length > 0 ? [] : [build.number(value)]), ...factors);
}

function inside(coefficient: Rational, numerator: readonly Expression[], denominator: readonly Expression[]): Expression {
  const [only] = denominator;
  if (Q.isOne(coefficient) && numerator.length === 0 && denominator.length === 1 && only?.kind === 'power' && only.exponent.kind === 'number' && !Q.isInteger(only.exponent.value)) {
    return build.power(only.base, Q.negate(only.exponent.value));
  }
  const above = withNumber(coefficient.num, numerator);
  if (coefficient.den === 1n && denominator.length === 0) return above;
  return build.quotient(above, withNumber(coefficient.den, denominator));
}

/** Powers of e become one, roots of positive constants move under one root. */
const mergePowers = (list: readonly Expression[]): readonly Expression[] => mergeRoots(mergeExponentials(list));

function mergeExponentials(list: readonly Expression[]): readonly Expression[] {
  const exponents = list.map((f) => exponentOf(f));
  const found = exponents.filter((e) => e !== null);
  if (found.length < 2) return list;
  const whole = build.power(build.constant('e'), build.sum(...found.flatMap((e) => (e.kind === 'sum' ? e.terms : [e]))));
  let placed = false;
  return list.flatMap((f, i) => {
    if (exponents[i] === null) return [f];
    if (placed) return [];
    placed = true;
    return [whole];
  });
}

/** The exponent of e^a that is not a plain number (sqrt(e) and e^2 stay in front). */
function exponentOf(f: Expression): Expression | null {
  if (f.kind === 'call' && f.function === 'exp') return f.args[0] ?? null;
  return f.kind === 'power' && f.base.kind === 'constant' && f.base.name === 'e' && f.exponent.kind !== 'number' ? f.exponent : null;
}

const isSquareRoot = (f: Expression): f is Extract<Expression, { kind: 'power' }> => f.kind === 'power' && f.exponent.kind === 'number' && Q.equal(f.exponent.value, Q.HALF);
const isPositiveConstant = (e: Expression): boolean => (e.kind === 'number' && e.value.num > 0n) || (e.kind === 'constant' && (e.name === 'pi' || e.name === 'e'));

/** sqrt(p) sqrt(z) = sqrt(p z) for every z where p > 0 (principal values). */
function mergeRoots(list: readonly Expression[]): readonly Expression[] {
  const constants = list.filter((f) => isSquareRoot(f) && isPositiveConstant(f.base));
  const other = list.find((f) => isSquareRoot(f) && !isPositiveConstant(f.base));
  const together = other ? [...constants, other] : constants;
  if (together.length < 2 || constants.length === 0) return list;
  const inside = together.flatMap((f) => (f.kind === 'power' ? (f.base.kind === 'product' ? f.base.factors : [f.base]) : []));
  const whole = build.squareRoot(build.product(...inside.sort((a, b) => rank(a) - rank(b))));
  const first = list.findIndex((f) => together.includes(f));
  return list.flatMap((f, i) => (i === first ? [whole] : together.includes(f) ? [] : [f]));
}

/** A sum with fractions as a rational factor times a sum without: `3 log 2/8 + 3/16` is 3/16 (2 log 2 + 1). Null where no member has a fraction. */
export function commonFraction(terms: readonly Expression[]): { readonly factor: Rational; readonly sum: Expression } | null {
  const parts = terms.map(factorsOf);
  if (parts.some((p) => Q.isZero(p.coefficient))) return null;
  const denominator = parts.reduce((l, p) => (l / Q.gcd(l, p.coefficient.den)) * p.coefficient.den, 1n);
  if (denominator === 1n) return null;
  const numerator = parts.reduce((g, p) => Q.gcd(g, (p.coefficient.num * denominator) / p.coefficient.den), 0n);
  const factor = Q.rational(numerator, denominator);
  return { factor, sum: build.sum(...parts.map((p) => arrange({ ...p, coefficient: Q.divide(p.coefficient, factor) }))) };
}
