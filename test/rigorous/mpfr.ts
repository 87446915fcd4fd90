/** MPFR (compiled to WebAssembly, development only) as the judge of enclosures. Numbers travel as exact hexadecimal strings. */
import { init } from 'gmp-wasm';
import type { Ball } from '../../src/rigorous/index.ts';
import { real } from '../../src/rigorous/index.ts';

export type UnaryName =
  | 'exp' | 'ln' | 'sin' | 'cos' | 'tan' | 'sinh' | 'cosh' | 'tanh' | 'asin' | 'acos' | 'atan' | 'asinh' | 'acosh' | 'atanh' | 'sqrt' | 'cbrt'
  | 'gamma' | 'lngamma' | 'digamma' | 'erf' | 'erfc' | 'eint' | 'li2' | 'zeta' | 'j0' | 'j1' | 'y0' | 'y1' | 'ai';

/** mid * 16^exp as text that MPFR reads in base 16. */
function hexadecimal(x: Ball): string {
  let mid = x.mid < 0n ? -x.mid : x.mid;
  let exp = x.exp;
  while (exp % 4 !== 0) {
    mid <<= 1n;
    exp -= 1;
  }
  return `${x.mid < 0n ? '-' : ''}${mid.toString(16)}@${exp / 4}`;
}

/** A ball around what MPFR printed, wide enough for its last bit. */
function fromHexadecimal(text: string, bits: number): Ball | null {
  const match = /^(-?)([0-9a-f]+)(?:\.([0-9a-f]*))?(?:@(-?\d+))?$/.exec(text);
  if (!match) return null;
  const [, sign, whole = '', fraction = '', exponent = '0'] = match;
  const mid = BigInt(`0x${whole}${fraction}`);
  const exact: Ball = { mid: sign ? -mid : mid, rad: 0n, exp: 4 * (Number(exponent) - fraction.length) };
  return mid === 0n ? exact : real.withRadius(exact, real.scaleByPowerOfTwo(real.absoluteUpper(exact), 2 - bits));
}

export async function judge(bits: number): Promise<(name: UnaryName, x: Ball) => Ball | null> {
  const library = await init();
  return (name, x) => {
    const context = library.getContext({ precisionBits: bits, radix: 16 });
    const value = context.Float(hexadecimal(real.midpoint(x)))[name]() as unknown as { isNumber(): boolean; toString(radix: number): string };
    const result = value.isNumber() ? fromHexadecimal(value.toString(16), bits) : null;
    context.destroy();
    return result;
  };
}
