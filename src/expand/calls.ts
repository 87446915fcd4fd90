/** Calls of known functions: elementary ones by their own series, others by what their description says. */
import type { Element } from '../algebra/types.ts';
import { build, type CallNode, Q } from '../expression/index.ts';
import { acceptsArity, describe, type FunctionDescription } from '../functions/index.ts';
import { Declined } from '../outcome.ts';
import {
  add, divide, eventualSign, exactOf, exponential, growth, hyperbolic, imaginaryPart, inverse, type InverseFunction, isEvenLead, isRational, isRealMulti, leading, logarithm, mapConstants, type Multi, multiply, negate, noteSides, power, realPart,
  scaleBy, Series, sineCosine, split, subtract, withExact,
} from '../series/index.ts';
import { sineOfArctangent } from './arcsine.ts';
import { evaluateDescribed, refusePole } from './described.ts';
import { withGammaShiftsJoined } from './gamma-shifts.ts';
import { perfectPower } from './perfect-power.ts';
import type { Evaluate, Session } from './session.ts';

export function evaluateCall(s: Session, e: CallNode, evaluate: Evaluate): Multi {
  const c = s.context;
  const size = logarithmOfSize(s, e, evaluate);
  if (size !== null) return size;
  const gamma = logarithmOfGamma(s, e, evaluate);
  if (gamma !== null) return gamma;
  const undone = inverseOfItself(s, e, evaluate);
  if (undone !== null) return undone;
  const args = e.args.map((a) => evaluate(s, a));
  const description = describe(e.function);
  const direct = elementary[e.function];
  const [first] = args;
  if (description && !acceptsArity(description, args.length)) throw new Declined('bad-request', `${description.title} does not take ${args.length} argument${args.length === 1 ? '' : 's'}; correct the call.`);
  if (args.every((a) => !(a instanceof Series))) {
    if (description) refusePole(s, description, args as readonly Element[], evaluate);
    return c.field.call(e.function, args as readonly Element[]);
  }
  const [tree] = e.args;
  const sine = e.function === 'atan' && tree && first !== undefined ? sineOfArctangent(c, tree, first) : null;
  if (sine) return evaluate(s, build.call('asin', sine));
  const root = e.function === 'sqrt' && tree && first !== undefined ? perfectPower(s, tree, first, Q.HALF) : null;
  if (root !== null) return root;
  if (direct && first !== undefined && args.length === 1) return remembered(s, e.function, first, () => direct(s, first));
  const several = compound[e.function];
  if (several) return several(s, args);
  if (!description) throw new Declined('unknown-function', `The function ${e.function} is not known; write it out or choose a known name.`);
  if (description.definition) return evaluateDefinition(s, description, args, evaluate);
  return evaluateDescribed(s, description, args, evaluate);
}

const inverses: Readonly<Record<string, string>> = { asin: 'sin', acos: 'cos', atan: 'tan', asinh: 'sinh', acosh: 'cosh', atanh: 'tanh', log: 'exp' };

