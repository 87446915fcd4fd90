/** Formulas whose letters do not commute: as a person writes them, and right to the stated order for matrices taken at random. */
import { describe, expect, it } from 'vitest';
import { expand, expandSmall, type Expansion, partialSum } from '../../src/expand/index.ts';
import { type Assumption, Q, type Expression } from '../../src/expression/index.ts';
import { budget } from '../../src/outcome.ts';
import { readAssumption, readVariable } from '../../src/read/index.ts';
import { expansionLatex, expansionNumeric } from '../../src/write/index.ts';
import { latex } from './tools.ts';

const operators = (...names: readonly string[]): readonly Assumption[] => names.map((symbol) => ({ kind: 'domain', symbol, domain: 'operator' }));
const AB = operators('A', 'B');
function variable(text: string): Expression {
  const read = readVariable(text);
  if (!read.ok) throw new Error(read.error.message);
  return read.value;
}
const ask = (text: string, terms: number, name = '\\epsilon', assumptions = AB, point: 'zero' | 'inf' = 'zero') =>
  expand({ function: latex(text), variable: variable(name), point: point === 'inf' ? 'inf' : { kind: 'number', value: Q.ZERO }, side: 'both', assumptions, terms }, budget(20000));
function expanded(...args: Parameters<typeof ask>): Expansion {
  const found = ask(...args);
  if (!found.ok) throw new Error(`${args[0]}: ${found.error.message}`);
  return found.value;
}

describe('as a person writes them', () => {
  const rows: readonly (readonly [string, number, string, string?, (readonly Assumption[])?])[] = [
    // Neumann's series, and the inverse of a sum: common practice.
    [String.raw`(1+\epsilon A)^{-1}`, 3, String.raw`1 - \epsilon A + \epsilon^2 A^2 + O(\epsilon^3)`],
    [String.raw`(A+\epsilon B)^{-1}`, 3, String.raw`A^{-1} - \epsilon A^{-1}BA^{-1} + \epsilon^2 A^{-1}BA^{-1}BA^{-1} + O(\epsilon^3)`],
    // The series of Baker, Campbell and Hausdorff, to fourth order: X + Y + [X,Y]/2 + [X,[X,Y]]/12 - [Y,[X,Y]]/12 - [Y,[X,[X,Y]]]/24, from memory; [X,[Y,[X,Y]]] = [Y,[X,[X,Y]]].
    [String.raw`\ln(e^{\epsilon A}e^{\epsilon B})`, 4, String.raw`\epsilon (A + B) + \frac{\epsilon^2}{2}[A, B] + \frac{\epsilon^3}{12} ([A, [A, B]] - [B, [A, B]]) - \frac{\epsilon^4}{24}[A, [B, [A, B]]] + O(\epsilon^5)`],
    // e^A B e^(-A) by repeated commutators: common practice.
    [String.raw`e^{\epsilon A} B e^{-\epsilon A}`, 4, String.raw`B + \epsilon[A, B] + \frac{\epsilon^2}{2}[A, [A, B]] + \frac{\epsilon^3}{6}[A, [A, [A, B]]] + O(\epsilon^4)`],
    [String.raw`e^{i\hat H t/\hbar}\hat A e^{-i\hat H t/\hbar}`, 2, String.raw`\hat{A} + \frac{i t}{\hbar}[\hat{H}, \hat{A}] + O(t^2)`, 't', []],
    [String.raw`e^{\epsilon A}e^{\epsilon B}`, 3, String.raw`1 + \epsilon (A + B) + \frac{\epsilon^2}{2} (A^2 + 2AB + B^2) + O(\epsilon^3)`],
    [String.raw`\sqrt{I + \epsilon A}`, 3, String.raw`I + \frac{\epsilon}{2} A - \frac{\epsilon^2}{8} A^2 + O(\epsilon^3)`],
    // The error of the symmetric splitting: h^3 ([A,[A,B]]/24 + [B,[A,B]]/12) for steps -h, common practice.
    [String.raw`e^{-\epsilon A/2}e^{-\epsilon B}e^{-\epsilon A/2} - e^{-\epsilon(A+B)}`, 1, String.raw`\frac{\epsilon^3}{24} ([A, [A, B]] + 2[B, [A, B]]) + O(\epsilon^4)`],
    // det(1 + x) = exp tr ln(1 + x): common practice.
    [String.raw`\det(1+\epsilon A)`, 3, String.raw`1 + \epsilon \operatorname{tr} A + \frac{\epsilon^2}{2} ((\operatorname{tr} A)^2 - \operatorname{tr}(A^2)) + O(\epsilon^3)`],
    [String.raw`(z - \hat H_0 - \lambda\hat V)^{-1}`, 2, String.raw`(z - \hat{H}_0)^{-1} + \lambda (z - \hat{H}_0)^{-1}\hat{V}(z - \hat{H}_0)^{-1} + O(\lambda^2)`, '\\lambda', []],
    [String.raw`(\mathbf{I}+\mathbf{E})^{-1}`, 3, String.raw`\mathbf{I} - \mathbf{E} + \mathbf{E}^2 + O(\left|\mathbf{E}\right|^3)`, '\\mathbf{E}', []],
    [String.raw`[e^{\epsilon A}, B]`, 1, String.raw`\epsilon[A, B] + O(\epsilon^2)`, '\\epsilon', []],
  ];
  for (const [text, terms, wanted, name, assumptions] of rows) it(text, () => expect(expansionLatex(expanded(text, terms, name, assumptions))).toBe(wanted));
});

