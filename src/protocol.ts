/**
 * The engine's contract: one request, one answer, both JSON. Editor, webview, command line and tests all speak it.
 * The conventions (local variable, side, values) are stated in DEVELOPERS.md, "The engine's protocol". Offsets count UTF-16 code units.
 */

/** Another file of the document's project, handed over by the host. */
export interface CompanionFile {
  /** Its path, as the host knows it or relative to the document; `/` between folders. */
  readonly name: string;
  readonly text: string;
}

interface CommonRequest {
  readonly id?: string | number;
  /** The text and its VS Code language identifier, or `plain`. */
  readonly text: string;
  readonly language: string;
  /** As written in the text (`x`, `\epsilon`, `\frac{v}{c}`); may be left out where the text shows only one candidate. */
  readonly variable?: string;
  /** Instead of `variable`: several small quantities, with weights (`\epsilon ~ \theta^2`) or an order (`y << x`). */
  readonly small?: readonly string[];
  /** Non-zero base points of the small quantities, by name. */
  readonly points?: Readonly<Record<string, string>>;
  /** `0` (default), `inf`, `-inf`, or an exact expression. */
  readonly point?: string;
  readonly side?: Side;
  readonly unknown?: string;
  readonly near?: string;
  readonly complex?: boolean;
  readonly assume?: readonly string[];
  readonly budget_ms?: number;
  /** What becomes of constants that code defines beside the expression (`const double g = 9.81;`): kept as symbols (default) or their values filled in. */
  readonly constants?: 'symbols' | 'values';
  /** Cursor or selection in `text`, where the text is a whole document and the expression has to be found in it. */
  readonly selection?: { readonly start: number; readonly end: number };
  /** Files that the document refers to (`companions.ts` names and gathers them): their macros and definitions are known. Later files win, the text itself last. */
  readonly files?: readonly CompanionFile[];
}

export type Side = 'both' | 'right' | 'left';
export type Measure = 'absolute' | 'relative';
export type FitMeasure = Measure | 'ulp';

export interface ExpandRequest extends CommonRequest {
  readonly ask: 'expand';
  /** Number of monomials t^p L^k; default 4. Exclusive with `order`. */
  readonly terms?: number;
  /** Keep every term t^q with q < order. A number or an exact rational (`7/2`). */
  readonly order?: number | string;
  /** Closed interval, exact ends. */
  readonly interval?: readonly [string, string];
  readonly tolerance?: number | string;
  readonly measure?: Measure;
  /** A value at which function, sum and error are wanted. */
  readonly at?: string;
  /** Parts of the answer that cost extra time and are only made when asked for. */
  readonly details?: readonly Detail[];
}

/** `reading`: what was understood. `ladder`: bounds for 1..n terms. `reach`: proven distances for 2, 3, 4 terms. `plot`: samples. `insertion`: the result as the document would write it. */
export type Detail = 'reading' | 'ladder' | 'reach' | 'plot' | 'insertion';

export interface FitRequest extends CommonRequest {
  readonly ask: 'fit';
  /** Not needed beside `intervals`. */
  readonly interval: readonly [string, string];
  /** Of hypot(x, y) and atan2(y, x): one closed interval a variable, by its name. */
  readonly intervals?: Readonly<Record<string, readonly [string, string]>>;
  readonly tolerance?: number | string;
  readonly degree?: number;
  readonly measure?: FitMeasure;
  /** `binary32`, `binary64`, `binary16`, `bfloat16`, `fixed:m.n`. */
  readonly format?: string;
  readonly emit?: string;
  readonly basis?: 'even' | 'odd' | 'all';
  /** So many leading coefficients of the expansion at 0 are kept as they are (1: the value there is exact). They must be numbers of the format. */
  readonly exact?: number;
  readonly form?: 'horner' | 'estrin';
  readonly contraction?: 'any' | 'none' | 'fma';
  readonly method?: 'minimax' | 'taylor' | 'economized' | 'rational';
  readonly pieces?: number | 'auto';
  /** The function asserts that its arguments lie in the interval, in the language's way. */
  readonly assertion?: boolean;
  /** Floats that the leading coefficient is the sum of: 1, 2, by default 2 only where a relative tolerance is not kept with 1. Two words are two coefficients of one power, the larger first. */
  readonly words?: 1 | 2;
  /** Whether the argument of exp, log, sin, cos, asin, acos, atan or a constant power is reduced to a small interval first: `auto` (default) where a plain polynomial would need a degree above 12 for the tolerance. A degree is that on the small interval. */
  readonly reduction?: 'auto' | 'none' | 'always';
  /** Code as a function (default) or as one expression in the variable. */
  readonly result?: 'function' | 'expression';
  /** `plot`: samples of the error in the measure. Made only when asked for. */
  readonly details?: readonly 'plot'[];
}

