/** Julia. Operators and names: Julia manual, "Mathematical Operations and Elementary Functions"; constants: "Essentials", Base.MathConstants. */
import * as K from './constants.ts';
import type { CodeLanguage } from './language.ts';

export const julia: CodeLanguage = {
  family: 'julia',
  grammar: null,
  prefixes: ['Base', 'Base.Math', 'Math', 'MathConstants', 'Base.MathConstants', 'SpecialFunctions'],
  modules: ['SpecialFunctions', 'Base.MathConstants'],
  methods: false,
  arithmetic: { sqrt: 'squareRoot', '√': 'squareRoot', cbrt: 'cubeRoot', '∛': 'cubeRoot', inv: 'reciprocal', abs2: 'square', fma: 'multiplyAdd', muladd: 'multiplyAdd', ldexp: 'scaleBinary', ifelse: 'choose', log: 'logBaseFirst', deg2rad: 'radians', rad2deg: 'degrees', evalpoly: 'horner rising', float: 'identity', identity: 'identity', big: 'identity' },
  constants: { pi: K.PI, π: K.PI, ℯ: K.E, e: K.E, im: K.I, Inf: K.INFINITY, Inf32: K.INFINITY, eulergamma: K.EULER_GAMMA, γ: K.EULER_GAMMA, catalan: K.CATALAN, golden: K.GOLDEN_RATIO, φ: K.GOLDEN_RATIO },
  bareConstants: /^(?:pi|π|ℯ|im|Inf|Inf32)$/,
  integerQuotient: 'exact',
  caret: 'power',
  juxtaposition: true,
  floatTypes: { Float64: 'binary64', Float32: 'binary32', Float16: 'binary16' },
  integerTypes: ['Int', 'Int64', 'Int32', 'Integer', 'UInt'],
  suffixes: {},
  literalFormat: 'binary64',
  literalAdapts: false,
  nameSuffixes: {},
  comments: { line: ['#'], block: [['#=', '=#']], nested: true, doc: [] },
};
