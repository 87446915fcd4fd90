/** What is timed: the rows that users meet first, and one of each heavier kind. */
export interface TimedCase {
  readonly name: string;
  readonly request: Readonly<Record<string, unknown>>;
  /** Aim in milliseconds of engine time, warm. */
  readonly aim: number;
}

const latex = (name: string, text: string, aim: number, more: Readonly<Record<string, unknown>> = {}): TimedCase => ({ name, aim, request: { ask: 'expand', text, language: 'latex', ...more } });

export const CASES: readonly TimedCase[] = [
  latex('tan^2 x, 3 terms', String.raw`\tan^2 x`, 50, { terms: 3 }),
  latex('1/(1+x^2) with bound and needed', String.raw`\frac{1}{1+x^2}`, 50, { terms: 5, interval: ['0', '1/2'], tolerance: '1e-6' }),
  latex('Lorentz factor', String.raw`\frac{1}{\sqrt{1-v^2/c^2}}`, 50, { variable: 'v' }),
  latex('tan sin - sin tan', String.raw`\tan(\sin x) - \sin(\tan x)`, 50, { terms: 2 }),
  latex('cos x / x^2', String.raw`\frac{\cos x}{x^2}`, 50),
  latex('sqrt(1 - cos x), right', String.raw`\sqrt{1 - \cos x}`, 50, { side: 'right' }),
  latex('arcosh(1+x)', String.raw`\operatorname{arcosh}(1+x)`, 50, { terms: 3 }),
  latex('ln x at a', String.raw`\ln x`, 50, { variable: 'x', point: 'a', assume: ['a > 0'] }),
  { name: '(1-cos x)/(x x) in C', aim: 50, request: { ask: 'expand', text: '(1.0 - cos(x)) / (x*x)', language: 'c' } },
  { name: 'sqrt exp in Python', aim: 50, request: { ask: 'expand', text: 'np.sqrt(1 + x)*np.exp(-x)', language: 'python' } },
  latex('exp(sin x), 200 terms', String.raw`e^{\sin x}`, 500, { terms: 200 }),
  latex('Stirling, 12 terms', String.raw`\ln\Gamma(x)`, 200, { point: 'inf', terms: 12 }),
  latex('nested exponentials at infinity', String.raw`e^{x}\left(e^{1/x+e^{-x}+e^{-x^{2}}}-e^{1/x-e^{-e^{x}}}\right)`, 500, { point: 'inf', terms: 3 }),
];
