/** One small program a language, of the kind that the readers meet: a series branch beside a direct form, a constant, comments. */
export const PROGRAMS: Readonly<Record<string, string>> = {
  c: `#include <math.h>
#define EPS 1e-3
/* cable sag: s = h*(cosh(x) - 1)
 * = h*(x^2/2 + O(x^4)) */
static const double g = 9.81;
double sag(double x, int n) {
  double x2 = x*x; // square
  if (fabs(x) < EPS) return x2/2.0 + x2*x2/24.0;
  return (cosh(x) - 1.0) * g / (double)n + sinf(x);
}
`,
  cpp: `#include <cmath>
namespace line {
constexpr double g = 9.81;
template <typename T> T sinc(const T& x) { return std::abs(x) < T(1e-3) ? 1 - x*x/6 : std::sin(x)/x; }
auto half = [](double t) { return std::expm1(t) / t; };
/// \\\\f$ \\\\sin x \\\\approx x - x^3/6 \\\\f$
double p(double x) { return std::fma(x, 0.5, 1'000.25) + std::numbers::pi; }
}
`,
  python: `import numpy as np
from math import sin, pi as PI
G: float = 9.81
def sinc(x, eps=1e-3):
    """sin(x)/x = 1 - x^2/6 + O(x^4)."""
    # near zero
    y = np.where(np.abs(x) < eps, 1 - x**2/6, np.sin(x)/x)
    for k in range(3):
        y += k
    return y if x > 0 else -y
class Line:
    g = 9.81
    def f(self, t): return self.g * sin(t) / (2*PI)
`,
  javascript: `import { a as b } from "m";
const G = 9.81;
/** doc x^2 */
export function f(x) { if (Math.abs(x) < 1e-3) { return 1 - x*x/6; } return Math.sin(x) / x; }
const g = t => (1 - Math.cos(t)) / t ** 2; // one
class C { m = 1; get() { return this.m * Math.E + \`\${x*x}\`.length } }
`,
  javascriptreact: `const View = ({ x }) => <div title={"a"}>{Math.sin(x) / x}</div>;
`,
  typescript: `const G: number = 9.81;
export const f = (x: number): number => Math.abs(x) < 1e-3 ? 1 - x*x/6 : Math.sin(x)/x;
function h<T extends number>(x: T, y?: number) { const z = x as number; return Math.log1p(z!) - z; }
`,
  typescriptreact: `export function View(p: { x: number }) { const s = Math.expm1(p.x) / p.x; return <p>{s}</p>; }
`,
  rust: `use std::f64::consts::PI;
const G: f64 = 9.81;
/// sin(x)/x
fn sinc(x: f64) -> f64 {
    let x2 = x * x;
    if x.abs() < 1e-3 { 1.0 - x2 / 6.0 } else { x.sin() / x }
}
impl Line { fn f(&self, t: f32) -> f32 { self.g * t.mul_add(2.0_f32, PI as f32).exp_m1() } }
`,
  java: `import static java.lang.Math.*;
/** doc */
class Line {
  static final double G = 9.81;
  static double f(double x, int n) { double y = (double) n / 2 + (x) - x; return Math.abs(x) < 1e-3 ? 1 - x*x/6 : Math.sin(x)/x + y; }
}
`,
  csharp: `using System; using static System.Math;
namespace N { class Line { const double G = 9.81;
  /// <summary>x^2</summary>
  static double F(double x) => Math.Abs(x) < 1e-3 ? 1 - x*x/6 : Math.Sin(x)/x;
  float H(float x, int n) { var y = 1_000.5f; x += 1; return MathF.Exp(-x) * y / n; } } }
`,
  go: `package p
import ("math"; m "math")
const ( A float64 = 1.0; B = 2 )
// doc
func F(x, y float64, n int) float64 {
	z := x*x
	if math.Abs(x) < 1e-3 { return 1 - z/6 }
	return m.Sin(x)/x + float64(n)
}
`,
  julia: `"""
    sinc(x)
1 - x^2/6
"""
sinc(x) = abs(x) < 1e-3 ? 1 - x^2/6 : sin(x)/x  # direct
const g = 9.81
function h(x::Float64; a=2.5f0)
  y = 2x^2 + 3(x + 1)' #= inner #= nested =# =#
  if x < 0.1
    return 1 - x^2/2
  elseif x > 2
    y .+= 1
  end
  exp.(y) ./ √2
end
`,
  fortran: `! comment x^2
module line
  implicit none
  real(dp), parameter :: g = 9.81_dp
contains
  real(dp) function f(x) result(y)
    real(dp), intent(in) :: x
    if (abs(x) < 1e-3_dp) then
      y = 1.0_dp - x**2/6.0_dp & ! goes on
        + x**4/120
    else if (x .gt. 3.d0 .and. x < 4) then
      y = cos(x); print *, 'it''s'
    else
      y = sin(x)/x
    end if
  end function f
end module
`,
  matlab: `function y = f(x)
% comment
%{
block
%}
  x2 = x.^2;
  a = [1 2 -3; x' 4];
  if abs(x) < 1e-3
    y = 1 - x2/6 + ...
        x2.^2/120;
  else
    y = sin(x)./x; s = 'it''s';
  end
end
`,
  r: `#' doc
g <- 9.81
f <- function(x, eps = 1e-3) {
  # comment
  y <- ifelse(abs(x) < eps, 1 - x^2/6, sin(x)/x)
  if (eps > 1L) y else -y %% 2
}
`,
  glsl: `#version 450
#define PI 3.14159265
uniform float t;
// fast
float acosFast(float x) { const float c0 = 1.5707963; float r = -0.0187293; r = r * x + 0.0742610; r *= x; return fma(r, x, c0) / inversesqrt(x); }
vec3 f(vec3 p) { return p.xyz * mix(0.5, 1.0, t); }
`,
  hlsl: `static const float g = 9.81f;
float3 c : register(b0);
float f(float x) { return (x < 0.01) ? 1 - x*x/6 : sin(x) * rcp(x) + (float)1.0h; }
`,
  kotlin: `import kotlin.math.*
/** doc */
const val G = 9.81
fun f(x: Double): Double {
  val x2 = x * x // sq
  return if (abs(x) < 1e-3) 1 - x2 / 6 else sin(x) / x + 2.0.pow(x) + "\${x}".length
}
class A { fun h(t: Float) = ln1p(t) / t
  /* a /* nested */ b */ }
`,
  swift: `import Foundation
/// doc
let g = 9.81
func f(_ x: Double, n: Int) -> Double {
  let x2 = x * x
  if abs(x) < 1e-3 { return 1 - x2 / 6 }
  return sin(x) / x
    + Double.pi * Double(n) + (x > 0 ? x.squareRoot() : .pi)
}
`,
};
