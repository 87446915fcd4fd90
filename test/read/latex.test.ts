/** Readings of LaTeX as authors write it. Notation and traps: from public documents, collected for this project; the meaning of each is common practice unless a source is named. */
import { describe, expect, it } from 'vitest';
import { collectMacros, readFormula, readLatex, type ReadOptions } from '../../src/read/index.ts';
import { processorTime } from '../setup.ts';
import { shown } from './shown.ts';

const reading = (text: string, options: ReadOptions = {}): string => {
  const read = readLatex(text, options);
  return read.ok ? shown(read.value) : `${read.error.code}: ${read.error.message}`;
};

const TABLE: readonly (readonly [string, string])[] = [
  // Exponents between a function's name and its argument (common practice): -1 is the inverse function.
  ['\\Phi^{-1}(p)', '@\\Phi^{-1}<0>(p)'],
  ['\\Phi^{-1}(1-p)', '@\\Phi^{-1}<0>((1 + -p))'],
  ['f^{-1}(x)', '@f^{-1}<0>(x)'],
  ['\\phi^2(t)', '@\\phi<0>(t)^2'],
  ['x(t) + x^2(t)', '(@x<0>(t) + @x<0>(t)^2)'],
  ['x^2(t+1)', '[x^2 (t + 1)]'],
  ['a^{-1}(1+x)', '[a^-1 (1 + x)]'],
  // Fractions, roots, powers.
  ['\\frac12', '{1 / 2}'],
  ['\\tfrac13x^3', '[{1 / 3} x^3]'],
  ['\\dfrac {x^2} 2', '{x^2 / 2}'],
  ['{a \\over b}', '{a / b}'],
  ['a \\over b', '{a / b}'],
  ['{n \\choose k}', 'binomial(n, k)'],
  ['\\binom{2n}{n}', 'binomial([2 n], n)'],
  ['\\sqrt[3]{x}', 'root3(x)'],
  ['\\sqrt[2]{x}', 'x^1:2'],
  ['\\sqrt2', '2^1:2'],
  ['x^{10}', 'x^10'],
  ['x^10', 'x^10'],
  ['e^\\frac{hc}{\\lambda kT}', '#e^{[h c] / [\\lambda k T]}'],
  ['e^{-x^2}', '#e^-x^2'],
  ['-x^2', '-x^2'],
  ['(-x)^2', '-x^2'],
  ['x^{y^z}', 'x^y^z'],
  ['2^{-n}', '2^-n'],
  // Products and quotients.
  ['2x(1-x)', '[2 x (1 + -x)]'],
  ['\\alpha(\\alpha-1)', '[\\alpha (\\alpha + -1)]'],
  ['\\tfrac{\\alpha(\\alpha-1)}{2!}x^2', '[{[\\alpha (\\alpha + -1)] / factorial(2)} x^2]'],
  ['n(n-1)', '[n (n + -1)]'],
  ['a(1+x)', '[a (1 + x)]'],
  ['\\hbar\\omega/k_B T', '{[\\hbar \\omega] / [k_B T]}'],
  ['v^2/2c^2', '{v^2 / [2 c^2]}'],
  ['1/2x', '[{1 / 2} x]'],
  ['a/b/c', '{{a / b} / c}'],
  ['2 \\cdot 3 \\times x', '[2 3 x]'],
  ['\\frac{1.3}{2.4}', '{13:10 / 12:5}'],
  ['1.3.5 x', '[1 3 5 x]'],
  ['1{,}000', '1000'],
  ['0.5x', '[1:2 x]'],
  ['.5', '1:2'],
  // Functions with and without brackets.
  ['\\sin x', 'sin(x)'],
  ['\\sin x \\cos y', '[sin(x) cos(y)]'],
  ['\\sin^2 x', 'sin(x)^2'],
  ['\\sin^{-1} x', 'asin(x)'],
  ['\\sin^{-2} x', 'sin(x)^-2'],
  ['\\sin x^2', 'sin(x^2)'],
  ['\\sin(x)^2', 'sin(x)^2'],
  ['\\sin 2\\pi x', 'sin([2 #pi x])'],
  ['\\ln 2\\pi', 'log([2 #pi])'],
  ['\\cos 2\\pi x/L', 'cos({[2 #pi x] / L})'],
  ['\\sin x/x', '{sin(x) / x}'],
  ['\\sin x / 2', '{sin(x) / 2}'],
  ['\\ln x\\,\\ln y', '[log(x) log(y)]'],
  ['\\ln\\ln x', 'log(log(x))'],
  ['\\sin\\frac{x}{2}\\cos x', '[sin({x / 2}) cos(x)]'],
  ['\\sin{x}', 'sin(x)'],
  ['cos(x) + exp(-x)', '(cos(x) + exp(-x))'],
  ['sin x', 'sin(x)'],
  ['\\log_{10} x', 'log10(x)'],
  ['\\log_2(x)', 'log2(x)'],
  ['\\log_b x', '{log(x) / log(b)}'],
  ['\\mathrm{erf}(x)', 'erf(x)'],
  ['\\operatorname{artanh} x', 'atanh(x)'],
  ['\\sin x e^{x}', '[sin(x) #e^x]'],
  // Special functions by letter, and the same letters as quantities.
  ['J_0(x)', 'besselJ(0, x)'],
  ['J_{\\nu+1}(x)', 'besselJ((\\nu + 1), x)'],
  ['J_0^2(x)', 'besselJ(0, x)^2'],
  ['W_{-1}(x)', 'lambertW(-1, x)'],
  ['W(x)', 'lambertW(0, x)'],
  ["\\psi'(x)", 'polygamma(1, x)'],
  ['\\psi^{(2)}(x)', 'polygamma(2, x)'],
  ['\\psi(x)', 'digamma(x)'],
  ['\\Gamma(s,x)', 'upperGamma(s, x)'],
  ['\\gamma(s,x)', 'lowerGamma(s, x)'],
  ['\\zeta(s,a)', 'hurwitzZeta(s, a)'],
  ["\\zeta'(s)", 'zetaDerivative(1, s)'],
  ['{}_2F_1(a,b;c;x)', 'hypergeometric(2, 1, a, b, c, x)'],
  ['\\operatorname{Li}_2(x)', 'polylog(2, x)'],
  ["\\operatorname{Ai}'(x)", 'airyAiPrime(x)'],
  ['\\operatorname{ber}^2 x', 'kelvinBer(0, x)^2'],
  ['K(k)', 'ellipticK(k)'],
  ['4aE(e)', '[4 a ellipticE(e)]'],
  ['F(\\phi,k)', 'ellipticF(\\phi, k)'],
  ['E_1(x)', 'expIntegralE(1, x)'],
  ['H_n', 'harmonic(n)'],
  ['T_0(1 + x)', '[T_0 (1 + x)]'],
  ['I_0(1 + \\cos x)', '[I_0 (1 + cos(x))]'],
  ['\\ln G(1+x)', 'log(barnesG((1 + x)))'],
  ['n!', 'factorial(n)'],
  ['(2n-1)!!', 'doubleFactorial(([2 n] + -1))'],
  ['(a)_n', 'pochhammer(a, n)'],
  // Unspecified functions.
  ['f(x+h)', '@f<0>((x + h))'],
  ["f'(x)", '@f<1>(x)'],
  ["y''(t)", '@y<2>(t)'],
  ['f^{(4)}(x)', '@f<4>(x)'],
  ['x(\\epsilon)', '@x<0>(\\epsilon)'],
  ['f(x,y)', '@f<0,0>(x, y)'],
  ['u(x+h) + u(x-h) = 2u + h^2 u_{xx} + O(h^4)', '(@u<0>((x + h)) + @u<0>((x + -h))) = ([2 @u<0>(x)] + [h^2 @u<2>(x)] + O(h^4))'],
  ['y(t + \\Delta t)', '@y<0>((t + \\Delta t))'],
  ['\\frac{\\partial E_n}{\\partial w} = \\frac{E_n(w + \\epsilon)}{\\epsilon}', 'd1/dw(@E_n<0>(w)) = {@E_n<0>((w + \\epsilon)) / \\epsilon}'],
  ['x(1+x)', '[x (1 + x)]'],
  // Constants.
  ['e^x', '#e^x'],
  ['\\mathrm{e}^x', '#e^x'],
  ['\\e^{x}', '#e^x'],
  ['\\left(\\frac{n}{e}\\right)^n', '{n / #e}^n'],
  ['1 + e\\cos\\theta', '(1 + [e cos(\\theta)])'],
  ['\\frac{\\sigma}{\\sqrt{\\sigma^2 + e^2}}', '{\\sigma / (\\sigma^2 + e^2)^1:2}'],
  ['e^{i\\theta}', '#e^[#i \\theta]'],
  ['e^{j\\theta}', '#e^[#i \\theta]'],
  ['\\sum_{i=1}^n i^2', 'sum(i = 1 to n, i^2)'],
  ['\\gamma_E', '#eulerGamma'],
  ['2\\pi r', '[2 #pi r]'],
  // Operators with a bound name.
  ['\\int_0^x f\\,dt', 'integral(0 to x, f dt)'],
  ['\\int_0^1 \\frac{dt}{\\sqrt{1-t^4}}', 'integral(0 to 1, {1 / (1 + -t^4)^1:2} dt)'],
  ['\\int dt\\, e^{-t}', 'integral(#e^-t dt)'],
  ['\\int_0^1 (a + t)\\,\\mathrm{d}t + c', '(integral(0 to 1, (a + t) dt) + c)'],
  ['\\int_0^1\\int_0^x t\\,dt\\,dx', 'integral(0 to 1, integral(0 to x, t dt) dx)'],
  ['\\int_0^{\\pi/2}\\frac{d\\theta}{\\sqrt{1-\\frac12\\sin^2\\theta}}', 'integral(0 to {#pi / 2}, {1 / (1 + -[{1 / 2} sin(\\theta)^2])^1:2} d\\theta)'],
  ['\\sum_{k=1}^{n}\\frac{1}{2k-1}', 'sum(k = 1 to n, {1 / ([2 k] + -1)})'],
  ['\\sum_{k\\ge 0} x^k', 'sum(k = 0 to #infinity, x^k)'],
  ['\\prod_{k=1}^n (1+kx) - 1', '(product(k = 1 to n, (1 + [k x])) + -1)'],
  ['\\frac{d}{dx}\\frac{\\sin x}{x}', 'd1/dx({sin(x) / x})'],
  ['\\frac{d^2 y}{dx^2}', 'd2/dx(@y<0>(x))'],
  ['\\frac{\\partial^2}{\\partial x\\partial y} f', 'd1/dx(d1/dy(@f<0,0>(x, y)))'],
  ['\\frac{d}{2R}', '{d / [2 R]}'],
  ['\\lim_{x\\to 0}\\frac{\\sin x}{x}', 'limit(x to 0, {sin(x) / x})'],
  // Remainders.
  ['x + O(x^3)', '(x + O(x^3))'],
  ['x - \\mathcal{O}\\left(x^3\\right)', '(x + -O(x^3))'],
  ['\\mathcal O(x^3)', 'O(x^3)'],
  ['{\\cal O}(x^3)', 'O(x^3)'],
  ['\\order{x^3}', 'O(x^3)'],
  ['x + o(x)', '(x + o(x))'],
  ['x + \\cdots o(x^3)', '(x + ... + o(x^3))'],
  ['x + O(x^2) + \\cdots', '(x + O(x^2) + ...)'],
  ['x - ...', '(x + -...)'],
  // Bars.
  ['|x|', 'abs(x)'],
  ['\\left|x-1\\right|', 'abs((x + -1))'],
  ['||x|-1|', 'abs((abs(x) + -1))'],
  ['2|x|y', '[2 abs(x) y]'],
  ['\\lvert x \\rvert', 'abs(x)'],
  // Relations.
  ['a = b \\approx c', 'a = b about c'],
  ['a ~= b', 'a about b'],
  ['x \\not= y', 'x != y'],
  ['f \\stackrel{?}{=} g', 'f = g'],
  ['x \\to \\infty', 'x to #infinity'],
  ['v \\ll c', 'v ll c'],
  // Typesetting.
  ['\\displaystyle\\sum\\limits_{k=1}^n k', 'sum(k = 1 to n, k)'],
  ['\\color{red}{x} + \\textcolor{blue}{y}', '(x + y)'],
  ['\\bigl(1+x\\bigr)\\Big/2', '{(1 + x) / 2}'],
  ['x\\;\\!\\,y', '[x y]'],
  ['\\boxed{x^2}', 'x^2'],
  ['x_{\\max}', 'x_\\max'],
  ['v_\\mathrm{max} + v_{\\text{max}}', '(v_{max} + v_{max})'],
  ['u^{n+1}_i', 'u_i^(n + 1)'],
  ['y^{(4)}_i', "y''''_i"],
  ['x^*', 'x^*'],
  ['E_{\\text{gross}}^{\\text{mix}}(x)', '@E_{gross}^{\\text{mix}}<0>(x)'],
  ['\\text{SVF} = 1', '\\text{SVF} = 1'],
  ['a_i X^i', '[a_i X^i]'],
  ['e^{ik x_i}', '#e^[#i k x_i]'],
  ['x \\to 0^+', 'x to 0^+'],
  ['f^\\prime(x)', '@f<1>(x)'],
  ['{\\rm erf}(x)', 'erf(x)'],
  ['\\int_0^1 x\\, {\\rm d}x', 'integral(0 to 1, x dx)'],
  ['\\int_0^1 x \\dd{x}', 'integral(0 to 1, x dx)'],
  ['\\dv[2]{y}{t}', 'd2/dt(@y<0>(t))'],
  ['\\underbrace{1+x}_{\\text{small}}', '(1 + x)'],
  ['\\mathop{\\mathrm{sech}} x', 'sech(x)'],
  ["|\\vec r - \\vec r\\,'|", "norm<>((symbol<\\vec{r}>() + -symbol<\\vec{r}'>()))"],
  ['H^{(1)}_\\nu(x)', 'hankel1(\\nu, x)'],
  ['k_{B}T', '[k_B T]'],
  ['\\varepsilon + \\epsilon', '(\\epsilon + \\epsilon)'],
  ['\\hat{x} + \\dot\\theta', '(\\hat{x} + \\dot{\\theta})'],
  ['\\begin{cases} x & x > 0 \\\\ -x & \\text{otherwise} \\end{cases}', 'cases(x if x > 0; -x if else)'],
  // Unicode, doubled backslashes, punctuation.
  ['x² + x⁻¹ + √x + ½', '(x^2 + x^-1 + x^1:2 + {1 / 2})'],
  ['θ − π', '(\\theta + -#pi)'],
  ['\\\\frac{1}{2} + \\\\sin x', '({1 / 2} + sin(x))'],
  ['$\\sin x$', 'sin(x)'],
  ['\\[ \\sin x \\]', 'sin(x)'],
  ['x = y.', 'x = y'],
  ['\\vec{r} \\cdot \\vec{s}', 'dot<>(symbol<\\vec{r}>(), symbol<\\vec{s}>())'],
  ['|\\mathbf{r} - \\mathbf{s}|', 'norm<>((symbol<\\mathbf{r}>() + -symbol<\\mathbf{s}>()))'],
];

