/** A summand as a sum of products of one linear factor's power and logarithm, so that each can be summed in closed form. */
import { build, dependsOn, type Expression, Q, type Rational, rationalOf } from '../../expression/index.ts';

/** coefficient * (k + shift)^exponent * log(k + shift)^logs, coefficient and shift free of k. */
export interface PowerTerm {
  readonly kind: 'power';
  readonly coefficient: Expression;
  readonly shift: Expression;
  readonly exponent: Expression;
  readonly logs: number;
}
/** coefficient * base^k, both free of k. */
export interface GeometricTerm {
  readonly kind: 'geometric';
  readonly coefficient: Expression;
  readonly base: Expression;
}
export type SummandTerm = PowerTerm | GeometricTerm;

interface Linear {
  readonly slope: Expression;
  readonly shift: Expression;
}

const MOST_TERMS = 200;
const zero = build.number(0);

/** The parts of the summand; null where it is not of this kind. */
export function summandTerms(body: Expression, k: string): SummandTerm[] | null {
  const expanded = expand(body, k);
  if (!expanded || expanded.length > MOST_TERMS) return null;
  const terms: SummandTerm[] = [];
  for (const factors of expanded) {
    const parts = productTerms(factors, k);
    if (!parts) return null;
    terms.push(...parts);
  }
  return terms;
}

/** The body as a sum of products; positive integer powers of sums are multiplied out. */
function expand(e: Expression, k: string): Expression[][] | null {
  if (!dependsOn(e, k)) return [[e]];
  switch (e.kind) {
    case 'sum': {
      if (linear(e, k)) return [[e]];
      const all: Expression[][] = [];
      for (const t of e.terms) {
        const part = expand(t, k);
        if (!part) return null;
        all.push(...part);
      }
      return all;
    }
    case 'negation':
      return expand(e.operand, k)?.map((f) => [build.number(-1), ...f]) ?? null;
    case 'product': {
      let all: Expression[][] = [[]];
      for (const f of e.factors) {
        const part = expand(f, k);
        if (!part || all.length * part.length > MOST_TERMS) return null;
        all = all.flatMap((a) => part.map((b) => [...a, ...b]));
      }
      return all;
    }
    case 'quotient': {
      const top = expand(e.numerator, k);
      const bottom = expand(e.denominator, k);
      if (!top || bottom?.length !== 1) return null;
      const inverse = (bottom[0] as Expression[]).map((f) => build.power(f, -1));
      return top.map((a) => [...a, ...inverse]);
    }
    case 'power': {
      const { base, exponent } = e;
      if (linear(base, k) || !dependsOn(base, k) || exponent.kind !== 'number' || exponent.value.den !== 1n || exponent.value.num < 0n || exponent.value.num > 12n) {
        const inner = base.kind === 'product' || base.kind === 'quotient' || base.kind === 'power' ? expand(base, k) : null;
        if (inner?.length === 1 && !dependsOn(exponent, k)) return [(inner[0] as Expression[]).map((f) => build.power(f, exponent))];
        return [[e]];
      }
      return expand(build.product(...Array.from({ length: Number(exponent.value.num) }, () => base)), k);
    }
    default:
      return [[e]];
  }
}

/** slope * (k + shift) for a tree that is linear in k. */
export function linear(e: Expression, k: string): Linear | null {
  if (!dependsOn(e, k)) return null;
  switch (e.kind) {
    case 'symbol':
      return { slope: build.number(1), shift: zero };
    case 'negation': {
      const inner = linear(e.operand, k);
      return inner && { slope: build.negation(inner.slope), shift: inner.shift };
    }
    case 'sum': {
      const moving = e.terms.filter((t) => dependsOn(t, k));
      const fixed = e.terms.filter((t) => !dependsOn(t, k));
      const [only] = moving;
      const inner = moving.length === 1 && only ? linear(only, k) : null;
      if (!inner) return null;
      return { slope: inner.slope, shift: fixed.length === 0 ? inner.shift : build.sum(inner.shift, build.quotient(build.sum(...fixed), inner.slope)) };
    }
    case 'product': {
      const moving = e.factors.filter((f) => dependsOn(f, k));
      const fixed = e.factors.filter((f) => !dependsOn(f, k));
      const [only] = moving;
      const inner = moving.length === 1 && only ? linear(only, k) : null;
      return inner && { slope: build.product(...fixed, inner.slope), shift: inner.shift };
    }
    case 'quotient': {
      const inner = dependsOn(e.denominator, k) ? null : linear(e.numerator, k);
      return inner && { slope: build.quotient(inner.slope, e.denominator), shift: inner.shift };
    }
    default:
      return null;
  }
}

