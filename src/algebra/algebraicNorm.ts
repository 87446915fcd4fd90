/** Algebraic numbers cleared from a polynomial: by a cofactor whose product with it, the norm, is free of them. */
import { Q } from '../expression/index.ts';
import { Declined } from '../outcome.ts';
import { compareExponents, type Exponent, numeratorOf, subtractExponents } from './exponent.ts';
import type { KernelTable } from './kernel.ts';
import { exponentIn, UNIT, withoutKernel } from './monomial.ts';
import { combine, contentOf, divideByInteger, kernelsIn, multiplyPolynomials, ONE_POLYNOMIAL, type Polynomial, scalePolynomial } from './polynomial.ts';
import { multiplyReduced, reduceByRelations } from './relations.ts';

/**
 * A polynomial g with f*g free of algebraic numbers, and that product: the cofactor is read off the characteristic polynomial of
 * multiplication by f, whose coefficients come from traces of powers by Newton's identities.
 */
export function clearAlgebraic(table: KernelTable, f: Polynomial): { readonly cofactor: Polynomial; readonly norm: Polynomial } {
  let cofactor = ONE_POLYNOMIAL;
  let norm = f;
  for (;;) {
    table.check();
    const candidates = [...kernelsIn(norm)].filter((k) => table.relations[k]?.numeric === true);
    const kernel = candidates.length === 0 ? undefined : Math.max(...candidates);
    if (kernel === undefined) return { cofactor, norm };
    const step = conjugateCofactor(table, norm, kernel);
    cofactor = multiplyReduced(table, cofactor, step.cofactor);
    norm = step.norm;
    const c = Q.gcd(contentOf(cofactor), contentOf(norm));
    if (c > 1n) {
      cofactor = divideByInteger(cofactor, c);
      norm = divideByInteger(norm, c);
    }
  }
}

function conjugateCofactor(table: KernelTable, f: Polynomial, kernel: number): { readonly cofactor: Polynomial; readonly norm: Polynomial } {
  const relation = table.relations[kernel];
  if (!relation) throw new RangeError('no relation to clear');
  let step: Exponent = relation.pure ? relation.period : 1;
  for (const t of relation.pure ? f : []) {
    const e = exponentIn(t.monomial, kernel);
    if (e !== 0) step = commonStep(step, e);
  }
  const degree = numeratorOf(relation.period) / (typeof step === 'number' ? step : step.p / step.q);
  const n = Math.round(degree);
  if (n > 24) throw new Declined('undecided', 'A denominator here has a root of too high a degree to be cleared; simplify it first.');
  const traces = powerTraces(table, kernel, relation.value, relation.pure, step, n);
  const traceOf = (p: Polynomial): Polynomial => {
    let sum: Polynomial = [];
    for (const t of p) {
      const e = exponentIn(t.monomial, kernel);
      const j = e === 0 ? 0 : Math.round((numeratorOf(e) / (typeof e === 'number' ? 1 : e.q)) / (typeof step === 'number' ? step : step.p / step.q));
      const trace = traces[j] as Polynomial;
      if (trace.length > 0) sum = combine(sum, 1n, multiplyPolynomials([{ monomial: withoutKernel(t.monomial, kernel), coefficient: t.coefficient }], trace), 1n);
    }
    return reduceByRelations(table, sum);
  };
  // f^n + c1 f^(n-1) + ... + cn = 0, so f * (f^(n-1) + ... + c(n-1)) = -cn.
  const powers: Polynomial[] = [ONE_POLYNOMIAL];
  for (let i = 1; i <= n; i += 1) powers.push(multiplyReduced(table, powers[i - 1] as Polynomial, f));
  const sums = powers.map(traceOf);
  const c: Polynomial[] = [ONE_POLYNOMIAL];
  for (let k = 1; k <= n; k += 1) {
    let s: Polynomial = sums[k] as Polynomial;
    for (let i = 1; i < k; i += 1) s = combine(s, 1n, multiplyReduced(table, c[i] as Polynomial, sums[k - i] as Polynomial), 1n);
    c.push(scalePolynomial(divideByInteger(s, BigInt(k)), -1n));
  }
  let cofactor: Polynomial = [];
  for (let i = 0; i < n; i += 1) cofactor = combine(cofactor, 1n, multiplyReduced(table, c[i] as Polynomial, powers[n - 1 - i] as Polynomial), 1n);
  return { cofactor, norm: scalePolynomial(c[n] as Polynomial, -1n) };
}

const commonStep = (a: Exponent, b: Exponent): Exponent => {
  let x = a;
  let y = b;
  while (compareExponents(y, 0) > 0) {
    let r = x;
    while (compareExponents(r, y) >= 0) r = subtractExponents(r, y);
    [x, y] = [y, r];
  }
  return x;
};

/** Traces of 1, y, ..., y^(n-1) for y = kernel^step of degree n. */
function powerTraces(table: KernelTable, kernel: number, value: Polynomial, pure: boolean, step: Exponent, n: number): readonly Polynomial[] {
  const traces: Polynomial[] = [[{ monomial: UNIT, coefficient: BigInt(n) }]];
  if (pure) {
    for (let i = 1; i < n; i += 1) traces.push([]);
    return traces;
  }
  if (step !== 1) throw new RangeError('a fractional power of an algebraic number');
  // y^n = sum of v_j y^j: elementary symmetric functions e_k = (-1)^(k-1) v_(n-k).
  const coefficient = (j: number): bigint => value.find((t) => exponentIn(t.monomial, kernel) === j)?.coefficient ?? 0n;
  const p: bigint[] = [BigInt(n)];
  for (let k = 1; k < n; k += 1) {
    let s = BigInt(k) * coefficient(n - k);
    for (let i = 1; i < k; i += 1) s += coefficient(n - i) * (p[k - i] as bigint);
    p.push(s);
    traces.push(s === 0n ? [] : [{ monomial: UNIT, coefficient: s }]);
  }
  return traces;
}
