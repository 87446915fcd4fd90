/** Where to stop a divergent series: against the terms of the published expansions, computed here. */
import { expect, it } from 'vitest';
import { leastTerm } from '../../src/bound/index.ts';
import { expand } from '../../src/expand/index.ts';
import { build } from '../../src/expression/index.ts';
import { budget } from '../../src/outcome.ts';
import { readLatex } from '../../src/read/index.ts';

function leastOf(text: string, x: number) {
  const f = readLatex(text);
  if (!f.ok) throw new Error(f.error.message);
  const time = budget(60000);
  const found = leastTerm((terms) => expand({ function: f.value, variable: build.symbol('x'), point: 'inf', side: 'both', assumptions: [], terms }, time), build.number(x), [], time);
  if (!found.ok) throw new Error(found.error.message);
  return found.value;
}

/** Index and size of the smallest of the terms; of equal ones both indices. */
function smallest(term: (k: number) => number): { indices: readonly number[]; size: number } {
  const sizes = Array.from({ length: 60 }, (_, k) => term(k));
  const size = Math.min(...sizes);
  return { indices: sizes.flatMap((s, k) => (s < size * (1 + 1e-12) ? [k] : [])), size };
}

const factorial = (k: number): number => (k < 2 ? 1 : k * factorial(k - 1));
const oddFactorial = (k: number): number => (k < 1 ? 1 : (2 * k - 1) * oddFactorial(k - 1));

// DLMF 6.12.1: e^x E_1(x) ~ sum of (-1)^k k!/x^(k+1). DLMF 7.12.1: erfc x ~ e^(-x^2)/(sqrt(pi) x) sum of (-1)^k 1.3...(2k-1)/(2x^2)^k.
for (const x of [3, 5, 10]) {
  it(`the exponential integral at ${x}`, () => {
    const wanted = smallest((k) => factorial(k) / x ** (k + 1));
    const found = leastOf('e^x E_1(x)', x);
    expect(wanted.indices).toContain(found?.terms);
    expect(Math.abs(Number(found?.size) / wanted.size - 1)).toBeLessThan(0.01);
  });
}
for (const x of [2, 3]) {
  it(`the complementary error function at ${x}`, () => {
    const wanted = smallest((k) => (Math.exp(-x * x) / (Math.sqrt(Math.PI) * x)) * oddFactorial(k) / (2 * x * x) ** k);
    const found = leastOf('\\operatorname{erfc}(x)', x);
    expect(wanted.indices).toContain(found?.terms);
    expect(Math.abs(Number(found?.size) / wanted.size - 1)).toBeLessThan(0.01);
  });
}
it('a convergent series has no place to stop', () => expect(leastOf('\\frac{x}{1+x}', 3)).toBeNull());
