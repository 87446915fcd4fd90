/** Directed decimal strings: what is printed is never on the wrong side of what was proved. */
import type { Rational } from '../expression/index.ts';
import type { Ball } from './ball.types.ts';
import { bitLength, divideCeil, divideFloor, magnitude } from './bits.ts';
import { lower, upper } from './ball.ts';

/** A decimal number `d.ddde-5` of `digits` significant digits: the smallest such number not below q (direction 1) or the largest not above it (-1). */
export function rationalToDecimal(q: Rational, digits: number, direction: 1 | -1): string {
  if (q.num === 0n) return '0';
  const size = magnitude(q.num);
  // Decimal exponent: an estimate from the bit lengths, put right below.
  let exponent = Math.floor((bitLength(size) - bitLength(q.den)) * 0.30103) - 1;
  const scaledEnough = (e: number): boolean => (e >= 0 ? size >= q.den * 10n ** BigInt(e) : size * 10n ** BigInt(-e) >= q.den);
  while (scaledEnough(exponent + 1)) exponent += 1;
  while (!scaledEnough(exponent)) exponent -= 1;
  const shift = digits - 1 - exponent;
  const numerator = shift >= 0 ? q.num * 10n ** BigInt(shift) : q.num;
  const denominator = shift >= 0 ? q.den : q.den * 10n ** BigInt(-shift);
  const integer = direction > 0 ? divideCeil(numerator, denominator) : divideFloor(numerator, denominator);
  return layOut(integer, -shift);
}

/** integer * 10^exponent as plain decimals between 1e-6 and 1e21, else in scientific notation; no trailing zeros after a point. */
function layOut(integer: bigint, exponent: number): string {
  if (integer === 0n) return '0';
  const negative = integer < 0n;
  let text = magnitude(integer).toString();
  let e = exponent;
  const trimmed = text.replace(/0+$/, '');
  e += text.length - trimmed.length;
  text = trimmed;
  const point = text.length + e;
  let body: string;
  if (point > 21 || point < -5) body = `${text[0] ?? ''}${text.length > 1 ? `.${text.slice(1)}` : ''}e${point - 1}`;
  else if (e >= 0) body = text + '0'.repeat(e);
  else if (point > 0) body = `${text.slice(0, point)}.${text.slice(point)}`;
  else body = `0.${'0'.repeat(-point)}${text}`;
  return negative ? `-${body}` : body;
}

/** A decimal of `digits` significant digits not below any number of the ball. */
export const toDecimalUp = (x: Ball, digits = 6): string => rationalToDecimal(upper(x), digits, 1);
/** A decimal of `digits` significant digits not above any number of the ball. */
export const toDecimalDown = (x: Ball, digits = 6): string => rationalToDecimal(lower(x), digits, -1);
