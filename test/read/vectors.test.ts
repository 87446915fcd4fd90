/** Bold letters, bars, commutators and traces as readers find them, and which vector a text calls small. */
import { describe, expect, it } from 'vitest';
import type { Expression } from '../../src/expression/index.ts';
import { candidates, readFormula, readLatex } from '../../src/read/index.ts';

function read(text: string): Expression {
  const found = readLatex(text);
  if (!found.ok) throw new Error(`${text}: ${found.error.message}`);
  return found.value;
}
/** Operation and names only: `dot(r,d)`. */
function shape(e: Expression): string {
  switch (e.kind) {
    case 'vector':
      return e.operation === 'symbol' ? (e.name ?? '') : `${e.operation}(${e.args.map(shape).join(',')})`;
    case 'symbol':
      return e.name;
    case 'call':
      return `${e.function}(${e.args.map(shape).join(',')})`;
    case 'apply':
      return `${e.name}[${e.args.map(shape).join(',')}]`;
    case 'sum':
      return e.terms.map(shape).join('+');
    case 'negation':
      return `-${shape(e.operand)}`;
    case 'product':
      return e.factors.map(shape).join('*');
    case 'number':
      return `${e.value.num}`;
    default:
      return e.kind;
  }
}

describe('notation', () => {
  const rows: readonly (readonly [string, string])[] = [
    [String.raw`|\mathbf r - \mathbf r'|`, String.raw`norm(\mathbf{r}+-\mathbf{r}')`],
    [String.raw`\lvert \vec{a} \rvert`, String.raw`norm(\vec{a})`],
    [String.raw`\left\|\boldsymbol{r}\right\|`, String.raw`norm(\boldsymbol{r})`],
    [String.raw`\|{\bf r}\|`, String.raw`norm(\mathbf{r})`],
    [String.raw`|\mathbf a\cdot\mathbf b|`, String.raw`abs(dot(\mathbf{a},\mathbf{b}))`],
    [String.raw`\hat{\mathbf r}\cdot\mathbf d`, String.raw`dot(\hat{\mathbf{r}},\mathbf{d})`],
    [String.raw`\mathbf k\cdot(\mathbf r-\mathbf s)`, String.raw`dot(\mathbf{k},\mathbf{r}+-\mathbf{s})`],
    [String.raw`\mathbf a\times\mathbf b`, String.raw`cross(\mathbf{a},\mathbf{b})`],
    [String.raw`V(\mathbf r + \mathbf a)`, String.raw`V[\mathbf{r}+\mathbf{a}]`],
    [String.raw`m(\mathbf r + \mathbf a)`, String.raw`m*\mathbf{r}+\mathbf{a}`],
    [String.raw`[A, B]`, 'commutator(A,B)'],
    [String.raw`\{\hat A, \hat B\}`, String.raw`anticommutator(\hat{A},\hat{B})`],
    [String.raw`[A, [A, B]]`, 'commutator(A,commutator(A,B))'],
    [String.raw`\operatorname{tr}(A)`, 'trace(A)'],
    [String.raw`\det A`, 'determinant(A)'],
    // The Struve functions are printed bold, DLMF 11.1.
    [String.raw`\mathbf{H}_0(x)`, 'struveH(0,x)'],
    [String.raw`\mathbf{L}_\nu(x)`, String.raw`struveL(\nu,x)`],
  ];
  for (const [text, wanted] of rows) it(text, () => expect(shape(read(text))).toBe(wanted));

  it('a list of numbers in brackets is no commutator', () => {
    for (const text of ['[0, 1]', '[a, b]']) expect(readLatex(text).ok, text).toBe(false);
  });
});

describe('which vector is small', () => {
  const f = String.raw`\frac{1}{|\mathbf r - \mathbf r'|}`;
  it('is asked where nothing tells', () => {
    const { found, list } = candidates(read(f));
    expect(found).toBeNull();
    expect(list.map((c) => c.name)).toEqual([String.raw`\mathbf{r}`, String.raw`\mathbf{r}'`]);
  });
  for (const [text, name] of [
    [String.raw`For $r' \ll r$ we have`, String.raw`\mathbf{r}'`],
    [String.raw`For small $\mathbf{r}'$ we have`, String.raw`\mathbf{r}'`],
    [String.raw`If $|\mathbf r| \gg |\mathbf r'|$ then`, String.raw`\mathbf{r}'`],
  ] as const) {
    it(text, () => expect(candidates(read(f), { before: text }).found?.variable.name).toBe(name));
  }
  it('a condition behind the formula', () => {
    const formula = readFormula(String.raw`${f}, \quad |\mathbf r'| \ll |\mathbf r|`, 'latex');
    expect(formula.ok && candidates(formula.value.expression, { conditions: formula.value.conditions }).found?.variable.name).toBe(String.raw`\mathbf{r}'`);
  });
});

describe('a bracket behind a bold letter', () => {
  const rows: readonly (readonly [string, string])[] = [
    [String.raw`\mathbf{u}(t)`, String.raw`\mathbf{u}[t]`],
    [String.raw`\vec{x}(t_0)`, String.raw`\vec{x}[t_0]`],
    [String.raw`\mathbf{u}(x, t)`, String.raw`\mathbf{u}[x,t]`],
    [String.raw`\mathbf{x}(t + \Delta t)`, String.raw`\mathbf{x}[t+\Delta t]`],
    [String.raw`\mathbf{B}(\mathbf{r})`, String.raw`\mathbf{B}[\mathbf{r}]`],
    [String.raw`\mathbf{a}(1 + \epsilon)`, String.raw`\mathbf{a}*1+\epsilon`],
    [String.raw`\mathbf{A}(\mathbf{B} + \mathbf{C})`, String.raw`\mathbf{A}*\mathbf{B}+\mathbf{C}`],
  ];
  for (const [text, wanted] of rows) it(text, () => expect(shape(read(text))).toBe(wanted));
  it('is not guessed', () => expect(readLatex(String.raw`\mathbf{a}(b + c)`).ok).toBe(false));
});

describe('an initial value that is being typed', () => {
  for (const text of ["y' = y, y(0) =", "y'' + y = 0, y(0) = 1, y'(0) =", String.raw`\dot x = x, x(0)=`, "y' = y, y(0", "y' = y, y("]) {
    it(`${text} is unreadable`, () => {
      const found = readFormula(text, 'latex');
      expect(found.ok ? null : found.error.code).toBe('unreadable');
    });
  }
  it('leaves other formulas readable', () => expect(readFormula(String.raw`\sin x, f(x) =`, 'latex').ok).toBe(true));
});
