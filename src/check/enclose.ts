/** Enclosures of exact constants as rationals: for decimals in print, and to look for a repair (which is then proved exactly). */
import { freeSymbols, Q, type Expression, type Rational } from '../expression/index.ts';
import { describe } from '../functions/index.ts';
import { encloseReal, real, type Ball } from '../rigorous/index.ts';

const PRECISION = 128;

const ofBall = (ball: Ball): { readonly low: Rational; readonly high: Rational } => {
  const scale = ball.exp >= 0 ? Q.rational(1n << BigInt(ball.exp)) : Q.rational(1n, 1n << BigInt(-ball.exp));
  return { low: Q.multiply(Q.rational(ball.mid - ball.rad), scale), high: Q.multiply(Q.rational(ball.mid + ball.rad), scale) };
};

/** Null where the value is not real, has free symbols, or is out of reach of the enclosures. */
export function enclose(e: Expression): { readonly low: Rational; readonly high: Rational } | null {
  if (e.kind === 'number') return { low: e.value, high: e.value };
  const ball = encloseReal(e, new Map(), PRECISION, describe);
  return ball && ofBall(ball);
}

/** A double near the value with every symbol at a fixed positive sample; null where there is none. Only to find candidates: nothing is concluded from it. */
export function sample(e: Expression): number | null {
  if (e.kind === 'number') return Q.toDouble(e.value);
  const ball = sampleBall(e);
  if (!ball) return null;
  const value = real.toDouble(ball);
  return Number.isFinite(value) ? value : null;
}

const sampleBall = (e: Expression): Ball | null => encloseReal(e, new Map(freeSymbols(e).map((name): [string, Ball] => [name, real.fromRational(sampleOf(name), PRECISION)])), PRECISION, describe);

/** The enclosure at the sample holds zero: a claim is not refuted by a coefficient that may vanish there by a relation not known to the exact test. */
export function mayVanish(e: Expression): boolean {
  if (e.kind === 'number') return false;
  const ball = sampleBall(e);
  return ball !== null && (ball.mid < 0n ? -ball.mid : ball.mid) <= ball.rad;
}

/** A positive rational between 1/2 and 3/2 made from the letters of the name. */
function sampleOf(name: string): Rational {
  let hash = 7;
  for (const sign of name) hash = (hash * 131 + (sign.codePointAt(0) ?? 0)) % 99991;
  return Q.rational(BigInt(hash) + 49999n, 99991n);
}
