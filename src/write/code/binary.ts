/** Exact access to the exponent of a float, in each language: 2^k, the exponent of x, the significand of x. For normal numbers x > 0 and exponents of normal numbers only. */
import { Declined } from '../../outcome.ts';
import type { FloatFormat } from '../float.ts';
import type { CodeLanguage, LanguageRow } from './languages.ts';

/** Names of calls in trees of code: k (a float that is an integer) -> 2^k; x -> e and x -> m with x = m 2^e, 1 <= m < 2, both as floats. */
export const BINARY_CALLS = ['power-of-two', 'binary-exponent', 'significand'] as const;
export type BinaryCall = (typeof BINARY_CALLS)[number];
export const isBinaryCall = (id: string): id is BinaryCall => (BINARY_CALLS as readonly string[]).includes(id);

interface Written {
  readonly text: string;
  readonly imports: readonly string[];
}
/** The argument stands as it is given: a name, a call or a bracket. */
type Way = (argument: string) => string;
interface Ways {
  readonly imports?: readonly string[];
  readonly power: Way;
  readonly exponent: Way | null;
  readonly significand: Way | null;
}

const DOUBLE_BITS = ['const doubleBits = new DataView(new ArrayBuffer(8));'];
const javascript: Ways = {
  imports: DOUBLE_BITS,
  power: (k) => `(doubleBits.setInt32(0, (${k} + 1023) << 20), doubleBits.setInt32(4, 0), doubleBits.getFloat64(0))`,
  exponent: (x) => `(doubleBits.setFloat64(0, ${x}), ((doubleBits.getInt32(0) >> 20) & 2047) - 1023)`,
  significand: (x) => `(doubleBits.setFloat64(0, ${x}), doubleBits.setInt32(0, (doubleBits.getInt32(0) & 1048575) | 1072693248), doubleBits.getFloat64(0))`,
};

const C_BITS: readonly string[] = ['#include <stdint.h>'];
const CPP_BITS: readonly string[] = ['#include <cstdint>', '#include <cstring>'];
const cppFloat = (type: string, integer: string, x: string): string => `[](${integer} i) { ${type} y; std::memcpy(&y, &i, sizeof y); return y; }(${x})`;
const cppBits = (type: string, integer: string, x: string): string => `[](${type} y) { ${integer} i; std::memcpy(&i, &y, sizeof i); return i; }(${x})`;

