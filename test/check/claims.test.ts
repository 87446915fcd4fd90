import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { check, type CheckParts } from '../../src/check/index.ts';
import { budget } from '../../src/outcome.ts';
import type { Finding } from '../../src/protocol.ts';

function findings(text: string, parts: Partial<CheckParts> = {}): readonly Finding[] {
  const outcome = check({ text, language: 'latex', ...parts }, budget(10_000));
  if (!outcome.ok) throw new Error(outcome.error.message);
  return outcome.value.findings;
}
const verdictOf = (list: readonly Finding[]): string => (list.some((f) => f.verdict === 'fails') ? 'fails' : list.some((f) => f.verdict === 'holds') ? 'holds' : list.length > 0 ? 'undecided' : 'none');
/** Verdict, what is underlined, what the fix puts there. */
function failing(text: string, parts: Partial<CheckParts> = {}): { readonly under: string; readonly fixed: string | null } {
  const [found] = findings(text, parts).filter((f) => f.verdict === 'fails');
  if (!found) throw new Error(`nothing fails: ${JSON.stringify(findings(text, parts))}`);
  return { under: text.slice(found.start, found.end), fixed: found.fix && text.slice(0, found.fix.start) + found.fix.text + text.slice(found.fix.end) };
}

interface Row {
  readonly id: string;
  readonly kind: string;
  readonly text: string;
  readonly language: string;
  readonly variable: string;
  readonly point: string;
  readonly correct: boolean;
  readonly of?: string;
}
/** Formulas as they stand in public documents; the wrong ones are wrong in the wild. */
const ROWS = readFileSync(new URL('./data/claims.jsonl', import.meta.url), 'utf8')
  .trim()
  .split('\n')
  .map((line) => JSON.parse(line) as Row)
  .filter((row) => row.kind === 'claim');

/** Nothing in these texts says which function is meant: an unknown root, the solution of an equation that is not shown. */
const WITHOUT_FUNCTION = ['c269', 'c336', 'c337'];

describe('claims of public documents', () => {
  const verdicts = ROWS.map((row) => ({ row, verdict: verdictOf(findings(row.text, { language: row.language, variable: row.variable, point: row.point, ...(row.of === undefined ? {} : { of: row.of }) })) }));
  it('no true claim fails', () => {
    expect(verdicts.filter((v) => v.row.correct && v.verdict === 'fails').map((v) => v.row.id)).toEqual([]);
  });
  it('every false claim fails whose function the text names', () => {
    expect(verdicts.filter((v) => !v.row.correct && v.verdict !== 'fails').map((v) => v.row.id)).toEqual(['c336']);
  });
  it('at least 95 % of the true claims hold', () => {
    const all = verdicts.filter((v) => v.row.correct);
    const open = all.filter((v) => v.verdict !== 'holds').map((v) => v.row.id);
    expect(open.filter((id) => !WITHOUT_FUNCTION.includes(id)).length).toBeLessThanOrEqual(1);
    expect(1 - open.length / all.length).toBeGreaterThanOrEqual(0.95);
  });
});

describe('a left side that is only a name', () => {
  it.each(WITHOUT_FUNCTION)('%s asked alone is undecided with that reason', (id) => {
    const row = ROWS.find((r) => r.id === id);
    const found = row ? findings(row.text, { language: row.language, variable: row.variable, point: row.point }) : [];
    expect(found.map((f) => [f.verdict, f.severity])).toEqual([['undecided', 'hint']]);
    expect(found[0]?.reason).toContain('is only a name');
  });
  it.each([
    'A perturbation expansion gives $y = 1 - \\epsilon t + \\frac12\\epsilon^2 t^2$.',
    'The root is $x(\\epsilon) = -2 + \\frac19 \\epsilon$.',
    'For $v \\ll c$, $E = m c^2 + \\frac{1}{3} m v^2$.',
  ])('%s is listed', (text) => {
    expect(findings(text).map((f) => f.verdict)).toEqual(['undecided']);
  });
  it.each([
    'The position is $x = x_0 + v t$ and $s = ut + \\frac12 a t^2$.',
    'The field $D = \\epsilon E + P$ is measured.',
    'Let $f(x) = 1 - x + x^2$ and $g(x) = x^3$.',
    'A solution is sought as $y = y_0 + \\epsilon y_1 + \\epsilon^2 y_2 + \\dots$.',
  ])('%s defines and claims nothing', (text) => {
    expect(findings(text)).toEqual([]);
  });
  it('is resolved where its definition stands before', () => {
    expect(verdictOf(findings('Let $E = m c^2/\\sqrt{1-v^2/c^2}$. For $v \\ll c$, $E = m c^2 + \\frac{1}{2} m v^2$'))).toBe('holds');
  });
});

