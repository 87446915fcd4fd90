/** Random expressions in the syntax of one language, from a seed: what the recorded values are values of. */
export const POINTS = [
  { x: 0.375, y: 1.75 },
  { x: -1.25, y: 0.5 },
];

function random(seed) {
  let state = seed >>> 0;
  return () => {
    // xorshift32 (Marsaglia, Journal of Statistical Software 8, 2003).
    state ^= state << 13;
    state >>>= 0;
    state ^= state >>> 17;
    state ^= state << 5;
    state >>>= 0;
    return state / 2 ** 32;
  };
}

const FLOATS = { c: ['1.0', '2.5', '.5', '3.', '1e-1', '0x1.8p1', '7.25e0'], cpp: ['1.0', '2.5', '.5', '3.', '1e-1', "1'000.5", '0x1.8p1'], rust: ['1.0_f64', '2.5f64', '0.5_f64', '3f64', '1e-1f64', '7.25_f64', '1_0.5f64'], java: ['1.0', '2.5', '.5', '3.', '1e-1', '0x1.8p1', '7.25d'], python: ['1.0', '2.5', '.5', '3.', '1e-1', '1_0.5'], javascript: ['1.0', '2.5', '.5', '3.', '1e-1', '1_0.5', '0x10'] };
const CALLS = {
  c: ['sin(#)', 'exp(#)', 'cos(#)', 'tanh(#)', 'fabs(#)', 'pow(#, 2)', 'pow(#, 3.0)', 'fma(#, x, #)', 'expm1(#)', 'atan2(#, y)', 'hypot(#, y)', 'cbrt(#)', 'sqrt(fabs(#))', '(double)(#)', 'log1p(fabs(#))', '(x < y ? # : #)', '(!(x > 0.0) && y > 1.0 ? # : #)', 'ldexp(#, 2)'],
  cpp: ['std::sin(#)', 'exp(#)', 'std::cos(#)', 'std::abs(#)', 'std::pow(#, 2)', 'std::fma(#, x, #)', 'std::expm1(#)', 'std::atan2(#, y)', 'std::cbrt(#)', 'static_cast<double>(#)', 'double(#)', '(x < y || y < 0 ? # : #)', 'std::hypot(#, y)'],
  rust: ['(#).sin()', '(#).exp()', 'f64::cos(#)', '(#).abs()', '(#).powi(2)', 'x.powi(3)', '(#).powf(2.0)', '(#).mul_add(x, #)', '(#).exp_m1()', '(#).atan2(y)', '(#).cbrt()', '(#).tanh()', '(7 / 2) as f64', '(if x < y { # } else { # })', '(#).recip()', '(#).abs().ln_1p()', 'x.hypot(#)', '(#).to_radians()'],
  java: ['Math.sin(#)', 'Math.exp(#)', 'Math.cos(#)', 'Math.abs(#)', 'Math.pow(#, 2)', 'Math.fma((double)(#), x, (double)(#))', 'Math.expm1(#)', 'Math.atan2(#, y)', 'Math.cbrt(#)', '(double) (#)', '(x < y ? # : #)', 'Math.hypot(#, y)', 'Math.toRadians(#)', 'Math.log1p(Math.abs(#))'],
  python: ['math.sin(#)', 'math.exp(#)', 'math.cos(#)', 'abs(#)', '(#)**2', 'x**2', 'math.pow(#, 2)', 'math.expm1(#)', 'math.atan2(#, y)', 'math.tanh(#)', 'float(#)', '(# if x < y else #)', 'math.hypot(#, y)', '(# if 0 < y < 1 else #)', '(# if not x > 0 or y > 1 else #)', '(7//2)', '(-7//2)', 'math.radians(#)', '2**-x', '-x**2'],
  javascript: ['Math.sin(#)', 'Math.exp(#)', 'Math.cos(#)', 'Math.abs(#)', '(#)**2', 'x**2', 'Math.pow(#, 2)', 'Math.expm1(#)', 'Math.atan2(#, y)', 'Math.cbrt(#)', '(x < y ? # : #)', 'Math.hypot(#, y)', 'Math.log1p(Math.abs(#))', '2**-x'],
};
const MIXED = new Set(['c', 'cpp', 'java', 'python', 'javascript']);

export function expressions(language, count, seed) {
  const next = random(seed);
  const pick = (list) => list[Math.floor(next() * list.length)];
  const literal = () => (MIXED.has(language) && next() < 0.55 ? pick(['1', '2', '3', '5', '7', '10']) : pick(FLOATS[language]));
  const primary = (depth) => {
    const roll = next();
    if (roll < 0.3 || depth <= 0) return next() < 0.5 ? pick(['x', 'y']) : literal();
    if (roll < 0.5) return `(${sum(depth - 1)})`;
    return pick(CALLS[language]).replaceAll('#', () => sum(depth - 1));
  };
  const divisor = (depth) => {
    const roll = next();
    if (roll < 0.5 || depth <= 0) return roll < 0.25 ? pick(['x', 'y']) : literal();
    return `(${pick(['x', 'y'])}${pick([' + ', '*'])}${literal()})`;
  };
  const factor = (depth) => (next() < 0.15 ? `-${primary(depth)}` : primary(depth));
  const term = (depth) => {
    let text = factor(depth);
    while (next() < 0.4) text += next() < 0.5 ? pick(['*', ' * ']) + factor(depth) : pick(['/', ' / ']) + divisor(depth);
    return text;
  };
  const sum = (depth) => {
    let text = term(depth);
    while (next() < 0.4) text += pick([' + ', ' - ', '+', '- ']) + term(depth);
    return text;
  };
  return Array.from({ length: count }, () => sum(3));
}
