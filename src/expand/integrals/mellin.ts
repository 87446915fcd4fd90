/**
 * Integrals over (0, inf) of f(t) h(t/s) where s is a power of the variable, by Mellin transforms: the integral is that of s^z F(z) H(z) over a vertical line, with F(z) the moment of f of order -z and H(z) that of h of order z - 1;
 * it expands in the residues beside that line. They lie where h has powers of its argument at the end that t/s approaches, and f at the opposite one; where two meet, logarithms arise.
 * Both transforms are needed in closed form, and a line on which both converge. Over (0, b) the weight f ends at b, where the kernel's own series at infinity serves: F(z) is needed near its poles only. Source: Wong, Asymptotic Approximations of Integrals, ch. 3; Bleistein & Handelsman ch. 4 (from memory).
 */
import type { Element } from '../../algebra/types.ts';
import { build, children, dependsOn, type Expression, Q } from '../../expression/index.ts';
import { differentiate } from '../../functions/index.ts';
import { Declined } from '../../outcome.ts';
import { add, beyondAllOrders, type Context, isOscillating, isZero, logarithm, monomialOf, type Multi, multiply, oscillatingParts, power, reciprocal, scaleBy, Series, signOfExponent, sumOfSeries } from '../../series/index.ts';
import { openSide } from '../open-side.ts';
import type { Evaluate, Session } from '../session.ts';
import { completeIntegral, SHIFT } from './complete.ts';
import { cutOffMoment } from './cut-off.ts';
import { diverges, type End, hasWaves, isPower, logarithmPower } from './growth-orders.ts';
import { homogeneous } from './homogeneous.ts';
import { type Range, signOn } from './monotone.ts';

/** Poles in a row without residue after which no more are looked for. */
const MOST_EMPTY = 24;

/** The integral over (0, high), high > 0 free of what varies, null for infinity. Null where the integrand is not of that form. `x` is the variable, which tends to 0 or infinity. */
export function byMellin(s: Session, body: Expression, v: string, x: string, high: Expression | null, evaluate: Evaluate): Multi | null {
  const c = s.context;
  const { field } = c;
  const halfLine: Range = { variable: v, low: build.number(0), high, field };
  const parts: Factors = { outside: [], fixed: [], mixed: [] };
  sort(body, v, (e) => (e.kind === 'symbol' ? e.name !== v && s.bindings.has(e.name) : children(e).some((child) => dependsOn(child, x))), (e) => signOn(halfLine, e) === 1, parts);
  const variable = s.bindings.get(x);
  const lead = variable instanceof Series && variable.element === c.scale.local ? variable.stream.at(0) : null;
  if (!lead || variable === undefined || parts.mixed.length === 0) return null;
  const mixed = build.product(...parts.mixed);
  const form = homogeneous(field, mixed, x, v);
  if (!form || dependsOn(form.tree, x)) return null;
  const f = build.product(...parts.fixed);
  const h = form.tree;
  const front = multiply(c, evaluate(s, build.product(...parts.outside)), power(c, variable, form.degree));
  if (high && hasWaves(h)) return null;
  const weight: Weight = { f, high };
  const alone = high === null && isPower(f, v) ? completeIntegral(field, build.product(f, h), v, null) : null;
  if (alone) return multiply(c, front, scaleBy(c, power(c, variable, field.multiply(form.g, field.add(degreeOf(c, f, v), Q.ONE))), alone));
  // The unit of t is s = x^g; t/s is small where s grows.
  const unit = power(c, variable, form.g);
  const grows = signOfExponent(c, field.multiply(lead.exponent, form.g));
  if (grows === 0) return null;
  const near: End = grows < 0 ? 'zero' : 'infinity';
  // Where t/s stays bounded, the integrand expands as it stands.
  if (high && near === 'zero') return null;
  const far: End = near === 'zero' ? 'infinity' : 'zero';
  if (!meet(endsOf(s, f, v, high === null, evaluate), endsOf(s, h, v, true, evaluate), field)) return null;
  const poles = merged(c, exponentsAt(s, h, v, near, evaluate), exponentsAt(s, f, v, far, evaluate), near);
  if (poles(0) === null) return null;
  c.notes.sided = true;
  const sign = near === 'zero' ? Q.ONE : Q.MINUS_ONE;
  const logarithmOfUnit = logarithm(c, unit);
  const terms: (Multi | null)[] = [];
  let next = 0;
  const term = (k: number): Multi | null => {
    for (let empty = 0; terms.length <= k; ) {
      const pole = poles(next);
      if (pole === null) {
        terms.push(null);
        break;
      }
      next += 1;
      const laurent = residue(s, weight, h, v, pole, evaluate);
      if (laurent.length === 0) {
        empty += 1;
        if (empty > MOST_EMPTY) throw new Declined('no-expansion', 'The integral is smaller than every power of the variable here; integrate first.');
        continue;
      }
      let value: Multi = Q.ZERO;
      let factor: Multi = sign;
      for (const [j, a] of laurent.entries()) {
        // s^(pole + e) = s^pole exp(e log s).
        if (j > 0) factor = scaleBy(c, multiply(c, factor, logarithmOfUnit), Q.rational(1, j));
        value = add(c, value, scaleBy(c, factor, a));
      }
      terms.push(multiply(c, value, power(c, unit, pole)));
    }
    return terms[k] ?? null;
  };
  // Everything that may fail does so at the first term.
  if (term(0) === null) return null;
  if (diverges(field, f, h, v, near)) c.notes.divergent = true;
  const endless = (k: number): boolean => term(k) !== null;
  const sum = sumOfSeries(c, c.scale.local, (k) => term(k) ?? Q.ZERO, endless);
  // A sum that ends leaves what is smaller than every power.
  const large = near === 'zero' ? unit : reciprocal(c, unit);
  const ends = poles(MOST_EMPTY) === null;
  return multiply(c, front, ends ? multiply(c, sum, add(c, Q.ONE, beyondAllOrders(c, large))) : sum);
}

