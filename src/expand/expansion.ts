/** A truncated expansion as exact data: what expand/ answers and everything after it consumes. */
import type { Assumption, Expression, Rational } from '../expression/index.ts';

/** coefficient * t^power * L^log * scale, with t the local variable and L its logarithm (conventions: protocol). */
export interface ExpansionTerm {
  readonly coefficient: Expression;
  /** Exact; a rational number node unless exponents are symbolic. */
  readonly power: Expression;
  readonly log: number;
  /** A further factor on another scale (exp(-x), log(log(x))^2, cos(x - pi/4)), written in the variable; null if none. */
  readonly scale: Expression | null;
  /** With several small quantities: the weight of this block, which stands in the coefficient; `power` is then 0. */
  readonly weight?: Expression;
}

export interface ExpansionRemainder {
  /** Null where the scale is not a power of t. */
  readonly power: Expression | null;
  readonly log: number;
  readonly scale: Expression | null;
}

export interface Expansion {
  /** The function expanded, as understood. */
  readonly function: Expression;
  readonly variable: Expression;
  /** The point: an exact expression, or 'inf' / '-inf'. */
  readonly point: Expression | 'inf' | '-inf';
  readonly side: 'both' | 'right' | 'left';
  /** The tree for t in the variable: x, x - a, a - x, 1/x. */
  readonly local: Expression;
  /** The tree for L in the variable. */
  readonly logarithm: Expression;
  /** Only where the leading behaviour is not c t^p L^k: terms and remainder are inside it. */
  readonly prefactor: Expression | null;
  /** In decreasing size. */
  readonly terms: readonly ExpansionTerm[];
  /** Null only for an exact sum. */
  readonly remainder: ExpansionRemainder | null;
  readonly exact: boolean;
  readonly divergent: boolean;
  readonly oscillating: boolean;
  /** In protocol notation (`a > 0`). */
  readonly assumptions: readonly string[];
  /** Where the variable is a quantity such as v/c or theta(t): the same expansion with one symbol in its place, for numbers. */
  readonly inOneSymbol?: Expansion;
  /** Names under which algebraic numbers stand in what is read by people; the trees hold their values. */
  readonly names?: readonly { readonly symbol: Expression; readonly value: Expression }[];
  /** The general term in an index (`k`, or the next letter that is free), where proved: the function is its sum over k = 0, 1, 2, ... */
  readonly general?: Expression;
  /** Radius of convergence in t (null: infinite) and a nearest singularity, where proven. */
  readonly radius?: { readonly value: Expression | null; readonly nearest?: Expression };
  /** The other side, where it differs (this one is then the right side). */
  readonly left?: Expansion;
  readonly branches?: readonly Expansion[];
  /** Of a system of equations: the expansions of all its unknown functions. */
  readonly components?: readonly { readonly unknown: Expression; readonly expansion: Expansion }[];
}

export type { Assumption };

export interface ExpansionProblem {
  readonly function: Expression;
  /** A symbol, or a quantity made of symbols by products, quotients and powers (`v/c`). */
  readonly variable: Expression;
  readonly point: Expression | 'inf' | '-inf';
  readonly side: 'both' | 'right' | 'left';
  /** Exactly one of the two. */
  readonly terms?: number;
  readonly order?: Rational;
  readonly assumptions: readonly Assumption[];
  /** Also find the radius of convergence. Default false. */
  readonly radius?: boolean;
}

/** Expand the root of an equation (a relation with one equals sign, or an expression set to zero) in the symbol `unknown`. */
export interface RootProblem extends Omit<ExpansionProblem, 'function'> {
  readonly equation: Expression;
  readonly unknown: Expression;
  /** The value that the wanted root tends to. */
  readonly near?: Expression | 'inf' | '-inf';
  /** Also branches that are not real. */
  readonly complex?: boolean;
}

/** One of several small quantities: it becomes point + s^weight (quantity - point), and the function is expanded in s -> 0+, then s = 1. */
export interface SmallQuantity {
  readonly symbol: Expression;
  readonly weight: Rational;
  /** Default 0. */
  readonly point?: Expression;
}

/** Expand in several small quantities at once; `terms` counts blocks of equal weight. */
export interface SmallProblem extends Omit<ExpansionProblem, 'variable' | 'point' | 'side'> {
  readonly quantities: readonly SmallQuantity[];
  /** True for an iterated expansion: each quantity is smaller than every power of the ones before it; weights are then not used. */
  readonly iterated?: boolean;
}
