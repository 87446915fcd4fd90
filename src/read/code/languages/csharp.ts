/** C#. Library names and constants: .NET API documentation of System.Math, System.MathF and the static members of System.Double. */
import * as K from './constants.ts';
import { type CodeLanguage, SLASHES } from './language.ts';

export const csharp: CodeLanguage = {
  family: 'csharp',
  grammar: 'tree-sitter-c-sharp',
  prefixes: ['Math', 'MathF', 'System.Math', 'System.MathF', 'double', 'float', 'Double', 'Single', 'Half', 'T', 'Mathf'],
  modules: ['System.Math', 'System.MathF'],
  methods: false,
  arithmetic: { Pow: 'power', Sqrt: 'squareRoot', Cbrt: 'cubeRoot', Log: 'logBase', FusedMultiplyAdd: 'multiplyAdd', MultiplyAddEstimate: 'multiplyAdd', ReciprocalEstimate: 'reciprocal', ScaleB: 'scaleBinary', DegreesToRadians: 'radians', RadiansToDegrees: 'degrees' },
  constants: { PI: K.PI, Pi: K.PI, E: K.E, Tau: K.TAU, PositiveInfinity: K.INFINITY },
  bareConstants: /^PI$/,
  integerQuotient: 'truncated',
  caret: 'exclusive or',
  floatTypes: { double: 'binary64', float: 'binary32', Double: 'binary64', Single: 'binary32', Half: 'binary16', decimal: 'decimal' },
  integerTypes: ['int', 'long', 'short', 'byte', 'sbyte', 'uint', 'ulong', 'ushort', 'char', 'nint', 'nuint', 'Int32', 'Int64'],
  suffixes: { d: 'binary64', f: 'binary32', m: 'decimal' },
  literalFormat: 'binary64',
  literalAdapts: false,
  nameSuffixes: {},
  comments: SLASHES,
};
