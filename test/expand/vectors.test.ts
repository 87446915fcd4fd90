/** Formulas with bold letters: written as authors write them, and right to the stated order for vectors taken at random. */
import { describe, expect, it } from 'vitest';
import { expand, expandSmall, type Expansion, partialSum } from '../../src/expand/index.ts';
import { Q, type Expression } from '../../src/expression/index.ts';
import { budget } from '../../src/outcome.ts';
import { readSmall, readVariable } from '../../src/read/index.ts';
import { expansionLatex, expansionNumeric } from '../../src/write/index.ts';
import { latex } from './tools.ts';

type Point = 'zero' | 'inf';
function variable(text: string): Expression {
  const read = readVariable(text);
  if (!read.ok) throw new Error(read.error.message);
  return read.value;
}
function expandedIn(text: string, name: string, terms: number, at: Point = 'zero'): Expansion {
  const point = at === 'inf' ? 'inf' : ({ kind: 'number', value: Q.ZERO } as const);
  const found = expand({ function: latex(text), variable: variable(name), point, side: 'both', assumptions: [], terms }, budget(20000));
  if (!found.ok) throw new Error(`${text}: ${found.error.message}`);
  return found.value;
}

describe('as authors write them', () => {
  const rows: readonly (readonly [string, string, number, string, Point?])[] = [
    // 1/|r - r'| = sum of r'^l / r^(l+1) P_l(cos): the generating function of the Legendre polynomials, DLMF 18.12.4.
    [String.raw`\frac{1}{|\mathbf r - \mathbf r'|}`, String.raw`\mathbf r'`, 3, String.raw`\frac{1}{r} + \frac{\mathbf{r} \cdot \mathbf{r}'}{r^3} + \frac{3(\mathbf{r} \cdot \mathbf{r}')^2 - r^2{r'}^2}{2r^5} + O({r'}^3)`],
    [String.raw`\frac{1}{\lvert\vec r - \vec r'\rvert}`, String.raw`\vec r`, 2, String.raw`\frac{1}{r} + \frac{\vec{r} \cdot \vec{r}'}{r^3} + O(r^{-3})`, 'inf'],
    [String.raw`\frac{1}{\left\|\boldsymbol{r} - \boldsymbol{d}\right\|}`, String.raw`\boldsymbol{d}`, 2, String.raw`\frac{1}{r} + \frac{\boldsymbol{r} \cdot \boldsymbol{d}}{r^3} + O(d^2)`],
    // A plain letter beside its bold one is its length, also without bars.
    [String.raw`\frac{1}{\sqrt{r^2 + r'^2 - 2{\bf r}\cdot{\bf r}'}}`, String.raw`{\bf r}'`, 3, String.raw`\frac{1}{r} + \frac{\mathbf{r} \cdot \mathbf{r}'}{r^3} + \frac{3(\mathbf{r} \cdot \mathbf{r}')^2 - r^2{r'}^2}{2r^5} + O({r'}^3)`],
    // The field of a displaced charge and its dipole term: common practice.
    [String.raw`\frac{\mathbf r - \mathbf d}{|\mathbf r - \mathbf d|^3}`, String.raw`\mathbf d`, 2, String.raw`\frac{\mathbf{r}}{r^3} + \frac{3(\mathbf{r} \cdot \mathbf{d}) \mathbf{r} - r^2 \mathbf{d}}{r^5} + O(d^2)`],
    // Taylor's formula along a direction: common practice.
    [String.raw`f(\mathbf x + \mathbf h)`, String.raw`\mathbf h`, 3, String.raw`f(\mathbf{x}) + \mathbf{h} \cdot \nabla f(\mathbf{x}) + \frac{1}{2} (\mathbf{h} \cdot \nabla)^2 f(\mathbf{x}) + O(h^3)`],
    [String.raw`f(\mathbf x + \mathbf h) - 2 f(\mathbf x) + f(\mathbf x - \mathbf h)`, String.raw`\mathbf h`, 2, String.raw`(\mathbf{h} \cdot \nabla)^2 f(\mathbf{x}) + \frac{1}{12} (\mathbf{h} \cdot \nabla)^4 f(\mathbf{x}) + O(h^6)`],
    [String.raw`\frac{f(\mathbf x + h\mathbf e) - f(\mathbf x - h\mathbf e)}{2h}`, 'h', 2, String.raw`\mathbf{e} \cdot \nabla f(\mathbf{x}) + \frac{h^2}{6} (\mathbf{e} \cdot \nabla)^3 f(\mathbf{x}) + O(h^4)`],
    [String.raw`\phi(\mathbf r + \epsilon\mathbf a) - \phi(\mathbf r)`, String.raw`\epsilon`, 1, String.raw`\epsilon \mathbf{a} \cdot \nabla \phi(\mathbf{r}) + O(\epsilon^2)`],
    // Vector functions of the time and of the place: Taylor's formula, common practice.
    [String.raw`\mathbf x(t + \Delta t) - \mathbf x(t)`, String.raw`\Delta t`, 2, String.raw`\mathbf{x}'(t) \Delta t + \frac{\mathbf{x}''(t) \Delta t^2}{2} + O(\Delta t^3)`],
    [String.raw`\mathbf E(\mathbf r + \mathbf d)`, String.raw`\mathbf d`, 2, String.raw`\mathbf{E}(\mathbf{r}) + \mathbf{d} \cdot \nabla \mathbf{E}(\mathbf{r}) + O(d^2)`],
    [String.raw`\mathbf a(1 + \epsilon)^2`, String.raw`\epsilon`, 2, String.raw`\mathbf{a} + 2\mathbf{a} \epsilon + O(\epsilon^2)`],
  ];
  for (const [text, name, terms, wanted, at] of rows) it(`${text} in ${name}`, () => expect(expansionLatex(expandedIn(text, name, terms, at))).toBe(wanted));
});