describe('readLatex', () => {
  it.each(TABLE)('%s', (text, expected) => {
    expect(reading(text)).toBe(expected);
  });

  it('reads a Fourier-like power x^2m by the index of the text', () => {
    expect(reading('\\sum_{m=0}^\\infty \\frac{x^2m}{(2m)!}')).toBe('sum(m = 0 to #infinity, {x^[2 m] / factorial([2 m])})');
    expect(reading('x^2m')).toBe('[x^2 m]');
  });

  it('takes names of the request as quantities', () => {
    expect(reading('e^2 + e', { symbols: ['e'] })).toBe('(e^2 + e)');
    expect(reading('f(x)', { symbols: ['f'] })).toBe('[f x]');
    expect(reading('k(x+1)', { functions: ['k'] })).toBe('@k<0>((x + 1))');
    expect(reading('i + 1', { symbols: ['i'] })).toBe('(i + 1)');
  });
});

describe('what stands beside a formula', () => {
  const CONDITIONS: readonly (readonly [string, string, string, string])[] = [
    ['\\tanh x = x - \\cdots \\qquad (|x| < \\pi/2)', 'tanh(x) = (x + -...)', 'abs(x) < {#pi / 2}', ''],
    ['\\cot x = \\frac1x + \\ldots \\quad \\left[0 < x < \\pi\\right]', 'cot(x) = ({1 / x} + ...)', '0 < x < #pi', ''],
    ['y:\\ y^{5}+y=x\\ (x\\to\\infty)', '(y^5 + y) = x', 'x to #infinity', ''],
    ['\\sin x = x + o(x) \\quad \\text{as} \\quad x \\to 0', 'sin(x) = (x + o(x))', 'x to 0', 'as'],
    ['x = y, \\quad x^2 < \\frac{\\pi^2}{4}', 'x = y', 'x^2 < {#pi^2 / 4}', ''],
    ['J_0(x) \\approx 1 \\implies J_0(0) = 1', 'besselJ(0, x) about 1', 'besselJ(0, 0) = 1', ''],
    ['x \\text{ (exponent)}', 'x', '', '(exponent)'],
  ];
  it.each(CONDITIONS)('%s', (text, expression, conditions, remarks) => {
    const read = readFormula(text, 'latex');
    expect(read.ok).toBe(true);
    if (!read.ok) return;
    expect(shown(read.value.expression)).toBe(expression);
    expect(read.value.conditions.map(shown).join('; ')).toBe(conditions);
    expect(read.value.remarks.join('; ')).toBe(remarks);
  });

  it('names the unknown before a colon', () => {
    const read = readFormula('y:\\ y^3 + y = x', 'latex');
    expect(read.ok && read.value.unknown).toBe('y');
  });
});