const BINARY32: Readonly<Record<CodeLanguage, Ways | null>> = {
  c: {
    imports: C_BITS,
    power: (k) => `((union { uint32_t i; float f; }){ .i = (uint32_t)((int32_t)${k} + 127) << 23 }.f)`,
    exponent: (x) => `(float)((int32_t)(((union { float f; uint32_t i; }){ .f = ${x} }.i >> 23) & 255) - 127)`,
    significand: (x) => `((union { uint32_t i; float f; }){ .i = ((union { float f; uint32_t i; }){ .f = ${x} }.i & 0x7fffff) | 0x3f800000 }.f)`,
  },
  cpp: {
    imports: CPP_BITS,
    power: (k) => cppFloat('float', 'std::uint32_t', `static_cast<std::uint32_t>(static_cast<std::int32_t>(${k}) + 127) << 23`),
    exponent: (x) => `static_cast<float>(static_cast<std::int32_t>((${cppBits('float', 'std::uint32_t', x)} >> 23) & 255) - 127)`,
    significand: (x) => cppFloat('float', 'std::uint32_t', `(${cppBits('float', 'std::uint32_t', x)} & 0x7fffff) | 0x3f800000`),
  },
  rust: { power: (k) => `f32::from_bits(((${k} as i32 + 127) as u32) << 23)`, exponent: (x) => `(((${x}.to_bits() >> 23) & 255) as i32 - 127) as f32`, significand: (x) => `f32::from_bits((${x}.to_bits() & 0x007f_ffff) | 0x3f80_0000)` },
  python: { imports: ['import numpy as np'], power: (k) => `np.ldexp(np.float32(1), int(${k}))`, exponent: (x) => `np.float32(np.frexp(${x})[1] - 1)`, significand: (x) => `(np.float32(2)*np.frexp(${x})[0])` },
  javascript,
  typescript: javascript,
  java: { power: (k) => `Math.scalb(1.0f, (int) ${k})`, exponent: (x) => `(float) Math.getExponent(${x})`, significand: (x) => `Math.scalb(${x}, -Math.getExponent(${x}))` },
  csharp: {
    imports: ['using System;'],
    power: (k) => `BitConverter.Int32BitsToSingle(((int)${k} + 127) << 23)`,
    exponent: (x) => `(float)(((BitConverter.SingleToInt32Bits(${x}) >> 23) & 255) - 127)`,
    significand: (x) => `BitConverter.Int32BitsToSingle((BitConverter.SingleToInt32Bits(${x}) & 0x7fffff) | 0x3f800000)`,
  },
  go: {
    imports: ['import "math"'],
    power: (k) => `math.Float32frombits(uint32(int32(${k})+127) << 23)`,
    exponent: (x) => `float32(int32((math.Float32bits(${x})>>23)&255) - 127)`,
    significand: (x) => `math.Float32frombits((math.Float32bits(${x}) & 0x7fffff) | 0x3f800000)`,
  },
  julia: { power: (k) => `ldexp(1.0f0, Int(${k}))`, exponent: (x) => `Float32(exponent(${x}))`, significand: (x) => `significand(${x})` },
  fortran: { power: (k) => `scale(1.0, int(${k}))`, exponent: (x) => `real(exponent(${x}) - 1)`, significand: (x) => `(2.0*fraction(${x}))` },
  matlab: {
    power: (k) => `single(pow2(1, double(${k})))`,
    exponent: (x) => `single(double(bitshift(typecast(${x}, 'uint32'), -23)) - 127)`,
    significand: (x) => `single(pow2(double(${x}), 127 - double(bitshift(typecast(${x}, 'uint32'), -23))))`,
  },
  r: null,
  glsl: { power: (k) => `intBitsToFloat((int(${k}) + 127) << 23)`, exponent: (x) => `float(((floatBitsToInt(${x}) >> 23) & 255) - 127)`, significand: (x) => `intBitsToFloat((floatBitsToInt(${x}) & 0x7fffff) | 0x3f800000)` },
  hlsl: { power: (k) => `asfloat((int(${k}) + 127) << 23)`, exponent: (x) => `float(((asint(${x}) >> 23) & 255) - 127)`, significand: (x) => `asfloat((asint(${x}) & 0x7fffff) | 0x3f800000)` },
  kotlin: {
    power: (k) => `Float.fromBits((${k}.toInt() + 127) shl 23)`,
    exponent: (x) => `(((${x}.toRawBits() shr 23) and 255) - 127).toFloat()`,
    significand: (x) => `Float.fromBits((${x}.toRawBits() and 0x7fffff) or 0x3f800000)`,
  },
  swift: { power: (k) => `Float(sign: .plus, exponent: Int(${k}), significand: 1)`, exponent: (x) => `Float(${x}.exponent)`, significand: (x) => `${x}.significand` },
};

