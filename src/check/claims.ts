/** Claims in a chain of relations: which side is the function, which the printed expansion. */
import { children, freeSymbols, type Expression, type Relation, type RelationNode, type Span, walk } from '../expression/index.ts';
import { isBareName } from '../read/index.ts';
import { hasFactorDots, hasMarks } from './truncated.ts';

export interface Claim {
  /** Null where every other side is only a name. */
  readonly function: Expression | null;
  /** The name that stands for the function, if one does. */
  readonly name: Expression | null;
  readonly side: Expression;
  readonly relation: Relation;
  /** From the function's side to the end of the printed expansion. */
  readonly span: Span;
  /** The side printed directly before, where it is another form of the same chain. */
  readonly neighbour: Expression | null;
  /** The printed side is the variable alone (sin x ~ x): meant as an expansion only where words of smallness or accuracy stand beside. */
  readonly bare?: true;
}

const COMPARING: ReadonlySet<Relation> = new Set<Relation>(['=', 'about', 'tilde', 'to', 'define']);

/** Every pair of the chain in which one side could be a truncated expansion of the other. Sides that an inequality leads to are left out. */
export function claimsOf(chain: RelationNode): readonly Claim[] {
  const { sides, relations } = chain;
  const exacts = sides.filter((s) => !isBareName(s) && !hasMarks(s));
  /** The side of which the printed one can be an expansion: it speaks of the same symbols, and is known. */
  const exactFor = (side: Expression): Expression | null => {
    const names = freeSymbols(side);
    const shares = (s: Expression): boolean => s === side || freeSymbols(s).some((n) => names.includes(n));
    const known = (s: Expression): boolean => ![...walk(s)].some((n) => n.kind === 'apply');
    return exacts.find((s) => shares(s) && known(s)) ?? exacts.find(shares) ?? exacts[0] ?? null;
  };
  const out: Claim[] = [];
  const spanOf = (from: Expression, to: Expression): Span => ({ start: Math.min(from.span?.start ?? chain.span?.start ?? 0, to.span?.start ?? 0), end: Math.max(from.span?.end ?? 0, to.span?.end ?? chain.span?.end ?? 0) });
  relations.forEach((relation, i) => {
    if (!COMPARING.has(relation)) return;
    const [left, right] = [sides[i], sides[i + 1]];
    if (!left || !right || hasFactorDots(right) || hasFactorDots(left)) return;
    if (isBareName(right) && !isBareName(left) && hasMarks(left)) {
      // The expansion printed first: x - x^3/6 + O(x^5) = f.
      if (i === 0) out.push({ function: null, name: right, side: left, relation, span: spanOf(left, right), neighbour: null });
      return;
    }
    if (right.kind === 'symbol' && relation === 'about' && isTranscendental(left, right.name)) {
      out.push({ function: left, name: null, side: right, relation, span: spanOf(left, right), neighbour: null, bare: true });
      return;
    }
    if (isBareName(right)) return;
    if (!hasMarks(right) && hasMarks(left) && i === 0) {
      out.push({ function: right, name: null, side: left, relation, span: spanOf(left, right), neighbour: null });
      return;
    }
    const exact = exactFor(right);
    const f = exact && exact !== right && sides.indexOf(exact) <= i ? exact : isBareName(left) || (hasMarks(left) && hasMarks(right) && i > 0) ? null : left;
    const name = f ? null : (sides.slice(0, i + 1).find(isBareName) ?? null);
    if (!f && !name) return;
    out.push({ function: f, name, side: right, relation, span: spanOf(f ?? name ?? left, right), neighbour: left === f || isBareName(left) ? null : left });
  });
  return out;
}

/** What a chain defines: a bare name (or f(x)) on the left of = or :=, a formula without marks behind it. */
export function definitionOf(chain: RelationNode): { readonly name: Expression; readonly value: Expression } | null {
  const [name] = chain.sides;
  if (!name || !isBareName(name) || !(name.kind === 'symbol' || name.kind === 'apply')) return null;
  const index = chain.sides.findIndex((s, i) => i > 0 && !isBareName(s) && !hasMarks(s) && (chain.relations[i - 1] === '=' || chain.relations[i - 1] === 'define') && chain.relations.slice(0, i).every((r) => r === '=' || r === 'define'));
  const value = chain.sides[index];
  return value && ![...walk(value)].some((n) => n !== value && sameName(n, name)) ? { name, value } : null;
}

/** T, T(\theta) and T(x) name one quantity. */
export function sameName(a: Expression, b: Expression): boolean {
  const nameOf = (e: Expression): string | null => (e.kind === 'symbol' ? e.name : e.kind === 'apply' && e.derivatives.every((d) => d === 0) ? e.name : null);
  const [x, y] = [nameOf(a), nameOf(b)];
  return x !== null && x === y;
}

/** A formula in which something could be expanded: it holds more than sums and products of powers. */
export function isTranscendental(e: Expression, variable: string): boolean {
  const visit = (node: Expression): boolean => {
    switch (node.kind) {
      case 'number':
      case 'constant':
      case 'symbol':
        return false;
      case 'sum':
      case 'product':
      case 'negation':
        return children(node).some(visit);
      case 'quotient':
        return visit(node.numerator) || mentions(node.denominator, variable, true);
      case 'power':
        return node.exponent.kind === 'number' && node.exponent.value.den === 1n && node.exponent.value.num >= 0n ? visit(node.base) : mentions(node, variable, false);
      default:
        return mentions(node, variable, false);
    }
  };
  return visit(e);
}

/** The variable occurs; a single power of it in a denominator does not count where `monomialAllowed`. */
function mentions(e: Expression, variable: string, monomialAllowed: boolean): boolean {
  const found = [...walk(e)].some((n) => n.kind === 'symbol' && n.name === variable);
  if (!found || !monomialAllowed) return found;
  return [...walk(e)].some((n) => n.kind === 'sum' || n.kind === 'call');
}
