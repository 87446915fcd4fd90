/** Elements as a person writes them: numbers in front, powers of one base together, radicals joined, sums in natural order. */
import { build, Q, walk, type Expression, type Rational } from '../expression/index.ts';
import { withNumbersWritten } from './algebraicWriting.ts';
import { constantKernel, kernelElement, rationalOf, type Context } from './context.ts';
import { exponentToRational, numeratorOf, denominatorOf, type Exponent } from './exponent.ts';
import { linearFactors } from './linearFactors.ts';
import { joinedPower, withJoinedLogarithms } from './joinedLogarithms.ts';
import type { Kernel } from './kernel.ts';
import { exponentIn, isUnit, monomialKey, multiplyMonomials, UNIT, withoutKernel, type Monomial } from './monomial.ts';
import { contentOf, divideByInteger, isOnePolynomial, kernelsIn, ONE_POLYNOMIAL, shiftPolynomial, type Polynomial, type Term } from './polynomial.ts';
import { addElements, elementKey, invertElement, multiplyElements, negateElement, scaleElement, wholePower } from './quotient.ts';
import { isQuotient, partsOf, type Factor, type Quotient } from './quotientParts.ts';
import { normalise } from './normalForm.ts';
import { kernelsOf } from './kernelsOf.ts';
import { reduceByRelations } from './relations.ts';
import { POSITIVE } from './signs.ts';
import { asElement, singleKernel } from './split.ts';
import { squareFreeFactors } from './squareFree.ts';
import { asSingleCosine, cosineOfPi } from './unitCircle.ts';
import type { Element } from './types.ts';

/** base^exponent, gathered before writing. */
interface Power {
  readonly rank: number;
  readonly order: number;
  readonly base: () => Expression;
  readonly positive: boolean;
  /** The base of a root whose sign is not known, where it is a single product or quotient, so that a number may go under the root with it. */
  readonly open?: Element;
  exponent: Element;
}

const RANK = { imaginary: 0, radical: 1, constant: 2, parameter: 3, sum: 4, function: 5, root: 6 } as const;

export function toExpression(ctx: Context, element: Element): Expression {
  const a = withJoinedLogarithms(ctx, element);
  if (!isQuotient(a)) return numberExpression(a);
  const written = withNumbersWritten(ctx, a);
  if (written) return toExpression(ctx, written);
  const cosines = inCosines(ctx, a);
  if (cosines) return cosines;
  const { content, monomial, numerator, denominator } = a;
  if (isOnePolynomial(numerator)) return writeProduct(ctx, content, monomial, [], denominator);
  if (denominator.length === 0 && isRealAlgebraic(ctx, a)) return writeAlgebraic(ctx, content, shiftPolynomial(numerator, monomial));
  const repeated = repeatedFactors(ctx, numerator);
  if (repeated === null && isUnit(monomial) && denominator.length === 0 && distributes(ctx, content, numerator)) return writeSum(ctx, content, numerator);
  const isParameter = (k: number): boolean => (ctx.table.kernels[k] as Kernel).shape.kind === 'parameter';
  const split = linearFactors(numerator, isParameter, !isUnit(monomial)) ?? repeated;
  if (split) {
    const factors = split.map((f): Factor => ({ polynomial: f.polynomial, exponent: -f.exponent }));
    return writeProduct(ctx, content, monomial, factors, denominator);
  }
  // The sign goes into the sum unless that leaves only minus signs: (1 - a)/2, but -(a + 1)/2.
  const inside = content.num < 0n && numerator.some((t) => t.coefficient < 0n);
  const sum = writeSum(ctx, inside ? Q.MINUS_ONE : Q.ONE, numerator);
  return writeProduct(ctx, inside ? Q.negate(content) : content, monomial, [{ base: () => sum, order: 0 }], denominator);
}

/** (a + c)^2 as it stands, where the sum is a power. */
function repeatedFactors(ctx: Context, f: Polynomial): readonly Factor[] | null {
  if (f.length > 60 || f.length < 3) return null;
  const factors = squareFreeFactors(f, ctx.table.check);
  return factors.some((x) => x.exponent > 1) ? factors : null;
}

const isRealAlgebraic = (ctx: Context, a: Element): boolean => [...kernelsOf(a)].every((k) => (ctx.table.kernels[k] as Kernel).shape.kind === 'integer');