/** asin(sin u) = u and the like, where u is real and its limit lies inside the principal range. */
function inverseOfItself(s: Session, e: CallNode, evaluate: Evaluate): Multi | null {
  const c = s.context;
  const [inner] = e.args;
  const function_ = inverses[e.function];
  if (!inner || !function_ || e.args.length !== 1) return null;
  // acos(sin u) = pi/2 - asin(sin u) and asin(cos u) = pi/2 - acos(cos u), DLMF 4.23.19.
  const complement = inner.kind === 'call' && ((e.function === 'acos' && inner.function === 'sin') || (e.function === 'asin' && inner.function === 'cos'));
  if (complement) {
    const other = inverseOfItself(s, { ...e, function: e.function === 'acos' ? 'asin' : 'acos' }, evaluate);
    return other === null ? null : subtract(c, c.field.fromExpression(build.quotient(build.constant('pi'), build.number(2))), other);
  }
  // acos(cosh u) = i |u| for real u, continuous from below as on the cut (DLMF 4.23.24, 4.37.19).
  if (inner.kind === 'call' && inner.function === 'cosh' && inner.args[0] && (e.function === 'acos' || e.function === 'asin')) {
    const size = inverseOfItself(s, { ...e, function: 'acosh' }, evaluate);
    if (size === null) return null;
    const turned = scaleBy(c, size, c.field.i);
    return e.function === 'acos' ? turned : subtract(c, c.field.fromExpression(build.quotient(build.constant('pi'), build.number(2))), turned);
  }
  // acosh(v) = i acos(v) for -1 <= v <= 1 (DLMF 4.37.24).
  if (e.function === 'acosh' && inner.kind === 'call' && (inner.function === 'cos' || inner.function === 'sin')) {
    const angle = inverseOfItself(s, { ...e, function: 'acos' }, evaluate);
    return angle === null ? null : scaleBy(c, angle, c.field.i);
  }
  const argument = inner.kind === 'call' && inner.function === function_ && inner.args.length === 1 ? inner.args[0] : function_ === 'exp' && inner.kind === 'power' && inner.base.kind === 'constant' && inner.base.name === 'e' ? inner.exponent : undefined;
  if (!argument) return null;
  const u = evaluate(s, argument);
  if (!(u instanceof Series) || !isRealMulti(c, u)) return null;
  if (e.function === 'acosh') return evaluate(s, build.call('abs', argument));
  if (e.function === 'asinh' || e.function === 'atanh' || e.function === 'log') return u;
  const { large, constant } = split(c, u);
  if (large) return null;
  if (e.function === 'acos' && isRational(constant) && constant.num === 0n) return evaluate(s, build.call('abs', argument));
  return inPrincipalRange(c, e.function, u, constant);
}

/** Half periods from the principal range that are looked through. */
const MOST_HALF_PERIODS = 16;

/** The value in the principal range with the same sine, cosine or tangent as u, whose limit is inside a monotone piece: asin(sin u) = (-1)^k (u - k pi) and so on. */
function inPrincipalRange(c: Session['context'], id: string, u: Multi, limit: Element): Multi | null {
  const { field } = c;
  const pi = field.fromExpression(build.constant('pi'));
  const start = id === 'acos' ? Q.ZERO : Q.rational(-1, 2);
  for (let n = 0; n <= 2 * MOST_HALF_PERIODS; n += 1) {
    const k = n % 2 === 0 ? n / 2 : -(n + 1) / 2;
    const low = Q.add(start, Q.rational(k));
    const inside = field.compare(limit, field.multiply(pi, low)) === 1 && field.compare(limit, field.multiply(pi, Q.add(low, Q.ONE))) === -1;
    if (!inside) continue;
    if (k % 2 === 0 || id === 'atan') return subtract(c, u, field.multiply(pi, Q.rational(k)));
    return subtract(c, field.multiply(pi, Q.rational(id === 'acos' ? k + 1 : k)), u);
  }
  return null;
}

/** log|u| = log(u^2)/2 for real u: the same on both sides. */
function logarithmOfSize(s: Session, e: CallNode, evaluate: Evaluate): Multi | null {
  const [inner] = e.args;
  if (e.function !== 'log' || inner?.kind !== 'call' || inner.function !== 'abs' || !inner.args[0]) return null;
  const u = evaluate(s, inner.args[0]);
  if (!(u instanceof Series) || !isRealMulti(s.context, u)) return null;
  return withExact(scaleBy(s.context, logarithm(s.context, multiply(s.context, u, u)), Q.HALF), () => build.call('log', build.call('abs', exactOf(s.context, u))));
}

