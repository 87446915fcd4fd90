/** Powers of a product as a person writes them: quotients of functions as one function, |a|/a^2 as 1/|a|, roots of products and quotients as one root. */
import { build, type Expression, Q, type Rational } from '../expression/index.ts';
import { type Context, kernelElement, rationalOf } from './context.ts';
import { type Exponent, exponentToRational, numeratorOf } from './exponent.ts';
import { joinedPower } from './joinedLogarithms.ts';
import type { Kernel } from './kernel.ts';
import { exponentIn, type Monomial, monomialKey } from './monomial.ts';
import { isOnePolynomial } from './polynomial.ts';
import { addElements, elementKey, invertElement, multiplyElements, wholePower } from './quotient.ts';
import { isQuotient, partsOf } from './quotientParts.ts';
import { POSITIVE } from './signs.ts';
import { singleKernel } from './split.ts';
import type { Element } from './types.ts';

/** base^exponent, gathered before writing. */
export interface Power {
  readonly rank: number;
  readonly order: number;
  readonly base: () => Expression;
  readonly positive: boolean;
  /** The base of a root whose sign is not known, where it is a single product or quotient, so that a number may go under the root with it. */
  readonly open?: Element;
  exponent: Element;
}

/** Where a power stands in a product: lower ones first. */
export const RANK = { imaginary: 0, radical: 1, constant: 2, parameter: 3, sum: 4, function: 5, root: 6 } as const;

/** How the pieces of a power are written; lent by the writer of whole elements. */
export interface Writer {
  readonly element: (a: Element) => Expression;
  readonly kernel: (k: Kernel) => Expression;
}

/** Changes powers, gathered from `monomial` and what stands beside it, into those that a person would write; powers that are used up get exponent zero. */
export function joinInPrint(ctx: Context, writer: Writer, powers: Map<string, Power>, monomial: Monomial): void {
  joinQuotients(ctx, writer, powers, monomial);
  joinAbsolutes(ctx, powers, monomial);
  joinRoots(ctx, writer, powers, monomial);
  joinPowers(ctx, writer, powers);
}

/** sin(a)/cos(a) is written tan(a), and likewise for sinh and cosh. */
function joinQuotients(ctx: Context, writer: Writer, powers: Map<string, Power>, monomial: Monomial): void {
  for (const index of monomial.kernels) {
    const { shape } = ctx.table.kernels[index] as Kernel;
    if (shape.kind !== 'call' || (shape.id !== 'sin' && shape.id !== 'sinh')) continue;
    const partner = ctx.table.find(`${shape.id === 'sin' ? 'cos' : 'cosh'}(${shape.args.map(elementKey).join(', ')})`);
    if (!partner) continue;
    const s = powers.get(elementKey(kernelElement(ctx, ctx.table.kernels[index] as Kernel)));
    const c = powers.get(elementKey(kernelElement(ctx, partner)));
    const sr = s ? rationalOf(s.exponent) : null;
    const cr = c ? rationalOf(c.exponent) : null;
    if (!s || !c || !sr || !cr || sr.num <= 0n || cr.num >= 0n || sr.den !== 1n || cr.den !== 1n) continue;
    const common = Q.compare(sr, Q.negate(cr)) < 0 ? sr : Q.negate(cr);
    s.exponent = Q.subtract(sr, common);
    c.exponent = Q.add(cr, common);
    const args = shape.args;
    const name = shape.id === 'sin' ? 'tan' : 'tanh';
    powers.set(`${name} ${monomialKey(monomial)}${index}`, { rank: RANK.function, order: index, base: () => build.call(name, ...args.map((x) => writer.element(x))), exponent: common, positive: false });
  }
}