/** f on (0, high). */
interface Weight {
  readonly f: Expression;
  readonly high: Expression | null;
}

interface Factors {
  readonly outside: Expression[];
  readonly fixed: Expression[];
  readonly mixed: Expression[];
}

/** Factors in the variable alone, in t alone, and in both; exponentials of sums fall apart. */
function sort(e: Expression, v: string, moves: (e: Expression) => boolean, positive: (e: Expression) => boolean, into: Factors, inverse = false): void {
  const put = (f: Expression): Expression => (inverse ? build.power(f, -1) : f);
  if (!dependsOn(e, v)) into.outside.push(put(e));
  else if (e.kind === 'product') e.factors.forEach((f) => sort(f, v, moves, positive, into, inverse));
  else if (e.kind === 'negation') {
    into.outside.push(build.number(-1));
    sort(e.operand, v, moves, positive, into, inverse);
  } else if (e.kind === 'quotient') {
    sort(e.numerator, v, moves, positive, into, inverse);
    sort(e.denominator, v, moves, positive, into, !inverse);
  } else if (e.kind === 'power' && e.base.kind === 'product' && !dependsOn(e.exponent, v) && e.base.factors.every((f) => positive(f))) e.base.factors.forEach((f) => sort(build.power(f, e.exponent), v, moves, positive, into, inverse));
  else {
    const exponent = e.kind === 'power' && e.base.kind === 'constant' && e.base.name === 'e' ? e.exponent : e.kind === 'call' && e.function === 'exp' ? e.args[0] : undefined;
    if (exponent) {
      for (const t of exponent.kind === 'sum' ? exponent.terms : [exponent]) {
        const single = put(build.power(build.constant('e'), t));
        (!dependsOn(t, v) ? into.outside : moves(t) ? into.mixed : into.fixed).push(single);
      }
    } else (moves(e) ? into.mixed : into.fixed).push(put(e));
  }
}

/** Of a product of powers of v. */
function degreeOf(c: Context, e: Expression, v: string): Element {
  const { field } = c;
  if (!dependsOn(e, v)) return Q.ZERO;
  if (e.kind === 'product') return e.factors.reduce<Element>((sum, f) => field.add(sum, degreeOf(c, f, v)), Q.ZERO);
  if (e.kind === 'quotient') return field.subtract(degreeOf(c, e.numerator, v), degreeOf(c, e.denominator, v));
  return e.kind === 'power' ? field.multiply(degreeOf(c, e.base, v), field.fromExpression(e.exponent)) : Q.ONE;
}

const sideAt = (c: Context, v: string, end: End) =>
  end === 'zero' ? openSide({ variable: build.symbol(v), point: build.number(0), assumptions: [] }, 'right', c.budget) : openSide({ variable: build.symbol(v), point: 'inf', assumptions: [] }, 'inf', c.budget);

