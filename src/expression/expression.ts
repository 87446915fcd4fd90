/**
 * The one tree that readers produce and everything else consumes. Nodes are plain readonly data.
 * A node says what is written, not how it is laid out; `span` says where, in UTF-16 code units of the text that was read.
 */
import type { Rational } from './rational.ts';

/** Half-open range of UTF-16 code units: `start` inclusive, `end` exclusive. */
export interface Span {
  readonly start: number;
  readonly end: number;
}

interface Node {
  /** Absent on nodes that were computed rather than read. */
  readonly span?: Span;
}

/** An exact number. `written` keeps the literal as it stands where that matters (a decimal, a float suffix). */
export interface NumberNode extends Node {
  readonly kind: 'number';
  readonly value: Rational;
  readonly written?: string;
}

/** Named constants. `i` is the imaginary unit, `infinity` the unsigned word of limits (negate it for minus infinity). */
export type ConstantName = 'pi' | 'e' | 'i' | 'eulerGamma' | 'catalan' | 'glaisher' | 'infinity';
export interface ConstantNode extends Node {
  readonly kind: 'constant';
  readonly name: ConstantName;
}

/** A symbol by its canonical name: LaTeX source without needless braces or spaces (`x`, `\epsilon`, `v_0`, `k_B`, `v_{max}`), or the identifier in code (`theta_sq`, `self.x`). */
export interface SymbolNode extends Node {
  readonly kind: 'symbol';
  readonly name: string;
}

export interface SumNode extends Node {
  readonly kind: 'sum';
  /** At least two. A subtraction is the sum with a negation. */
  readonly terms: readonly Expression[];
}
export interface ProductNode extends Node {
  readonly kind: 'product';
  /** At least two. */
  readonly factors: readonly Expression[];
}
export interface QuotientNode extends Node {
  readonly kind: 'quotient';
  readonly numerator: Expression;
  readonly denominator: Expression;
}
export interface NegationNode extends Node {
  readonly kind: 'negation';
  readonly operand: Expression;
}
/** base^exponent, principal value. `e^x` is a power whose base is the constant e. `\sqrt{x}` is x^(1/2). */
export interface PowerNode extends Node {
  readonly kind: 'power';
  readonly base: Expression;
  readonly exponent: Expression;
}
/** `\sqrt[n]{x}`, cbrt: the real root where n is odd (protocol.md); n a positive integer at least 3, or a symbol. */
export interface RootNode extends Node {
  readonly kind: 'root';
  readonly degree: Expression;
  readonly radicand: Expression;
}
/** A known function of mathematics, by the id of its description in src/functions (`sin`, `log`, `besselJ`, `abs`, `factorial`, ...). */
export interface CallNode extends Node {
  readonly kind: 'call';
  readonly function: string;
  readonly args: readonly Expression[];
  /** The name as written in the text, where known (`std::exp`, `\ln`, `sinf`). */
  readonly written?: string;
}
/** An unspecified function: `f(x+h)`, `y''(t)`, `u_{xx}`. `derivatives[i]` counts differentiations in argument i. */
export interface ApplyNode extends Node {
  readonly kind: 'apply';
  readonly name: string;
  readonly args: readonly Expression[];
  readonly derivatives: readonly number[];
}
/** An O-term or o-term as written. */
export interface OrderNode extends Node {
  readonly kind: 'order';
  readonly little: boolean;
  readonly argument: Expression;
}
/** `\dots`, `...` as a member of a sum or product. */
export interface DotsNode extends Node {
  readonly kind: 'dots';
}
export interface DerivativeNode extends Node {
  readonly kind: 'derivative';
  readonly body: Expression;
  readonly variable: Expression;
  /** Number of differentiations, at least 1. */
  readonly times: number;
}
/** Without limits: the antiderivative that vanishes at 0 (or the plainest one where 0 is no regular point). */
export interface IntegralNode extends Node {
  readonly kind: 'integral';
  readonly body: Expression;
  readonly variable: Expression;
  readonly lower?: Expression;
  readonly upper?: Expression;
}
/** A sum or product over an index, both limits inclusive. */
export interface IndexedNode extends Node {
  readonly kind: 'indexedSum' | 'indexedProduct';
  readonly body: Expression;
  readonly index: Expression;
  readonly lower: Expression;
  readonly upper: Expression;
}
export interface LimitNode extends Node {
  readonly kind: 'limit';
  readonly body: Expression;
  readonly variable: Expression;
  readonly target: Expression;
}
/** A condition choosing between branches: `c ? a : b` in code, `cases` in LaTeX. */
export interface PiecewiseNode extends Node {
  readonly kind: 'piecewise';
  readonly branches: readonly { readonly condition: Expression | null; readonly value: Expression }[];
}
/** What stands between two sides. `about` is an approximation sign, `tilde` \sim or ~, `to` an arrow, `define` := or \equiv. */
export type Relation = '=' | 'about' | 'tilde' | 'to' | 'define' | '<' | '<=' | '>' | '>=' | '!=' | 'propto' | 'll' | 'gg';
/** A chain `side0 relations[0] side1 relations[1] side2 ...`: one more side than relations. */
export interface RelationNode extends Node {
  readonly kind: 'relation';
  readonly sides: readonly Expression[];
  readonly relations: readonly Relation[];
  readonly relationSpans?: readonly Span[];
}
/**
 * Vectors and operators, kept as written until expand/vectors or expand/noncommuting reads them: a bold letter (`symbol`, its LaTeX in `name`), |v|, a dot b, a cross b, a list of components;
 * `directional`: args[0] differentiated along each further argument, (a . nabla)(b . nabla) f; `ordered`: a product whose factors keep their order; [A, B] and {A, B}; `trace` and `determinant` of args[0].
 */
export type VectorOperation = 'symbol' | 'norm' | 'dot' | 'cross' | 'tuple' | 'directional' | 'ordered' | 'commutator' | 'anticommutator' | 'trace' | 'determinant';
export interface VectorNode extends Node {
  readonly kind: 'vector';
  readonly operation: VectorOperation;
  readonly name?: string;
  readonly args: readonly Expression[];
}

export type Expression =
  | NumberNode
  | ConstantNode
  | SymbolNode
  | SumNode
  | ProductNode
  | QuotientNode
  | NegationNode
  | PowerNode
  | RootNode
  | CallNode
  | ApplyNode
  | OrderNode
  | DotsNode
  | DerivativeNode
  | IntegralNode
  | IndexedNode
  | LimitNode
  | PiecewiseNode
  | RelationNode
  | VectorNode;

export type ExpressionKind = Expression['kind'];