describe('remainder marks', () => {
  it.each([
    ['\\sin x = x - \\frac{x^3}{6} + O(x^5)', 'holds', 'none'],
    ['\\sin x = x - \\frac{x^3}{6} + O(x^4)', 'holds', 'hint'],
    ['\\sin x = x - \\frac{x^3}{6} + O(x^6)', 'fails', 'error'],
    ['\\sin x = x - \\frac{x^3}{6} + o(x^4)', 'holds', 'none'],
    ['\\sin x = x - \\frac{x^3}{6} + o(x^5)', 'fails', 'error'],
    ['\\sin x = x - \\frac{x^3}{6} + O(x^3)', 'holds', 'hint'],
    ['\\cos x \\approx 1 - \\frac{x^2}{2}', 'holds', 'none'],
    ['\\cos x = 1 - \\frac{x^2}{2}', 'holds', 'hint'],
    ['\\cos x \\sim 1 - \\frac{x^2}{2} + \\frac{x^4}{24}', 'holds', 'none'],
    ['x\\left(1 - \\frac{x^2}{6}\\left(1 - \\frac{x^2}{20}\\right)\\right) \\approx \\sin x', 'holds', 'none'],
    ['\\frac{\\sin x}{x} = \\frac{x + O(x^3)}{x}', 'holds', 'none'],
    ['\\sin x = x(1 - x^2/6 + O(x^4))', 'holds', 'none'],
  ])('%s: %s', (claim, verdict, severity) => {
    const [first] = findings(`\\[ ${claim} \\]`);
    expect(first).toMatchObject({ verdict, severity });
  });
  it('identities and equations to be solved are no claims', () => {
    for (const text of ['\\sin^2 x + \\cos^2 x = 1', '(1+x)^2 = 1 + 2x + x^2', 'y^5 + y = x', 'E = mc^2', 'f(x) = 3x + 1', 'a^2 + b^2 = c^2', '\\cos x = \\frac{1}{2}']) expect(findings(`\\[ ${text} \\]`), text).toEqual([]);
  });
  it('a tilde in running text may mean "about"', () => {
    expect(verdictOf(findings('Here $\\sin x \\sim 2x$.'))).not.toBe('fails');
  });
});

describe('the wrong piece and its repair', () => {
  it.each([
    ['\\[ \\sin x = x + \\frac{x^3}{6} + O(x^5) \\]', '+', '\\[ \\sin x = x - \\frac{x^3}{6} + O(x^5) \\]'],
    ['\\[ \\tan x = x + \\frac{x^3}{3} + \\frac{2}{17}x^5 + \\dots \\]', '17', '\\[ \\tan x = x + \\frac{x^3}{3} + \\frac{2}{15}x^5 + \\dots \\]'],
    ['\\[ e^x = 1 + x + \\frac{x^2}{2!} + \\frac{x^3}{3} + \\cdots \\]', '3', '\\[ e^x = 1 + x + \\frac{x^2}{2!} + \\frac{x^3}{3!} + \\cdots \\]'],
    ['\\[ \\cos x = 1 - \\frac{x^3}{2} + \\frac{x^4}{24} + O(x^6) \\]', '3', '\\[ \\cos x = 1 - \\frac{x^2}{2} + \\frac{x^4}{24} + O(x^6) \\]'],
    ['\\[ \\sin x = x - \\frac{x^3}{6} + \\mathcal{O}(x^6) \\]', '6', '\\[ \\sin x = x - \\frac{x^3}{6} + \\mathcal{O}(x^5) \\]'],
    ['\\[ \\frac{1}{\\sqrt{1-v^2/c^2}} = 1 + \\frac{v^2}{3c^2} + O(v^4) \\]', '3', '\\[ \\frac{1}{\\sqrt{1-v^2/c^2}} = 1 + \\frac{v^2}{2c^2} + O(v^4) \\]'],
    ['\\[ \\operatorname{erf} x = \\frac{2}{\\pi}\\left(x - \\frac{x^3}{3} + \\cdots\\right) \\]', null, null],
    ['\\[ e^{\\sin x} = 1 + x + \\frac{1}{2}x^2 - \\frac{1}{6}x^3 - \\frac{1}{8}x^4 + \\cdots \\]', '\\frac{1}{6}', '\\[ e^{\\sin x} = 1 + x + \\frac{1}{2}x^2 - \\frac{1}{8}x^4 + \\cdots \\]'],
    ['// sin(x) ≈ x − x³/5 + x⁵/120\n', '5', '// sin(x) ≈ x − x³/6 + x⁵/120\n'],
  ])('%s', (text, under, fixed) => {
    const language = text.startsWith('//') ? 'c' : 'latex';
    const found = failing(text, { language });
    if (under !== null) expect(found).toEqual({ under, fixed });
  });
  it('a fix applied holds', () => {
    const { fixed } = failing('\\[ \\ln(1+x) = x - \\frac{x^2}{2} + \\frac{x^3}{4} - \\cdots \\]');
    expect(verdictOf(findings(fixed ?? ''))).toBe('holds');
  });
});

