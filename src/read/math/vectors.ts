/** Which pieces of a formula are vectors or operators, as far as the notation shows it. */
import { BOLD, type Expression, isVectorName, walk } from '../../expression/index.ts';
import type { Token } from './tokens.ts';

const HAT = /^\\(?:wide)?hat\{/;

/** Sums, multiples and cross products of bold letters. Dot products and norms are scalars. */
export function isVectorValued(e: Expression): boolean {
  switch (e.kind) {
    case 'vector':
      return e.operation === 'symbol' || e.operation === 'cross';
    case 'apply':
      return isVectorName(e.name);
    case 'sum':
      return e.terms.some(isVectorValued);
    case 'negation':
      return isVectorValued(e.operand);
    case 'product':
      return e.factors.filter(isVectorValued).length === 1;
    case 'quotient':
      return isVectorValued(e.numerator);
    default:
      return false;
  }
}

/** Both sides of a dot or cross as vectors: a letter under a hat beside a vector is a unit vector. Null where the sign only multiplies. */
export function vectorPair(left: Expression, right: Expression): readonly [Expression, Expression] | null {
  const isHat = (e: Expression): boolean => e.kind === 'symbol' && HAT.test(e.name);
  const fits = (isVectorValued(left) && (isVectorValued(right) || isHat(right))) || (isHat(left) && isVectorValued(right));
  return fits ? [asVector(left), asVector(right)] : null;
}
const asVector = (e: Expression): Expression => (e.kind === 'symbol' ? { kind: 'vector', operation: 'symbol', name: e.name, args: [], ...(e.span ? { span: e.span } : {}) } : e);

/** What a pair of bars means around the value: the length of a vector, else the absolute value. */
export const between = (value: Expression, written: string): Expression => (isVectorValued(value) ? { kind: 'vector', operation: 'norm', args: [value] } : { kind: 'call', function: 'abs', args: [value], written });

/** Both entries of `[A, B]` hold a letter that can stand for an operator: a capital, a letter under a hat, a bold one. */
export const isOperatorPair = (args: readonly Expression[]): boolean =>
  args.length === 2 &&
  args.every((a) => [...walk(a)].some((e) => (e.kind === 'symbol' && (/^[A-Z]/.test(e.name) || HAT.test(e.name))) || (e.kind === 'vector' && e.operation !== 'norm' && e.operation !== 'dot')));

/** Whether the tokens from `from` up to `to` are one bold letter with its primes and indices: `V(\mathbf{r})`. */
export function isOneVector(tokens: readonly Token[], match: Int32Array, from: number, to: number): boolean {
  const first = tokens[from];
  if (first?.kind !== 'command' || !BOLD.has(first.text)) return false;
  let k = from + 1;
  k = tokens[k]?.kind === 'open' ? (match[k] ?? k) + 1 : k + 1;
  for (; k < to; k += 1) {
    const t = tokens[k];
    if (t?.kind === 'mark' && t.text === '_') k = tokens[k + 1]?.kind === 'open' ? (match[k + 1] ?? k + 1) : k + 1;
    else if (!(t?.kind === 'mark' && t.text === "'") && t?.kind !== 'space' && t?.kind !== 'sub') return false;
  }
  return true;
}