/** log Gamma(u) for large positive u, as a function of its own: the logarithm of the product of Stirling's form would cancel in all its derivatives. */
function logarithmOfGamma(s: Session, e: CallNode, evaluate: Evaluate): Multi | null {
  const [inner] = e.args;
  if (e.function !== 'log' || inner?.kind !== 'call' || (inner.function !== 'gamma' && inner.function !== 'factorial') || !inner.args[0]) return null;
  const argument = inner.function === 'gamma' ? inner.args[0] : build.sum(inner.args[0], build.number(1));
  const u = evaluate(s, argument);
  const c = s.context;
  if (!(u instanceof Series) || !isRealMulti(c, u) || growth(c, u) !== 'large' || eventualSign(c, u) !== 1) return null;
  return withExact(evaluate(s, build.call('logGamma', argument)), () => build.call('log', build.call('gamma', exactOf(c, u))));
}

/** The same call of the same series is the same result. */
function remembered(s: Session, key: string, argument: Multi, compute: () => Multi): Multi {
  if (!(argument instanceof Series)) return compute();
  let known = s.calls.get(argument);
  if (!known) s.calls.set(argument, (known = new Map()));
  const found = known.get(key);
  if (found !== undefined) return found;
  const value = compute();
  known.set(key, value);
  return value;
}

/** Evaluates the definition once, with the arguments bound to fresh symbols. */
function evaluateDefinition(s: Session, description: FunctionDescription, args: readonly Multi[], evaluate: Evaluate): Multi {
  const names = args.map((_, k) => `argument'${k}`);
  const defined = description.definition?.(args.map((a, k) => (a instanceof Series ? build.symbol(names[k] as string) : exactOf(s.context, a))));
  const tree = defined && withGammaShiftsJoined(defined);
  if (!tree) throw new Error('a definition that was there is gone');
  const bindings = new Map(s.bindings);
  args.forEach((a, k) => {
    if (a instanceof Series) bindings.set(names[k] as string, a);
  });
  const inner: Session = { ...s, bindings, memo: new Map(), varying: new Map() };
  return withExact(evaluate(inner, tree), () => build.call(description.id, ...args.map((a) => exactOf(s.context, a))));
}

type Elementary = (s: Session, f: Multi) => Multi;
const inverseOf =
  (id: InverseFunction): Elementary =>
  (s, f) =>
    inverse(s.context, id, f);
const quotientOf = (s: Session, id: string, f: Multi, a: Multi, b: Multi): Multi => withExact(divide(s.context, a, b), () => build.call(id, exactOf(s.context, f)));

const elementary: Readonly<Record<string, Elementary>> = {
  exp: (s, f) => exponential(s.context, f),
  log: (s, f) => logarithm(s.context, f),
  sqrt: (s, f) => power(s.context, f, Q.HALF),
  sin: (s, f) => sineCosine(s.context, f).sine,
  cos: (s, f) => sineCosine(s.context, f).cosine,
  tan: (s, f) => {
    const { sine, cosine } = sineCosine(s.context, f);
    return quotientOf(s, 'tan', f, sine, cosine);
  },
  cot: (s, f) => {
    const { sine, cosine } = sineCosine(s.context, f);
    return quotientOf(s, 'cot', f, cosine, sine);
  },
  sinh: (s, f) => hyperbolic(s.context, f).sine,
  cosh: (s, f) => hyperbolic(s.context, f).cosine,
  tanh: (s, f) => {
    const { sine, cosine } = hyperbolic(s.context, f);
    return quotientOf(s, 'tanh', f, sine, cosine);
  },
  coth: (s, f) => {
    const { sine, cosine } = hyperbolic(s.context, f);
    return quotientOf(s, 'coth', f, cosine, sine);
  },
  asin: inverseOf('asin'),
  acos: inverseOf('acos'),
  atan: inverseOf('atan'),
  asinh: inverseOf('asinh'),
  acosh: inverseOf('acosh'),
  atanh: inverseOf('atanh'),
  abs: (s, f) => {
    const sign = realSign(s, f);
    if (sign === 'complex') {
      const real = mapConstants(s.context, f, (e) => realPart(s.context, e));
      const imaginary = mapConstants(s.context, f, (e) => imaginaryPart(s.context, e));
      s.context.notes.sided = true;
      return power(s.context, add(s.context, multiply(s.context, real, real), multiply(s.context, imaginary, imaginary)), Q.HALF);
    }
    noteSide(s, f);
    return sign === -1 ? negate(s.context, f) : f;
  },
  re: (s, f) => mapConstants(s.context, f, (e) => realPart(s.context, e)),
  im: (s, f) => mapConstants(s.context, f, (e) => imaginaryPart(s.context, e)),
  sign: (s, f) => {
    const sign = realSign(s, f);
    if (sign === 'complex') throw new Declined('no-expansion', 'The sign of a complex quantity is not expanded; use a real argument.');
    noteSide(s, f);
    return Q.rational(sign);
  },
  heaviside: (s, f) => {
    const sign = realSign(s, f);
    if (sign === 'complex') throw new Declined('no-expansion', 'The step function of a complex quantity is not expanded; use a real argument.');
    noteSide(s, f);
    return sign === 0 ? Q.HALF : Q.rational(sign === 1 ? 1 : 0);
  },
  floor: (s, f) => rounded(s, f, (q) => Q.floor(q)),
  ceil: (s, f) => negate(s.context, rounded(s, negate(s.context, f), (q) => Q.floor(q))),
  trunc: (s, f) => (eventualSign(s.context, f) === -1 ? negate(s.context, rounded(s, negate(s.context, f), (q) => Q.floor(q))) : rounded(s, f, (q) => Q.floor(q))),
};

