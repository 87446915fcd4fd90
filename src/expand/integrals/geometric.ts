/** Rational functions of q = e^(-b t) with poles at roots of unity, and log(1 -+ q), as power series in q whose coefficients are polynomials in the index on residue classes. */
import type { Element, Field } from '../../algebra/types.ts';
import { build, dependsOn, type Expression, Q, type Rational, walk } from '../../expression/index.ts';

/** The coefficients of q^k for k = residue, residue + modulus, ...: sum of coefficient * k^power. */
export interface ResidueClass {
  /** From 1 to the modulus. */
  readonly residue: number;
  readonly modulus: number;
  readonly powers: readonly { readonly power: number; readonly coefficient: Rational }[];
  /** To be added for single k. */
  readonly corrections: readonly { readonly index: number; readonly coefficient: Rational }[];
}

export interface DecayingSeries {
  /** b > 0. */
  readonly rate: Element;
  readonly classes: readonly ResidueClass[];
  /** Order of the pole at q = 1, negative for a zero. */
  readonly poleAtOne: number;
}

/** Polynomials in q, lowest first, times q^low. */
interface Laurent {
  readonly low: number;
  readonly c: readonly Rational[];
}
interface Fraction {
  readonly top: Laurent;
  readonly bottom: Laurent;
}

const MODULI = [1, 2, 3, 4, 6, 8, 5, 12];
const MOST_ORDER = 8;
const MOST_POWER = 64;

/** The product of factors base^exponent as such a series without constant term; null where it is not one. */
export function decayingSeries(field: Field, factors: readonly { readonly base: Expression; readonly exponent: Element }[], v: string): DecayingSeries | null {
  const rate = commonRate(field, factors.map((f) => f.base), v);
  if (!rate) return null;
  const [only] = factors;
  const exponentOf = (e: Element): number | null => {
    const r = field.asRational(e);
    return r && r.den === 1n && r.num >= -12n && r.num <= 12n ? Number(r.num) : null;
  };
  if (only && factors.length === 1 && exponentOf(only.exponent) === 1) {
    const logarithm = logarithmOf(field, only.base, v, rate);
    if (logarithm) return logarithm;
  }
  let whole: Fraction = { top: constant(Q.ONE), bottom: constant(Q.ONE) };
  for (const f of factors) {
    const n = exponentOf(f.exponent);
    const own = n === null ? null : fractionOf(field, f.base, v, rate);
    if (!own || n === null) return null;
    whole = multiplied(whole, raised(own, n));
  }
  return expanded(rate, whole);
}

/** log(1 - q^c) = -sum q^(ck)/k, log(1 + q^c) = sum (-1)^(k-1) q^(ck)/k. */
function logarithmOf(field: Field, e: Expression, v: string, rate: Element): DecayingSeries | null {
  const [a] = e.kind === 'call' && (e.function === 'log' || e.function === 'log1p') ? e.args : [];
  if (!a || e.kind !== 'call') return null;
  const inside = fractionOf(field, e.function === 'log' ? build.difference(a, build.number(1)) : a, v, rate);
  if (!inside) return null;
  const top = trimmed(inside.top);
  const bottom = trimmed(inside.bottom);
  const [c] = top.c;
  const [d] = bottom.c;
  if (top.c.length !== 1 || bottom.c.length !== 1 || !c || !d) return null;
  const sign = Q.divide(c, d);
  const step = top.low - bottom.low;
  if (step < 1 || !Q.isOne(Q.absolute(sign))) return null;
  const own = field.multiply(rate, Q.rational(step));
  const term = (residue: number, modulus: number, coefficient: number): ResidueClass => ({ residue, modulus, powers: [{ power: -1, coefficient: Q.rational(coefficient) }], corrections: [] });
  return { rate: own, poleAtOne: 0, classes: Q.signOf(sign) < 0 ? [term(1, 1, -1)] : [term(1, 2, 1), term(2, 2, -1)] };
}

const constant = (c: Rational): Laurent => ({ low: 0, c: [c] });

function trimmed(p: Laurent): Laurent {
  let from = 0;
  let to = p.c.length;
  while (to > from && Q.isZero(p.c[to - 1] as Rational)) to -= 1;
  while (from < to && Q.isZero(p.c[from] as Rational)) from += 1;
  return { low: p.low + from, c: p.c.slice(from, to) };
}
function sumOf(a: Laurent, b: Laurent): Laurent {
  const low = Math.min(a.low, b.low);
  const length = Math.max(a.low + a.c.length, b.low + b.c.length) - low;
  return trimmed({ low, c: Array.from({ length }, (_, k) => Q.add(a.c[k + low - a.low] ?? Q.ZERO, b.c[k + low - b.low] ?? Q.ZERO)) });
}
function productOf(a: Laurent, b: Laurent): Laurent {
  if (a.c.length === 0 || b.c.length === 0) return { low: 0, c: [] };
  const c = Array.from({ length: a.c.length + b.c.length - 1 }, () => Q.ZERO);
  a.c.forEach((x, i) => b.c.forEach((y, j) => (c[i + j] = Q.add(c[i + j] as Rational, Q.multiply(x, y)))));
  return trimmed({ low: a.low + b.low, c });
}
const multiplied = (a: Fraction, b: Fraction): Fraction => ({ top: productOf(a.top, b.top), bottom: productOf(a.bottom, b.bottom) });
function raised(a: Fraction, n: number): Fraction {
  const base = n < 0 ? { top: a.bottom, bottom: a.top } : a;
  let result: Fraction = { top: constant(Q.ONE), bottom: constant(Q.ONE) };
  for (let k = 0; k < Math.abs(n); k += 1) result = multiplied(result, base);
  return result;
}

