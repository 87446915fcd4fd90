/** One C program that times functions by turns; each lies in its own unit, so that nothing is inlined and calls cost the same. */
import { runUnits } from '../exhaustive/compile.ts';

export interface TimedPair {
  readonly name: string;
  /** Emitted C with one function of one argument. */
  readonly code: string;
  /** The library's function. */
  readonly call: string;
  readonly type: 'float' | 'double';
  readonly low: number;
  readonly high: number;
}

const ROUNDS = 7;
const ARGUMENTS = 4096;
const REPEATS = 60;

/** For each pair time of the call over time of the emitted code, of the least times seen in alternating rounds. Arguments are independent of each other; no vector code. */
export function compileTimes(pairs: readonly TimedPair[]): readonly number[] {
  const flags = ['-O2', '-fno-tree-vectorize', '-fno-builtin'];
  const units = pairs.flatMap(({ code, call, type }, k) => {
    const name = new RegExp(`(\\w+)\\(${type} x\\)`).exec(code)?.[1] ?? '';
    return [
      { source: `${code}\n${type} emitted_${k}(${type} x) { return ${name}(x); }\n`, flags: [...flags, `-D${name}=inner_${k}`] },
      { source: `#include <math.h>\n${type} library_${k}(${type} x) { return ${call}(x); }\n`, flags },
    ];
  });
  const timed = pairs.map(({ type, low, high }, k) => `extern ${type} emitted_${k}(${type}), library_${k}(${type});
static void pair_${k}(void) {
  static ${type} x[${ARGUMENTS}];
  for (int i = 0; i < ${ARGUMENTS}; i++) x[i] = (${type})(${low} + (${high} - (${low})) * next());
  double best[2] = {1e300, 1e300};
  ${type} (*const f[2])(${type}) = {emitted_${k}, library_${k}};
  for (int round = 0; round < ${ROUNDS}; round++) for (int side = 0; side < 2; side++) {
    ${type} sum = 0;
    const double start = seconds();
    for (int repeat = 0; repeat < ${REPEATS}; repeat++) for (int i = 0; i < ${ARGUMENTS}; i++) sum += f[side](x[i]);
    const double spent = seconds() - start;
    if (spent < best[side]) best[side] = spent;
    sink += sum;
  }
  printf("%.4f ", best[1] / best[0]);
}`);
  const main = `#include <stdint.h>
#include <stdio.h>
#include <time.h>
static volatile double sink;
static double seconds(void) { struct timespec t; clock_gettime(CLOCK_PROCESS_CPUTIME_ID, &t); return t.tv_sec + 1e-9 * t.tv_nsec; }
static double next(void) { static uint64_t s = 88172645463325252u; s ^= s << 13; s ^= s >> 7; s ^= s << 17; return (double)(s >> 11) * 0x1p-53; }
${timed.join('\n')}
int main(void) { ${pairs.map((_, k) => `pair_${k}();`).join(' ')} return 0; }
`;
  return runUnits([...units, { source: main, flags: ['-O2', '-D_POSIX_C_SOURCE=199309L'] }]).split(' ').map(Number);
}