it('reads that letters do not commute in several wordings', () => {
  for (const text of ['A, B do not commute', 'A and B do not commute', 'A, B operators', 'A and B are matrices', 'A matrix, B matrix']) {
    const read = readAssumption(text);
    const said = read.ok ? read.value.map((a) => (a.kind === 'property' && a.subject.kind === 'symbol' ? `${a.subject.name} ${a.property}` : '')) : [];
    expect(new Set(said), text).toEqual(new Set(['A operator', 'B operator']));
  }
});

it('keeps order in the numeric text', () => {
  expect(expansionNumeric(expanded(String.raw`(A+\epsilon B)^{-1}`, 2)).sum).toBe('A**(-1) - epsilon*(A**(-1)*B*A**(-1))');
});

it('several small operators', () => {
  const quantities = ['A', 'B'].map((name) => ({ symbol: variable(name), weight: Q.ONE }));
  const found = expandSmall({ function: latex(String.raw`\ln(e^A e^B)`), quantities, assumptions: AB, terms: 2 }, budget(20000));
  if (!found.ok) throw new Error(found.error.message);
  expect(expansionLatex(found.value)).toContain(String.raw`A + B + \frac{1}{2}[A, B] + O(`);
});

it('gives a reason where words do not serve', () => {
  for (const [text, code] of [
    [String.raw`e^{A + \epsilon B}`, 'no-expansion'],
    [String.raw`\frac{A}{1 + \epsilon B}`, 'bad-request'],
    [String.raw`|1 + \epsilon A B|`, 'no-expansion'],
    [String.raw`\det(2 + \epsilon A)`, 'needs-assumption'],
    [String.raw`\ln(\epsilon A B)`, 'no-expansion'],
  ] as const) {
    const found = ask(text, 2);
    expect(found.ok ? expansionLatex(found.value) : found.error.code, text).toBe(code);
  }
});

