/** Kotlin. Library names and constants: API documentation of package kotlin.math. */
import * as K from './constants.ts';
import { type CodeLanguage, SLASHES } from './language.ts';

export const kotlin: CodeLanguage = {
  family: 'kotlin',
  grammar: null,
  prefixes: ['kotlin.math', 'Math', 'java.lang.Math', 'StrictMath', 'Double', 'Float'],
  modules: ['kotlin.math'],
  methods: true,
  arithmetic: { pow: 'power', sqrt: 'squareRoot', cbrt: 'cubeRoot', fma: 'multiplyAdd', log: 'logBase', toDouble: 'identity', toFloat: 'identity', toInt: 'truncate', toLong: 'truncate', unaryMinus: 'negate', plus: 'add', minus: 'subtract', times: 'multiply', div: 'divide' },
  functions: { ln: 'log', absoluteValue: 'abs' },
  constants: { PI: K.PI, E: K.E, POSITIVE_INFINITY: K.INFINITY },
  bareConstants: /^PI$/,
  integerQuotient: 'truncated',
  caret: 'exclusive or',
  floatTypes: { Double: 'binary64', Float: 'binary32' },
  integerTypes: ['Int', 'Long', 'Short', 'Byte', 'UInt', 'ULong'],
  suffixes: { f: 'binary32' },
  literalFormat: 'binary64',
  literalAdapts: false,
  nameSuffixes: {},
  comments: { ...SLASHES, nested: true },
};
