/** How fast moments and Taylor coefficients of a function of t grow or shrink, read off its form: whether a series of their products diverges. */
import type { Field } from '../../algebra/types.ts';
import { build, children, dependsOn, type Expression, Q, substitute } from '../../expression/index.ts';
import { differentiate } from '../../functions/index.ts';

/** An end of the half line. */
export type End = 'zero' | 'infinity';

/** Whether the tree is a constant times a power of v, by its form. */
export function isPower(e: Expression, v: string): boolean {
  if (!dependsOn(e, v)) return true;
  switch (e.kind) {
    case 'symbol':
      return true;
    case 'product':
      return e.factors.every((f) => isPower(f, v));
    case 'quotient':
      return isPower(e.numerator, v) && isPower(e.denominator, v);
    case 'power':
      return !dependsOn(e.exponent, v) && isPower(e.base, v);
    default:
      return false;
  }
}

/** n for log(v)^n, 0 for others. */
export function logarithmPower(e: Expression, v: string): number {
  if (e.kind === 'call') return e.function === 'log' && e.args[0]?.kind === 'symbol' && e.args[0].name === v ? 1 : 0;
  if (e.kind !== 'power' || e.exponent.kind !== 'number' || !Q.isInteger(e.exponent.value) || e.exponent.value.num <= 0n || e.exponent.value.num > 8n) return 0;
  return logarithmPower(e.base, v) * Number(e.exponent.value.num);
}

/**
 * Whether the coefficients outgrow every power: by Stirling's formula moments of exp(-t^m) grow as Gamma(k/m), the coefficients of exp(-t^m), sin(t^m), cos(t^m) shrink so, and those of functions with singularities elsewhere do neither.
 */
export function diverges(field: Field, f: Expression, h: Expression, v: string, near: End): boolean {
  const far: End = near === 'zero' ? 'infinity' : 'zero';
  const [ofF, ofH] = [growthOrders(field, f, v), growthOrders(field, h, v)];
  return ofF.moments(far) > ofH.coefficients(near) || ofH.moments(near) > ofF.coefficients(far);
}

interface GrowthOrders {
  /** Of the moments of high order that the behaviour at that end decides. */
  readonly moments: (end: End) => number;
  /** How fast the coefficients at that end shrink. */
  readonly coefficients: (end: End) => number;
}

function growthOrders(field: Field, e: Expression, v: string): GrowthOrders {
  const degrees: number[] = [];
  let entire = true;
  for (const f of e.kind === 'product' ? e.factors : [e]) {
    const inner = f.kind === 'power' && f.base.kind === 'constant' ? f.exponent : f.kind === 'call' && ['exp', 'sin', 'cos'].includes(f.function) ? f.args[0] : undefined;
    if (!inner || !isPowerOf(inner, v)) {
      if (!isPower(f, v) && logarithmPower(f, v) === 0) entire = false;
      continue;
    }
    const unsigned = substitute(build.call('log', inner), v, build.power(build.constant('e'), build.symbol(v)));
    const slope = differentiate(unsigned, v);
    const degree = slope && field.asRational(field.fromExpression(slope));
    if (degree) degrees.push(Number(degree.num) / Number(degree.den));
    else entire = false;
  }
  const largest = (sign: 1 | -1): number => Math.max(0, ...degrees.map((d) => (d * sign > 0 ? 1 / Math.abs(d) : 0)));
  return {
    moments: (end) => largest(end === 'infinity' ? 1 : -1),
    coefficients: (end) => (entire ? largest(end === 'zero' ? 1 : -1) : 0),
  };
}

const isPowerOf = (e: Expression, v: string): boolean => (e.kind === 'negation' ? isPowerOf(e.operand, v) : isPower(e, v));

/** Whether the kernel may oscillate: then the end of the range contributes waves of its own. */
export const hasWaves = (h: Expression): boolean =>
  h.kind === 'call' ? !['log', 'atan', 'sqrt', 'exp'].includes(h.function) || h.args.some(hasWaves) : (h.kind === 'constant' && h.name === 'i') || children(h).some(hasWaves);