/** Sign of f for small t; 'complex' where one of its first terms is not real. */
function realSign(s: Session, f: Multi): -1 | 0 | 1 | 'complex' {
  return isRealMulti(s.context, f) ? eventualSign(s.context, f) : 'complex';
}

/** A function of the sign of f is the same on both sides only if f keeps away from zero or behaves like an even power of t. */
function noteSide(s: Session, f: Multi): void {
  if (growth(s.context, f) === 'finite') return;
  const lead = f instanceof Series ? leading(s.context, f) : null;
  noteSides(s.context, lead === null || (f instanceof Series && isEvenLead(lead, f.element)));
}

function rounded(s: Session, f: Multi, floor: (q: { num: bigint; den: bigint }) => bigint): Multi {
  const c = s.context;
  const { large, constant, small } = split(c, f);
  const limit = c.field.asRational(constant);
  if (large || !limit) throw new Declined('no-expansion', 'Rounding is expanded only where its argument has a rational limit; choose another point.');
  if (limit.den !== 1n || !small) return Q.rational(floor(limit));
  s.context.notes.sided = true;
  return Q.rational(eventualSign(c, small) === -1 ? limit.num - 1n : limit.num);
}

type Several = (s: Session, args: readonly Multi[]) => Multi;
const extreme =
  (wanted: 1 | -1): Several =>
  (s, args) =>
    args.reduce((best, next) => {
      const sign = realSign(s, subtract(s.context, next, best));
      if (sign === 'complex') throw new Declined('no-expansion', 'The largest or smallest of complex quantities has no meaning; use real arguments.');
      noteSide(s, subtract(s.context, next, best));
      return sign === wanted ? next : best;
    });

const compound: Readonly<Record<string, Several>> = {
  min: extreme(-1),
  max: extreme(1),
  atan2: (s, [y, x]) => {
    const c = s.context;
    if (y === undefined || x === undefined) throw new Declined('bad-request', 'atan2 takes two arguments, y and x.');
    const right = realSign(s, x);
    const up = realSign(s, y);
    if (right === 'complex' || up === 'complex') throw new Declined('no-expansion', 'atan2 takes real arguments.');
    const pi = c.field.fromExpression(build.constant('pi'));
    if (right === 0) return up === 0 ? Q.ZERO : c.field.multiply(pi, Q.rational(up, 2));
    noteSide(s, x);
    const angle = inverse(c, 'atan', divide(c, y, x));
    if (right === 1) return angle;
    noteSide(s, y);
    return add(c, angle, up === -1 ? c.field.negate(pi) : pi);
  },
};

