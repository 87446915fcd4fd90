/** Trigonometric, hyperbolic and inverse functions of multiseries at regular points, through addition theorems and derivatives. */
import type { Element } from '../algebra/types.ts';
import { build, Q } from '../expression/index.ts';
import { exponential, isRealMulti, levels, reciprocal, requireOscillation, withExact } from './exponential.ts';
import { leading } from './leading.ts';
import { type Context, exactOf, type Multi, type ScaleElement, Series, Stream, unnamed } from './multi.ts';
import { add, multiply, ringOf, scaleBy, streamIn, subtract } from './ring.ts';
import { split } from './split.ts';
import { sumOfStreams } from './stream.ts';
import { composeTail, integralTail, sineCosineTail } from './tail.ts';

export interface SineCosine {
  readonly sine: Multi;
  readonly cosine: Multi;
}

/** sin f and cos f. An unbounded f oscillates: its phase stays inside a coefficient. */
export function sineCosine(c: Context, f: Multi): SineCosine {
  const { large, constant, small } = split(c, f);
  let phase: Element = constant;
  if (large && !isRealMulti(c, large)) return ofComplex(c, f);
  if (large) {
    requireOscillation(c);
    phase = c.field.add(c.field.fromExpression(exactOf(c, large)), constant);
  }
  const at: SineCosine = { sine: c.field.call('sin', [phase]), cosine: c.field.call('cos', [phase]) };
  if (!small) return at;
  return named(c, f, addAngles(c, at, sineCosineOfSmall(c, small, -1), -1), 'sin', 'cos');
}

/** By exponentials: only a real phase oscillates, the imaginary part grows. */
function ofComplex(c: Context, f: Multi): SineCosine {
  const up = exponential(c, scaleBy(c, f, c.field.i));
  const down = exponential(c, scaleBy(c, f, c.field.negate(c.field.i)));
  const half = scaleBy(c, subtract(c, up, down), c.field.divide(Q.HALF, c.field.i));
  return named(c, f, { sine: half, cosine: scaleBy(c, add(c, up, down), Q.HALF) }, 'sin', 'cos');
}

/** sinh f and cosh f. */
export function hyperbolic(c: Context, f: Multi): SineCosine {
  const { large, constant, small } = split(c, f);
  if (large) {
    const up = exponential(c, f);
    const down = reciprocal(c, up);
    return named(c, f, { sine: scaleBy(c, subtract(c, up, down), Q.HALF), cosine: scaleBy(c, add(c, up, down), Q.HALF) }, 'sinh', 'cosh');
  }
  const at: SineCosine = { sine: c.field.call('sinh', [constant]), cosine: c.field.call('cosh', [constant]) };
  if (!small) return at;
  return named(c, f, addAngles(c, at, sineCosineOfSmall(c, small, 1), 1), 'sinh', 'cosh');
}

function named(c: Context, f: Multi, pair: SineCosine, sine: string, cosine: string): SineCosine {
  return { sine: withExact(pair.sine, () => build.call(sine, exactOf(c, f))), cosine: withExact(pair.cosine, () => build.call(cosine, exactOf(c, f))) };
}

/** Addition theorems; sign -1 for the circular, 1 for the hyperbolic functions. */
function addAngles(c: Context, a: SineCosine, b: SineCosine, sign: 1 | -1): SineCosine {
  const ss = multiply(c, a.sine, b.sine);
  const cc = multiply(c, a.cosine, b.cosine);
  return {
    sine: add(c, multiply(c, a.sine, b.cosine), multiply(c, a.cosine, b.sine)),
    cosine: sign === 1 ? add(c, cc, ss) : subtract(c, cc, ss),
  };
}

function sineCosineOfSmall(c: Context, f: Multi, sign: 1 | -1): SineCosine {
  const [sineName, cosineName] = sign === 1 ? ['sinh', 'cosh'] : ['sin', 'cos'];
  if (!(f instanceof Series)) return { sine: c.field.call(sineName as string, [f]), cosine: c.field.call(cosineName as string, [f]) };
  const { base, rest } = levels(c, f);
  const streams = sineCosineTail(c, rest, sign);
  const pair = {
    sine: new Series(f.element, streams.sine, () => build.call(sineName as string, f.exact())),
    cosine: new Series(f.element, streams.cosine, () => build.call(cosineName as string, f.exact())),
  };
  return base === null ? pair : addAngles(c, sineCosineOfSmall(c, base, sign), pair, sign);
}

/**
 * F(f) for bounded f where F is analytic at the limit of f: F(f) = F(f_0) + integral of f' F'(f), level by level.
 * `value` gives F at a constant, `slope` F' along a multiseries; `self` is F there, whose later terms must only be asked for lazily.
 */
export function alongDerivative(c: Context, f: Multi, value: (at: Element) => Multi, slope: (f: Multi, self: Multi) => Multi): Multi {
  if (!(f instanceof Series)) return value(f);
  const { base, rest } = levels(c, f);
  const start = base === null ? value(Q.ZERO) : alongDerivative(c, base, value, slope);
  if (rest.at(0) === null) return start;
  let definition: Stream | null = null;
  const stream = new Stream((k) => {
    if (k === 0) return { exponent: Q.ZERO, coefficient: start };
    definition ??= integralTail(c, start, rest, streamIn(slope(f, self), f.element));
    return definition.at(k);
  });
  const self: Series = new Series(f.element, stream, unnamed);
  return self;
}

/** sum over k of coefficient(k) f^k for f -> 0, level by level; null ends the sum. The result is unnamed: give it its tree with `withExact`. */
export function compose(c: Context, coefficient: (k: number) => Multi | null, f: Multi): Multi {
  if (!(f instanceof Series)) {
    const first = coefficient(0);
    return first ?? Q.ZERO;
  }
  const { base, rest } = levels(c, f);
  if (base === null) return new Series(f.element, composeTail(c, coefficient, rest), unnamed);
  const memo: (Multi | null)[] = [];
  const shifted = (j: number): Multi | null => {
    if (memo[j] === undefined) {
      memo[j] = coefficient(j) === null ? null : compose(c, (k) => {
        const value = coefficient(k + j);
        return value === null ? null : scaleBy(c, value, Q.rational(binomial(k + j, j)));
      }, base);
    }
    return memo[j] as Multi | null;
  };
  return new Series(f.element, composeTail(c, shifted, rest), unnamed);
}

/** The sum of multiseries whose leading exponents in the element increase without bound; it ends at the first k that does not exist. */
export function sumOfSeries(c: Context, element: ScaleElement, part: (k: number) => Multi, exists: (k: number) => boolean = () => true): Multi {
  const stream = sumOfStreams(c, ringOf(c), (k) => {
    if (!exists(k)) return null;
    const value = part(k);
    const first = value instanceof Series && value.element === element ? leading(c, value) : null;
    return { lead: first?.exponent ?? Q.ZERO, stream: streamIn(value, element) };
  });
  return new Series(element, stream, unnamed);
}

/** n over k, for whole 0 <= k <= n. */
export function binomial(n: number, k: number): bigint {
  let result = 1n;
  for (let j = 1; j <= k; j += 1) result = (result * BigInt(n - k + j)) / BigInt(j);
  return result;
}