export interface GuardRequest extends CommonRequest {
  readonly ask: 'guard';
  readonly interval?: readonly [string, string];
  readonly format?: string;
  readonly emit?: string;
  readonly tolerance?: number | string;
  /** Assumed error of each library call in ulp; default 1. */
  readonly library?: number;
  /** Also a guarded form of the derivative, with the same switch where that serves it. */
  readonly derivative?: boolean;
}

export interface CheckRequest extends CommonRequest {
  readonly ask: 'check';
  /** The function, where the text holds only its expansion. */
  readonly of?: string;
}

export type Request = ExpandRequest | FitRequest | GuardRequest | CheckRequest;

export interface TermAnswer {
  readonly coefficient: string;
  readonly power: string;
  readonly log: number;
  readonly scale?: string;
}

export interface RemainderAnswer {
  readonly latex: string;
  /** Null where the scale is not a power. */
  readonly power: string | null;
  readonly log: number;
}

export interface NumericAnswer {
  readonly syntax: 'mpmath';
  readonly sum: string;
  readonly scale: string;
  /** Name in `sum` and `scale` -> its LaTeX. */
  readonly symbols: Readonly<Record<string, string>>;
}

export interface BoundAnswer {
  /** Decimal, rounded up; null where the remainder is unbounded on the interval. */
  readonly value: string | null;
  /** Proven lower bound of the supremum, rounded down. */
  readonly lower: string | null;
  readonly method: string;
  /** With free parameters the bound is value * factor. */
  readonly factor?: string;
  /** Where the remainder is unbounded. */
  readonly place?: string;
  /** Steps of the proof, in a form a reader can re-check. */
  readonly proof?: readonly string[];
}

export interface NeededAnswer {
  readonly terms: number | null;
  readonly order?: string;
  readonly bound?: string;
  readonly minimal?: boolean;
  readonly reason?: string;
  readonly estimate?: number;
  readonly best?: { readonly terms: number; readonly bound: string };
  /** `closed`: at the distance itself the tolerance is kept (true) or cannot be (false), each proven; absent where only every smaller distance is decided. */
  readonly reach?: { readonly distance: string; readonly closed?: boolean };
  /** Degree of a fitted polynomial that would keep the tolerance, where no truncated expansion does. */
  readonly fittedDegree?: number;
}

export interface LadderRow {
  readonly terms: number;
  readonly order: string;
  readonly bound: string | null;
}

/** For a number of terms: the largest proven distance from the point (1/|x| at infinity) within which the tolerance holds. Without `details`, a `tolerance` without `interval` is answered by the row of the terms asked for. */
export interface ReachRow {
  readonly terms: number;
  readonly order: string;
  /** Decimal rounded down; `inf` where the sum is exact. */
  readonly distance: string | null;
}

export interface ExpandAnswer {
  readonly id?: string | number;
  readonly ok: true;
  readonly terms: readonly TermAnswer[];
  readonly prefactor?: string;
  readonly remainder: RemainderAnswer | null;
  readonly exact: boolean;
  readonly latex: string;
  /** One line of Unicode. */
  readonly text: string;
  /** Function = expansion, typeset. */
  readonly equation?: string;
  readonly numeric: NumericAnswer;
  readonly general?: string;
  readonly radius?: { readonly value: string; readonly nearest?: string };
  readonly divergent?: boolean;
  readonly oscillating?: boolean;
  readonly assumptions: readonly string[];
  readonly bound?: BoundAnswer;
  readonly needed?: NeededAnswer;
  readonly ladder?: readonly LadderRow[];
  readonly reach?: readonly ReachRow[];
  readonly at?: { readonly argument: string; readonly function: string; readonly sum: string; readonly error: string; readonly percent: string | null; /** Enclosures behind the shown digits. */ readonly enclosures?: unknown };
  /** With `at`, of a divergent series: how many terms stand before the least one, where the sum is best stopped, and that term's size there, rounded up. */
  readonly leastTerm?: { readonly terms: number; readonly size: string };
  readonly left?: ExpandAnswer;
  readonly branches?: readonly ExpandAnswer[];
  /** Of an equation simplified in place: each replaced piece, as LaTeX, and its leading terms. `latex` and `text` are then the whole equation; `terms`, `remainder` and `numeric` are those of the piece where there is one, else `terms` is empty and `numeric` is left minus right side. */
  readonly replaced?: readonly ReplacedAnswer[];
  /** Of a system of differential equations: all its unknown functions, as LaTeX, with their expansions. */
  readonly components?: readonly { readonly unknown: string; readonly expansion: ExpandAnswer }[];
  readonly value?: { readonly low: string; readonly high: string };
  /** How the value of a definite integral was enclosed. */
  readonly proof?: readonly string[];
  /** What was understood: function, variable, point, and where each came from. */
  readonly reading?: ReadingAnswer;
  /** Samples of function and partial sum over the interval, doubles, for drawing only. */
  readonly plot?: PlotAnswer;
  readonly insertion?: InsertionAnswer;
}

