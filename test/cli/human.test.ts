/** What the command line prints for a person. */
import { expect, it } from 'vitest';
import { humanText } from '../../src/cli/human.ts';
import type { ExpandAnswer } from '../../src/protocol.ts';

const answer: ExpandAnswer = { ok: true, terms: [], remainder: null, exact: false, latex: 'y', text: 'y', numeric: { syntax: 'mpmath', sum: '0', scale: '1', symbols: {} }, assumptions: [] };

it('says where a divergent series is best stopped', () => {
  expect(humanText({ ...answer, leastTerm: { terms: 3, size: '0.0235' } }, {})).toContain('best        3 terms at this argument; the first one left out is at most 0.0235 there');
});

it('lists what was replaced in an equation, with the error of each piece', () => {
  const replaced = [{ from: '\\sin\\theta', to: '\\theta + O(\\theta^3)', relativeError: { percent: '0.5', bound: '0.007' } }, { from: '\\cos\\theta', to: '1 + O(\\theta^2)' }];
  const lines = humanText({ ...answer, replaced }, {}).split('\n');
  expect(lines).toContain('  replaced    \\sin\\theta by \\theta + O(\\theta^3); relative error 0.5 % there, at most 0.007 on the interval, proven');
  expect(lines).toContain('  replaced    \\cos\\theta by 1 + O(\\theta^2)');
});

it('lists every function of a system', () => {
  const components = [{ unknown: 'x', expansion: { ...answer, text: '1 − t²/2' } }, { unknown: 'y', expansion: { ...answer, text: '−t' } }];
  expect(humanText({ ...answer, components }, {}).split('\n').slice(1, 3)).toEqual(['  component   x: 1 − t²/2', '  component   y: −t']);
});
