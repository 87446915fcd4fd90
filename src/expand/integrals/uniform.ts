/**
 * Proofs that an integrand expands uniformly over a closed interval. The integrand is read as G(h(v), u): h are its parts in the integration variable alone, u those in the small quantity alone, with finite limits u0.
 * G is analytic near u = u0 uniformly in v where every h is bounded and every quotient, root, logarithm and so on meets at u = u0 only points where it is analytic, for all v in the closed interval: the values of h
 * fill compact boxes, on which the analytic G has a common radius in u. Its Taylor series in u - u0 may then be integrated term by term.
 */
import { build, dependsOn, type Expression, freeSymbols, substitute } from '../../expression/index.ts';
import { describe } from '../../functions/index.ts';
import { Declined } from '../../outcome.ts';
import { encloseRectangle, interval, type Interval, isElementaryName, type Rectangle } from '../../rigorous/index.ts';
import { growth, isOscillating, Series, split } from '../../series/index.ts';
import { type Evaluate, type Session } from '../session.ts';
import { type Range, regularOn, signOn } from './monotone.ts';

export interface ClosedInterval {
  readonly variable: string;
  readonly low: Expression;
  readonly high: Expression;
}

const ENTIRE: ReadonlySet<string> = new Set(['exp', 'expm1', 'sin', 'cos', 'sinh', 'cosh', 'erf', 'erfc']);
/** Pieces of the interval that are looked at for one part of the integrand. */
const MOST_PIECES = 4000;
const SLACK = 2 ** -30;

const unproven = (): Declined =>
  new Declined('no-expansion', 'It is not proven that the integrand stays regular at this point for every value of the integration variable; split the interval where it is singular, or integrate first.');

/** Throws Declined unless the expansion of e is proven uniform. `moves` tells whether a tree depends on what becomes small. */
export function requireUniform(s: Session, e: Expression, over: ClosedInterval, moves: (e: Expression) => boolean, evaluate: Evaluate): void {
  const v = over.variable;
  const visit = (node: Expression): void => {
    s.context.budget.check();
    if (!moves(node)) {
      if (!isBounded(s, node, over)) throw unproven();
      return;
    }
    if (!dependsOn(node, v)) return requireLimit(s, node, evaluate);
    switch (node.kind) {
      case 'sum':
        return node.terms.forEach(visit);
      case 'negation':
        return visit(node.operand);
      case 'product': {
        // Together: one factor may balance another.
        const alone = node.factors.filter((f) => !dependsOn(f, v));
        if (alone.length > 0) visit(build.product(...alone));
        return node.factors.filter((f) => dependsOn(f, v)).forEach(visit);
      }
      case 'quotient':
        if (!dependsOn(node.denominator, v)) {
          const above = node.numerator.kind === 'product' ? node.numerator.factors : [node.numerator];
          return visit(build.product(...above, build.power(node.denominator, -1)));
        }
        visit(node.numerator);
        return through(node.denominator, reciprocal);
      case 'power': {
        if (node.base.kind === 'constant' && node.base.name === 'e') return visit(node.exponent);
        const still = !moves(node.exponent) && !dependsOn(node.exponent, v);
        const n = still ? s.context.field.asRational(s.context.field.fromExpression(node.exponent)) : null;
        if (n && n.den === 1n) return n.num >= 0n ? visit(node.base) : through(node.base, reciprocal);
        if (!still) visit(node.exponent);
        return through(node.base, logarithm);
      }
      case 'root':
        return moves(node.degree) || dependsOn(node.degree, v) ? fail() : through(node.radicand, logarithm);
      case 'call': {
        const [first] = node.args;
        if (first && node.args.length === 1 && ENTIRE.has(node.function)) return visit(first);
        if (first && node.args.length === 1 && isElementaryName(node.function)) return through(first, (z) => build.call(node.function, z));
        return fail();
      }
      default:
        return fail();
    }
  };
  const fail = (): never => {
    throw unproven();
  };
  /** The argument is uniform, and the function analytic at its limit values. */
  const through = (argument: Expression, f: (z: Expression) => Expression): void => {
    visit(argument);
    const { large, constant } = split(s.context, evaluate(s, argument));
    if (large || constant instanceof Series) throw unproven();
    if (!isAnalyticAt(s, s.context.field.toExpression(constant), f, over)) throw unproven();
  };
  visit(e);
}

