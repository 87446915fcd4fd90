/** Proofs that something is not identically zero because it varies with a parameter. No numbers are needed, so that functions without an enclosure are served too. */
import type { AssumptionStore } from './assumptions.ts';
import { NEVER_ZERO, NOT_ANALYTIC, TRANSCENDENTAL } from './callSigns.ts';
import type { Kernel, KernelTable } from './kernel.ts';
import { exponentIn } from './monomial.ts';
import { isOnePolynomial } from './polynomial.ts';
import { allKernels, kernelsOf } from './kernelsOf.ts';
import { isQuotient } from './quotientParts.ts';
import type { Element } from './types.ts';

/** Parameters that vary continuously: not those stated to be integers. */
function continuousParameters(table: KernelTable, facts: AssumptionStore, kernels: Iterable<number>): ReadonlySet<number> {
  const found = new Set<number>();
  for (const k of kernels) {
    const { shape } = table.kernels[k] as Kernel;
    if (shape.kind === 'parameter' && !facts.isInteger(shape.name)) found.add(k);
  }
  return found;
}

const isConstantZero = (a: Element): boolean => !isQuotient(a) && a.num === 0n;

const isIndependent = (k: Kernel): boolean =>
  k.shape.kind === 'parameter' || k.shape.kind === 'integer' || k.shape.kind === 'imaginary' || k.shape.kind === 'apply' || (k.shape.kind === 'constant' && k.shape.name === 'pi');

/** Whether the element is proven to vary: in its normal form over independent kernels, or by two balls that do not meet (`differs`). */
function varies(table: KernelTable, facts: AssumptionStore, a: Element, differs: (a: Element) => boolean): boolean {
  if (continuousParameters(table, facts, allKernels(table, a)).size === 0) return false;
  return [...kernelsOf(a)].every((k) => isIndependent(table.kernels[k] as Kernel)) || differs(a);
}

/**
 * A log or call kernel that is not identically zero: it has no zeros, or is analytic and varies with a continuous parameter through some argument while no other is 0.
 * `differs` tells whether balls at two choices of the parameters are disjoint.
 */
export function cannotVanish(table: KernelTable, facts: AssumptionStore, k: Kernel, differs: (a: Element) => boolean): boolean {
  const { shape } = k;
  if (shape.kind === 'log') return varies(table, facts, shape.argument, differs);
  if (shape.kind !== 'call') return false;
  if (NEVER_ZERO.has(shape.id)) return true;
  if (NOT_ANALYTIC.has(shape.id) || shape.args.some(isConstantZero)) return false;
  return shape.args.some((a) => varies(table, facts, a, differs));
}

/**
 * True if for some parameter p exactly one kernel of the numerator depends on p through a function that is transcendental over the rational functions of p, everything else
 * being rational in p, and some positive power of that kernel has a coefficient proven non-zero: then the numerator cannot vanish identically in p.
 */
export function variesByOneKernel(table: KernelTable, facts: AssumptionStore, a: Element): boolean {
  if (!isQuotient(a) || isOnePolynomial(a.numerator)) return false;
  const kernels = [...new Set(a.numerator.flatMap((t) => t.monomial.kernels))];
  const dependents = kernels.map((k) => ({ k, on: parametersOf(table, k) }));
  for (const p of continuousParameters(table, facts, dependents.flatMap((d) => [...d.on]))) {
    const varying = dependents.filter((d) => d.on.has(p) && d.k !== p);
    const [only] = varying;
    if (varying.length !== 1 || !only || !isTranscendentalIn(table, only.k, p)) continue;
    const degrees = a.numerator.map((t) => ({ degree: exponentIn(t.monomial, only.k), others: t.monomial.kernels.filter((k) => k !== only.k) }));
    if (degrees.some((t) => typeof t.degree !== 'number')) continue;
    const proven = degrees.some(
      (t) => t.degree !== 0 && degrees.filter((u) => u.degree === t.degree).every((u) => u.others.every((k) => isIndependent(table.kernels[k] as Kernel))),
    );
    if (proven) return true;
  }
  return false;
}

function parametersOf(table: KernelTable, index: number): ReadonlySet<number> {
  const kernel = table.kernels[index] as Kernel;
  const { shape } = kernel;
  if (shape.kind === 'parameter') return new Set([index]);
  const args =
    shape.kind === 'call' || shape.kind === 'apply' ? shape.args : shape.kind === 'log' || shape.kind === 'abs' ? [shape.argument] : shape.kind === 'radicand' ? [shape.base] : shape.kind === 'exp' ? [shape.unit] : shape.kind === 'power' ? [shape.base, shape.unit] : [];
  const found = new Set<number>();
  for (const a of args) for (const k of allKernels(table, a)) if ((table.kernels[k] as Kernel).shape.kind === 'parameter') found.add(k);
  return found;
}

/** exp, log and the listed functions of a rational function that varies with p. */
function isTranscendentalIn(table: KernelTable, index: number, p: number): boolean {
  const { shape } = table.kernels[index] as Kernel;
  const argument = shape.kind === 'exp' ? shape.unit : shape.kind === 'log' ? shape.argument : shape.kind === 'call' && shape.args.length === 1 && TRANSCENDENTAL.has(shape.id) ? shape.args[0] : undefined;
  if (argument === undefined || !isQuotient(argument)) return false;
  const own = kernelsOf(argument);
  return own.has(p) && [...own].every((k) => isIndependent(table.kernels[k] as Kernel)) && argument.monomial.exponents.every((e) => typeof e === 'number');
}
