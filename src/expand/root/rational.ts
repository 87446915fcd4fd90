/** Equations with the unknown under a fraction bar: the numerator over one denominator. */
import { build, dependsOn, type Expression, Q, sameExpression } from '../../expression/index.ts';

interface Fraction {
  readonly top: Expression;
  /** Factors that hold the unknown. */
  readonly bottom: readonly Factor[];
}

interface Factor {
  readonly base: Expression;
  /** At least 1. */
  readonly exponent: bigint;
}

const MOST = 12n;

/** N with F = N/D, where D holds the unknown in sums, products and whole powers; null where there is no such denominator. Zeros of N where D vanishes too are no zeros of F. */
export function clearedOfDenominators(e: Expression, unknown: string): { readonly numerator: Expression; readonly denominator: Expression } | null {
  const { top, bottom } = fraction(e, unknown);
  return bottom.length === 0 ? null : { numerator: top, denominator: productOf(bottom) };
}

const powerOf = (f: Factor): Expression => (f.exponent === 1n ? f.base : build.power(f.base, build.number(f.exponent)));
const productOf = (factors: readonly Factor[]): Expression => build.product(...factors.map(powerOf));

function fraction(e: Expression, y: string): Fraction {
  const whole: Fraction = { top: e, bottom: [] };
  if (!dependsOn(e, y)) return whole;
  switch (e.kind) {
    case 'negation': {
      const inner = fraction(e.operand, y);
      return { top: build.negation(inner.top), bottom: inner.bottom };
    }
    case 'sum': {
      const parts = e.terms.map((t) => fraction(t, y));
      const common = parts.reduce<readonly Factor[]>((all, p) => merged(all, p.bottom, (a, b) => (a > b ? a : b)), []);
      return { top: build.sum(...parts.map((p) => build.product(p.top, productOf(without(common, p.bottom))))), bottom: common };
    }
    case 'product': {
      const parts = e.factors.map((f) => fraction(f, y));
      return { top: build.product(...parts.map((p) => p.top)), bottom: parts.reduce<readonly Factor[]>((all, p) => merged(all, p.bottom, (a, b) => a + b), []) };
    }
    case 'quotient': {
      const above = fraction(e.numerator, y);
      const below = fraction(e.denominator, y);
      const own = dependsOn(below.top, y) ? factorsOf(below.top) : [];
      const top = build.product(above.top, productOf(below.bottom));
      return { top: own.length > 0 ? top : build.quotient(top, below.top), bottom: merged(above.bottom, own, (a, b) => a + b) };
    }
    case 'power': {
      const n = e.exponent.kind === 'number' ? e.exponent.value : e.exponent.kind === 'negation' && e.exponent.operand.kind === 'number' ? Q.negate(e.exponent.operand.value) : null;
      if (!n || n.den !== 1n || n.num > MOST || n.num < -MOST) return whole;
      if (n.num < 0n) return fraction(build.quotient(build.number(1), n.num === -1n ? e.base : build.power(e.base, build.number(-n.num))), y);
      const base = fraction(e.base, y);
      return base.bottom.length === 0 ? whole : { top: build.power(base.top, e.exponent), bottom: base.bottom.map((f) => ({ ...f, exponent: f.exponent * n.num })) };
    }
    default:
      return whole;
  }
}

function factorsOf(e: Expression): readonly Factor[] {
  if (e.kind === 'product') return e.factors.flatMap(factorsOf);
  if (e.kind === 'power' && e.exponent.kind === 'number' && e.exponent.value.den === 1n && e.exponent.value.num > 0n) return [{ base: e.base, exponent: e.exponent.value.num }];
  return [{ base: e, exponent: 1n }];
}

function merged(a: readonly Factor[], b: readonly Factor[], join: (x: bigint, y: bigint) => bigint): readonly Factor[] {
  const result = [...a];
  for (const f of b) {
    const at = result.findIndex((g) => sameExpression(g.base, f.base));
    const other = result[at];
    if (other) result[at] = { base: f.base, exponent: join(other.exponent, f.exponent) };
    else result.push(f);
  }
  return result;
}

const without = (all: readonly Factor[], own: readonly Factor[]): readonly Factor[] =>
  all.flatMap((f) => {
    const exponent = f.exponent - (own.find((g) => sameExpression(g.base, f.base))?.exponent ?? 0n);
    return exponent > 0n ? [{ base: f.base, exponent }] : [];
  });
