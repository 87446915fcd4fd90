/** Emitted C over every float of an interval, compiled once with each sum and product rounded by itself and once fused: the worst errors against a reference in double precision. */
import { runUnits } from './compile.ts';

export interface FloatRun {
  /** Emitted C with one function of a float. */
  readonly code: string;
  readonly name: string;
  /** C expression in double `x`, right to 2^-marginBits of its size. */
  readonly reference: string;
  /** Of the interval: whole numbers, ratios, `inf`, `-inf`. */
  readonly low: string;
  readonly high: string;
  readonly measure: 'absolute' | 'relative' | 'ulp';
  /**
   * The reference's own relative error is at most 2^-marginBits; it is added to every error seen. For glibc's double functions its manual lists
   * known maximum errors of a few units of the 53rd bit ("Errors in Math Functions", from memory); 48 leaves a factor of 16.
   */
  readonly marginBits: number;
  /** The function grows beyond all floats: nothing is looked at beyond half the largest one. */
  readonly grows?: boolean;
}

export interface SeenErrors {
  /** In the measure, the reference's margin included; of the two compilations the worse. */
  readonly worst: number;
  readonly at: number;
  readonly separate: number;
  readonly fused: number;
  /** Largest absolute error where |f| is below the smallest normal number; measured apart where the measure is relative. */
  readonly subnormal: number;
  readonly floats: number;
  readonly seconds: number;
}

const end = (t: string): string => (t === 'inf' ? 'INFINITY' : t === '-inf' ? '-INFINITY' : t.replace(/^(-?\d+)(?:\/(\d+))?$/, (_, a: string, b?: string) => `${a}.0/${b ?? '1'}.0`));

const UNITS = {
  absolute: 'const double unit = 1;',
  relative: 'const double unit = 1/fabs(f);',
  ulp: 'uint64_t bits; memcpy(&bits, &f, 8); int e = (int)(bits >> 52 & 2047) - 1023; if (e < -126) e = -126; bits = (uint64_t)(1023 + 23 - e) << 52; double unit; memcpy(&unit, &bits, 8);',
} as const;

/** The program prints: worst separate, its place, worst fused, its place, worst below the smallest normal number, floats. */
function mainProgram({ reference, low, high, measure, marginBits, grows = false }: FloatRun, every: number): string {
  const below = measure === 'relative' ? 'if (fabs(f) < 0x1p-126) { const double a = fmax(fabs((double)s - f), fabs((double)m - f)); if (!(a <= small)) small = a; if (f == 0 && (s != 0 || m != 0)) small = INFINITY; return; }' : '';
  return `#include <float.h>
#include <math.h>
#include <stdint.h>
#include <stdio.h>
#include <string.h>
float emitted_separate(float x);
float emitted_fused(float x);
static inline double reference(double x) { return ${reference}; }
static double worst[2], small; static float where[2]; static unsigned long count;
static inline void look(float x) {
  const double f = reference(x);
  ${grows ? 'if (!(fabs(f) <= 0x1p127)) return;' : ''}
  const float s = emitted_separate(x), m = emitted_fused(x);
  count++;
  ${below}
  ${UNITS[measure]}
  const double margin = fabs(f) * 0x1p-${marginBits};
  const double a = (fabs((double)s - f) + margin) * unit, b = (fabs((double)m - f) + margin) * unit;
  if (!(a <= worst[0])) { worst[0] = a; where[0] = x; }
  if (!(b <= worst[1])) { worst[1] = b; where[1] = x; }
}
static float from_bits(uint32_t b) { float v; memcpy(&v, &b, 4); return v; }
static uint32_t to_bits(float v) { uint32_t b; memcpy(&b, &v, 4); return b; }
/* Every float of [low, high] with the sign of s, 0 <= low <= high in magnitude. */
static void run(float low, float high, float s) { const uint32_t last = to_bits(high); for (uint32_t b = to_bits(low); b < last; b += ${every}) look(s * from_bits(b)); look(s * high); }
static float inside(double v, int up) { if (isinf(v)) return v > 0 ? FLT_MAX : -FLT_MAX; float r = (float)v; if (up && r < v) r = nextafterf(r, INFINITY); if (!up && r > v) r = nextafterf(r, -INFINITY); return r; }
int main(void) {
  const float low = inside(${end(low)}, 1), high = inside(${end(high)}, 0);
  if (low >= 0) run(low, high, 1); else if (high <= 0) run(-high, -low, -1); else { run(0, high, 1); run(0, -low, -1); }
  printf("%.17g %.9g %.17g %.9g %.17g %lu\\n", worst[0], where[0], worst[1], where[1], small, count);
  return 0;
}
`;
}

/** Every `every`-th float. Fused code only where the machine has the instruction; else both numbers are of the separate one. */
export function overFloats(run: FloatRun, every: number, fma: boolean): SeenErrors {
  const start = performance.now();
  const emitted = (as: string, flags: readonly string[]): { readonly source: string; readonly flags: readonly string[] } => ({ source: `${run.code}\nfloat ${as}(float x) { return ${run.name}(x); }\n`, flags: ['-O2', `-D${run.name}=inner_${as}`, ...flags] });
  const text = runUnits([
    emitted('emitted_separate', ['-ffp-contract=off']),
    emitted('emitted_fused', fma ? ['-ffp-contract=fast', '-march=native'] : ['-ffp-contract=fast']),
    { source: mainProgram(run, every), flags: ['-O2', '-fno-math-errno'] },
  ]);
  const [separate = NaN, at = NaN, fused = NaN, fusedAt = NaN, subnormal = NaN, floats = 0] = text.split(' ').map(Number);
  const worse = fused > separate;
  return { worst: worse ? fused : separate, at: worse ? fusedAt : at, separate, fused, subnormal, floats, seconds: (performance.now() - start) / 1000 };
}