/** The exponents of t in the expansion at an end, from the largest term on; none where the function is smaller than every power. */
function exponentsAt(s: Session, e: Expression, v: string, end: End, evaluate: Evaluate): (k: number) => Element | null {
  const inner = sideAt(s.context, v, end);
  const own = inner.context;
  let value = evaluate(inner.session, inner.fromVariable(e));
  while (value instanceof Series && value.element !== own.scale.local) {
    if (value.element.rank < own.scale.local.rank) return (k) => (k === 0 ? Q.ZERO : null);
    const first = value.stream.at(0);
    const sign = first ? signOfExponent(own, first.exponent) : 1;
    if (!first || sign > 0) return () => null;
    if (sign < 0 || first.order) throw new Declined('no-expansion', 'The integral diverges; correct its integrand.');
    value = first.coefficient;
  }
  if (!(value instanceof Series)) {
    const vanishes = isZero(own, value) || onlyOscillates(own, value);
    return (k) => (k === 0 && !vanishes ? Q.ZERO : null);
  }
  const { stream } = value;
  const found: Element[] = [];
  let next = 0;
  return (k) => {
    // Waves have no poles of their own.
    for (let waves = 0; found.length <= k; ) {
      const t = stream.at(next);
      if (t?.order) throw new Declined('no-expansion', 'An O-term stands inside the integral; integrate the terms before it.');
      if (!t || waves > MOST_EMPTY) return null;
      next += 1;
      if (!(t.coefficient instanceof Series) && (onlyOscillates(own, t.coefficient) || isZero(own, t.coefficient))) {
        waves += 1;
        continue;
      }
      const exponent = s.context.field.fromExpression(own.field.toExpression(t.exponent));
      found.push(end === 'zero' ? exponent : s.context.field.negate(exponent));
    }
    return found[k] ?? null;
  };
}

/** Oscillating, without a constant part. */
const onlyOscillates = (c: Context, e: Element): boolean => isOscillating(c, e) && oscillatingParts(c, e).every((p) => p.factor !== null && isSingleWave(p.factor));
/** A product of waves may have a mean. */
const isSingleWave = (e: Expression): boolean => e.kind === 'call' && (e.function === 'sin' || e.function === 'cos');

/** The places of the poles of F(z) H(z), nearest to the line first: h ~ u^b at z = -b, f ~ t^a at z = a + 1. */
function merged(c: Context, ofKernel: (k: number) => Element | null, ofWeight: (k: number) => Element | null, near: End): (k: number) => Element | null {
  const { field } = c;
  const found: Element[] = [];
  let [i, j] = [0, 0];
  return (k) => {
    while (found.length <= k) {
      c.budget.check();
      const [b, a] = [ofKernel(i), ofWeight(j)];
      const [left, right] = [b && field.negate(b), a && field.add(a, Q.ONE)];
      if (!left && !right) return null;
      const order = !left ? -1 : !right ? 1 : field.compare(left, right);
      if (order !== 1 && order !== -1 && order !== 0) throw new Declined('undecided', 'The order of two powers in the integral could not be decided; state what is known of its parameters.');
      // To the left of the line the greatest place is nearest, to the right the least.
      const takeKernel = order === 0 || (order === 1) === (near === 'zero') ? left !== null : false;
      const kernel = !right || (left !== null && takeKernel);
      found.push((kernel ? left : right) as Element);
      if (order === 0 && left && right) [i, j] = [i + 1, j + 1];
      else if (kernel) i += 1;
      else j += 1;
    }
    return found[k] ?? null;
  };
}

/** a_(-1), a_(-2), ... of F(z) H(z) at the pole; empty where it is regular. */
function residue(s: Session, { f, high }: Weight, h: Expression, v: string, pole: Element, evaluate: Evaluate): Element[] {
  const { field, budget } = s.context;
  const place = field.toExpression(pole);
  const shift = build.symbol(SHIFT);
  const z = build.sum(place, shift);
  const ofKernel = momentOf(s, h, v, build.difference(z, build.number(1)), 1);
  const inner = openSide({ variable: shift, point: build.number(0), assumptions: [] }, 'right', budget);
  const laurent = (tree: Expression): Element[] => laurentOf(s, inner.context, evaluate(inner.session, inner.fromVariable(tree)));
  if (high === null) return laurent(build.product(momentOf(s, f, v, build.negation(z), -1), ofKernel));
  const ofWeight = cutOffMoment(s.context, f.kind === 'product' ? f.factors : [f], v, high, pole);
  if (!ofWeight.exact && laurent(ofKernel).length > 1) throw new Declined('no-expansion', 'The moments of the integrand are not known in closed form; integrate first or split the integrand.');
  return laurent(build.product(ofWeight.tree, ofKernel));
}