it('says what the letters stand for and what is divided by', () => {
  const found = expandedIn(String.raw`\frac{1}{|\mathbf r - a\hat{\mathbf n}|}`, 'a', 2);
  expect(found.assumptions).toContain('r > 0');
  expect(found.assumptions).toContain('r = |𝐫|');
  expect(found.assumptions).toContain('|𝐧̂| = 1');
});

it('gives no answer where the formula mixes numbers and vectors', () => {
  for (const text of [String.raw`1 + \mathbf a`, String.raw`\mathbf a \mathbf b`, String.raw`\frac{1}{\mathbf a + \mathbf b}`, String.raw`e^{\mathbf a}`, String.raw`\mathbf a^3`]) {
    const found = expand({ function: latex(text), variable: variable(String.raw`\mathbf a`), point: { kind: 'number', value: Q.ZERO }, side: 'both', assumptions: [], terms: 2 }, budget(5000));
    expect(found.ok, text).toBe(false);
  }
});

it('gives no answer for lengths and products of vector functions', () => {
  for (const text of [String.raw`|\mathbf u(t)|`, String.raw`\mathbf u(t) \cdot \mathbf v`, String.raw`|\mathbf r - \mathbf r_0(t)|`, String.raw`\mathbf u(t)^2`, String.raw`\mathbf u(t) + \mathbf v t`]) {
    const found = expand({ function: latex(text), variable: variable('t'), point: { kind: 'number', value: Q.ZERO }, side: 'both', assumptions: [], terms: 2 }, budget(5000));
    expect(found.ok, text).toBe(false);
  }
});

type Triple = readonly [number, number, number];
const dot = (a: Triple, b: Triple): number => a[0] * b[0] + a[1] * b[1] + a[2] * b[2];
const cross = (a: Triple, b: Triple): Triple => [a[1] * b[2] - a[2] * b[1], a[2] * b[0] - a[0] * b[2], a[0] * b[1] - a[1] * b[0]];
const scale = (a: Triple, s: number): Triple => [a[0] * s, a[1] * s, a[2] * s];
type Environment = { readonly vectors: ReadonlyMap<string, Triple>; readonly scalars: ReadonlyMap<string, number> };

/** Doubles for a tree with vectors, straight from its components. */
function valueOf(e: Expression, env: Environment): number | Triple {
  const num = (x: Expression): number => valueOf(x, env) as number;
  const plus = (a: number | Triple, b: number | Triple): number | Triple => (typeof a === 'number' ? a + (b as number) : [a[0] + (b as Triple)[0], a[1] + (b as Triple)[1], a[2] + (b as Triple)[2]]);
  const times = (a: number | Triple, b: number | Triple): number | Triple => (typeof a === 'number' ? (typeof b === 'number' ? a * b : scale(b, a)) : scale(a, b as number));
  switch (e.kind) {
    case 'number':
      return Number(e.value.num) / Number(e.value.den);
    case 'symbol': {
      const length = env.vectors.get(`\\mathbf{${e.name.replace(/'/g, '')}}${"'".repeat(e.name.split("'").length - 1)}`);
      return env.scalars.get(e.name) ?? (length ? Math.sqrt(dot(length, length)) : NaN);
    }
    case 'sum':
      return e.terms.map((t) => valueOf(t, env)).reduce(plus);
    case 'product':
      return e.factors.map((t) => valueOf(t, env)).reduce(times);
    case 'negation':
      return times(-1, valueOf(e.operand, env));
    case 'quotient':
      return times(1 / num(e.denominator), valueOf(e.numerator, env));
    case 'power': {
      const base = valueOf(e.base, env);
      return typeof base === 'number' ? Math.pow(base, num(e.exponent)) : Math.pow(dot(base, base), num(e.exponent) / 2);
    }
    case 'call':
      return ({ abs: Math.abs, log: Math.log, cos: Math.cos, sin: Math.sin, exp: Math.exp } as Record<string, (x: number) => number>)[e.function]?.(num(e.args[0] as Expression)) ?? NaN;
    case 'vector': {
      const [a, b] = e.args.map((x) => valueOf(x, env) as Triple);
      const hat = /^\\hat\{(.*)\}$/.exec(e.name ?? '');
      const whole = env.vectors.get(hat?.[1] ?? '');
      if (whole) return scale(whole, 1 / Math.sqrt(dot(whole, whole)));
      if (e.operation === 'symbol') return env.vectors.get(e.name ?? '') ?? NaN;
      if (!a) return NaN;
      return e.operation === 'norm' ? Math.sqrt(dot(a, a)) : e.operation === 'dot' ? dot(a, b as Triple) : cross(a, b as Triple);
    }
    default:
      return NaN;
  }
}
const distance = (a: number | Triple, b: number | Triple): number => (typeof a === 'number' ? Math.abs(a - (b as number)) : Math.sqrt([0, 1, 2].reduce((s, k) => s + ((a[k] as number) - ((b as Triple)[k] as number)) ** 2, 0)));

