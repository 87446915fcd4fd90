/** C++. Library names: ISO/IEC 14882:2024, [cmath.syn], [sf.cmath]; constants: [math.constants]. */
import * as K from './constants.ts';
import { c } from './c.ts';
import type { CodeLanguage } from './language.ts';

export const cpp: CodeLanguage = {
  ...c,
  family: 'cpp',
  grammar: 'tree-sitter-cpp',
  prefixes: ['std', 'boost.math', 'sycl', 'cuda.std', 'glm', 'std.numbers', 'numbers', 'boost.math.constants'],
  constants: {
    ...c.constants,
    pi: K.PI,
    e: K.E,
    log2e: K.LOG2_E,
    log10e: K.LOG10_E,
    inv_pi: K.INVERSE_PI,
    inv_sqrtpi: K.INVERSE_ROOT_PI,
    ln2: K.LOG_TWO,
    ln10: K.LOG_TEN,
    sqrt2: K.ROOT_TWO,
    sqrt3: K.ROOT_THREE,
    inv_sqrt3: K.INVERSE_ROOT_THREE,
    egamma: K.EULER_GAMMA,
    phi: K.GOLDEN_RATIO,
    pi_v: K.PI,
    e_v: K.E,
    log2e_v: K.LOG2_E,
    log10e_v: K.LOG10_E,
    inv_pi_v: K.INVERSE_PI,
    inv_sqrtpi_v: K.INVERSE_ROOT_PI,
    ln2_v: K.LOG_TWO,
    ln10_v: K.LOG_TEN,
    sqrt2_v: K.ROOT_TWO,
    sqrt3_v: K.ROOT_THREE,
    inv_sqrt3_v: K.INVERSE_ROOT_THREE,
    egamma_v: K.EULER_GAMMA,
    phi_v: K.GOLDEN_RATIO,
  },
  arithmetic: { ...c.arithmetic, rsqrt: 'reciprocalSquareRoot', inversesqrt: 'reciprocalSquareRoot' },
  functions: { abs: 'abs', beta: 'beta', expint: 'expIntegralEi', riemann_zeta: 'zeta' },
  floatTypes: { ...c.floatTypes, 'std::float16_t': 'binary16', 'std::float32_t': 'binary32', 'std::float64_t': 'binary64', 'std::float128_t': 'binary128', 'std::bfloat16_t': 'bfloat16' },
};