/** |a|/a^2 is written 1/|a|. */
function joinAbsolutes(ctx: Context, powers: Map<string, Power>, monomial: Monomial): void {
  for (const index of monomial.kernels) {
    const kernel = ctx.table.kernels[index] as Kernel;
    if (kernel.shape.kind !== 'abs') continue;
    const own = powers.get(elementKey(kernelElement(ctx, kernel)));
    const inner = powers.get(elementKey(kernel.shape.argument));
    const e = inner ? rationalOf(inner.exponent) : null;
    if (!own || !inner || !e || e.num >= 0n || e.den !== 1n) continue;
    const even = e.num % 2n === 0n ? e : Q.add(e, Q.ONE);
    if (even.num === 0n) continue;
    own.exponent = addElements(ctx.table, own.exponent, even);
    inner.exponent = Q.subtract(e, even);
  }
}

/**
 * Square roots of positive numbers, constants and parameters under one root: sqrt(2 pi), sqrt(a b), sqrt(2/pi); the powers used up get exponent zero.
 * One root of something of unknown sign may join them, since sqrt(2) sqrt(u) = sqrt(2 u) for all u.
 */
export function joinedSquareRoot(writer: Writer, powers: readonly Power[], integer: bigint, divisorUnder: bigint): Expression | null {
  const candidates = powers.filter((p) => (p.rank === RANK.parameter || p.rank === RANK.constant) && p.positive);
  const above = candidates.filter((p) => isHalf(p.exponent));
  const unknown = powers.filter((p) => ((p.rank === RANK.parameter && !p.positive) || p.open !== undefined) && isHalf(p.exponent));
  const [alone] = unknown;
  const below = unknown.length < 2 ? candidates.filter((p) => 'num' in p.exponent && p.exponent.num === -1n && p.exponent.den === 2n) : [];
  const joins = unknown.length === 1 && alone !== undefined;
  if (integer === 1n && divisorUnder === 1n && above.length === 0 && (!joins || (below.length === 0 && alone.open === undefined))) return null;
  if (joins && alone.open === undefined) above.push(alone);
  // A lone root below stays there: 1/sqrt(pi); with something above they share one: sqrt(2/pi).
  const top = build.product(...(integer === 1n ? [] : [build.number(integer)]), ...above.map((p) => p.base()));
  const under = [...(divisorUnder === 1n ? [] : [build.number(divisorUnder)]), ...below.map((p) => p.base())];
  for (const p of [...above, ...below]) p.exponent = Q.ZERO;
  if (!joins || alone.open === undefined) return build.power(below.length === 0 ? top : build.quotient(top, build.product(...under)), Q.HALF);
  alone.exponent = Q.ZERO;
  const inner = writer.element(alone.open);
  if (build.isOneNumber(top) && under.length === 0) return build.power(inner, Q.HALF);
  const [over, inside] = inner.kind === 'quotient' ? [inner.numerator, inner.denominator] : [inner, null];
  const product = build.isOneNumber(over) ? top : build.product(...(build.isOneNumber(top) ? [] : [top]), ...(over.kind === 'product' ? over.factors : [over]));
  const divisor = [...under, ...(inside ? (inside.kind === 'product' ? inside.factors : [inside]) : [])];
  return build.power(divisor.length === 0 ? product : build.quotient(product, build.product(...divisor)), Q.HALF);
}

