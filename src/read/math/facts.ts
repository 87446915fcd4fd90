/** What one pass over the tokens tells about the names in a formula: which stand before brackets, which stand alone, whether e and i are constants. */
import type { Token } from './tokens.ts';
import { GREEK } from './unicode.ts';
import { isOneVector } from './vectors.ts';

export interface NameFacts {
  /** Written with a prime or a comma in its brackets, or differentiated. */
  readonly surelyFunctions: ReadonlySet<string>;
  /** Differentiated somewhere (`\partial E_n`): a function of the author's own. */
  readonly differentiated: ReadonlySet<string>;
  /** The text shows a truncated expansion: dots, O, an approximation sign. */
  readonly truncated: boolean;
  /** Stand somewhere before a single name in brackets. */
  readonly applied: ReadonlySet<string>;
  /** Stand somewhere without brackets behind them. */
  readonly bare: ReadonlySet<string>;
  /** Single letters of plain text that stand alone somewhere, so that a run of them is a product. */
  readonly alone: ReadonlySet<string>;
  readonly eulerNumber: boolean;
  /** The imaginary unit of this text, or null. */
  readonly imaginary: 'i' | 'j' | null;
  /** Products are written with full stops (`1.3.5`). */
  readonly dotProducts: boolean;
  /** `\over` or `\choose` stands somewhere. */
  readonly infix: boolean;
  /** Letters that count: indices of sums, letters under a factorial. */
  readonly indices: ReadonlySet<string>;
}

/** Letters that name functions where an argument follows an exponent. */
export const FUNCTION_LETTER = /^(?:[fFgG]|\\(?:phi|varphi|psi|Phi|Psi))$/;

export const isName = (t: Token | undefined): boolean => t !== undefined && (t.kind === 'letter' || t.kind === 'word' || (t.kind === 'command' && GREEK.has(t.text)));
/** The spelling of a name token: `x`, `\alpha`. `\varepsilon` is `\epsilon`. */
export function nameText(t: Token): string {
  if (t.kind === 'command') return t.text === 'varepsilon' ? '\\epsilon' : `\\${t.text}`;
  return t.text;
}

export function gatherFacts(tokens: readonly Token[], match: Int32Array): NameFacts {
  const surelyFunctions = new Set<string>();
  const differentiated = new Set<string>();
  const applied = new Set<string>();
  const bare = new Set<string>();
  const alone = new Set<string>();
  const indices = new Set<string>();
  let bareE = false;
  let variableExponent = false;
  let plainSquareOnly = true;
  let sawEPower = false;
  let eulerByUse = false;
  let iBound = false;
  let jInExponent = false;
  let iSeen = false;
  let iIndex = false;
  let iInExponent = false;
  let dotProducts = false;
  const token = (i: number): Token | undefined => tokens[i];
  const is = (i: number, text: string): boolean => tokens[i]?.kind === 'mark' && tokens[i]?.text === text;

  for (let i = 0; i < tokens.length; i += 1) {
    const t = tokens[i] as Token;
    if (t.kind === 'digit' && is(i + 1, '.') && token(i + 2)?.kind === 'digit') {
      let k = i + 3;
      while (token(k)?.kind === 'digit') k += 1;
      if (is(k, '.') && token(k + 1)?.kind === 'digit') dotProducts = true;
    }
    if ((t.kind === 'command' && (t.text === 'sum' || t.text === 'prod')) && is(i + 1, '_')) {
      const index = token(i + 2)?.kind === 'open' ? token(i + 3) : token(i + 2);
      if (index && isName(index)) {
        indices.add(nameText(index));
        if (index.text === 'i') iBound = true;
      }
    }
    if (!isName(t)) continue;
    const name = nameText(t);
    if (t.kind === 'letter' && !(isName(token(i - 1)) && !t.spaced) && !(token(i + 1)?.kind === 'letter' && token(i + 1)?.spaced === false)) alone.add(name);
    let k = i + 1;
    let primes = false;
    let subscripted = false;
    let full = name;
    for (;;) {
      if (is(k, "'") && k < i + 40) {
        primes = true;
        k += 1;
      } else if (is(k, '_') && !subscripted) {
        subscripted = true;
        const open = k + 1;
        const end = token(open)?.kind === 'open' && (match[open] ?? -1) > 0 ? (match[open] as number) : open;
        for (let inner = open; inner <= end && inner < open + 20; inner += 1) if (token(inner)?.kind === 'letter' && token(inner)?.text === 'i') iIndex = true;
        full += tokens.slice(k, end + 1).map((x) => (x.kind === 'command' ? `\\${x.text}` : x.kind === 'open' || x.kind === 'close' ? '' : x.text)).join('');
        k = end + 1;
      } else break;
    }
    if (is(k, '!')) indices.add(name);
    const bracket = is(k, '(') || is(k, '[');
    if (primes) surelyFunctions.add(full);
    if (bracket) {
      if (match[k] === k + 2 && isName(token(k + 1))) applied.add(full);
      const close = match[k] ?? -1;
      let inner = k + 1;
      if (isOneVector(tokens, match, inner, close)) surelyFunctions.add(full);
      for (; inner < close && inner < k + 400; inner += 1) {
        if (tokens[inner]?.kind === 'open' || is(inner, '(')) {
          inner = Math.max(inner, match[inner] ?? inner);
          continue;
        }
        if (is(inner, ',') || is(inner, ';')) {
          surelyFunctions.add(full);
          break;
        }
      }
    } else if (!primes && !raisedBeforeArgument(tokens, match, k, name)) bare.add(full);
    const before = token(i - 1);
    if (before?.kind === 'command' && before.text === 'partial' && !is(i + 1, '^')) {
      // `\partial E_n` in a numerator: E_n is differentiated. Denominators hold variables.
      let depth = i - 1;
      while (depth > 0 && tokens[depth]?.kind !== 'open') depth -= 1;
      const command = token(depth - 1);
      if (command?.kind === 'command' && /frac$/.test(command.text)) {
        surelyFunctions.add(full);
        differentiated.add(full);
      }
    }
    if (name === 'e' && !subscripted && !t.upright) {
      if (is(i + 1, '^')) {
        sawEPower = true;
        const exponent = exponentText(tokens, match, i + 2);
        if (!/^[24]$/.test(exponent)) plainSquareOnly = false;
        if (!/^\d+$/.test(exponent)) variableExponent = true;
      } else if (token(i + 1)?.kind === 'super') {
        sawEPower = true;
        if (!/^[24]$/.test(token(i + 1)?.text ?? '')) plainSquareOnly = false;
      } else if ((is(i - 1, '/') && !bracket) || (token(i - 1)?.kind === 'open' && token(i + 1)?.kind === 'close' && token(i - 2)?.kind === 'close') || underBar(tokens, i)) eulerByUse = true;
      else bareE = true;
    }
    if (name === 'i' && !subscripted) {
      iSeen = true;
      if (insideEulerExponent(tokens, match, i)) iInExponent = true;
    }
    if (name === 'j' && !iSeen && insideEulerExponent(tokens, match, i)) jInExponent = true;
  }
  const words = tokens.some((t) => t.kind === 'command' && /^(?:ln|log|lim|exp)$/.test(t.text));
  const eulerNumber = variableExponent || eulerByUse || (!bareE && sawEPower && !(plainSquareOnly && !words));
  const truncated = tokens.some((t, i) => (t.kind === 'command' && /^(?:[cl]?dots.?|approx|sim|simeq|mathcal|order)$/.test(t.text)) || t.text === '...' || (/^[Oo]$/.test(t.text) && tokens[i + 1]?.text === '('));
  const infix = tokens.some((t) => t.kind === 'command' && (t.text === 'over' || t.text === 'choose'));
  return { infix, surelyFunctions, differentiated, truncated, applied, bare, alone, eulerNumber, imaginary: jInExponent ? 'j' : iBound || (iIndex && !iInExponent) ? null : 'i', dotProducts, indices };
}