describe('decimals', () => {
  it.each([
    ['\\exp(x) \\approx 1 + x + 0.5x^2 + 0.167x^3', 'holds'],
    ['\\exp(x) \\approx 1 + x + 0.5x^2 + 0.17x^3', 'holds'],
    ['\\exp(x) \\approx 1 + x + 0.5x^2 + 0.16x^3', 'fails'],
    ['\\exp(x) \\approx 1 + x + 0.5x^2 + 0.166x^3', 'fails'],
    ['\\frac{1}{\\Gamma(x)} \\approx x + 0.5772x^2', 'holds'],
  ])('%s %s', (claim, verdict) => {
    expect(verdictOf(findings(`\\[ ${claim} \\]`))).toBe(verdict);
  });
});

describe('general terms', () => {
  it.each([
    ['e^x = \\sum_{n=0}^{\\infty} \\frac{x^n}{n!}', 'holds'],
    ['\\cos x = \\sum_{n=0}^{\\infty} \\frac{(-1)^n x^{2n}}{(2n)!}', 'holds'],
    ['\\ln(1+x) = \\sum_{n=1}^{\\infty} \\frac{(-1)^{n-1}}{n} x^n', 'holds'],
    ['\\arctan x = \\sum_{n=0}^\\infty \\frac{(-1)^n x^{2n+1}}{2n+1}', 'holds'],
    ['\\frac{1}{\\sqrt{1-4x}} = \\sum_{n=0}^\\infty \\binom{2n}{n} x^n', 'holds'],
    ['\\ln(1+x) = \\sum_{n=1}^{\\infty} \\frac{(-1)^{n}}{n} x^n', 'fails'],
    ['\\sin x = \\sum_{n=0}^{\\infty} \\frac{(-1)^n x^{2n+1}}{(2n)!}', 'fails'],
    ['\\sin x = x - \\frac{x^3}{3!} + \\cdots + \\frac{(-1)^n x^{2n+1}}{(2n+1)!} + \\cdots', 'holds'],
    ['\\tan x = x + \\frac{x^3}{3} + \\cdots + \\frac{2^{2n}(2^{2n}-1)|B_{2n}| x^{2n-1}}{(2n)!} + \\cdots', 'undecided'],
  ])('%s %s', (claim, verdict) => {
    expect(verdictOf(findings(`\\[ ${claim} \\]`))).toBe(verdict);
  });
});

describe('documents', () => {
  it('a name is resolved by its definition, before or after', () => {
    const text = 'Let $$ T(x) = \\sqrt{1 + x^2} $$ be the length. For small $x$ we have\n$$ T(x) = 1 + \\frac{x^2}{2} + O(x^4) $$ and $T(x) \\approx 1 + \\frac{x^2}{3}$.';
    const found = findings(text, { language: 'markdown' }).filter((f) => f.verdict !== 'holds' || f.severity !== 'none');
    expect(found.map((f) => [f.verdict, text.slice(f.start, f.end)])).toEqual([['fails', '3']]);
  });
  it('a name without a definition is undecided, as a hint', () => {
    expect(findings('$$ R = 1 + \\frac{x}{2} + O(x^2) $$', { language: 'markdown' })).toMatchObject([{ verdict: 'undecided', severity: 'hint' }]);
  });
  it('aligned rows, labels and what cannot be read', () => {
    const text = '\\begin{align}\n\\sin x &= x - \\frac{x^3}{6} + O(x^5) \\label{eq:sine} \\\\\n\\cos x &= 1 - x^2 + O(x^4) \\label{eq:cosine}\n\\end{align}\n$\\frac{1}{$ and $x ^ ^ 2$';
    const outcome = check({ text, language: 'latex' }, budget(5000));
    expect(outcome.ok && outcome.value.findings.map((f) => [f.verdict, f.label])).toEqual([['holds', 'eq:sine'], ['fails', 'eq:cosine']]);
    expect(outcome.ok && outcome.value.unread.length).toBeGreaterThan(0);
  });
  it('comments in code, notes that skip', () => {
    expect(findings('/* small angle: cos(x) ~= 1 - x*x/2 */\n', { language: 'c' })).toMatchObject([{ verdict: 'holds' }]);
    expect(findings('# leading-order: skip\n# cos(x) ~= 1 - x*x/3\n', { language: 'python' })).toEqual([]);
  });
  it('a formula that goes on over the lines of a comment', () => {
    const text = '/* sinh(x) = (exp(x) - 1/exp(x))/2\n *         = x + x^3/6 + o(x^5)\n */\n';
    expect(findings(text, { language: 'c' }).filter((f) => f.verdict === 'fails').map((f) => text.slice(f.start, f.end))).toEqual(['5']);
    expect(findings('// cos(x) ~= 1 - x^2/2\n//         + x^4/24\n', { language: 'c' })).toMatchObject([{ verdict: 'holds' }]);
  });
  it('bad input ends at once', () => {
    for (const text of ['', '$', '\\[ = \\]', '\\[ x = + O( \\]', `$${'('.repeat(100_000)}$`, '\\[ \\sin x = \\dots \\]', '\\[ O(x) = O(x^2) \\]']) expect(check({ text, language: 'latex' }, budget(2000)).ok, text.slice(0, 30)).toBe(true);
  });
  it('variable, point and function of the request', () => {
    expect(verdictOf(findings('1 + \\frac{h}{2} + O(h^2)', { of: '\\sqrt{1+h}', variable: 'h' }))).toBe('holds');
    expect(verdictOf(findings('h(x) = 1 - \\frac{x^2}{2} + O(x^4)', { of: 'derivative of sin(x)', variable: 'x' }))).toBe('holds');
    const outcome = check({ text: 'x', language: 'latex', variable: '((' }, budget(1000));
    expect(outcome).toMatchObject({ ok: false, error: { code: 'bad-request' } });
  });
});

