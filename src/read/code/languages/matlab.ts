/** MATLAB. Operators: documentation, "Operator Precedence"; names: "Elementary Math", "Special Functions". */
import * as K from './constants.ts';
import type { CodeLanguage } from './language.ts';

export const matlab: CodeLanguage = {
  family: 'matlab',
  grammar: null,
  prefixes: [],
  modules: [],
  methods: false,
  arithmetic: { sqrt: 'squareRoot', realsqrt: 'squareRoot', power: 'power', mpower: 'power', times: 'multiply', mtimes: 'multiply', plus: 'add', minus: 'subtract', rdivide: 'divide', mrdivide: 'divide', uminus: 'negate', nthroot: 'realRoot', polyval: 'horner falling', deg2rad: 'radians', rad2deg: 'degrees' },
  constants: { pi: K.PI, Inf: K.INFINITY, inf: K.INFINITY, i: K.I, j: K.I, eulergamma: K.EULER_GAMMA },
  bareConstants: /^(?:pi|Inf|inf|i|j)$/,
  integerQuotient: 'exact',
  caret: 'power',
  floatTypes: { double: 'binary64', single: 'binary32', half: 'binary16' },
  integerTypes: ['int8', 'int16', 'int32', 'int64', 'uint8', 'uint16', 'uint32', 'uint64'],
  suffixes: {},
  literalFormat: 'binary64',
  literalAdapts: true,
  nameSuffixes: {},
  comments: { line: ['%'], block: [['%{', '%}']], nested: true, doc: [] },
};
