/** The Lambert W function (branch, x) and relatives. */
import { build, type Expression } from '../../expression/index.ts';
import type { FunctionDescription } from '../description.ts';
import { names } from '../naming.ts';
import { enclosed } from '../enclosure/wrap.ts';
import { lambertAlgorithms } from './enclosure.ts';
import { lambertLocal, lambertValue, wrightLocal, wrightValue } from './lambert.ts';

const { call, number, product, quotient, sum } = build;
const zeroBranch = {
  read: (a: readonly Expression[]): readonly Expression[] | null => (a.length === 1 ? [number(0), ...a] : a.length === 2 ? [...a].reverse() : null),
  write: (a: readonly Expression[]): readonly Expression[] | null => [...a].reverse(),
};

const descriptions: readonly FunctionDescription[] = [
  {
    id: 'lambertW',
    title: 'Lambert W function (branch, argument)',
    arity: 2,
    names: names({
      latex: ['\\operatorname{W}', '\\operatorname{LambertW}', '\\operatorname{Wp}'],
      latexLetters: ['W'],
      latexIndices: { count: 1, place: 'subscript' },
      latexForm: ([k = '0', x = '']) => (k === '0' ? `W(${x})` : `W_{${k}}(${x})`),
      unicodeForm: ([k = '0', x = '']) => (k === '0' ? `W(${x})` : `W_${k}(${x})`),
      plain: ['lambertw', 'LambertW'],
      mpmath: ([k = '0', x = '']) => (k === '0' ? `lambertw(${x})` : `lambertw(${x},${k})`),
      code: { python: 'lambertw', julia: 'lambertw', matlab: 'lambertw', cpp: ['lambert_w0', 'lambert_wm1'] },
      codeArguments: {
        'python:lambertw': zeroBranch,
        'julia:lambertw': zeroBranch,
        'matlab:lambertw': { read: (a) => (a.length === 1 ? [number(0), ...a] : a.length === 2 ? a : null), write: (a) => a },
        'cpp:lambert_w0': { read: (a) => (a.length === 1 ? [number(0), ...a] : null), write: (a) => (a[0]?.kind === 'number' && a[0].value.num === 0n ? a.slice(1) : null) },
        'cpp:lambert_wm1': { read: (a) => (a.length === 1 ? [number(-1), ...a] : null), write: (a) => (a[0]?.kind === 'number' && a[0].value.num === -1n ? a.slice(1) : null) },
      },
    }),
    derivative: ([k = number(0), x = number(0)], index) => {
      const w = call('lambertW', k, x);
      return index === 1 ? quotient(number(1), product(call('exp', w), sum(number(1), w))) : null;
    },
    local: lambertLocal,
    value: lambertValue,
    domain: 'x >= -1/e (branch 0), -1/e <= x < 0 (branch -1)',
    source: 'DLMF 4.13.1',
  },
  { id: 'wrightOmega', title: 'Wright omega function, y + ln y = x', arity: 1, local: wrightLocal, value: wrightValue, names: names({ latex: ['\\operatorname{wrightomega}', '\\omega_W'], latexForm: ([x = '']) => `W(e^{${x}})`, mpmath: ([x = '']) => `lambertw(exp(${x}))`, code: { python: 'wrightomega', matlab: 'wrightOmega' } }), derivative: ([x = number(0)]) => quotient(call('wrightOmega', x), sum(number(1), call('wrightOmega', x))), source: 'Corless & Jeffrey, The Wright omega function (2002), from memory' },
];

export const lambertFunctions = enclosed(descriptions, lambertAlgorithms);