type Matrix = readonly (readonly number[])[];
const SIZE = [0, 1, 2] as const;
const build3 = (f: (i: number, j: number) => number): Matrix => SIZE.map((i) => SIZE.map((j) => f(i, j)));
const at = (m: Matrix, i: number, j: number): number => m[i]?.[j] ?? 0;
const plus = (a: Matrix, b: Matrix): Matrix => build3((i, j) => at(a, i, j) + at(b, i, j));
const times = (a: Matrix, b: Matrix): Matrix => build3((i, j) => SIZE.reduce<number>((s, k) => s + at(a, i, k) * at(b, k, j), 0));
const scaled = (a: Matrix, x: number): Matrix => build3((i, j) => x * at(a, i, j));
const identity = (x: number): Matrix => build3((i, j) => (i === j ? x : 0));
const norm = (a: Matrix): number => Math.max(...a.flat().map(Math.abs));
const trace = (a: Matrix): number => SIZE.reduce<number>((s, i) => s + at(a, i, i), 0);
const determinant = (m: Matrix): number => SIZE.reduce<number>((s, j) => s + at(m, 0, j) * (at(m, 1, (j + 1) % 3) * at(m, 2, (j + 2) % 3) - at(m, 1, (j + 2) % 3) * at(m, 2, (j + 1) % 3)), 0);
const inverse = (m: Matrix): Matrix => {
  const d = determinant(m);
  return build3((i, j) => (at(m, (j + 1) % 3, (i + 1) % 3) * at(m, (j + 2) % 3, (i + 2) % 3) - at(m, (j + 1) % 3, (i + 2) % 3) * at(m, (j + 2) % 3, (i + 1) % 3)) / d);
};
/** sum of c(k) x^k until the terms no longer count. */
function powerSeries(x: Matrix, c: (k: number) => number): Matrix {
  let total = identity(c(0));
  let power = identity(1);
  for (let k = 1; k < 90; k += 1) {
    power = times(power, x);
    total = plus(total, scaled(power, c(k)));
  }
  return total;
}
const factorial = (k: number): number => (k < 2 ? 1 : k * factorial(k - 1));
const binomial = (p: number, k: number): number => (k === 0 ? 1 : (binomial(p, k - 1) * (p - k + 1)) / k);
const FUNCTIONS: Readonly<Record<string, (x: Matrix) => Matrix>> = {
  exp: (x) => powerSeries(x, (k) => 1 / factorial(k)),
  log: (x) => powerSeries(plus(x, identity(-1)), (k) => (k === 0 ? 0 : (-1) ** (k + 1) / k)),
  sin: (x) => powerSeries(x, (k) => (k % 2 === 0 ? 0 : (-1) ** ((k - 1) / 2) / factorial(k))),
  cos: (x) => powerSeries(x, (k) => (k % 2 === 1 ? 0 : (-1) ** (k / 2) / factorial(k))),
};

/** Matrices of doubles, numbers as multiples of the identity. */
function valueOf(e: Expression, env: ReadonlyMap<string, Matrix>): Matrix {
  const of = (x: Expression): Matrix => valueOf(x, env);
  switch (e.kind) {
    case 'number':
      return identity(Number(e.value.num) / Number(e.value.den));
    case 'symbol':
      return env.get(e.name) ?? identity(NaN);
    case 'sum':
      return e.terms.map(of).reduce(plus);
    case 'product':
      return e.factors.map(of).reduce(times);
    case 'negation':
      return scaled(of(e.operand), -1);
    case 'quotient':
      return times(of(e.numerator), inverse(of(e.denominator)));
    case 'power': {
      if (e.base.kind === 'constant') return (FUNCTIONS['exp'] as (x: Matrix) => Matrix)(of(e.exponent));
      const p = at(of(e.exponent), 0, 0);
      const base = p < 0 && Number.isInteger(p) ? inverse(of(e.base)) : of(e.base);
      if (Number.isInteger(p)) return Array.from({ length: Math.abs(p) }, () => base).reduce(times, identity(1));
      return powerSeries(plus(base, identity(-1)), (k) => binomial(p, k));
    }
    case 'call':
      return FUNCTIONS[e.function]?.(of(e.args[0] as Expression)) ?? identity(NaN);
    case 'vector': {
      const [a, b] = e.args.map(of);
      if (!a) return identity(NaN);
      if (e.operation === 'ordered') return e.args.map(of).reduce(times);
      if (e.operation === 'trace') return identity(trace(a));
      if (e.operation === 'determinant') return identity(determinant(a));
      const [ab, ba] = [times(a, b ?? a), times(b ?? a, a)];
      return plus(ab, scaled(ba, e.operation === 'commutator' ? -1 : 1));
    }
    default:
      return identity(NaN);
  }
}

