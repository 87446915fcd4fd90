/** Elements as a person writes them: numbers in front, powers of one base together, radicals joined, sums in natural order. */
import { build, Q, type Expression, type Rational } from '../expression/index.ts';
import { kernelElement, rationalOf, type Context } from './context.ts';
import { exponentToRational, numeratorOf, denominatorOf, type Exponent } from './exponent.ts';
import { linearFactors } from './linearFactors.ts';
import type { Kernel } from './kernel.ts';
import { isUnit, monomialKey, type Monomial } from './monomial.ts';
import { isOnePolynomial, kernelsIn, type Polynomial, type Term } from './polynomial.ts';
import { addElements, elementKey, isQuotient, multiplyElements, negateElement, partsOf, scaleElement, type Factor } from './quotient.ts';
import { asElement } from './split.ts';
import type { Element } from './types.ts';

/** base^exponent, gathered before writing. */
interface Power {
  readonly rank: number;
  readonly order: number;
  readonly base: () => Expression;
  exponent: Element;
}

const RANK = { constant: 0, radical: 1, imaginary: 2, parameter: 3, function: 4, sum: 5 } as const;

export function toExpression(ctx: Context, a: Element): Expression {
  if (!isQuotient(a)) return numberExpression(a);
  const { content, monomial, numerator, denominator } = a;
  if (isOnePolynomial(numerator)) return writeProduct(ctx, content, monomial, [], denominator);
  const negative = leadingIsNegative(ctx, content, numerator);
  if (isUnit(monomial) && denominator.length === 0 && distributes(ctx, content, numerator)) return writeSum(ctx, content, numerator);
  const split = linearFactors(numerator, (k) => (ctx.table.kernels[k] as Kernel).shape.kind === 'parameter', !isUnit(monomial));
  if (split) {
    const factors = split.map((f): Factor => ({ polynomial: f.polynomial, exponent: -f.exponent }));
    return writeProduct(ctx, content, monomial, factors, denominator);
  }
  const magnitude = negative ? Q.negate(content) : content;
  const sum = writeSum(ctx, negative ? Q.MINUS_ONE : Q.ONE, numerator);
  return writeProduct(ctx, magnitude, monomial, [{ base: () => sum, order: 0 }], denominator);
}

const numberExpression = (r: Rational): Expression => (r.num < 0n ? build.negation(build.number(Q.negate(r))) : build.number(r));

/** Whether c * (sum) is better written term by term: numbers always when the factor is whole, other sums when a term becomes plainer. */
function distributes(ctx: Context, c: Rational, f: Polynomial): boolean {
  if (Q.isOne(c) || (c.num === -1n && c.den === 1n)) return true;
  const numeric = [...kernelsIn(f)].every((k) => (ctx.table.kernels[k] as Kernel).shape.kind !== 'parameter');
  if (c.den === 1n) return numeric;
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
  ranked.sort((x, y) => y.d[0] - x.d[0] || y.d[1] - x.d[1] || x.i - y.i);
  const terms = ranked.map((r) => r.t);
  // Numbers are written with the rational part first: 1 + sqrt(5).
  return numeric ? [...terms].reverse() : terms;
}

const leadingIsNegative = (ctx: Context, c: Rational, f: Polynomial): boolean => {
  const order = naturalOrder(ctx, f);
  const first = order[0];
  const last = order[order.length - 1];
  if (!first || !last) return false;
  const sign = c.num < 0n;
  const negative = (t: Term): boolean => t.coefficient < 0n !== sign;
  return negative(first) && negative(last);
};

function writeSum(ctx: Context, c: Rational, f: Polynomial): Expression {
  let order = naturalOrder(ctx, f);
  const signed = (t: Term): Rational => Q.multiply(c, { num: t.coefficient, den: 1n });
  const first = order[0];
  const last = order[order.length - 1];
  // 1 - v^2 rather than -v^2 + 1.
  if (first && last && signed(first).num < 0n && signed(last).num > 0n) order = [...order].reverse();
  return build.sum(...order.map((t) => writeProduct(ctx, signed(t), t.monomial, [], [])));
}

interface ExtraFactor {
  readonly base: () => Expression;
  readonly order: number;
}
const isFactor = (x: ExtraFactor | Factor): x is Factor => 'polynomial' in x;

/** content * monomial * extra / denominator as one product or quotient; extra Factors carry minus their exponent. */
function writeProduct(ctx: Context, content: Rational, monomial: Monomial, extra: readonly (ExtraFactor | Factor)[], denominator: readonly Factor[]): Expression {
  const powers = new Map<string, Power>();
  const put = (key: string, rank: number, order: number, base: () => Expression, exponent: Element): void => {
    const known = powers.get(key);
    if (known) known.exponent = addElements(ctx.table, known.exponent, exponent);
    else powers.set(key, { rank, order, base, exponent });
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
        put(elementKey(shape.base), RANK.sum, index, () => toExpression(ctx, shape.base), r);
        break;
      case 'parameter':
        put(elementKey(kernelElement(ctx, kernel)), RANK.parameter, index, () => build.symbol(shape.name), r);
        break;
      case 'constant':
        put(elementKey(kernelElement(ctx, kernel)), RANK.constant, index, () => build.constant(shape.name), r);
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
  const sums: ExtraFactor[] = [];
  for (const x of extra) {
    if (isFactor(x)) polynomialPower(x, 0);
    else sums.push(x);
  }

  joinQuotients(ctx, powers, monomial);
  const ordered = [...powers.values()].sort((x, y) => x.rank - y.rank || x.order - y.order);
  const numbers: Expression[] = [];
  for (const [q, value] of [...radicals].sort((x, y) => x[0] - y[0])) numbers.push(build.power(build.number(value), Q.rational(1, q)));
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
    if (p.rank > RANK.parameter) placeExponential();
    const r = rationalOf(p.exponent);
    if (r && r.num === 0n) continue;
    if (r && r.num < 0n) bottom.push(raised(p.base(), numberExpression(Q.negate(r)), Q.negate(r)));
    else top.push(r ? raised(p.base(), numberExpression(r), r) : build.power(p.base(), toExpression(ctx, p.exponent)));
  }
  place();
  placeExponential();
  for (const s of sums) top.push(s.base());

  const size = Q.absolute(content);
  if (size.num !== 1n || top.length === 0) {
    if (bottom.length === 0 && top.length === 0) return numberExpression(flipped ? Q.negate(content) : content);
    top.unshift(build.number(size.num));
  }
  if (size.den !== 1n) bottom.unshift(build.number(size.den));
  const whole = bottom.length === 0 ? build.product(...top) : build.quotient(build.product(...top), build.product(...bottom));
  return content.num < 0n !== flipped ? build.negation(whole) : whole;
}

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
    powers.set(`${name} ${monomialKey(monomial)}${index}`, { rank: RANK.function, order: index, base: () => build.call(name, ...args.map((x) => toExpression(ctx, x))), exponent: common });
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
