/** Where a question's parts come from, seen through a whole consultation. The expansions are the Maclaurin series of sine and exponential function (DLMF 4.19.1, 4.2.19). */
import { describe, expect, it } from 'vitest';
import { createEngine } from '../../src/engine.ts';
import { consult } from '../../src/worker/desk/consult.ts';

const engine = createEngine({ loadFile: () => Promise.reject(new Error('no file is needed')) });
const ask = (text: string, formula: string, remembered = {}) => {
  const start = text.indexOf(formula);
  return consult({ desk: 'consult', text, language: 'latex', selection: { start, end: start + formula.length }, remembered }, engine);
};

describe('what was settled for a whole file', () => {
  it('holds for the formulas that have the quantity', async () => {
    const { answer, sources } = await ask('$\\sin(a t)$', '\\sin(a t)', { variable: 't' });
    expect(answer).toMatchObject({ ok: true, text: 'at − a³t³/6 + a⁵t⁵/120 − a⁷t⁷/5040 + O(t⁹)' });
    expect(sources.variable).toBe('remembered');
  });
  it('is no answer about a formula without it', async () => {
    const { answer, sources } = await ask('$\\sin\\theta$', '\\sin\\theta', { variable: 't', point: '1' });
    expect(answer).toMatchObject({ ok: true, text: 'θ − θ³/6 + θ⁵/120 − θ⁷/5040 + O(θ⁹)' });
    expect(sources.variable).toBe('text');
  });
  it('nor is a note for the file', async () => {
    const { answer } = await ask('% leading-order: small t\n\n$e^q$', 'e^q');
    expect(answer).toMatchObject({ ok: true, text: '1 + q + q²/2 + q³/6 + O(q⁴)' });
  });
  it('a note right above is taken at its word', async () => {
    const { answer } = await ask('% leading-order: small t\n$e^q$', 'e^q');
    expect(answer).toMatchObject({ ok: true, exact: true });
  });
});