/** A piece of an equation and what stands in its place. */
export interface ReplacedAnswer {
  readonly from: string;
  /** With its O-term. */
  readonly to: string;
  /** |from - to|/|from|: `percent` at the request's `at`; with `interval` the proven `bound` of its supremum there, and a proven lower bound of that. */
  readonly relativeError?: { readonly percent?: string | null; readonly bound?: string | null; readonly lower?: string | null };
}

/** The result as it would stand in the document that was asked about. */
export interface InsertionAnswer {
  /** Relation, expansion and remainder in the document's own style (`= x - \frac{x^3}{6} + \mathcal{O}(x^5)`). */
  readonly continuation: string;
  /** The expansion alone, without relation. */
  readonly expansion: string;
  /** The sum as one expression of the document's programming language, and the lines that its file needs; null in prose and where the language cannot say it. */
  readonly code: { readonly text: string; readonly imports: readonly string[] } | null;
}

/** A constant that code defines beside the expression, and whether its value was filled in. */
export interface ConstantAnswer {
  readonly name: string;
  /** Plain notation. */
  readonly value: string;
  readonly filled: boolean;
  /** Declared nowhere in the text: what the name means by common practice. */
  readonly assumed?: true;
}

export interface ReadingAnswer {
  readonly latex: string;
  readonly start: number;
  readonly end: number;
  readonly variable: string;
  readonly variableLatex: string;
  readonly point: string;
  readonly pointLatex: string;
  readonly side: Side;
  /** Other symbols and dimensionless ratios that could be the small quantity. */
  readonly candidates: readonly string[];
  /** Constants of the code around that stand in the expression. */
  readonly constants?: readonly ConstantAnswer[];
}

export interface PlotAnswer {
  readonly x: readonly number[];
  readonly f: readonly (number | null)[];
  readonly sum: readonly (number | null)[];
  /** |f - sum|, from more digits than the two columns have. */
  readonly error?: readonly (number | null)[];
}

export type Verdict = 'holds' | 'fails' | 'undecided';
export interface Finding {
  /** The wrong piece (the whole claim where it holds). */
  readonly start: number;
  readonly end: number;
  readonly claim: { readonly start: number; readonly end: number };
  readonly verdict: Verdict;
  readonly severity: 'error' | 'hint' | 'none';
  readonly reason: string;
  /** What is right, in the author's notation, where it is known. */
  readonly found: string;
  readonly fix: { readonly start: number; readonly end: number; readonly text: string } | null;
  /** `\label` or equation number near the claim. */
  readonly label?: string;
}
export interface CheckAnswer {
  readonly id?: string | number;
  readonly ok: true;
  readonly findings: readonly Finding[];
  /** Formulas that could not be read, never a failure. */
  readonly unread: readonly { readonly start: number; readonly end: number; readonly reason: string }[];
}

