/** JavaScript and TypeScript. Library names and constants: ECMA-262, "The Math Object". */
import * as K from './constants.ts';
import { type CodeLanguage, SLASHES } from './language.ts';

export const javascript: CodeLanguage = {
  family: 'javascript',
  grammar: 'tree-sitter-javascript',
  prefixes: ['Math', 'globalThis.Math', 'window.Math', 'math', 'Number'],
  modules: ['mathjs', 'Math'],
  methods: false,
  arithmetic: { pow: 'power', sqrt: 'squareRoot', cbrt: 'cubeRoot', fround: 'identity', f16round: 'identity', Number: 'identity', square: 'square' },
  constants: { PI: K.PI, E: K.E, LN2: K.LOG_TWO, LN10: K.LOG_TEN, LOG2E: K.LOG2_E, LOG10E: K.LOG10_E, SQRT2: K.ROOT_TWO, SQRT1_2: K.INVERSE_ROOT_TWO, Infinity: K.INFINITY, POSITIVE_INFINITY: K.INFINITY },
  bareConstants: /^(?:PI|Infinity|π)$/,
  integerQuotient: 'exact',
  caret: 'exclusive or',
  floatTypes: { number: 'binary64' },
  integerTypes: ['bigint'],
  suffixes: {},
  literalFormat: 'binary64',
  literalAdapts: false,
  nameSuffixes: {},
  comments: SLASHES,
};