/** A small generator of its own, so that a failure can be repeated. */
function generator(seed: number): () => number {
  let state = seed;
  return () => {
    state = (state * 1103515245 + 12345) % 2147483648;
    return state / 2147483648 - 0.5;
  };
}

describe('the remainder has the stated order for random vectors', () => {
  const small = String.raw`\mathbf{d}`;
  const formulas = [
    String.raw`\frac{1}{|\mathbf r - \mathbf d|}`,
    String.raw`|\mathbf{r}-\mathbf{d}/2|`,
    String.raw`\ln|\mathbf r + 2\mathbf d|`,
    String.raw`\frac{\mathbf p\cdot(\mathbf r - \mathbf d)}{|\mathbf r - \mathbf d|^3}`,
    String.raw`\frac{\mathbf r - \mathbf d}{|\mathbf r - \mathbf d|^3}`,
    String.raw`\sqrt{\mathbf r^2 + \mathbf r\cdot\mathbf d + 3\mathbf d^2}`,
    String.raw`\cos(\mathbf p\cdot(\mathbf r + \mathbf d))`,
    String.raw`|\mathbf p\times(\mathbf r + \mathbf d)|`,
    String.raw`(\mathbf p\times\mathbf r)\cdot(\mathbf d\times\mathbf r + \mathbf p)\,|\mathbf p + \mathbf d|`,
    String.raw`\mathbf p\cdot((\mathbf r+\mathbf d)\times\mathbf q)\,\sqrt{1 + \mathbf d^2}`,
    String.raw`(\mathbf r + \mathbf d)\times(\mathbf p\times(\mathbf r+\mathbf d))\,(1+\hat{\mathbf r}\cdot\mathbf d)`,
    String.raw`\frac{\mathbf d\cdot\hat{\mathbf r} - |\mathbf r+\mathbf d| + r}{1 + \mathbf q^2}`,
  ];
  for (const [k, text] of formulas.entries()) {
    for (const terms of [1, 3]) {
      it(`${text}, ${terms} terms`, () => {
        const found = expandedIn(text, small, terms);
        const tree = latex(text);
        const sum = partialSum(found);
        const power = found.remainder?.power?.kind === 'number' ? Number(found.remainder.power.value.num) / Number(found.remainder.power.value.den) : null;
        const random = generator(11 * k + terms);
        for (let trial = 0; trial < 4; trial += 1) {
          const vector = (size: number): Triple => [size * random(), size * random(), size * random()];
          const fixed = { r: vector(4), p: vector(4), q: vector(4), d: vector(1) };
          const errorAt = (s: number): number => {
            const vectors = new Map<string, Triple>(Object.entries({ ...fixed, d: scale(fixed.d, s) }).map(([name, v]) => [`\\mathbf{${name}}`, v]));
            const env = { vectors, scalars: new Map<string, number>() };
            return distance(valueOf(tree, env), valueOf(sum, env));
          };
          if (power === null) expect(errorAt(1)).toBeLessThan(1e-12);
          else {
            // Two steps of a factor 4: the quotient tends to 4^power; where a coefficient is nearly zero it is larger.
            const [coarse, fine] = [errorAt(2 ** -5), errorAt(2 ** -7)];
            expect(fine, `order ${power}`).toBeLessThan(coarse * 4 ** -(power - 0.4) + 1e-13);
          }
        }
      });
    }
  }
});

it('several small quantities, a vector with a scalar of weight 2', () => {
  const small = readSmall([String.raw`\mathbf d`, String.raw`\epsilon ~ \mathbf d^2`]);
  if (!small.ok) throw new Error(small.error.message);
  const quantities = small.value.map((q) => ({ symbol: q.quantity, weight: q.weight }));
  const found = expandSmall({ function: latex(String.raw`\sqrt{(\mathbf r + \mathbf d)^2 + \epsilon}`), quantities, assumptions: [], terms: 3 }, budget(20000));
  if (!found.ok) throw new Error(found.error.message);
  expect(expansionLatex(found.value)).toContain(String.raw`r + \frac{\mathbf{r} \cdot \mathbf{d}}{r} + `);
  expect(expansionNumeric(found.value).symbols['r_dot_d']).toBe(String.raw`\mathbf{r} \cdot \mathbf{d}`);
});
