/** Java. Library names and constants: API documentation of java.lang.Math and StrictMath. */
import * as K from './constants.ts';
import { type CodeLanguage, SLASHES } from './language.ts';

export const java: CodeLanguage = {
  family: 'java',
  grammar: 'tree-sitter-java',
  prefixes: ['Math', 'StrictMath', 'FastMath', 'java.lang.Math', 'java.lang.StrictMath', 'Double', 'Float'],
  modules: ['java.lang.Math', 'java.lang.StrictMath'],
  methods: false,
  arithmetic: { pow: 'power', sqrt: 'squareRoot', cbrt: 'cubeRoot', fma: 'multiplyAdd', scalb: 'scaleBinary', toRadians: 'radians', toDegrees: 'degrees' },
  constants: { PI: K.PI, E: K.E, TAU: K.TAU, POSITIVE_INFINITY: K.INFINITY },
  bareConstants: /^PI$/,
  integerQuotient: 'truncated',
  caret: 'exclusive or',
  floatTypes: { double: 'binary64', float: 'binary32', Double: 'binary64', Float: 'binary32' },
  integerTypes: ['int', 'long', 'short', 'byte', 'char', 'Integer', 'Long', 'Short'],
  suffixes: { d: 'binary64', f: 'binary32' },
  literalFormat: 'binary64',
  literalAdapts: false,
  nameSuffixes: {},
  comments: SLASHES,
};
