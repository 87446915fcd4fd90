/** Elements as a person writes them: numbers in front, powers of one base together, radicals joined, sums in natural order. */
import { build, type Expression, Q, type Rational, walk } from '../expression/index.ts';
import { withNumbersWritten } from './algebraicWriting.ts';
import { type Context, kernelElement, rationalOf } from './context.ts';
import { type Exponent, exponentToRational } from './exponent.ts';
import { withJoinedLogarithms } from './joinedLogarithms.ts';
import type { Kernel } from './kernel.ts';
import { kernelsOf } from './kernelsOf.ts';
import { linearFactors } from './linearFactors.ts';
import { isUnit, type Monomial, UNIT } from './monomial.ts';
import { contentOf, divideByInteger, isOnePolynomial, type Polynomial, shiftPolynomial, type Term } from './polynomial.ts';
import { addElements, elementKey, invertElement, multiplyElements, negateElement, scaleElement } from './quotient.ts';
import { type Factor, isQuotient, partsOf } from './quotientParts.ts';
import { reduceByRelations } from './relations.ts';
import { POSITIVE } from './signs.ts';
import { asElement } from './split.ts';
import { squareFreeFactors } from './squareFree.ts';
import { distributes, naturalOrder } from './termOrder.ts';
import type { Element } from './types.ts';
import { inCosines } from './writtenCosines.ts';
import { isHalf, joinedSquareRoot, joinInPrint, type Power, RANK, type Writer } from './writtenPowers.ts';

/** The tree of an element, of the same value. Every element can be written. Cost: linear in its size, but for square-free factorisation of sums. */
export function toExpression(ctx: Context, element: Element): Expression {
  const a = withJoinedLogarithms(ctx, element);
  if (!isQuotient(a)) return numberExpression(a);
  const written = withNumbersWritten(ctx, a);
  if (written) return toExpression(ctx, written);
  const cosines = inCosines(ctx, a, (b) => toExpression(ctx, b));
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

const numberExpression = (r: Rational): Expression => (r.num < 0n ? build.negation(build.number(Q.negate(r))) : build.number(r));

/** c * f, term by term. */
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

/** A factor that is written as it stands, at its place among sums. */
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

  const writer: Writer = { element: (a) => toExpression(ctx, a), kernel: (k) => kernelExpression(ctx, k) };
  joinInPrint(ctx, writer, powers, monomial);
  const two = radicals.get(2) ?? 1n;
  // sqrt(2)/2 sqrt(u) is sqrt(u/2) where that root was met.
  const lower = two !== 1n && content.den % two === 0n && [...powers.values()].some((p) => p.open !== undefined && isHalf(p.exponent) && ctx.fractionRoots.has(elementKey(p.open)));
  const root = joinedSquareRoot(writer, [...powers.values()], lower ? 1n : two, lower ? two : 1n);
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

const raised = (base: Expression, exponent: Expression, r: Rational): Expression => (Q.isOne(r) ? base : build.power(base, exponent));

/** e^exponent; exp(i pi n) as (-1)^n. */
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

/** The tree of a kernel alone. */
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
