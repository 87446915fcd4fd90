/** Antiderivatives of oscillating multiseries: sums of powers of t, with logarithms, times waves whose phases grow as powers, by parts again and again. Source: Erdelyi, Asymptotic Expansions (1956), 2.2 and 2.8 (from memory). */
import type { Element } from '../../algebra/types.ts';
import { build, type Expression, Q } from '../../expression/index.ts';
import { Declined } from '../../outcome.ts';
import { add, type Context, growth, integrate, isKnownZero, isOscillating, isZero, leading, monomial, type Multi, multiply, negate, oscillatingParts, reciprocal, scaleBy, Series, sumOfSeries, theta } from '../../series/index.ts';
import type { Evaluate, Session } from '../session.ts';

const refuse = (): Declined => new Declined('no-expansion', 'The integral of this oscillating function is not expanded here; write its products of waves as sums.');

/** cosine cos(phase) + sine sin(phase); a phase of zero for what does not oscillate. */
interface Wave {
  readonly phase: Element;
  readonly cosine: Element;
  readonly sine: Element;
}

/** F with t F'(t) = f, where coefficients of f oscillate. */
export function integrateWaves(s: Session, f: Multi, evaluate: Evaluate): Multi {
  const c = s.context;
  const own = c.scale.local;
  const ofTerm = (m: Multi): Multi => wavesIn(c, m).map(({ wave, amplitude }) => ofWave(s, wave, amplitude, evaluate)).reduce<Multi>((sum, part) => add(c, sum, part), Q.ZERO);
  if (!(f instanceof Series)) return ofTerm(f);
  if (f.element !== own) throw refuse();
  const { stream } = f;
  return sumOfSeries(
    c,
    own,
    (k) => {
      const t = stream.at(k);
      if (!t) return Q.ZERO;
      if (t.order) throw new Declined('no-expansion', 'An O-term stands inside the integral; integrate the terms before it.');
      return ofTerm(multiply(c, monomial(c, own, t.exponent), t.coefficient));
    },
    (k) => stream.at(k) !== null,
  );
}

const MOST_LOGARITHMS = 12;

/** One power of t, with powers of log t, as waves times amplitudes that do not oscillate. */
function wavesIn(c: Context, m: Multi): { readonly wave: Wave; readonly amplitude: Multi }[] {
  if (!(m instanceof Series)) return wavesOf(c, m).map((wave) => ({ wave, amplitude: Q.ONE }));
  const found: { wave: Wave; amplitude: Multi }[] = [];
  for (let k = 0; ; k += 1) {
    const t = m.stream.at(k);
    if (!t) return found;
    if (t.order || k >= MOST_LOGARITHMS) throw refuse();
    for (const inner of wavesIn(c, t.coefficient)) found.push({ wave: inner.wave, amplitude: multiply(c, monomial(c, m.element, t.exponent), inner.amplitude) });
  }
}

function wavesOf(c: Context, e: Element): Wave[] {
  if (!isOscillating(c, e)) return [{ phase: Q.ZERO, cosine: e, sine: Q.ZERO }];
  return oscillatingParts(c, e).flatMap(({ coefficient, factor }) => (factor ? linear(c, factor) : [{ phase: Q.ZERO, cosine: Q.ONE, sine: Q.ZERO }]).map((w) => ({ phase: w.phase, cosine: c.field.multiply(coefficient, w.cosine), sine: c.field.multiply(coefficient, w.sine) })));
}

/** Products of waves as sums (DLMF 4.21.13 to 4.21.16). */
function linear(c: Context, factor: Expression): Wave[] {
  const { field } = c;
  if (factor.kind === 'call' && (factor.function === 'sin' || factor.function === 'cos') && factor.args[0]) {
    const cosine = factor.function === 'cos';
    return [{ phase: field.fromExpression(factor.args[0]), cosine: cosine ? Q.ONE : Q.ZERO, sine: cosine ? Q.ZERO : Q.ONE }];
  }
  if (factor.kind === 'product') return factor.factors.map((f) => linear(c, f)).reduce((a, b) => a.flatMap((x) => b.flatMap((y) => product(c, x, y))));
  const n = factor.kind === 'power' && factor.exponent.kind === 'number' && factor.exponent.value.den === 1n ? Number(factor.exponent.value.num) : 0;
  if (factor.kind !== 'power' || n < 1 || n > MOST_LOGARITHMS) throw refuse();
  return linear(c, build.product(...Array.from({ length: n }, () => factor.base)));
}

function product(c: Context, x: Wave, y: Wave): Wave[] {
  const { field } = c;
  const half = (a: Element): Element => field.multiply(Q.HALF, a);
  const [cc, ss, sc, cs] = [field.multiply(x.cosine, y.cosine), field.multiply(x.sine, y.sine), field.multiply(x.sine, y.cosine), field.multiply(x.cosine, y.sine)];
  return [
    { phase: field.subtract(x.phase, y.phase), cosine: half(field.add(cc, ss)), sine: half(field.subtract(sc, cs)) },
    { phase: field.add(x.phase, y.phase), cosine: half(field.subtract(cc, ss)), sine: half(field.add(sc, cs)) },
  ];
}

/**
 * With f = p cos(phi) + q sin(phi) and F = P cos(phi) + Q sin(phi): theta P + Phi Q = p and theta Q - Phi P = q, where Phi = theta phi grows as a power of t; solved by iteration from P = -q/Phi, Q = p/Phi.
 */
function ofWave(s: Session, wave: Wave, amplitude: Multi, evaluate: Evaluate): Multi {
  const c = s.context;
  if (!isOscillating(c, wave.phase)) {
    const { field } = c;
    const constant = field.add(field.multiply(wave.cosine, field.call('cos', [wave.phase])), field.multiply(wave.sine, field.call('sin', [wave.phase])));
    return isZero(c, constant) ? Q.ZERO : integrate(c, scaleBy(c, amplitude, constant));
  }
  const speed = theta(c, evaluate(s, c.field.toExpression(wave.phase)));
  if (!(speed instanceof Series) || speed.element !== c.scale.local || growth(c, speed) !== 'large') throw refuse();
  const slowness = reciprocal(c, speed);
  const steps: [Multi, Multi][] = [[scaleBy(c, multiply(c, amplitude, slowness), c.field.negate(wave.sine)), scaleBy(c, multiply(c, amplitude, slowness), wave.cosine)]];
  const step = (k: number): [Multi, Multi] => {
    for (let last = steps[steps.length - 1]; last && steps.length <= k; last = steps[steps.length - 1]) {
      steps.push([multiply(c, theta(c, last[1]), slowness), negate(c, multiply(c, theta(c, last[0]), slowness))]);
    }
    return steps[k] as [Multi, Multi];
  };
  const vanishes = (m: Multi): boolean => (m instanceof Series ? isKnownZero(c, m) || leading(c, m) === null : isZero(c, m));
  const exists = (k: number): boolean => !step(k).every(vanishes);
  // The amplitude of a wave that is a power of t alone has derivatives of every order that do not vanish, unless it is a polynomial.
  if (step(MOST_STEPS).every(vanishes) === false) c.notes.divergent = true;
  const [first, second] = [0, 1].map((i) => sumOfSeries(c, c.scale.local, (k) => step(k)[i] ?? Q.ZERO, exists)) as [Multi, Multi];
  return add(c, scaleBy(c, first, c.field.call('cos', [wave.phase])), scaleBy(c, second, c.field.call('sin', [wave.phase])));
}

/** More than the degree of a polynomial amplitude that is recognised as one. */
const MOST_STEPS = 24;
