/** Swift. Library names: Swift standard library (FloatingPoint), Foundation's C mathematics; constants: FloatingPoint.pi. */
import * as K from './constants.ts';
import { type CodeLanguage, SLASHES } from './language.ts';

export const swift: CodeLanguage = {
  family: 'swift',
  grammar: null,
  prefixes: ['Foundation', 'Darwin', 'Glibc', 'Double', 'Float', 'CGFloat', 'Float80', 'Float16', 'T', 'Self', ''],
  modules: [],
  methods: true,
  arithmetic: { pow: 'power', sqrt: 'squareRoot', squareRoot: 'squareRoot', cbrt: 'cubeRoot', fma: 'multiplyAdd', addingProduct: 'addProduct', scalbn: 'scaleBinary', ldexp: 'scaleBinary', reciprocal: 'reciprocal' },
  functions: { magnitude: 'abs' },
  constants: { pi: K.PI, infinity: K.INFINITY, M_PI: K.PI, M_E: K.E, M_PI_2: K.piOver(2), M_PI_4: K.piOver(4), M_LN2: K.LOG_TWO, M_SQRT2: K.ROOT_TWO },
  bareConstants: /^M_\w+$/,
  integerQuotient: 'context',
  caret: 'exclusive or',
  floatTypes: { Double: 'binary64', Float: 'binary32', Float64: 'binary64', Float32: 'binary32', Float16: 'binary16', CGFloat: 'binary64', Float80: 'extended' },
  integerTypes: ['Int', 'Int8', 'Int16', 'Int32', 'Int64', 'UInt', 'UInt8', 'UInt16', 'UInt32', 'UInt64'],
  suffixes: {},
  literalFormat: 'binary64',
  literalAdapts: true,
  nameSuffixes: { f: 'binary32' },
  comments: { ...SLASHES, nested: true },
};
