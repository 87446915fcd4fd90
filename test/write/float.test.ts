import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { Q } from '../../src/expression/index.ts';
import { floatLiteral, hexFloat, roundToFormat, shortestDecimal, type FloatFormat } from '../../src/write/index.ts';

const float32 = new Float32Array(1);
const bits32 = new Uint32Array(float32.buffer);

describe('rounding to a format', () => {
  it('binary32 agrees with the hardware, ties, subnormals and overflow included', () => {
    fc.assert(
      fc.property(fc.double({ noNaN: true, noDefaultInfinity: true }), (value) => {
        const rounded = roundToFormat(Q.fromDouble(value), 'binary32');
        const hardware = Math.fround(value);
        expect(rounded === null ? null : Q.toDouble(rounded)).toBe(Number.isFinite(hardware) ? hardware + 0 : null);
      }),
      { numRuns: 2000, examples: [[1 + 2 ** -24], [1 + 3 * 2 ** -24], [2 ** -150], [3 * 2 ** -150], [3.4028235677973366e38], [3.4028235677973362e38]] },
    );
  });
});

describe('shortest decimals', () => {
  it('binary64 agrees with the shortest round-trip digits of ECMAScript (Number::toString)', () => {
    fc.assert(
      fc.property(fc.double({ noNaN: true, noDefaultInfinity: true }), (value) => {
        const text = shortestDecimal(value, 'binary64');
        expect(Number(text)).toBe(value);
        expect(text.replace(/^-|e.*$|\./g, '').replace(/^0+|0+$/g, '').length).toBe(String(value).replace(/^-|e.*$|\./g, '').replace(/^0+|0+$/g, '').length);
      }),
      { numRuns: 1000, examples: [[5e-324], [1.7976931348623157e308], [0.1], [2 ** 70], [-0]] },
    );
  });
  it('binary32 reads back and no shorter text does', () => {
    fc.assert(
      fc.property(fc.integer({ min: 0, max: 0xffffffff }), (bits) => {
        bits32[0] = bits;
        const value = float32[0] ?? 0;
        fc.pre(Number.isFinite(value) && value !== 0);
        const text = shortestDecimal(value, 'binary32');
        const exact = Q.fromDecimal(text);
        expect(exact && roundToFormat(exact, 'binary32')).toEqual(Q.fromDouble(value));
        const digits = text.replace(/^-|e.*$|\./g, '').replace(/^0+|0+$/g, '').length;
        if (digits > 1) {
          const shorter = Q.fromDecimal(Math.abs(value).toExponential(digits - 2));
          expect(shorter && roundToFormat(shorter, 'binary32')).not.toEqual(Q.fromDouble(Math.abs(value)));
        }
      }),
      { numRuns: 2000 },
    );
  });
  /** IEEE 754-2019 parameters: largest and smallest numbers of each format. */
  it.each<[number, FloatFormat, string, string]>([
    [0.1, 'binary64', '0.1', '0x1.999999999999ap-4'],
    [Math.fround(1 / 6), 'binary32', '0.16666667', '0x1.555556p-3'],
    [65504, 'binary16', '65500', '0x1.ffcp+15'],
    [2 ** -24, 'binary16', '6e-8', '0x1p-24'],
    [3.3895313892515355e38, 'bfloat16', '3.39e38', '0x1.fep+127'],
    [1.401298464324817e-45, 'binary32', '1e-45', '0x1p-149'],
    [-1, 'binary64', '-1', '-0x1p+0'],
    [123456, 'binary64', '123456', '0x1.e24p+16'],
  ])('%d in %s', (value, format, decimal, hex) => {
    expect(shortestDecimal(value, format)).toBe(decimal);
    expect(hexFloat(value, format)).toBe(hex);
  });
  it('refuses what is no float of the format', () => {
    expect(() => shortestDecimal(0.1, 'binary32')).toThrow(RangeError);
  });
});

describe('literals', () => {
  it.each([
    ['c', 'binary32', '0.16666667f'],
    ['rust', 'binary32', '0.16666667f32'],
    ['julia', 'binary32', '0.16666667f0'],
    ['fortran', 'binary64', '0.16666666666666666d0'],
    ['fortran', 'binary32', '0.16666667'],
    ['javascript', 'binary32', 'Math.fround(0.16666667)'],
    ['python', 'binary32', 'np.float32(0.16666667)'],
    ['glsl', 'binary32', '0.16666667'],
    ['hlsl', 'binary32', '0.16666667f'],
    ['swift', 'binary64', '0.16666666666666666'],
  ] as const)('%s %s', (language, format, text) => {
    expect(floatLiteral(Q.rational(1, 6), format, language)).toBe(text);
  });
  it('a negative literal, an exponent, a style of the file', () => {
    expect(floatLiteral(-1e-30, 'binary64', 'fortran')).toBe('-1.0d-30');
    expect(floatLiteral(1e30, 'binary64', 'c')).toBe('1.0e30');
    expect(floatLiteral(0.5, 'binary64', 'fortran', { suffix: '_dp' })).toBe('0.5_dp');
    expect(floatLiteral(0.1, 'binary64', 'java', { hexadecimal: true })).toBe('0x1.999999999999ap-4');
    expect(() => floatLiteral(1e39, 'binary32', 'c')).toThrow(/beyond|cannot/);
  });
});
