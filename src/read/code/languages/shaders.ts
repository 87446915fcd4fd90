/** GLSL (The OpenGL Shading Language 4.60, chapter 8) and HLSL (Microsoft reference, "Intrinsic Functions"). */
import { type CodeLanguage, SLASHES } from './language.ts';

const shared = {
  grammar: null,
  prefixes: [],
  modules: [],
  methods: false,
  constants: {},
  bareConstants: /^$/,
  integerQuotient: 'truncated',
  caret: 'exclusive or',
  suffixes: { f: 'binary32', h: 'binary16', lf: 'binary64', l: 'binary64', hf: 'binary16' },
  literalFormat: 'binary32',
  literalAdapts: false,
  nameSuffixes: {},
  comments: SLASHES,
} as const;

export const glsl: CodeLanguage = {
  ...shared,
  family: 'glsl',
  arithmetic: { pow: 'power', sqrt: 'squareRoot', inversesqrt: 'reciprocalSquareRoot', inverseSqrt: 'reciprocalSquareRoot', fma: 'multiplyAdd', radians: 'radians', degrees: 'degrees', ldexp: 'scaleBinary' },
  floatTypes: { float: 'binary32', double: 'binary64', float16_t: 'binary16', f32: 'binary32', f16: 'binary16' },
  integerTypes: ['int', 'uint', 'i32', 'u32', 'bool'],
};

export const hlsl: CodeLanguage = {
  ...shared,
  family: 'hlsl',
  arithmetic: { pow: 'power', sqrt: 'squareRoot', rsqrt: 'reciprocalSquareRoot', rcp: 'reciprocal', mad: 'multiplyAdd', fma: 'multiplyAdd', radians: 'radians', degrees: 'degrees', ldexp: 'scaleBinary', select: 'choose' },
  floatTypes: { float: 'binary32', double: 'binary64', half: 'binary16', float16_t: 'binary16', float32_t: 'binary32', float64_t: 'binary64', min16float: 'binary16', float1: 'binary32' },
  integerTypes: ['int', 'uint', 'dword', 'min16int', 'int16_t', 'uint16_t', 'int64_t', 'uint64_t', 'bool'],
};
