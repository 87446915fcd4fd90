/** The kernels that an element is made of. */
import type { Kernel, KernelTable } from './kernel.ts';
import { isQuotient } from './quotientParts.ts';
import { kernelsIn } from './polynomial.ts';
import type { Element } from './types.ts';

/** Indices of all kernels that occur. */
export function kernelsOf(a: Element): ReadonlySet<number> {
  const found = new Set<number>();
  if (!isQuotient(a)) return found;
  for (const k of a.monomial.kernels) found.add(k);
  for (const k of kernelsIn(a.numerator)) found.add(k);
  for (const f of a.denominator) for (const k of kernelsIn(f.polynomial)) found.add(k);
  return found;
}

/** Kernels of the element and of all that they are built on. */
export function allKernels(table: KernelTable, a: Element): ReadonlySet<number> {
  const found = new Set<number>();
  const open: Element[] = [a];
  for (let x = open.pop(); x; x = open.pop()) {
    for (const k of kernelsOf(x)) {
      if (found.has(k)) continue;
      found.add(k);
      const { shape } = table.kernels[k] as Kernel;
      if (shape.kind === 'radicand') open.push(shape.base);
      else if (shape.kind === 'exp') open.push(shape.unit);
      else if (shape.kind === 'power') open.push(shape.base, shape.unit);
      else if (shape.kind === 'log' || shape.kind === 'abs') open.push(shape.argument);
      else if (shape.kind === 'call' || shape.kind === 'apply') open.push(...shape.args);
    }
  }
  return found;
}