/** Sums of radicals of integers over one denominator: (1 + sqrt 5)/2, (sqrt 6 + sqrt 2)/4. */
function writeAlgebraic(ctx: Context, content: Rational, sum: Polynomial): Expression {
  const terms = reduceByRelations(ctx.table, sum);
  const common = contentOf(terms);
  const f = divideByInteger(terms, common);
  let c = Q.multiply(content, Q.rational(common));
  if (c.den === 1n) return writeSum(ctx, c, f);
  const inside = c.num < 0n && f.some((t) => t.coefficient < 0n);
  if (inside) c = Q.negate(c);
  const body = writeSum(ctx, inside ? Q.MINUS_ONE : Q.ONE, f);
  return writeProduct(ctx, c, UNIT, [{ base: () => body, order: 0 }], []);
}

/** Powers of 2 cos(2 pi/m) as sums of cosines of multiples, which is how such numbers are written; null where there is no such kernel. */
function inCosines(ctx: Context, a: Quotient): Expression | null {
  const kernels = [...kernelsOf(a)].filter((k) => (ctx.table.kernels[k] as Kernel).shape.kind === 'cosine');
  const [kernel] = kernels;
  if (kernels.length !== 1 || kernel === undefined || a.denominator.some((f) => kernelsIn(f.polynomial).has(kernel))) return null;
  const { shape } = ctx.table.kernels[kernel] as Kernel;
  if (shape.kind !== 'cosine') return null;
  const written = (r: Rational, coefficient: Element): Expression => {
    // Angles with radicals: sqrt(3) rather than 2 cos(pi/6).
    if (r.den <= 6n || r.den === 12n) return toExpression(ctx, multiplyElements(ctx.table, coefficient, cosineOfPi(ctx, r)));
    const sine = Q.compare(r, Q.rational(1, 4)) > 0;
    const angle = sine ? Q.subtract(Q.HALF, r) : r;
    const call = ctx.table.intern(`written ${sine ? 'sin' : 'cos'} ${Q.toText(angle)}`, () => ({
      shape: { kind: 'call', id: sine ? 'sin' : 'cos', args: [scaleElement(kernelElement(ctx, constantKernel(ctx, 'pi')), angle)] },
    }));
    return toExpression(ctx, multiplyElements(ctx.table, coefficient, kernelElement(ctx, call)));
  };
  const single = asSingleCosine(ctx, ctx.table.kernels[kernel] as Kernel, a);
  if (single) return written(single.angle, single.factor);
  const byAngle = new Map<string, { angle: Rational; coefficient: Element }>();
  const put = (k: number, coefficient: Element): void => {
    // cos(pi r), r brought into [0, 1/2].
    let r = Q.multiply(shape.angle, Q.rational(k));
    r = Q.subtract(r, Q.rational(2n * Q.floor(Q.multiply(r, Q.HALF))));
    if (Q.compare(r, Q.ONE) > 0) r = Q.subtract(Q.rational(2), r);
    const negative = Q.compare(r, Q.HALF) > 0;
    if (negative) r = Q.subtract(Q.ONE, r);
    if (Q.equal(r, Q.HALF)) return;
    const signed = negative ? negateElement(coefficient) : coefficient;
    const key = Q.toText(r);
    const known = byAngle.get(key);
    if (known) known.coefficient = addElements(ctx.table, known.coefficient, signed);
    else byAngle.set(key, { angle: r, coefficient: signed });
  };
  for (const t of a.numerator) {
    const monomial = multiplyMonomials(t.monomial, a.monomial);
    const degree = exponentIn(monomial, kernel);
    if (typeof degree !== 'number' || degree < 0) return null;
    const rest = normalise(ctx.table, Q.multiply(a.content, Q.rational(t.coefficient)), withoutKernel(monomial, kernel), ONE_POLYNOMIAL, a.denominator, false);
    let binomial = 1n;
    for (let i = 0; 2 * i <= degree; i += 1) {
      if (i > 0) binomial = (binomial * BigInt(degree - i + 1)) / BigInt(i);
      const k = degree - 2 * i;
      put(k, scaleElement(rest, Q.rational(k === 0 ? binomial : 2n * binomial)));
    }
  }
  const terms = [...byAngle.values()].filter((x) => isQuotient(x.coefficient) || x.coefficient.num !== 0n).sort((x, y) => Q.compare(x.angle, y.angle));
  return build.sum(...terms.map((x) => written(x.angle, x.coefficient)));
}