/** `^2(t)`: a power of the value of a function, where its argument is one letter. */
function raisedBeforeArgument(tokens: readonly Token[], match: Int32Array, at: number, name: string): boolean {
  if (tokens[at]?.text !== '^' || tokens[at]?.kind !== 'mark') return false;
  const first = tokens[at + 1];
  const after = first?.kind === 'open' ? (match[at + 1] ?? -1) + 1 : at + 2;
  if (tokens[after]?.text !== '(') return false;
  return (match[after] === after + 2 && isName(tokens[after + 1])) || (FUNCTION_LETTER.test(name) && exponentText(tokens, match, at + 1) === '-1');
}

/** The token alone is the denominator of a fraction whose numerator is one token: `\frac ne`, `\frac1{e}`. */
function underBar(tokens: readonly Token[], at: number): boolean {
  const braced = tokens[at - 1]?.kind === 'open' && tokens[at + 1]?.kind === 'close';
  const bar = tokens[at - (braced ? 3 : 2)];
  return bar?.kind === 'command' && /^[dtc]?frac$/.test(bar.text);
}

function exponentText(tokens: readonly Token[], match: Int32Array, at: number): string {
  const first = tokens[at];
  if (!first) return '';
  if (first.kind !== 'open') return first.text;
  const close = match[at] ?? at;
  return tokens.slice(at + 1, Math.min(close, at + 12)).map((t) => t.text).join('');
}

/** Whether the token stands in `e^{...}` or `\exp(...)`. Looks back at most 60 tokens. */
function insideEulerExponent(tokens: readonly Token[], match: Int32Array, at: number): boolean {
  for (let k = at - 1; k >= Math.max(0, at - 60); k -= 1) {
    const t = tokens[k];
    if (!t || (match[k] ?? -1) <= at) {
      if (t?.text === '^' && k === at - 1 && tokens[k - 1]?.text === 'e') return true;
      continue;
    }
    const caret = tokens[k - 1];
    if (t.kind === 'open' && caret?.text === '^' && tokens[k - 2]?.text === 'e') return true;
    if (caret?.text === 'exp') return true;
  }
  return false;
}
