/** C. Library names: ISO/IEC 9899:2024, 7.12 <math.h>; constants: POSIX.1-2017 <math.h>. */
import { I, POSIX } from './constants.ts';
import { type CodeLanguage, SLASHES } from './language.ts';

const C_INTEGERS = ['int', 'long', 'short', 'char', 'unsigned', 'signed', 'size_t', 'ssize_t', 'ptrdiff_t', 'intptr_t', 'uintptr_t', 'int8_t', 'int16_t', 'int32_t', 'int64_t', 'uint8_t', 'uint16_t', 'uint32_t', 'uint64_t', 'bool', '_Bool'];

export const c: CodeLanguage = {
  family: 'c',
  grammar: 'tree-sitter-c',
  prefixes: [],
  modules: [],
  methods: false,
  arithmetic: { pow: 'power', sqrt: 'squareRoot', rsqrt: 'reciprocalSquareRoot', cbrt: 'cubeRoot', fma: 'multiplyAdd', ldexp: 'scaleBinary', scalbn: 'scaleBinary', scalbln: 'scaleBinary' },
  constants: { ...POSIX, _Complex_I: I, I },
  bareConstants: /^(?:M_\w+|INFINITY|HUGE_VAL|_Complex_I)$/,
  integerQuotient: 'truncated',
  caret: 'exclusive or',
  floatTypes: { float: 'binary32', double: 'binary64', 'long double': 'extended', float_t: 'binary32', double_t: 'binary64', _Float16: 'binary16', _Float32: 'binary32', _Float64: 'binary64', _Float128: 'binary128', __float128: 'binary128', __bf16: 'bfloat16', half: 'binary16' },
  integerTypes: C_INTEGERS,
  suffixes: { f: 'binary32', l: 'extended', f16: 'binary16', f32: 'binary32', f64: 'binary64', f128: 'binary128', q: 'binary128', bf16: 'bfloat16' },
  literalFormat: 'binary64',
  literalAdapts: false,
  nameSuffixes: { f: 'binary32', l: 'extended' },
  comments: SLASHES,
};