const numberExpression = (r: Rational): Expression => (r.num < 0n ? build.negation(build.number(Q.negate(r))) : build.number(r));

/** Whether c * (sum) is better written term by term: numbers always when the factor is whole, other sums when a term becomes plainer. */
function distributes(ctx: Context, c: Rational, f: Polynomial): boolean {
  if (Q.isOne(c) || (c.num === -1n && c.den === 1n)) return true;
  const shapes = [...kernelsIn(f)].map((k) => ctx.table.kernels[k] as Kernel);
  const numeric = shapes.every((k) => k.shape.kind !== 'parameter');
  if (numeric && (c.den === 1n || (shapes.some((k) => k.relation?.numeric !== true) && f.some((t) => Q.gcd(t.coefficient, c.den) > 1n)))) return true;
  if (c.den === 1n) return false;
  return f.some((t) => (t.coefficient * c.num) % c.den === 0n);
}

/** Total degree of a term in parameters, then in all kernels: higher degrees are written first. */
function degrees(ctx: Context, m: Monomial): readonly [number, number] {
  let parameters = 0;
  let all = 0;
  m.kernels.forEach((k, i) => {
    const e = m.exponents[i] as Exponent;
    const d = numeratorOf(e) / denominatorOf(e);
    all += d;
    if ((ctx.table.kernels[k] as Kernel).shape.kind === 'parameter') parameters += d;
  });
  return [parameters, all];
}

function naturalOrder(ctx: Context, f: Polynomial): readonly Term[] {
  const numeric = [...kernelsIn(f)].every((k) => ctx.table.relations[k]?.numeric === true);
  const ranked = f.map((t, i) => ({ t, i, d: degrees(ctx, t.monomial) }));
  const imaginary = (m: Monomial): number => (m.kernels.some((k) => (ctx.table.kernels[k] as Kernel).shape.kind === 'imaginary') ? 1 : 0);
  ranked.sort((x, y) => y.d[0] - x.d[0] || imaginary(x.t.monomial) - imaginary(y.t.monomial) || y.d[1] - x.d[1] || x.i - y.i);
  const terms = ranked.map((r) => r.t);
  // Numbers are written with the rational part first: 1 + sqrt(5).
  return numeric ? [...terms].sort((x, y) => imaginary(x.monomial) - imaginary(y.monomial) || terms.indexOf(y) - terms.indexOf(x)) : terms;
}

function writeSum(ctx: Context, c: Rational, f: Polynomial): Expression {
  let order = naturalOrder(ctx, f);
  const signed = (t: Term): Rational => Q.multiply(c, { num: t.coefficient, den: 1n });
  const first = order[0];
  const last = order[order.length - 1];
  // 1 - v^2 rather than -v^2 + 1, and any positive term before a negative one.
  if (first && last && signed(first).num < 0n) {
    const positive = order.find((t) => signed(t).num > 0n);
    if (signed(last).num > 0n) order = [...order].reverse();
    else if (positive) order = [positive, ...order.filter((t) => t !== positive)];
  }
  const written = joinLogarithms(ctx, order.map((t) => ({ coefficient: signed(t), monomial: t.monomial })));
  return build.sum(...written);
}

/** Terms as trees; logarithms of numbers and constants with equal coefficients (up to sign) become one: log(2 pi)/2, log(3/2). */
function joinLogarithms(ctx: Context, terms: readonly { readonly coefficient: Rational; readonly monomial: Monomial }[]): readonly Expression[] {
  const argumentOf = (m: Monomial): Element | null => {
    const [k] = m.kernels;
    const shape = m.kernels.length === 1 && m.exponents[0] === 1 && k !== undefined ? (ctx.table.kernels[k] as Kernel).shape : null;
    if (shape?.kind !== 'log') return null;
    const plain = !isQuotient(shape.argument) || [...kernelsOf(shape.argument)].every((x) => (ctx.table.kernels[x] as Kernel).shape.kind === 'constant');
    return plain ? shape.argument : null;
  };
  const groups = new Map<string, number[]>();
  terms.forEach((t, i) => {
    if (!argumentOf(t.monomial)) return;
    const key = Q.toText(Q.absolute(t.coefficient));
    groups.set(key, [...(groups.get(key) ?? []), i]);
  });
  const done = new Set<number>();
  return terms.flatMap((t, i): Expression[] => {
    if (done.has(i)) return [];
    const group = argumentOf(t.monomial) ? (groups.get(Q.toText(Q.absolute(t.coefficient))) ?? []) : [];
    if (group.length < 2) return [writeProduct(ctx, t.coefficient, t.monomial, [], [])];
    let argument: Element = Q.ONE;
    for (const j of group) {
      done.add(j);
      const member = terms[j];
      const x = member ? argumentOf(member.monomial) : null;
      if (member && x) argument = multiplyElements(ctx.table, argument, member.coefficient.num < 0n === t.coefficient.num < 0n ? x : invertElement(ctx.table, x));
    }
    const log = build.call('log', toExpression(ctx, argument));
    return [writeProduct(ctx, t.coefficient, UNIT, [{ base: () => log, order: 0 }], [])];
  });
}