interface Gathered {
  readonly coefficient: Expression[];
  /** By shift: exponent and number of logarithms. */
  readonly linear: { shift: Rational | Expression; exponent: Expression; logs: number }[];
  geometric: Expression | null;
}

function productTerms(factors: readonly Expression[], k: string): SummandTerm[] | null {
  const g: Gathered = { coefficient: [], linear: [], geometric: null };
  for (const f of factors) if (!gather(g, f, k, build.number(1))) return null;
  const coefficient = build.product(...g.coefficient);
  const moving = g.linear.filter((l) => !(l.exponent.kind === 'number' && Q.isZero(l.exponent.value) && l.logs === 0));
  if (g.geometric) return moving.length === 0 ? [{ kind: 'geometric', coefficient, base: g.geometric }] : null;
  if (moving.length === 0) return [{ kind: 'power', coefficient, shift: zero, exponent: zero, logs: 0 }];
  const [only] = moving;
  if (moving.length === 1 && only) return [{ kind: 'power', coefficient, shift: shiftTree(only.shift), exponent: only.exponent, logs: only.logs }];
  return partialFractions(coefficient, moving);
}

const shiftTree = (shift: Rational | Expression): Expression => ('num' in shift ? build.number(shift) : shift);

function gather(g: Gathered, f: Expression, k: string, exponent: Expression): boolean {
  if (!dependsOn(f, k)) {
    g.coefficient.push(isOne(exponent) ? f : build.power(f, exponent));
    return true;
  }
  if (f.kind === 'power' && dependsOn(f.exponent, k) && !dependsOn(f.base, k) && isOne(exponent)) {
    const line = linear(f.exponent, k);
    if (!line || g.geometric) return false;
    g.geometric = build.power(f.base, line.slope);
    g.coefficient.push(build.power(f.base, build.product(line.slope, line.shift)));
    return true;
  }
  if (f.kind === 'power' && !dependsOn(f.exponent, k)) return gather(g, f.base, k, isOne(exponent) ? f.exponent : multiplied(f.exponent, exponent));
  if (f.kind === 'call' && f.function === 'sqrt' && f.args[0]) return gather(g, f.args[0], k, multiplied(build.number(Q.HALF), exponent));
  if (f.kind === 'call' && f.function === 'log' && f.args.length === 1 && f.args[0] && exponent.kind === 'number' && exponent.value.den === 1n && exponent.value.num > 0n) {
    const line = linear(f.args[0], k);
    if (!line || !(line.slope.kind === 'number' && Q.isOne(line.slope.value))) return false;
    entry(g, line.shift).logs += Number(exponent.value.num);
    return true;
  }
  const line = linear(f, k);
  if (!line) return false;
  const own = entry(g, line.shift);
  own.exponent = added(own.exponent, exponent);
  if (!isOne(line.slope)) g.coefficient.push(build.power(line.slope, exponent));
  return true;
}

const isOne = (e: Expression): boolean => e.kind === 'number' && Q.isOne(e.value);
const multiplied = (a: Expression, b: Expression): Expression => (a.kind === 'number' && b.kind === 'number' ? build.number(Q.multiply(a.value, b.value)) : build.product(a, b));
const added = (a: Expression, b: Expression): Expression => (a.kind === 'number' && b.kind === 'number' ? build.number(Q.add(a.value, b.value)) : build.sum(a, b));

