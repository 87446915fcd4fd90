/** Fortran. Intrinsics: ISO/IEC 1539-1:2023, 16.9 (specific names such as DEXP from Fortran 77, annex B of later editions). */
import type { CodeLanguage } from './language.ts';

export const fortran: CodeLanguage = {
  family: 'fortran',
  grammar: null,
  prefixes: [],
  modules: [],
  methods: false,
  arithmetic: { sqrt: 'squareRoot', dsqrt: 'squareRoot', csqrt: 'squareRoot', cbrt: 'cubeRoot', merge: 'merge', real: 'identity', dble: 'identity', sngl: 'identity', dfloat: 'identity', float: 'identity', scale: 'scaleBinary', int: 'truncate', ieee_fma: 'multiplyAdd' },
  constants: {},
  bareConstants: /^$/,
  integerQuotient: 'truncated',
  caret: 'exclusive or',
  foldCase: true,
  floatTypes: { real: 'binary32', 'double precision': 'binary64', 'real(8)': 'binary64', 'real*8': 'binary64', 'real(4)': 'binary32', 'real*4': 'binary32', 'real(dp)': 'binary64', 'real(sp)': 'binary32', 'real(real64)': 'binary64', 'real(real32)': 'binary32', 'real(kind=8)': 'binary64', 'real(kind=dp)': 'binary64', 'real(wp)': 'binary64', 'real(real128)': 'binary128', 'real(16)': 'binary128', 'real(qp)': 'binary128' },
  integerTypes: ['integer', 'integer(4)', 'integer(8)', 'integer*4', 'integer*8', 'integer(int32)', 'integer(int64)'],
  suffixes: { dp: 'binary64', sp: 'binary32', wp: 'binary64', real64: 'binary64', real32: 'binary32', real128: 'binary128', qp: 'binary128', '8': 'binary64', '4': 'binary32', r8: 'binary64', r4: 'binary32', rk: 'binary64', c_double: 'binary64', c_float: 'binary32' },
  literalFormat: 'binary32',
  literalAdapts: false,
  nameSuffixes: {},
  comments: { line: ['!'], block: [], nested: false, doc: ['!!', '!>', '!<'] },
  implicitIntegers: true,
};
