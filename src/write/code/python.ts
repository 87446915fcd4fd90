/** In which module of Python a library function lives: the same function has other names, or none, in the other modules. Sources: the documentation of Python's `math` module, numpy's ufuncs and scipy.special (common practice). */

const words = (text: string): ReadonlySet<string> => new Set(text.split(' '));
const BUILT_IN = words('abs max min');
const MATH = words('acos acosh asin asinh atan atan2 atanh cbrt ceil cos cosh erf erfc exp exp2 expm1 fabs floor fmod gamma hypot lgamma log log10 log1p log2 pow sin sinh sqrt tan tanh');
const NUMPY = words('absolute arccos arccosh arcsin arcsinh arctan arctan2 arctanh cbrt ceil copysign cos cosh exp exp2 expm1 fabs floor hypot log log10 log1p log2 maximum minimum power sign sin sinh sqrt tan tanh');
const NUMPY_NAMES: Readonly<Record<string, string>> = { acos: 'arccos', acosh: 'arccosh', asin: 'arcsin', asinh: 'arcsinh', atan: 'arctan', atan2: 'arctan2', atanh: 'arctanh', pow: 'power', max: 'maximum', min: 'minimum' };
const MATH_NAMES: Readonly<Record<string, string>> = Object.fromEntries(Object.entries(NUMPY_NAMES).map(([math, numpy]) => [numpy, math]));

export interface PythonCall {
  readonly name: string;
  readonly imports: readonly string[];
}

/** The call of a library function for a file that uses `prefix` (`math.`, `np.`, `numpy.`, empty after `from math import *`). */
export function pythonCall(bare: string, prefix: string): PythonCall {
  const isNumpy = /^(?:np|numpy)\.$/.test(prefix);
  const numpyImport = prefix === 'numpy.' ? 'import numpy' : 'import numpy as np';
  if (isNumpy) {
    const name = NUMPY_NAMES[bare] ?? bare;
    if (NUMPY.has(name)) return { name: `${prefix}${name}`, imports: [numpyImport] };
    if (BUILT_IN.has(bare)) return { name: bare, imports: [] };
    return { name: `scipy.special.${SCIPY_NAMES[bare] ?? bare}`, imports: ['import scipy.special'] };
  }
  if (BUILT_IN.has(bare)) return { name: bare, imports: [] };
  const name = MATH_NAMES[bare] ?? bare;
  if (MATH.has(name)) return { name: `${prefix}${name}`, imports: prefix === 'math.' ? ['import math'] : [] };
  if (NUMPY.has(bare)) return { name: `np.${bare}`, imports: ['import numpy as np'] };
  return { name: `scipy.special.${SCIPY_NAMES[bare] ?? bare}`, imports: ['import scipy.special'] };
}

const SCIPY_NAMES: Readonly<Record<string, string>> = { lgamma: 'gammaln' };