const reciprocal = (z: Expression): Expression => build.power(z, -1);
const logarithm = (z: Expression): Expression => build.call('log', z);

function requireLimit(s: Session, e: Expression, evaluate: Evaluate): void {
  const value = evaluate(s, e);
  if (!(value instanceof Series)) return;
  const { large, constant } = split(s.context, value);
  if (large || growth(s.context, value) === 'large' || constant instanceof Series || isOscillating(s.context, constant)) throw unproven();
}

/** Whether a tree in v (and parameters) is bounded on the closed interval. */
export function isBounded(s: Session, e: Expression, over: ClosedInterval): boolean {
  if (!dependsOn(e, over.variable)) return true;
  if (e.kind === 'sum') return e.terms.every((t) => isBounded(s, t, over));
  if (e.kind === 'product') return e.factors.every((f) => isBounded(s, f, over));
  if (e.kind === 'negation') return isBounded(s, e.operand, over);
  const everywhere: Range = { variable: over.variable, low: null, high: null, field: s.context.field };
  return regularOn(everywhere, e) || onPieces(s, e, over, () => true);
}

/** Whether f is analytic at all values that the tree takes on the closed interval. */
function isAnalyticAt(s: Session, e: Expression, f: (z: Expression) => Expression, over: ClosedInterval): boolean {
  const z = build.symbol("z'");
  const tree = f(z);
  const accepts = (value: Rectangle<Interval>): boolean => {
    const image = encloseRectangle(tree, new Map([["z'", { re: widened(value.re), im: widened(value.im) }]]), describe, true);
    return image !== null && isFinite(image);
  };
  if (onPieces(s, e, over, accepts)) return true;
  if (f !== reciprocal && f !== logarithm) return false;
  // With parameters: by the sign, which on a closed interval keeps a distance from zero.
  const { field } = s.context;
  const range: Range = { variable: over.variable, low: over.low, high: over.high, field };
  const fits = (sign: unknown): boolean => sign === 1 || (sign === -1 && f === reciprocal);
  if (!dependsOn(e, over.variable)) {
    const value = field.fromExpression(e);
    return fits(field.sign(value)) || (f === reciprocal && field.isZero(value) === 'no');
  }
  if (!regularOn({ ...range, low: null, high: null }, e) || !fits(signOn(range, e))) return false;
  return [over.low, over.high].every((end) => fits(field.sign(field.fromExpression(substitute(e, over.variable, end)))));
}



/** Encloses the tree on pieces of the closed interval, halved until each is accepted. False where it holds parameters or the pieces run out. */
function onPieces(s: Session, e: Expression, over: ClosedInterval, accepts: (value: Rectangle<Interval>) => boolean): boolean {
  const v = over.variable;
  const enclosed = (tree: Expression, environment: ReadonlyMap<string, Rectangle<Interval>>): Rectangle<Interval> | null => {
    const value = encloseRectangle(tree, environment, describe);
    return value && isFinite(value) ? value : null;
  };
  if (!dependsOn(e, v)) {
    const value = enclosed(e, new Map());
    return value !== null && accepts(value);
  }
  for (const name of freeSymbols(e)) if (name !== v) return false;
  const [low, high] = [enclosed(over.low, new Map()), enclosed(over.high, new Map())];
  if (!low || !high || !interval.isZero(low.im) || !interval.isZero(high.im)) return false;
  const open: Interval[] = [interval.union(low.re, high.re)];
  for (let count = 0; open.length > 0; count += 1) {
    const piece = open.pop() as Interval;
    s.context.budget.check();
    const value = enclosed(e, new Map([[v, { re: piece, im: interval.ZERO }]]));
    if (value && accepts(value)) continue;
    const middle = interval.midpoint(piece);
    if (count > MOST_PIECES || middle <= piece.lo || middle >= piece.hi) return false;
    open.push(interval.fromEnds(piece.lo, middle), interval.fromEnds(middle, piece.hi));
  }
  return true;
}

const isFinite = (value: Rectangle<Interval>): boolean => interval.isFinite(value.re) && interval.isFinite(value.im);
/** A neighbourhood. */
const widened = (x: Interval): Interval => interval.fromEnds(interval.down(x.lo - SLACK * Math.abs(x.lo) - Number.MIN_VALUE), interval.up(x.hi + SLACK * Math.abs(x.hi) + Number.MIN_VALUE));