const HYPERBOLIC: Readonly<Record<string, readonly [-1 | 1, 'sum' | 'inverse' | 'quotient']>> = { sinh: [-1, 'sum'], cosh: [1, 'sum'], csch: [-1, 'inverse'], sech: [1, 'inverse'], tanh: [-1, 'quotient'], coth: [1, 'quotient'] };

/** The exponents' common divisor b > 0 of which all are whole multiples. */
function commonRate(field: Field, bases: readonly Expression[], v: string): Element | null {
  let first: Element | null = null;
  let unit: Rational = Q.ZERO;
  for (const base of bases) {
    for (const node of walk(base)) {
      const argument = exponentOf(node) ?? (node.kind === 'call' && HYPERBOLIC[node.function] ? (node.args[0] ?? null) : null);
      if (!argument || !dependsOn(argument, v)) continue;
      const speed = speedOf(field, argument, v);
      if (!speed) return null;
      first ??= speed;
      const ratio = field.asRational(field.divide(speed, first));
      if (!ratio || Q.isZero(ratio)) return null;
      unit = { num: Q.gcd(unit.num * ratio.den, ratio.num * unit.den), den: unit.den * ratio.den };
    }
  }
  if (!first || Q.isZero(unit)) return null;
  const reduced = Q.absolute(Q.divide(Q.rational(unit.num), Q.rational(unit.den)));
  const sign = field.sign(first);
  if (sign !== 1 && sign !== -1) return null;
  return field.multiply(first, sign === 1 ? reduced : Q.negate(reduced));
}

/** The argument of an exponential. */
function exponentOf(e: Expression): Expression | null {
  if (e.kind === 'power' && e.base.kind === 'constant' && e.base.name === 'e') return e.exponent;
  return e.kind === 'call' && (e.function === 'exp' || e.function === 'expm1') ? (e.args[0] ?? null) : null;
}

/** a where e = a v. */
function speedOf(field: Field, e: Expression, v: string): Element | null {
  const speed = field.divide(field.fromExpression(e), field.fromExpression(build.symbol(v)));
  return field.parameters(speed).includes(v) ? null : speed;
}

function fractionOf(field: Field, e: Expression, v: string, rate: Element): Fraction | null {
  const one = constant(Q.ONE);
  const whole = (top: Laurent): Fraction => ({ top, bottom: one });
  const wave = (argument: Expression): Laurent | null => {
    const speed = speedOf(field, argument, v);
    const k = speed && field.asRational(field.divide(speed, rate));
    // e^(k b t) = q^(-k).
    return k && k.den === 1n && k.num <= BigInt(MOST_POWER) && k.num >= -BigInt(MOST_POWER) ? { low: -Number(k.num), c: [Q.ONE] } : null;
  };
  if (!dependsOn(e, v)) {
    const value = field.asRational(field.fromExpression(e));
    return value && whole(Q.isZero(value) ? { low: 0, c: [] } : constant(value));
  }
  const exponent = exponentOf(e);
  if (exponent) {
    const own = wave(exponent);
    return own && whole(e.kind === 'call' && e.function === 'expm1' ? sumOf(own, constant(Q.MINUS_ONE)) : own);
  }
  switch (e.kind) {
    case 'negation': {
      const inner = fractionOf(field, e.operand, v, rate);
      return inner && { top: productOf(inner.top, constant(Q.MINUS_ONE)), bottom: inner.bottom };
    }
    case 'sum':
      return e.terms.reduce<Fraction | null>((sum, t) => {
        const own = sum && fractionOf(field, t, v, rate);
        return own && sum && { top: sumOf(productOf(sum.top, own.bottom), productOf(own.top, sum.bottom)), bottom: productOf(sum.bottom, own.bottom) };
      }, whole({ low: 0, c: [] }));
    case 'product':
      return e.factors.reduce<Fraction | null>((product, f) => {
        const own = product && fractionOf(field, f, v, rate);
        return own && product && multiplied(product, own);
      }, whole(one));
    case 'quotient': {
      const [above, below] = [fractionOf(field, e.numerator, v, rate), fractionOf(field, e.denominator, v, rate)];
      return above && below && multiplied(above, raised(below, -1));
    }
    case 'power': {
      const n = dependsOn(e.exponent, v) ? null : field.asRational(field.fromExpression(e.exponent));
      const base = n && n.den === 1n && n.num <= 12n && n.num >= -12n ? fractionOf(field, e.base, v, rate) : null;
      return base && n && raised(base, Number(n.num));
    }
    case 'call': {
      const shape = HYPERBOLIC[e.function];
      const up = shape && e.args[0] ? wave(e.args[0]) : null;
      if (!shape || !up) return null;
      const down = { low: -up.low, c: up.c };
      const combined = (sign: Rational): Laurent => sumOf(up, productOf(down, constant(sign)));
      const own = whole(combined(Q.rational(shape[0])));
      if (shape[1] === 'sum') return multiplied(own, whole(constant(Q.HALF)));
      if (shape[1] === 'inverse') return multiplied(raised(own, -1), whole(constant(Q.rational(2))));
      return multiplied(own, raised(whole(combined(Q.rational(-shape[0]))), -1));
    }
    default:
      return null;
  }
}