interface ExtraFactor {
  readonly base: () => Expression;
  readonly order: number;
}
const isFactor = (x: ExtraFactor | Factor): x is Factor => 'polynomial' in x;

/** content * monomial * extra / denominator as one product or quotient; extra Factors carry minus their exponent. */
function writeProduct(ctx: Context, content: Rational, monomial: Monomial, extra: readonly (ExtraFactor | Factor)[], denominator: readonly Factor[]): Expression {
  const powers = new Map<string, Power>();
  const put = (key: string, rank: number, order: number, base: () => Expression, exponent: Element, positive = false): void => {
    const known = powers.get(key);
    if (known) known.exponent = addElements(ctx.table, known.exponent, exponent);
    else powers.set(key, { rank, order, base, exponent, positive });
  };
  const radicals = new Map<number, bigint>();
  let exponential: Element | null = null;
  const top: Expression[] = [];
  const bottom: Expression[] = [];

  monomial.kernels.forEach((index, i) => {
    const kernel = ctx.table.kernels[index] as Kernel;
    const e = monomial.exponents[i] as Exponent;
    const r = exponentToRational(e);
    const { shape } = kernel;
    switch (shape.kind) {
      case 'integer': {
        const q = Number(r.den);
        radicals.set(q, (radicals.get(q) ?? 1n) * shape.value ** r.num);
        break;
      }
      case 'exp':
        exponential = addElements(ctx.table, exponential ?? Q.ZERO, scaleElement(shape.unit, r));
        break;
      case 'power':
        put(elementKey(shape.base), RANK.function, index, () => toExpression(ctx, shape.base), scaleElement(shape.unit, r));
        break;
      case 'radicand':
        put(elementKey(shape.base), RANK.root, index, () => toExpression(ctx, shape.base), r);
        break;
      case 'parameter':
        put(elementKey(kernelElement(ctx, kernel)), RANK.parameter, index, () => build.symbol(shape.name), r, ctx.signs.ofKernel(kernel) === POSITIVE);
        break;
      case 'constant':
        put(elementKey(kernelElement(ctx, kernel)), RANK.constant, index, () => build.constant(shape.name), r, true);
        break;
      case 'imaginary':
        put(elementKey(kernelElement(ctx, kernel)), RANK.imaginary, index, () => build.constant('i'), r);
        break;
      default:
        put(elementKey(kernelElement(ctx, kernel)), RANK.function, index, () => kernelExpression(ctx, kernel), r);
    }
  });
  const polynomialPower = (f: Factor, order: number): void => put(elementKey(asElement(ctx, f.polynomial)), RANK.sum, 1e6 + order, () => writeSum(ctx, Q.ONE, f.polynomial), Q.rational(-f.exponent));
  let flipped = false;
  denominator.forEach((f, order) => {
    // (1 - a^2)^(1/2)/(a^2 - 1) is -(1 - a^2)^(-1/2).
    const opposite = powers.get(elementKey(negateElement(asElement(ctx, f.polynomial))));
    if (!opposite) polynomialPower(f, order);
    else {
      opposite.exponent = addElements(ctx.table, opposite.exponent, Q.rational(-f.exponent));
      if (f.exponent % 2 === 1) flipped = !flipped;
    }
  });
  for (const x of extra) {
    if (isFactor(x)) polynomialPower(x, 0);
    else put('sum', RANK.sum, x.order, x.base, Q.ONE);
  }

  joinQuotients(ctx, powers, monomial);
  joinAbsolutes(ctx, powers, monomial);
  joinRoots(ctx, powers, monomial);
  joinPowers(ctx, powers);
  const two = radicals.get(2) ?? 1n;
  // sqrt(2)/2 sqrt(u) is sqrt(u/2) where that root was met.
  const lower = two !== 1n && content.den % two === 0n && [...powers.values()].some((p) => p.open !== undefined && isHalf(p.exponent) && ctx.fractionRoots.has(elementKey(p.open)));
  const root = joinedSquareRoot(ctx, [...powers.values()], lower ? 1n : two, lower ? two : 1n);
  const plainRoot = root !== null && ![...walk(root)].some((e) => e.kind !== 'number' && e.kind !== 'constant' && e.kind !== 'power' && e.kind !== 'product' && e.kind !== 'quotient');
  if (root && !plainRoot) powers.set('square root', { rank: RANK.root, order: 0, base: () => root, exponent: Q.ONE, positive: false });
  const rankOf = (p: Power): number => (rationalOf(p.exponent) ? p.rank : Math.max(p.rank, RANK.function));
  const ordered = [...powers.values()].sort((x, y) => rankOf(x) - rankOf(y) || x.order - y.order);
  const numbers: Expression[] = [];
  for (const [q, value] of [...radicals].sort((x, y) => x[0] - y[0])) if (q !== 2) numbers.push(build.power(build.number(value), Q.rational(1, q)));
  if (root && plainRoot) numbers.unshift(root);
  let placed = false;
  const place = (): void => {
    if (!placed) top.push(...numbers);
    placed = true;
  };
  let exponentialPlaced = exponential === null;
  const placeExponential = (): void => {
    if (exponentialPlaced || exponential === null) return;
    exponentialPlaced = true;
    top.push(exponentialExpression(ctx, exponential));
  };
  for (const p of ordered) {
    if (p.rank > RANK.radical) place();
    if (rankOf(p) > RANK.sum) placeExponential();
    const r = rationalOf(p.exponent);
    if (r && r.num === 0n) continue;
    if (r && r.num < 0n) bottom.push(raised(p.base(), numberExpression(Q.negate(r)), Q.negate(r)));
    else top.push(r ? raised(p.base(), numberExpression(r), r) : build.power(p.base(), toExpression(ctx, p.exponent)));
  }
  place();
  placeExponential();

  const size = Q.absolute(lower && root ? Q.multiply(content, Q.rational(two)) : content);
  if (size.num !== 1n || top.length === 0) {
    if (bottom.length === 0 && top.length === 0) return numberExpression(flipped ? Q.negate(content) : content);
    top.unshift(build.number(size.num));
  }
  if (size.den !== 1n) bottom.unshift(build.number(size.den));
  const whole = bottom.length === 0 ? build.product(...top) : build.quotient(build.product(...top), build.product(...bottom));
  return content.num < 0n !== flipped ? build.negation(whole) : whole;
}

