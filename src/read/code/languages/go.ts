/** Go. Library names and constants: documentation of package math. */
import * as K from './constants.ts';
import { type CodeLanguage, SLASHES } from './language.ts';

export const go: CodeLanguage = {
  family: 'go',
  grammar: 'tree-sitter-go',
  prefixes: ['math', 'cmplx', 'math32'],
  modules: ['math', 'math/cmplx'],
  methods: false,
  arithmetic: { Pow: 'power', Sqrt: 'squareRoot', Cbrt: 'cubeRoot', FMA: 'multiplyAdd', Ldexp: 'scaleBinary' },
  constants: { Pi: K.PI, E: K.E, Phi: K.GOLDEN_RATIO, Sqrt2: K.ROOT_TWO, SqrtE: K.ROOT_E, SqrtPi: K.ROOT_PI, SqrtPhi: K.ROOT_GOLDEN_RATIO, Ln2: K.LOG_TWO, Log2E: K.LOG2_E, Ln10: K.LOG_TEN, Log10E: K.LOG10_E },
  bareConstants: /^$/,
  integerQuotient: 'truncated',
  caret: 'exclusive or',
  floatTypes: { float64: 'binary64', float32: 'binary32' },
  integerTypes: ['int', 'int8', 'int16', 'int32', 'int64', 'uint', 'uint8', 'uint16', 'uint32', 'uint64', 'byte', 'rune', 'uintptr'],
  suffixes: {},
  literalFormat: 'binary64',
  literalAdapts: true,
  nameSuffixes: {},
  comments: { ...SLASHES, doc: [] },
};