function entry(g: Gathered, shift: Expression): Gathered['linear'][number] {
  const value = rationalOf(shift);
  const key = value ? Q.toText(value) : JSON.stringify(shift, (_, v: unknown) => (typeof v === 'bigint' ? `${v}` : v));
  const found = g.linear.find((l) => ('num' in l.shift ? Q.toText(l.shift) : JSON.stringify(l.shift, (_, v: unknown) => (typeof v === 'bigint' ? `${v}` : v))) === key);
  if (found) return found;
  const created = { shift: value ?? shift, exponent: zero, logs: 0 };
  g.linear.push(created);
  return created;
}

/** Product of (k + r_i)^(n_i) with rational r_i and integers n_i as a sum of single powers. */
function partialFractions(coefficient: Expression, factors: readonly { shift: Rational | Expression; exponent: Expression; logs: number }[]): SummandTerm[] | null {
  const parsed: { shift: Rational; exponent: number }[] = [];
  for (const f of factors) {
    if (!('num' in f.shift) || f.logs > 0 || f.exponent.kind !== 'number' || f.exponent.value.den !== 1n) return null;
    const exponent = Number(f.exponent.value.num);
    if (Math.abs(exponent) > 12) return null;
    parsed.push({ shift: f.shift, exponent });
  }
  // Multiply one factor (k + r)^(+-1) at a time into the terms (k + s)^m.
  let terms: Simple[] = [{ shift: parsed[0]?.shift ?? Q.ZERO, exponent: 0, weight: Q.ONE }];
  for (const p of parsed) {
    for (let n = 0; n < Math.abs(p.exponent); n += 1) {
      terms = terms.flatMap((t) => timesLinear(t, p.shift, p.exponent > 0));
      if (terms.length > 4000) return null;
      terms = collect(terms);
    }
  }
  return terms.map((t) => ({ kind: 'power', coefficient: build.product(coefficient, build.number(t.weight)), shift: build.number(t.shift), exponent: build.number(t.exponent), logs: 0 }));
}

type Simple = { shift: Rational; exponent: number; weight: Rational };

function collect(terms: readonly Simple[]): Simple[] {
  const map = new Map<string, Simple>();
  for (const t of terms) {
    const key = `${Q.toText(t.shift)}:${t.exponent}`;
    const own = map.get(key);
    map.set(key, own ? { ...own, weight: Q.add(own.weight, t.weight) } : t);
  }
  return [...map.values()].filter((t) => !Q.isZero(t.weight));
}

/** weight (k + s)^m (k + r)^(+1 or -1) as a sum of single powers. */
function timesLinear(t: Simple, r: Rational, up: boolean): Simple[] {
  const gap = Q.subtract(r, t.shift);
  if (Q.isZero(gap)) return [{ ...t, exponent: t.exponent + (up ? 1 : -1) }];
  if (up) return [{ ...t, exponent: t.exponent + 1 }, { ...t, weight: Q.multiply(t.weight, gap) }];
  if (t.exponent === 0) return [{ shift: r, exponent: -1, weight: t.weight }];
  if (t.exponent < 0) {
    // 1/((k+s)^n (k+r)) = (1/gap) (1/(k+s)^n - 1/((k+s)^(n-1) (k+r)))
    const first = { ...t, weight: Q.divide(t.weight, gap) };
    const rest = timesLinear({ ...t, exponent: t.exponent + 1, weight: Q.negate(Q.divide(t.weight, gap)) }, r, false);
    return [first, ...rest];
  }
  // (k+s)^m/(k+r) = (k+s)^(m-1) - gap (k+s)^(m-1)/(k+r)
  const first = { ...t, exponent: t.exponent - 1 };
  const rest = timesLinear({ ...t, exponent: t.exponent - 1, weight: Q.negate(Q.multiply(t.weight, gap)) }, r, false);
  return [first, ...rest];
}