const BINARY64: Readonly<Record<CodeLanguage, Ways | null>> = {
  c: {
    imports: C_BITS,
    power: (k) => `((union { uint64_t i; double f; }){ .i = (uint64_t)((int64_t)${k} + 1023) << 52 }.f)`,
    exponent: (x) => `(double)((int32_t)(((union { double f; uint64_t i; }){ .f = ${x} }.i >> 52) & 2047) - 1023)`,
    significand: (x) => `((union { uint64_t i; double f; }){ .i = ((union { double f; uint64_t i; }){ .f = ${x} }.i & 0xfffffffffffffu) | 0x3ff0000000000000u }.f)`,
  },
  cpp: {
    imports: CPP_BITS,
    power: (k) => cppFloat('double', 'std::uint64_t', `static_cast<std::uint64_t>(static_cast<std::int64_t>(${k}) + 1023) << 52`),
    exponent: (x) => `static_cast<double>(static_cast<std::int32_t>((${cppBits('double', 'std::uint64_t', x)} >> 52) & 2047) - 1023)`,
    significand: (x) => cppFloat('double', 'std::uint64_t', `(${cppBits('double', 'std::uint64_t', x)} & 0xfffffffffffffu) | 0x3ff0000000000000u`),
  },
  rust: { power: (k) => `f64::from_bits(((${k} as i64 + 1023) as u64) << 52)`, exponent: (x) => `(((${x}.to_bits() >> 52) & 2047) as i32 - 1023) as f64`, significand: (x) => `f64::from_bits((${x}.to_bits() & 0x000f_ffff_ffff_ffff) | 0x3ff0_0000_0000_0000)` },
  python: { imports: ['import math'], power: (k) => `math.ldexp(1.0, int(${k}))`, exponent: (x) => `float(math.frexp(${x})[1] - 1)`, significand: (x) => `(2.0*math.frexp(${x})[0])` },
  javascript,
  typescript: javascript,
  java: { power: (k) => `Math.scalb(1.0, (int) ${k})`, exponent: (x) => `(double) Math.getExponent(${x})`, significand: (x) => `Math.scalb(${x}, -Math.getExponent(${x}))` },
  csharp: {
    imports: ['using System;'],
    power: (k) => `BitConverter.Int64BitsToDouble(((long)${k} + 1023) << 52)`,
    exponent: (x) => `(double)(((BitConverter.DoubleToInt64Bits(${x}) >> 52) & 2047) - 1023)`,
    significand: (x) => `BitConverter.Int64BitsToDouble((BitConverter.DoubleToInt64Bits(${x}) & 0xfffffffffffffL) | 0x3ff0000000000000L)`,
  },
  go: {
    imports: ['import "math"'],
    power: (k) => `math.Float64frombits(uint64(int64(${k})+1023) << 52)`,
    exponent: (x) => `float64(int64((math.Float64bits(${x})>>52)&2047) - 1023)`,
    significand: (x) => `math.Float64frombits((math.Float64bits(${x}) & 0xfffffffffffff) | 0x3ff0000000000000)`,
  },
  julia: { power: (k) => `ldexp(1.0, Int(${k}))`, exponent: (x) => `Float64(exponent(${x}))`, significand: (x) => `significand(${x})` },
  fortran: { power: (k) => `scale(1.0d0, int(${k}))`, exponent: (x) => `dble(exponent(${x}) - 1)`, significand: (x) => `(2.0d0*fraction(${x}))` },
  matlab: {
    power: (k) => `pow2(1, ${k})`,
    exponent: (x) => `(double(bitshift(typecast(${x}, 'uint64'), -52)) - 1023)`,
    significand: (x) => `pow2(${x}, 1023 - double(bitshift(typecast(${x}, 'uint64'), -52)))`,
  },
  r: null,
  glsl: {
    power: (k) => `packDouble2x32(uvec2(0u, uint(int(${k}) + 1023) << 20))`,
    exponent: (x) => `double(int((unpackDouble2x32(${x}).y >> 20) & 2047u) - 1023)`,
    significand: (x) => `packDouble2x32(uvec2(unpackDouble2x32(${x}).x, (unpackDouble2x32(${x}).y & 0xfffffu) | 0x3ff00000u))`,
  },
  hlsl: { power: (k) => `asdouble(0u, uint(int(${k}) + 1023) << 20)`, exponent: null, significand: null },
  kotlin: {
    power: (k) => `Double.fromBits((${k}.toLong() + 1023L) shl 52)`,
    exponent: (x) => `(((${x}.toRawBits() shr 52) and 2047L) - 1023L).toDouble()`,
    significand: (x) => `Double.fromBits((${x}.toRawBits() and 0xfffffffffffffL) or 0x3ff0000000000000L)`,
  },
  swift: { power: (k) => `Double(sign: .plus, exponent: Int(${k}), significand: 1)`, exponent: (x) => `Double(${x}.exponent)`, significand: (x) => `${x}.significand` },
};

/** Throws Declined where the language has no exact way. */
export function binaryCall(row: LanguageRow, id: BinaryCall, format: FloatFormat, argument: string): Written {
  const ways = format === 'binary32' ? BINARY32[row.id] : format === 'binary64' ? BINARY64[row.id] : null;
  const way = ways && (id === 'power-of-two' ? ways.power : id === 'binary-exponent' ? ways.exponent : ways.significand);
  if (!ways || !way) throw new Declined('bad-request', `${row.title} has no exact way to read or set the exponent of a ${format} number, which this range reduction needs; choose another language or a smaller interval.`);
  return { text: way(argument), imports: ways.imports ?? [] };
}