describe('the remainder has the stated order for random matrices', () => {
  const formulas = [
    String.raw`(1 + \epsilon A)^{-1}(1 - \epsilon B)^{-2}`,
    String.raw`(A + \epsilon B)^{-1} C`,
    String.raw`\ln(e^{\epsilon A}e^{2\epsilon B})`,
    String.raw`\ln(e^{\epsilon A}e^{\epsilon B}e^{-\epsilon A}e^{-\epsilon B})`,
    String.raw`\sqrt{1 + \epsilon A + \epsilon^2 B}`,
    String.raw`\sin(\epsilon A)\cos(\epsilon B) C - C\sin(\epsilon B)`,
    String.raw`e^{\epsilon(A + B)} - e^{\epsilon A/2}e^{\epsilon B}e^{\epsilon A/2}`,
    String.raw`[e^{\epsilon A}, (1+\epsilon B)^{-1}]`,
    String.raw`\frac{\sin\epsilon}{1+\epsilon}\, e^{\epsilon A} B e^{-\epsilon A}`,
    String.raw`\det(1 + \epsilon A + \epsilon^2 B)`,
    String.raw`\det(A + \epsilon B)`,
    String.raw`\operatorname{tr}(e^{\epsilon A}e^{\epsilon B} C) + \ln\det(1 + \epsilon A)`,
    String.raw`(A + B + \epsilon C)^{-1}`,
    String.raw`(1 + \epsilon (A B + B A)^2)^{-1/3}`,
    String.raw`((1 + \epsilon A)^{-1} + (1+\epsilon B))^{-1}`,
  ];
  formulas.forEach((text, k) => {
    for (const terms of [1, 3]) {
      it(`${text}, ${terms} terms`, () => {
        const found = expanded(text, terms, '\\epsilon', operators('A', 'B', 'C'));
        const [tree, sum] = [latex(text), partialSum(found)];
        const power = found.remainder?.power?.kind === 'number' ? Number(found.remainder.power.value.num) : NaN;
        let state = 17 * k + terms;
        const random = (): number => {
          state = (state * 1103515245 + 12345) % 2147483648;
          return state / 2147483648 - 0.5;
        };
        for (let trial = 0; trial < 3; trial += 1) {
          // Near the identity, so that what is inverted has an inverse.
          const named = new Map(['A', 'B', 'C'].map((name) => [name, plus(identity(1), build3(() => 0.8 * random()))] as const));
          const errorAt = (s: number): number => {
            const env = new Map([...named, ['\\epsilon', identity(s)] as const]);
            return norm(plus(valueOf(tree, env), scaled(valueOf(sum, env), -1)));
          };
          const [coarse, fine] = [errorAt(2 ** -6), errorAt(2 ** -8)];
          expect(fine, `order ${power}`).toBeLessThan(coarse * 4 ** -(power - 0.5) + 1e-12);
        }
      });
    }
  });
});

describe('plain capitals that are not declared', () => {
  const note = (text: string): string | undefined => expanded(text, 2, '\\epsilon', []).assumptions.find((a) => a.includes('commute'));
  for (const text of [String.raw`e^{\epsilon A} B e^{-\epsilon A}`, String.raw`e^{\epsilon A} e^{\epsilon B}`, String.raw`(A + \epsilon B)^{-1}`, String.raw`A^{-1} (B + \epsilon) A`]) it(`${text}: commuting is an assumption`, () => expect(note(text)).toMatch(/^A, B commute/));
  for (const text of [String.raw`\frac{A}{1 + \epsilon B}`, String.raw`N e^{-\epsilon E/T}`, String.raw`(1 + \epsilon A)^{-1}`]) it(`${text}: nothing is assumed`, () => expect(note(text)).toBeUndefined());
});