/** The root of a product N D over |D| is written as the root of N/D, and (N D)^(1/2)/(N D) as (N D)^(-1/2). */
function joinRoots(ctx: Context, writer: Writer, powers: Map<string, Power>, monomial: Monomial): void {
  for (const index of monomial.kernels) {
    const kernel = ctx.table.kernels[index] as Kernel;
    if (kernel.shape.kind !== 'radicand') continue;
    const key = elementKey(kernel.shape.base);
    const own = powers.get(key);
    const r = own ? rationalOf(own.exponent) : null;
    if (!own || !r || r.den === 1n) continue;
    let base: Element = kernel.shape.base;
    let exponent: Rational = r;
    const parts = partsOf(base);
    const plain = isOnePolynomial(parts.numerator);
    if (plain && exponent.num > 0n) {
      const factors = parts.monomial.kernels.map((k, i) => ({ power: powers.get(elementKey(kernelElement(ctx, ctx.table.kernels[k] as Kernel))), e: exponentToRational(parts.monomial.exponents[i] as Exponent) }));
      const below = factors.every(({ power, e }) => power && !isQuotient(power.exponent) && Q.compare(power.exponent, Q.negate(e)) <= 0);
      // |b| (a b)^(1/2)/a^2 is b (a/b)^(-1/2)/a.
      const bars = monomial.kernels.some((k) => {
        const { shape } = ctx.table.kernels[k] as Kernel;
        const inner = shape.kind === 'abs' ? singleKernel(shape.argument) : null;
        const s = inner && exponentIn(parts.monomial, inner.kernel) !== 0 ? powers.get(elementKey(kernelElement(ctx, ctx.table.kernels[k] as Kernel)))?.exponent : undefined;
        return s !== undefined && !isQuotient(s) && Q.equal(s, Q.multiply(Q.rational(-2), Q.subtract(r, Q.ONE)));
      });
      const some = factors.some(({ power, e }) => power && !isQuotient(power.exponent) && Q.compare(power.exponent, Q.negate(e)) <= 0);
      if ((below || (bars && some)) && Q.isOne(parts.content)) {
        exponent = Q.subtract(exponent, Q.ONE);
        factors.forEach(({ power, e }, i) => {
          if (power) power.exponent = addElements(ctx.table, power.exponent, e);
          else {
            const factor = ctx.table.kernels[parts.monomial.kernels[i] as number] as Kernel;
            powers.set(elementKey(kernelElement(ctx, factor)), { rank: factor.shape.kind === 'parameter' ? RANK.parameter : RANK.function, order: factor.index, base: () => writer.kernel(factor), exponent: e, positive: ctx.signs.ofKernel(factor) === POSITIVE });
          }
        });
      }
    }
    for (const other of monomial.kernels) {
      const size = ctx.table.kernels[other] as Kernel;
      if (size.shape.kind !== 'abs') continue;
      const bars = powers.get(elementKey(kernelElement(ctx, size)));
      const s = bars ? rationalOf(bars.exponent) : null;
      if (!bars || !s || s.num === 0n) continue;
      const m = Q.divide(s, exponent);
      if (m.den !== 1n || m.num % 2n !== 0n || m.num >= 0n) continue;
      const single = multiplyElements(ctx.table, kernel.shape.base, invertElement(ctx.table, size.shape.argument));
      if (isQuotient(single) && (single.denominator.length > 0 || single.monomial.exponents.some((e) => numeratorOf(e) < 0))) continue;
      base = multiplyElements(ctx.table, base, wholePower(ctx.table, size.shape.argument, Number(m.num)));
      bars.exponent = Q.ZERO;
    }
    own.exponent = Q.ZERO;
    const whole = base;
    const product = isOnePolynomial(partsOf(whole).numerator) && partsOf(whole).denominator.length === 0;
    powers.set(`root ${index}`, { rank: RANK.root, order: index, base: () => writer.element(whole), exponent, positive: false, ...(product ? { open: whole } : {}) });
  }
}

/** 4^e pi^e |mu|^(2 e)/Delta^e is written (4 pi mu^2/Delta)^e where that power was met. */
function joinPowers(ctx: Context, writer: Writer, powers: Map<string, Power>): void {
  const found = joinedPower(ctx, (key) => powers.get(key)?.exponent ?? null);
  if (!found) return;
  for (const key of found.keys) {
    const p = powers.get(key);
    if (p) p.exponent = Q.ZERO;
  }
  powers.set('joined', { rank: RANK.function, order: 1e6, base: () => writer.element(found.argument), exponent: found.exponent, positive: false });
}

export const isHalf = (e: Element): boolean => 'num' in e && e.num === 1n && e.den === 2n;
