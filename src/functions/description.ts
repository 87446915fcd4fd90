/**
 * What is known of one function of mathematics, in one place: names, derivative, domain, expansions, enclosure.
 * Adding a function is adding one description to a file of this folder and listing it in registry.ts.
 * Descriptions stand on expression/ and rigorous/ only; coefficients are exact expressions, which algebra/ turns into field elements.
 */
import type { Expression, Rational } from '../expression/index.ts';
import type { Ball, ComplexBall } from '../rigorous/index.ts';

/** How the function is written. The first name of a list is the one used for writing, all are read. */
export interface FunctionNames {
  /** LaTeX commands or operator names with their backslash where they have one: `\sin`, `\operatorname{artanh}`, `\Gamma`. Spelled without needless braces or spaces; `\mathrm{erf}` and `\text{erf}` are looked up as `\operatorname{erf}`. */
  readonly latex: readonly string[];
  /** Single letters of the trade (`J`, `K`, `W`, `E`) which are this function only where index and bracket have the shape given by `latexIndices` and the arity; elsewhere they are symbols. */
  readonly latexLetters?: readonly string[];
  /** How many leading arguments stand as an index of the name in LaTeX, and where: `J_{\nu}(x)` has one subscript, `\psi^{(n)}(x)` one superscript in parentheses. Absent: none. */
  readonly latexIndices?: { readonly count: number; readonly place: 'subscript' | 'superscript' };
  /** Writing that is not name(args): `\Gamma(x)` is default; `J_{\nu}(x)` needs a template. Arguments are LaTeX already. */
  readonly latexForm?: (args: readonly string[]) => string;
  /** Plain words in comments and plain text (`arctan`, `ln`), beside the id itself. */
  readonly plain?: readonly string[];
  /** Unicode line, if it is not name(args). */
  readonly unicodeForm?: (args: readonly string[]) => string;
  /** As a Python expression in the names of the mpmath library; arguments are such expressions already. */
  readonly mpmath: (args: readonly string[]) => string;
  /** Bare library names per language id family (`c`, `cpp`, `python`, `javascript`, `rust`, `java`, `csharp`, `go`, `julia`, `fortran`, `matlab`, `r`, `glsl`, `hlsl`, `kotlin`, `swift`), without prefix (`std::`, `np.`, `Math.`) and without float suffix. Absent: the language has no such library call. */
  readonly code: Readonly<Record<string, readonly string[]>>;
  /** Library names whose arguments differ from the description's (order, added indices), keyed `family:name`. `read` gives null where the call does not fit. */
  readonly codeArguments?: Readonly<Record<string, { readonly read: (args: readonly Expression[]) => readonly Expression[] | null; readonly write: (args: readonly Expression[]) => readonly Expression[] | null }>>;
}

/** Where the varying argument goes. `offset` is the symbol of a small quantity u with argument = center + u. */
export type Place =
  | { readonly kind: 'finite'; readonly center: Expression; readonly offset: Expression; /** Sign of u where known. */ readonly side: 'right' | 'left' | 'both' | 'complex' }
  /** The argument grows without bound; direction 1 or -1 on the real line, or a complex phase as an exact expression. */
  | { readonly kind: 'infinite'; readonly argument: Expression; readonly direction: 1 | -1 | Expression };

/** How the second of two arguments that grow together stands to the first, positive one: by a constant difference, or by a constant positive ratio, which may be known to lie below or above 1. */
export type Together = { readonly kind: 'difference'; readonly value: Expression } | { readonly kind: 'ratio'; readonly value: Expression; readonly size: 'below' | 'above' | 'unknown' };

/** sum over k >= 0 of coefficient(k) * argument^k, argument -> 0. Coefficients are exact. */
export interface FormalSeries {
  readonly argument: Expression;
  readonly coefficient: (k: number) => Rational | Expression;
  /** True where the series diverges for every non-zero argument (asymptotic only). */
  readonly divergent: boolean;
  /** Set where the series is finite: number of coefficients. */
  readonly length?: number;
}

/** The function near a place, as an expression in elementary functions and formal series. A symbol in `body` whose name is a key of `formals` stands for that series; `body` may hold an O-term where the function is a sum over scales that no power series gives (Dirichlet series, powers of log log x). */
export interface LocalForm {
  readonly body: Expression;
  readonly formals: Readonly<Record<string, FormalSeries>>;
  /** Assumptions (protocol notation) under which the form holds, beyond those of the place. */
  readonly assumptions?: readonly string[];
  /** Exponentially small parts that were dropped: the form equals the function only to all orders of its series. */
  readonly subdominantDropped?: boolean;
  readonly source?: string;
}

export interface FunctionDescription {
  /** camelCase, used in CallNode.function. */
  readonly id: string;
  /** Trade name in words, for messages. */
  readonly title: string;
  /** Number of arguments, or inclusive range. */
  readonly arity: number | readonly [number, number];
  readonly names: FunctionNames;
  /** Exact rewriting into more elementary functions, valid on the whole domain with principal values: sec -> 1/cos, expm1 -> exp - 1. */
  readonly definition?: (args: readonly Expression[]) => Expression;
  /** Partial derivative in argument `index`; null where there is none in closed form. */
  readonly derivative?: (args: readonly Expression[], index: number) => Expression | null;
  /** Exact special values (sin(pi/6), Gamma(1/2), zeta(2)); null: no simpler form known. */
  readonly value?: (args: readonly Expression[]) => Expression | null;
  readonly parity?: 'even' | 'odd';
  /** Behaviour when argument `index` approaches a place where the function is not analytic, or where a better stream of coefficients than repeated differentiation is known. Null: regular there (use derivative or equation) or unknown. */
  readonly local?: (args: readonly Expression[], index: number, place: Place) => LocalForm | null;
  /** Behaviour where both arguments of a function of two grow together; `first` is the first of them. Null: unknown. */
  readonly together?: (relation: Together, first: Expression) => LocalForm | null;
  /**
   * Linear differential equation in the varying argument z: sum over j of p_j(z) f^(j)(z) = 0, p_j as polynomials with exact coefficients, lowest power first.
   * Gives Taylor coefficients at any regular point from the values of f, f', ... there.
   */
  readonly equation?: (args: readonly Expression[], index: number) => { readonly polynomials: readonly (readonly Expression[])[]; readonly initial: readonly ((point: Expression) => Expression)[] } | null;
  /** Real-line domain in words for messages ("x > 0"), and the points where f is not analytic, for radii and discs. */
  readonly domain?: string;
  /** Rigorous enclosure at real or complex balls; null where this precision or region is out of reach. Never an estimate. `check` is called in long loops and throws where the time is up. */
  readonly enclose?: (args: readonly ComplexBall[], precision: number, check?: () => void) => ComplexBall | null;
  readonly encloseReal?: (args: readonly Ball[], precision: number, check?: () => void) => Ball | null;
  readonly source?: string;
}
