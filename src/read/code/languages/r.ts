/** R. Operators: R Language Definition, 3.1.4; names: reference manual of package base, "Arithmetic", "MathFun", "Trig", "Hyperbolic", "Special", "Bessel". */
import * as K from './constants.ts';
import type { CodeLanguage } from './language.ts';

export const r: CodeLanguage = {
  family: 'r',
  grammar: null,
  prefixes: ['base', 'stats', 'pracma', 'gsl', 'expint', 'Rmpfr'],
  modules: [],
  methods: false,
  arithmetic: { sqrt: 'squareRoot', ifelse: 'choose', log: 'logBase', 'as.numeric': 'identity', 'as.double': 'identity', I: 'identity' },
  constants: { pi: K.PI, Inf: K.INFINITY },
  bareConstants: /^(?:pi|Inf)$/,
  integerQuotient: 'exact',
  caret: 'power',
  floatTypes: { numeric: 'binary64', double: 'binary64' },
  integerTypes: ['integer'],
  suffixes: {},
  literalFormat: 'binary64',
  literalAdapts: false,
  nameSuffixes: {},
  comments: { line: ['#'], block: [], nested: false, doc: ["#'"] },
};