describe('macros', () => {
  const definitions = collectMacros(String.raw`
    \newcommand{\half}{\tfrac12} \newcommand\ord[1]{\mathcal{O}\left(#1\right)} \def\pair#1#2{#1^{#2}}
    \DeclareMathOperator{\arth}{artanh} \let\ep\varepsilon \newcommand{\scaled}[2][3]{#1 #2} \newcommand{\loop}{\loop}`);
  it.each([
    ['\\half x', '[{1 / 2} x]'],
    ['\\ord{x^3}', 'O(x^3)'],
    ['\\pair{x}{2}', 'x^2'],
    ['\\pair x 2', 'x^2'],
    ['\\arth x', 'atanh(x)'],
    ['\\ep + 1', '(\\epsilon + 1)'],
    ['\\scaled{x}', '[3 x]'],
    ['\\scaled[4]{x}', '[4 x]'],
    ['\\ord{\\half x}', 'O([{1 / 2} x])'],
    ['\\loop', 'unreadable: The macro \\loop calls itself; give it a definition that ends.'],
  ])('%s', (text, expected) => {
    expect(reading(text, { macros: definitions })).toBe(expected);
  });

  it('maps what an argument holds to its own place, and the rest to the use', () => {
    const text = '1 + \\ord{x^3}';
    const read = readLatex(text, { macros: definitions });
    expect(read.ok).toBe(true);
    if (!read.ok || read.value.kind !== 'sum') return;
    const order = read.value.terms[1];
    expect(order?.kind === 'order' && order.span && text.slice(order.span.start, order.span.end)).toBe('\\ord{x^3}');
    const argument = order?.kind === 'order' ? order.argument : undefined;
    expect(argument?.span && text.slice(argument.span.start, argument.span.end)).toBe('x^3');
  });
});

