/** What the parts of one field share. */
import type { Expression, Rational } from '../expression/index.ts';
import { Declined, type Budget } from '../outcome.ts';
import type { FunctionDescription } from '../functions/description.ts';
import type { Kernel, KernelShape, KernelTable } from './kernel.ts';
import { monomialOf, UNIT } from './monomial.ts';
import { compareExponents, type Exponent } from './exponent.ts';
import { addElements, elementFromMonomial, elementKey, negateElement } from './quotient.ts';
import { isQuotient } from './quotientParts.ts';
import { normalise } from './normalForm.ts';
import type { SignRules } from './signs.ts';
import type { Element, Truth } from './types.ts';

/** log(argument) = sum of coefficient * log kernel, principal values throughout. */
export interface JoinedLogarithm {
  readonly argument: Element;
  readonly value: Element;
  readonly parts: ReadonlyMap<number, Rational>;
}

export interface Context {
  readonly table: KernelTable;
  readonly budget: Budget;
  readonly signs: SignRules;
  readonly describe: (id: string) => FunctionDescription | null | undefined;
  readonly isZero: (a: Element) => Truth;
  /** A tree as an element. */
  readonly read: (e: Expression) => Element;
  /** Results of calls so far, by key. */
  readonly calls: Map<string, Element>;
  /** Logarithms of products met so far, by the key of their split form: for writing only. */
  readonly joined: Map<string, JoinedLogarithm>;
  /** Keys of u where a root of u/n or u m/n was taken: for writing only. */
  readonly fractionRoots: Set<string>;
  readonly call: (id: string, args: readonly Element[]) => Element;
  /** Sign of an element without parameters by balls; null where it stays open or is not real. */
  readonly signOfNumber: (a: Element) => -1 | 1 | null;
  /** Sign of the real part of an element without parameters by balls; null where it stays open. */
  readonly signOfRealPart: (a: Element) => -1 | 1 | null;
  /** Whether the assumptions make the symbol an integer. */
  readonly isInteger: (name: string) => boolean;
}

export const kernelElement = (ctx: Context, k: Kernel, exponent: Exponent = 1): Element => elementFromMonomial(ctx.table, monomialOf(k.index, exponent));

export function parameterKernel(ctx: Context, name: string): Kernel {
  return ctx.table.intern(`$${name}`, () => ({ shape: { kind: 'parameter', name } }));
}
export function constantKernel(ctx: Context, name: Extract<KernelShape, { kind: 'constant' }>['name']): Kernel {
  return ctx.table.intern(`#${name}`, () => ({ shape: { kind: 'constant', name } }));
}
export function imaginaryKernel(ctx: Context): Kernel {
  return ctx.table.intern('#i', () => ({
    shape: { kind: 'imaginary' },
    relation: { period: 2, value: [{ monomial: UNIT, coefficient: -1n }], pure: true, numeric: true },
  }));
}
export function integerKernel(ctx: Context, value: bigint): Kernel {
  return ctx.table.intern(`integer ${value}`, () => ({
    shape: { kind: 'integer', value },
    relation: { period: 1, value: [{ monomial: UNIT, coefficient: value }], pure: true, numeric: true },
  }));
}
export const expKernel = (ctx: Context, unit: Element): Kernel => ctx.table.intern(`exp ${elementKey(unit)}`, () => ({ shape: { kind: 'exp', unit } }));
export const powerKernel = (ctx: Context, base: Element, unit: Element): Kernel =>
  ctx.table.intern(`power ${elementKey(base)} to ${elementKey(unit)}`, () => ({ shape: { kind: 'power', base, unit } }));
export const logKernel = (ctx: Context, argument: Element): Kernel => ctx.table.intern(`log ${elementKey(argument)}`, () => ({ shape: { kind: 'log', argument } }));

/** The call as a kernel; an equal argument seen before, though in another form, gives the same kernel. */
export function callKernel(ctx: Context, id: string, args: readonly Element[]): Kernel {
  const key = callKey(id, args);
  const known = ctx.table.find(key);
  if (known) return known;
  for (const k of ctx.table.kernels) {
    if (k.shape.kind !== 'call' || k.shape.id !== id || k.shape.args.length !== args.length) continue;
    const same = k.shape.args.every((x, i) => {
      const y = args[i] as Element;
      return elementKey(x) === elementKey(y) || ctx.isZero(minus(ctx, x, y)) === 'yes';
    });
    if (same) return k;
  }
  const kernel = ctx.table.intern(key, () => ({ shape: { kind: 'call', id, args } }));
  const partner = PARTNERS[id];
  const other = partner ? ctx.table.find(callKey(partner, args)) : undefined;
  if (other) {
    const [sine, cosine] = id === 'sin' || id === 'cosh' ? [kernel.index, other.index] : [other.index, kernel.index];
    ctx.table.circles.push({ sine, cosine, factor: id === 'sin' || id === 'cos' ? -1n : 1n });
  }
  return kernel;
}

/** a with 1 - sin^2 = cos^2 and its kin applied where that shortens it, also where the partner of a function was not met before: a root or logarithm then sees the square. */
export function withSquaresJoined(ctx: Context, a: Element): Element {
  if (!isQuotient(a) || a.numerator.length < 2) return a;
  let involved = false;
  for (const t of a.numerator) {
    t.monomial.kernels.forEach((index, i) => {
      const { shape } = ctx.table.kernels[index] as Kernel;
      const partner = shape.kind === 'call' ? PARTNERS[shape.id] : undefined;
      if (shape.kind !== 'call' || partner === undefined || compareExponents(t.monomial.exponents[i] as Exponent, 2) < 0) return;
      callKernel(ctx, partner, shape.args);
      involved = true;
    });
  }
  return involved ? normalise(ctx.table, a.content, a.monomial, a.numerator, a.denominator, true) : a;
}

const callKey = (id: string, args: readonly Element[]): string => `${id}(${args.map(elementKey).join(', ')})`;

const PARTNERS: Readonly<Record<string, string>> = { sin: 'cos', cos: 'sin', sinh: 'cosh', cosh: 'sinh' };

export function applyKernel(ctx: Context, name: string, derivatives: readonly number[], args: readonly Element[]): Kernel {
  return ctx.table.intern(`@${name}[${derivatives.join(',')}](${args.map(elementKey).join(', ')})`, () => ({ shape: { kind: 'apply', name, derivatives, args } }));
}

export const minus = (ctx: Context, a: Element, b: Element): Element => addElements(ctx.table, a, negateElement(b));

export const undecided = (message: string): Declined => new Declined('undecided', message);
/** What is proven to have no value. */
export const valueless = (message: string): Declined => new Declined('no-expansion', message);
export const rationalOf = (a: Element): Rational | null => ('num' in a ? a : null);
export const isZeroRational = (a: Element): boolean => 'num' in a && a.num === 0n;
