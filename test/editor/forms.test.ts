/** Exact forms put into a file: in its language, with its imports, and not at all where the language lacks the function that makes them exact. */
import { describe, expect, it } from 'vitest';
import { forms } from '../../src/worker/desk/proposals/forms.ts';

function put(language: string, text: string, expression: string, form: string): string | null {
  const start = text.indexOf(expression);
  const [proposal] = forms({ desk: 'forms', text, language, place: { start, end: start + expression.length }, forms: [form] });
  if (!proposal || proposal.edits.length === 0) return null;
  return [...proposal.edits].sort((a, b) => b.start - a.start).reduce((t, e) => t.slice(0, e.start) + e.text + t.slice(e.end), text);
}

describe('exact forms in the language of the file', () => {
  it('C has no power operator', () => expect(put('c', 'y = 3.0*(sqrt(1.0 + u*u) - 1.0);', '(sqrt(1.0 + u*u) - 1.0)', 'u^2/(sqrt(1 + u^2) + 1)')).toBe('#include <math.h>\ny = 3.0*(u*u/(sqrt(1.0 + u*u) + 1.0));'));
  it('Python keeps the prefix of its file', () => expect(put('python', 'import numpy as np\ny = np.exp(u) - 1\n', 'np.exp(u) - 1', 'expm1(u)')).toBe('import numpy as np\ny = np.expm1(u)\n'));
  it('Rust writes methods', () => expect(put('rust', 'let y = u.exp() - 1.0;', 'u.exp() - 1.0', 'expm1(u)')).toBe('let y = u.exp_m1();'));
  // The Fortran 2018 standard has no expm1 or log1p among its intrinsic procedures (from memory).
  it('Fortran is not given the difference back', () => expect(put('fortran', 'y = exp(u) - 1', 'exp(u) - 1', 'expm1(u)')).toBeNull());
  it('LaTeX is typeset', () => expect(put('latex', '$\\cos u - 1$', '\\cos u - 1', '-2*sin(u/2)^2')).toContain('\\sin^2'));
  it('an unreadable form is not offered', () => expect(put('c', 'y = x;', 'x', '((')).toBeNull());
});