describe('what cannot be read', () => {
  it.each([
    ['\\foo{x}', 'unknown-function', 0, 4],
    ['\\frac{1}{', 'unreadable', 8, 9],
    ['', 'unreadable', 0, 0],
    ['x +', 'unreadable', 2, 3],
    ['(x', 'unreadable', 0, 1],
    ['x)', 'unreadable', 1, 2],
    ['\\sin', 'unreadable', 0, 4],
    ['x = ', 'unreadable', 2, 3],
    ['\\frac12 \\pm x', 'unreadable', 8, 11],
    ['x^', 'unreadable', 1, 2],
    ['\\sin\\theta/2', 'unreadable', 10, 11],
    ['W(1+x)', 'unreadable', 0, 1],
    ['\\operatorname{foo}(x)', 'unknown-function', 0, 18],
    ['\\int_0^1 x', 'unreadable', 0, 4],
    ['\\sum_{k} k', 'unreadable', 0, 4],
    ['f^{(n)}(a)', 'unreadable', 0, 1],
    ['\\frac{d^n}{dx^n} f', 'unreadable', 6, 7],
    ['{sin}(x)', 'unreadable', 1, 2],
    ['\\begin{pmatrix} 1 & 2 \\end{pmatrix}', 'unreadable', 0, 15],
  ])('%s', (text, code, start, end) => {
    const read = readLatex(text);
    expect(read.ok).toBe(false);
    if (read.ok) return;
    expect([read.error.code, read.error.start, read.error.end]).toEqual([code, start, end]);
    // One plain sentence that says what to do next.
    expect(read.error.message).toMatch(/^[^\n]{20,160}\.$/);
  });

  it.each(['(', '{', '[', '\\left(', '\\frac{', '\\sqrt', '\\mathrm{', '|', '-', '1/', 'x^', 'e^{', '\\sin ', 'x!', "x'", 'K(', '\\int ', 'a_', '\\text{', '\\begin{cases}', 'f(x)', '\\binom', '{}_'])('answers 100 000 characters of %s at once', (piece) => {
    const text = piece.repeat(Math.ceil(100_000 / piece.length));
    const begin = processorTime();
    const read = readLatex(text);
    expect(processorTime() - begin).toBeLessThan(2000);
    if (!read.ok) expect(read.error.message).toMatch(/^[^\n]{20,160}\.$/);
  });
});
