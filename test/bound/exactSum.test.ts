/** Sums that are exact near the point: where they are exact on the interval too, and where that is not taken for granted. Values by hand. */
import { describe, expect, it } from 'vitest';
import { ask } from '../fit/engine.ts';

const bounded = (text: string, point: string, interval: readonly [string, string]): ReturnType<typeof ask> => ask({ ask: 'expand', language: 'latex', text, variable: 'x', point, interval });

describe('exact sums', () => {
  it.each([
    ['x^2+1', '0', ['0', '3']],
    ['\\frac{1}{x} + x', '0', ['1', '3']],
    ['\\arcsin(\\sin x)', '0', ['-1', '1']],
    ['\\ln(e^x)', '0', ['0', '3']],
    ['\\sqrt{x}', '0', ['0', '2']],
    ['\\sqrt{x^2-2x+1}', '3', ['2', '4']],
    ['\\min(x,2)', '1', ['55/64', '3/2']],
    ['\\max(x,2,3-x)', '3', ['5/2', '4']],
    ['|x-1|', '3', ['3/2', '4']],
  ] as const)('%s at %s is exact on %j', async (text, point, interval) => expect(await bounded(text, point, interval)).toMatchObject({ ok: true, bound: { value: '0' } }));
  it.each([
    ['|x-1|', '3', ['0', '4']],
    ['\\min(x,2)', '1', ['0', '5/2']],
    ['\\sqrt{x^2-2x+1}', '3', ['0', '4']],
    ['\\arcsin(\\sin x)', '0', ['0', '3']],
    ['\\arctan(\\tan 3x)', '\\frac{23}{8}', ['35/16', '53/16']],
    ['|x-1|', '3', ['2', 'inf']],
  ] as const)('%s at %s is not claimed to be exact on %j', async (text, point, interval) => expect(await bounded(text, point, interval)).toMatchObject({ ok: false, error: { code: 'undecided' } }));
  it.each([
    ['\\sqrt{x}', ['-1', '1']],
    ['\\ln x', ['-2', '-1']],
    ['\\frac{1}{x}', ['1', '-1']],
  ] as const)('%s at 0 has no bound on %j', async (text, interval) => expect(await bounded(text, '0', interval)).toMatchObject({ ok: false, error: { code: 'bad-request' } }));
  it('a bound of an unspecified function is refused by name', async () => expect(await bounded('f(x) \\sin x', '0', ['0', '1'])).toMatchObject({ ok: false, error: { code: 'unknown-function', message: expect.stringContaining('what f is') } }));
});
