/** How one document writes its mathematics. A reader finds it in the text; writers follow it, so that what is inserted looks as if its author had typed it. */
export interface DocumentStyle {
  readonly order: OrderStyle;
  /** The command of a built-up fraction in running mathematics. `slash` writes `x^3/6`. */
  readonly fraction: '\\frac' | '\\tfrac' | '\\dfrac' | 'slash';
  /** `inside`: `\frac{17x^6}{45}`; `outside`: `\frac{17}{45}x^6`. */
  readonly coefficient: 'inside' | 'outside';
  readonly logarithm: '\\ln' | '\\log';
  /** What stands between a function and its truncated expansion when no remainder is printed. */
  readonly approximation: string;
  /** The habit at the end of an expansion: an O-term, dots, or nothing (then the approximation sign is used). */
  readonly ending: 'order' | 'dots' | 'none';
  readonly dots: '\\cdots' | '\\dots' | '\\ldots' | '...';
  /** How e^x is written: `e^{x}` or `\exp(x)`; `euler` is the text of Euler's number (`e`, `\mathrm{e}`). */
  readonly exponential: 'power' | '\\exp';
  readonly euler: string;
  /** The imaginary unit (`i`, `\mathrm{i}`, `j`). */
  readonly imaginary: string;
  /** Parentheses that grow (`\left( \right)`) or plain ones; `auto` grows them only around what is tall. */
  readonly parentheses: 'auto' | 'plain';
}

/** The text of an O-term: macro and how it takes its argument (`O(x)`, `\order{x}`, `O\left(x\right)`); `little` is the macro of o-terms. */
export interface OrderStyle {
  readonly macro: string;
  readonly little: string;
  readonly argument: 'parentheses' | 'braces' | 'growing';
}

/** What is written where a document shows no habit of its own. */
export const PLAIN_STYLE: DocumentStyle = {
  order: { macro: 'O', little: 'o', argument: 'parentheses' },
  fraction: '\\frac',
  coefficient: 'inside',
  logarithm: '\\ln',
  approximation: '\\approx',
  ending: 'order',
  dots: '\\cdots',
  exponential: 'power',
  euler: 'e',
  imaginary: 'i',
  parentheses: 'auto',
};