export interface CoefficientAnswer {
  readonly power: number;
  readonly value: string;
  readonly hex: string;
}
export interface FitBound {
  readonly approximation: string;
  readonly rounding: string;
  readonly evaluation: string;
  readonly total: string;
  readonly method: string;
  readonly measure: FitMeasure;
  readonly subnormal?: string;
}
export interface FitPieceAnswer {
  readonly from: string;
  readonly to: string;
  readonly coefficients: readonly CoefficientAnswer[];
  readonly degree: number;
  readonly centre?: string;
  /** Proven total error on this piece, in the measure. */
  readonly bound: string;
}
/** How the argument is reduced, in words, and the polynomials in the reduced argument `r` that stand for `function` on [from, to]. */
export interface FitReductionAnswer {
  readonly method: string;
  readonly kernels: readonly { readonly function: string; readonly from: string; readonly to: string; readonly coefficients: readonly CoefficientAnswer[]; readonly degree: number; readonly centre?: string }[];
}
export interface FitAnswer {
  readonly id?: string | number;
  readonly ok: true;
  readonly coefficients: readonly CoefficientAnswer[];
  readonly degree: number;
  readonly bound: FitBound;
  readonly code: string;
  readonly taylorDegree: number | null;
  readonly assumptions?: readonly string[];
  /** The lines that the code needs at the head of its file; `code` has them in front. */
  readonly imports?: readonly string[];
  /** The polynomial is in x - centre, a float; absent for 0. */
  readonly centre?: string;
  /** Of a rational form; `coefficients` are those of its numerator. */
  readonly denominator?: readonly CoefficientAnswer[];
  /** Where the interval was split: the polynomials in ascending order. `coefficients` and `centre` above are then those of the first one, `degree` and `bound` the largest. */
  readonly pieces?: readonly FitPieceAnswer[];
  /** Where the argument is reduced first. `coefficients` and `centre` above are then those of the first kernel, `degree` the largest. */
  readonly reduction?: FitReductionAnswer;
  /** Of a function of two variables: these, as `intervals` names them, in the order in which the emitted function takes them. */
  readonly arguments?: readonly string[];
  readonly operations?: { readonly multiplications: number; readonly additions: number; readonly fused: number };
  readonly plot?: FitPlotAnswer;
  readonly speed?: FitSpeedAnswer;
}
/** For the eye: the error of the polynomial with its rounded coefficients, evaluated exactly, at about 200 arguments. `bound` is the proven one and includes the rounding of the evaluation. */
export interface FitPlotAnswer {
  readonly x: readonly number[];
  /** Signed (polynomial - function) in the unit of `measure`; null where it has no value. */
  readonly error: readonly (number | null)[];
  readonly bound: number;
  /** What was asked for; null where a degree was. */
  readonly tolerance: number | null;
  readonly measure: FitMeasure;
}
/** An estimate from counted operations, no measurement: costs in units of one multiplication of the format. Absent where code is interpreted. */
export interface FitSpeedAnswer {
  /** Of the emitted code. */
  readonly code: number;
  /** Of the calls and operations that it replaces. */
  readonly call: number;
  /** call / code: above 1 the emitted code is expected to be faster. */
  readonly ratio: number;
}

export interface GuardAnswer {
  readonly id?: string | number;
  readonly ok: true;
  /** Exact forms in order of proven bound; `identities` name the steps that made each of them. */
  readonly forms: readonly { readonly text: string; readonly bound: string; readonly identities?: readonly string[] }[];
  readonly ranges: readonly { readonly from: string; readonly to: string; readonly form: string; readonly bound: string }[];
  readonly switch: string | null;
  readonly terms: number | null;
  readonly bound: { readonly series: string | null; readonly direct: string | null; readonly whole: string };
  readonly code: string;
  /** The lines that the code needs at the head of its file. */
  readonly imports?: readonly string[];
  readonly assumptions: readonly string[];
  /** The interval that the bounds hold on, given or proposed, and the format. */
  readonly interval?: readonly [string, string];
  readonly format?: string;
  /** The derivative's own guard, where it was asked for. */
  readonly derivative?: GuardAnswer;
}

export type ErrorCode = 'unreadable' | 'unknown-function' | 'no-expansion' | 'needs-assumption' | 'undecided' | 'over-budget' | 'bad-request';
export interface Failure {
  readonly code: ErrorCode;
  /** One plain sentence that says what to do next. */
  readonly message: string;
  readonly start?: number;
  readonly end?: number;
  /** Where it is not plain which quantity is small: what it could be. */
  readonly candidates?: readonly string[];
}
export interface ErrorAnswer {
  readonly id?: string | number;
  readonly ok: false;
  readonly error: Failure;
}

export type Answer = ExpandAnswer | FitAnswer | GuardAnswer | CheckAnswer | ErrorAnswer;
export type AnswerTo<R extends Request> = R extends ExpandRequest ? ExpandAnswer | ErrorAnswer : R extends FitRequest ? FitAnswer | ErrorAnswer : R extends GuardRequest ? GuardAnswer | ErrorAnswer : CheckAnswer | ErrorAnswer;