/** The coefficients of e^(-1), e^(-2), ... of a series in e. */
function laurentOf(s: Session, inner: Context, value: Multi): Element[] {
  const { field } = s.context;
  if (!(value instanceof Series)) return [];
  const laurent: Element[] = [];
  for (let k = 0; ; k += 1) {
    const t = value.stream.at(k);
    if (!t || signOfExponent(inner, t.exponent) >= 0) return laurent;
    const exponent = inner.field.asRational(t.exponent);
    if (value.element !== inner.scale.local || t.order || t.coefficient instanceof Series || exponent?.den !== 1n) throw new Declined('no-expansion', 'The integral over the parameter has no expansion in powers here; integrate first.');
    const a = field.fromExpression(inner.field.toExpression(t.coefficient));
    if (isZero(s.context, a)) continue;
    while (laurent.length < -Number(exponent.num)) laurent.push(Q.ZERO);
    laurent[-Number(exponent.num) - 1] = a;
  }
}

/** The continued integral of v^exponent e over (0, inf), the shift in the exponent with the given sign; whole powers of log v are derivatives by it. */
function momentOf(s: Session, e: Expression, v: string, exponent: Expression, sign: 1 | -1): Expression {
  const { field } = s.context;
  const factors = e.kind === 'product' ? e.factors : [e];
  const logarithms = factors.map((f) => logarithmPower(f, v));
  const rest = factors.filter((_, k) => logarithms[k] === 0);
  const value = continued(field, build.power(build.symbol(v), exponent), rest, v);
  if (!value) throw new Declined('no-expansion', 'The moments of the integrand are not known in closed form; integrate first or split the integrand.');
  let tree = field.toExpression(value);
  for (let k = logarithms.reduce((sum, n) => sum + n, 0); k > 0; k -= 1) {
    const slope = differentiate(tree, SHIFT);
    if (!slope) throw new Declined('no-expansion', 'The moments of the integrand are not known in closed form; integrate first or split the integrand.');
    tree = sign === 1 ? slope : build.negation(slope);
  }
  return tree;
}

/** The continued integral of a power times the factors; a sum among them falls apart where the product as it stands is not known. */
function continued(field: Context['field'], power_: Expression, factors: readonly Expression[], v: string): Element | null {
  const whole = completeIntegral(field, build.product(power_, ...factors), v, null, { atZero: false, atInfinity: false });
  const sum = whole ? undefined : factors.find((f) => f.kind === 'sum');
  if (sum?.kind !== 'sum') return whole;
  const others = factors.filter((f) => f !== sum);
  let total: Element = Q.ZERO;
  for (const term of sum.terms) {
    const part = continued(field, power_, [...(term.kind === 'product' ? term.factors : [term]), ...others], v);
    if (!part) return null;
    total = field.add(total, part);
  }
  return total;
}

/** Leading exponents of t at both ends: null where smaller than every power; a wave at infinity counts as one power less, because its integrals converge that far. */
interface Ends {
  readonly zero: Element | null;
  readonly infinity: Element | null;
}

function endsOf(s: Session, e: Expression, v: string, reachesInfinity: boolean, evaluate: Evaluate): Ends {
  const leadAt = (end: End): Element | null => {
    const inner = sideAt(s.context, v, end);
    const own = inner.context;
    const lead = monomialOf(own, evaluate(inner.session, inner.fromVariable(e)));
    const fast = lead?.factors.find((x) => x.element.rank > own.scale.local.rank);
    if (!lead || (fast && signOfExponent(own, fast.exponent) > 0)) return null;
    if (fast) throw new Declined('no-expansion', 'The integral diverges; correct its integrand.');
    const local = lead.factors.find((x) => x.element === own.scale.local);
    const exponent = s.context.field.fromExpression(own.field.toExpression(local?.exponent ?? Q.ZERO));
    const size = end === 'zero' ? exponent : s.context.field.negate(exponent);
    return onlyOscillates(own, lead.constant) ? s.context.field.subtract(size, Q.ONE) : size;
  };
  return { zero: leadAt('zero'), infinity: reachesInfinity ? leadAt('infinity') : null };
}

/** Whether both moments converge on one line: z in (-h0, -h1) and in (f1 + 1, f0 + 1). */
function meet(f: Ends, h: Ends, field: Context['field']): boolean {
  const lower = [h.zero && field.negate(h.zero), f.infinity && field.add(f.infinity, Q.ONE)];
  const upper = [h.infinity && field.negate(h.infinity), f.zero && field.add(f.zero, Q.ONE)];
  return lower.every((a) => upper.every((b) => a === null || b === null || field.compare(b, a) === 1));
}