/** N/D with D dividing (1 - q^m)^r. */
function expanded(rate: Element, { top, bottom }: Fraction): DecayingSeries | null {
  const [n, d] = [trimmed(top), trimmed(bottom)];
  if (n.c.length === 0 || d.c.length === 0) return null;
  const low = n.low - d.low;
  if (low < 1) return null;
  const poleAtOne = zerosAtOne(d.c) - zerosAtOne(n.c);
  for (let r = 0; r <= MOST_ORDER; r += 1) {
    for (const modulus of MODULI) {
      if (modulus * r > MOST_POWER) continue;
      let all: Laurent = constant(Q.ONE);
      const factor: Laurent = { low: 0, c: Array.from({ length: modulus + 1 }, (_, k) => (k === 0 ? Q.ONE : k === modulus ? Q.MINUS_ONE : Q.ZERO)) };
      for (let k = 0; k < r; k += 1) all = productOf(all, factor);
      const cofactor = exactQuotient(all.c, d.c);
      if (!cofactor) continue;
      const numerator = productOf({ low, c: n.c }, { low: 0, c: cofactor });
      return { rate, poleAtOne, classes: classesOf(numerator, modulus, r) };
    }
  }
  return null;
}

function zerosAtOne(p: readonly Rational[]): number {
  let rest = p;
  for (let count = 0; ; count += 1) {
    const quotient = rest.length > 1 ? exactQuotient(rest, [Q.ONE, Q.MINUS_ONE]) : null;
    if (!quotient) return count;
    rest = quotient;
  }
}

function exactQuotient(p: readonly Rational[], q: readonly Rational[]): Rational[] | null {
  const rest = [...p];
  const lead = q[q.length - 1] as Rational;
  const quotient: Rational[] = [];
  for (let shift = p.length - q.length; shift >= 0; shift -= 1) {
    const c = Q.divide(rest[shift + q.length - 1] as Rational, lead);
    quotient[shift] = c;
    q.forEach((x, k) => (rest[k + shift] = Q.subtract(rest[k + shift] as Rational, Q.multiply(c, x))));
  }
  return p.length >= q.length && rest.every((x) => Q.isZero(x)) ? quotient : null;
}

/** Coefficients of N/(1 - q^m)^r: N_i q^i gives binomial(r - 1 + j, r - 1) at k = i + m j, a polynomial in k that vanishes for the r - 1 values of j before 0. */
function classesOf(numerator: Laurent, modulus: number, r: number): ResidueClass[] {
  return Array.from({ length: modulus }, (_, index) => index + 1).flatMap((residue) => {
    let polynomial: Rational[] = [];
    const corrections: { index: number; coefficient: Rational }[] = [];
    numerator.c.forEach((c, at) => {
      const i = at + numerator.low;
      if (Q.isZero(c) || (i - residue) % modulus !== 0) return;
      if (r === 0) {
        corrections.push({ index: i, coefficient: c });
        return;
      }
      // j = (k - i)/m; product over h = 1 .. r-1 of (j + h)/h.
      let own: Rational[] = [c];
      for (let h = 1; h < r; h += 1) {
        const scale = Q.rational(1, modulus * h);
        const factor = [Q.multiply(Q.rational(modulus * h - i), scale), scale];
        const next = Array.from({ length: own.length + 1 }, () => Q.ZERO);
        own.forEach((x, a) => factor.forEach((y, b) => (next[a + b] = Q.add(next[a + b] as Rational, Q.multiply(x, y)))));
        own = next;
      }
      polynomial = Array.from({ length: Math.max(polynomial.length, own.length) }, (_, k) => Q.add(polynomial[k] ?? Q.ZERO, own[k] ?? Q.ZERO));
      // The polynomial is summed from the first k of the class on: take back what lies before i.
      for (let k = residue; k < i; k += modulus) {
        const value = own.reduceRight<Rational>((sum, x) => Q.add(Q.multiply(sum, Q.rational(k)), x), Q.ZERO);
        if (!Q.isZero(value)) corrections.push({ index: k, coefficient: Q.negate(value) });
      }
    });
    const powers = polynomial.flatMap((coefficient, power) => (Q.isZero(coefficient) ? [] : [{ power, coefficient }]));
    return powers.length === 0 && corrections.length === 0 ? [] : [{ residue, modulus, powers, corrections }];
  });
}