/**
 * Square roots of positive numbers, constants and parameters under one root: sqrt(2 pi), sqrt(a b), sqrt(2/pi); the powers used up get exponent zero.
 * One root of something of unknown sign may join them, since sqrt(2) sqrt(u) = sqrt(2 u) for all u.
 */
function joinedSquareRoot(ctx: Context, powers: readonly Power[], integer: bigint, divisorUnder: bigint): Expression | null {
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
  const inner = toExpression(ctx, alone.open);
  if (build.isOneNumber(top) && under.length === 0) return build.power(inner, Q.HALF);
  const [over, inside] = inner.kind === 'quotient' ? [inner.numerator, inner.denominator] : [inner, null];
  const product = build.isOneNumber(over) ? top : build.product(...(build.isOneNumber(top) ? [] : [top]), ...(over.kind === 'product' ? over.factors : [over]));
  const divisor = [...under, ...(inside ? (inside.kind === 'product' ? inside.factors : [inside]) : [])];
  return build.power(divisor.length === 0 ? product : build.quotient(product, build.product(...divisor)), Q.HALF);
}

/** The root of a product N D over |D| is written as the root of N/D, and (N D)^(1/2)/(N D) as (N D)^(-1/2). */
function joinRoots(ctx: Context, powers: Map<string, Power>, monomial: Monomial): void {
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
            powers.set(elementKey(kernelElement(ctx, factor)), { rank: factor.shape.kind === 'parameter' ? RANK.parameter : RANK.function, order: factor.index, base: () => kernelExpression(ctx, factor), exponent: e, positive: ctx.signs.ofKernel(factor) === POSITIVE });
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
    powers.set(`root ${index}`, { rank: RANK.root, order: index, base: () => toExpression(ctx, whole), exponent, positive: false, ...(product ? { open: whole } : {}) });
  }
}