describe('tolerances stated beside a claim', () => {
  // Largest errors by the alternating series: 0.5^5/120 = 2.604e-4, 0.5^2/2 = 0.125 (1 against cos 0.5 = 0.87758: 13.9 %).
  it.each([
    ['For $|x| < 0.5$ we have $\\sin x \\approx x - \\frac{x^3}{6}$ with an error below $3\\cdot 10^{-4}$ when $|x| < 0.5$.', 'holds', null],
    ['$\\sin x \\approx x - \\frac{x^3}{6}$ with an error below $10^{-4}$ for $|x| < 0.5$.', 'fails', '10^{-4}'],
    ['$\\cos x \\approx 1$ within 14 % for $|x| \\le 0.5$', 'none', null],
    ['$\\cos x \\approx 1 - x^2/2$ within 0.1 % for $|x| \\le 0.5$', 'fails', '0.1 %'],
    ['$\\cos x \\approx 1 - x^2/2$ within 0.3 % for $|x| \\le 0.5$', 'holds', null],
    ['$\\sin x \\approx 0.9997x - 0.16x^3$ with an error of at most 0.005 for $|x| < 1$', 'holds', null],
  ])('%s', (text, verdict, under) => {
    const found = findings(text, { language: 'markdown' });
    expect(verdictOf(found)).toBe(verdict);
    const failure = found.find((f) => f.verdict === 'fails');
    expect(failure ? text.slice(failure.start, failure.end) : null).toBe(under);
  });
});

describe('sums with parameters and stated digits', () => {
  const at = { variable: 'x' };
  it('a sum that ends at a symbol is judged by its terms (DLMF 4.6.7, 4.19.1)', () => {
    expect(verdictOf(findings('\\frac{\\sin x}{x} = \\sum_{i=0}^{n} \\frac{(-1)^i}{(2i+1)!} x^{2i}', at))).toBe('holds');
    expect(verdictOf(findings('\\frac{\\sin x}{x} = \\sum_{i=0}^{n} \\frac{(-1)^i}{(2i)!} x^{2i}', at))).toBe('fails');
  });
  it('the binomial series with binomials or gamma functions never fails (DLMF 4.6.7)', () => {
    expect(verdictOf(findings('$(1+x)^{\\alpha} = \\sum_{k=0}^\\infty \\binom{\\alpha}{k} x^k$, $|x| < 1$', at))).not.toBe('fails');
    expect(verdictOf(findings('$(1+x)^\\alpha = 1 + \\frac{\\Gamma(\\alpha+1)}{\\Gamma(\\alpha)} x + \\cdots$', at))).not.toBe('fails');
    expect(verdictOf(findings('$(1+x)^{\\alpha} = \\sum_{k=0}^\\infty \\binom{\\alpha}{k} \\frac{x^k}{k!}$, $|x| < 1$', at))).toBe('fails');
  });
  it('digits in words are not a bound of 1', () => {
    const stated = (interval: string): Finding | undefined => findings(`$\\cos x \\approx 1 - x^2/2$, correct to 3 decimal places for $${interval}$.`, at).at(-1);
    // cos 1 - 1/2 = 0.0403, cos 0.3 - 0.955 = 0.000336.
    expect(stated('|x| < 1')?.verdict).toBe('fails');
    expect(stated('|x| < 0.3')?.verdict).toBe('holds');
  });
});