/** 4^e pi^e |mu|^(2 e)/Delta^e is written (4 pi mu^2/Delta)^e where that power was met. */
function joinPowers(ctx: Context, powers: Map<string, Power>): void {
  const found = joinedPower(ctx, (key) => powers.get(key)?.exponent ?? null);
  if (!found) return;
  for (const key of found.keys) {
    const p = powers.get(key);
    if (p) p.exponent = Q.ZERO;
  }
  powers.set('joined', { rank: RANK.function, order: 1e6, base: () => toExpression(ctx, found.argument), exponent: found.exponent, positive: false });
}

const isHalf = (e: Element): boolean => 'num' in e && e.num === 1n && e.den === 2n;
const raised = (base: Expression, exponent: Expression, r: Rational): Expression => (Q.isOne(r) ? base : build.power(base, exponent));

function exponentialExpression(ctx: Context, exponent: Element): Expression {
  const parts = partsOf(exponent);
  const shapes = parts.monomial.kernels.map((k) => (ctx.table.kernels[k] as Kernel).shape);
  // exp(i pi n) is (-1)^n.
  const i = shapes.findIndex((s) => s.kind === 'imaginary');
  const pi = shapes.findIndex((s) => s.kind === 'constant' && s.name === 'pi');
  if (i >= 0 && pi >= 0 && parts.monomial.exponents[pi] === 1) {
    const unit = multiplyElements(ctx.table, kernelElement(ctx, ctx.table.kernels[parts.monomial.kernels[i] as number] as Kernel, 1), kernelElement(ctx, ctx.table.kernels[parts.monomial.kernels[pi] as number] as Kernel, -1));
    return build.power(build.number(-1), toExpression(ctx, scaleElement(multiplyElements(ctx.table, exponent, unit), Q.MINUS_ONE)));
  }
  const r = rationalOf(exponent);
  if (r && Q.isOne(r)) return build.constant('e');
  return build.power(build.constant('e'), toExpression(ctx, exponent));
}

/** sin(a)/cos(a) is written tan(a), and likewise for sinh and cosh. */
function joinQuotients(ctx: Context, powers: Map<string, Power>, monomial: Monomial): void {
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
    powers.set(`${name} ${monomialKey(monomial)}${index}`, { rank: RANK.function, order: index, base: () => build.call(name, ...args.map((x) => toExpression(ctx, x))), exponent: common, positive: false });
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

function kernelExpression(ctx: Context, k: Kernel): Expression {
  const { shape } = k;
  switch (shape.kind) {
    case 'log':
      return build.call('log', toExpression(ctx, shape.argument));
    case 'abs':
      return build.call('abs', toExpression(ctx, shape.argument));
    case 'call':
      return build.call(shape.id, ...shape.args.map((x) => toExpression(ctx, x)));
    case 'apply':
      return { kind: 'apply', name: shape.name, args: shape.args.map((x) => toExpression(ctx, x)), derivatives: shape.derivatives };
    case 'cosine':
      return build.product(build.number(2), build.call('cos', build.quotient(Q.isOne({ num: shape.angle.num, den: 1n }) ? build.constant('pi') : build.product(build.number(shape.angle.num), build.constant('pi')), build.number(shape.angle.den))));
    case 'algebraic':
      return build.product(build.number(shape.coefficients[0] ?? 1n), build.call('polynomialRoot', build.number(shape.index), ...shape.coefficients.map((x) => build.number(x))));
    case 'parameter':
      return build.symbol(shape.name);
    case 'constant':
      return build.constant(shape.name);
    case 'imaginary':
      return build.constant('i');
    case 'integer':
      return build.number(shape.value);
    case 'radicand':
      return toExpression(ctx, shape.base);
    case 'exp':
      return exponentialExpression(ctx, shape.unit);
    case 'power':
      return build.power(toExpression(ctx, shape.base), toExpression(ctx, shape.unit));
  }
}
