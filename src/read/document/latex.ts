/** Mathematics and code of a LaTeX document. One pass over the characters, each looked at a bounded number of times. */
import { groupEnd } from '../math/macros.ts';
import type { Region } from './regions.ts';
import { formulasOf, labelsOf } from './rows.ts';

const MATH = new Set('equation align alignat gather multline eqnarray flalign displaymath math IEEEeqnarray dmath xalignat xxalignat empheq dgroup'.split(' '));
const VERBATIM = new Set('verbatim Verbatim lstlisting minted comment filecontents alltt BVerbatim LVerbatim spverbatim listing pycode sagesilent'.split(' '));
const DEFINITIONS = /^(?:re|provide)?newcommand$|^providecommand$|^renewcommand$|^DeclareRobustCommand$|^DeclareMathOperator$|^(?:re)?newenvironment$|^DeclarePairedDelimiter$/;
/** Longest inline formula; a dollar sign without a partner in reach is money. */
const LONGEST_INLINE = 4000;
const MOST_MISSES = 100;

/** All mathematics and code of `text` between `from` and `to`, in order. */
export function latexRegions(text: string, from = 0, to = text.length): readonly Region[] {
  const out: Region[] = [];
  /** Openers without a partner so far; beyond the cap none is searched for, which keeps half-typed documents linear. */
  let misses = 0;
  const missed = (): void => {
    misses += 1;
  };
  let i = from;
  while (i < to) {
    const c = text.charCodeAt(i);
    if (c === 37) i = lineEnd(text, i, to);
    else if (c === 36) i = dollars(i);
    else if (c === 92) i = command(i);
    else i += 1;
  }
  return out;

  function math(start: number, end: number, contentStart: number, contentEnd: number, kind: 'inline' | 'display' | 'environment', environment: string | null): void {
    const formulas = formulasOf(text, contentStart, contentEnd, environment);
    const [label, tag] = kind === 'inline' ? [undefined, undefined] : labelsOf(text.slice(contentStart, contentEnd));
    out.push({ start, end, contentStart, contentEnd, kind, ...(environment === null ? {} : { environment }), ...(label === undefined ? {} : { label }), ...(tag === undefined ? {} : { tag }), language: 'latex', formulas });
  }

  function dollars(at: number): number {
    const double = text.charCodeAt(at + 1) === 36;
    const begin = at + (double ? 2 : 1);
    if (misses > MOST_MISSES) return begin;
    const reach = Math.min(to, begin + LONGEST_INLINE);
    const balanced = double ? displayEnd(text, begin, to) : inlineEnd(text, begin, reach, true);
    // Braces still open while the formula is being typed: the next dollar sign ends it.
    const end = balanced < 0 && !double ? inlineEnd(text, begin, reach, false) : balanced;
    if (end < 0 || end === begin) {
      missed();
      return begin;
    }
    const close = end + (double ? 2 : 1);
    math(at, close, begin, end, double ? 'display' : 'inline', null);
    return close;
  }

  function command(at: number): number {
    const next = text.charCodeAt(at + 1);
    if (next === 91 || next === 40) {
      const closer = next === 91 ? '\\]' : '\\)';
      const end = misses > MOST_MISSES ? -1 : delimiterEnd(text, at + 2, to, closer);
      if (end < 0) {
        missed();
        return at + 2;
      }
      math(at, end + 2, at + 2, end, next === 91 ? 'display' : 'inline', null);
      return end + 2;
    }
    if (!isLetter(next)) return at + 2;
    let k = at + 2;
    while (k < to && isLetter(text.charCodeAt(k))) k += 1;
    const name = text.slice(at + 1, k);
    if (name === 'begin') return begin(at, k);
    if (name === 'verb' || name === 'lstinline' || name === 'mintinline') return inlineVerbatim(name, k);
    if (name === 'def' || name === 'gdef' || name === 'edef') {
      const open = text.indexOf('{', k);
      if (open < 0 || open > k + 200) return k;
      const close = misses > MOST_MISSES ? -1 : groupEnd(text, open);
      if (close < 0) missed();
      return close < 0 ? k : close + 1;
    }
    if (DEFINITIONS.test(name)) return definition(k);
    if (name === 'iffalse') {
      const close = text.indexOf('\\fi', k);
      return close < 0 ? k : close + 3;
    }
    if (name === 'end' && text.startsWith('{document}', k)) return to;
    return k;
  }

  /** Past the name, the optional arguments and the bodies of a definition. */
  function definition(at: number): number {
    let k = at;
    let groups = 0;
    while (k < to && groups < 3) {
      const c = text.charAt(k);
      if (c === '{') {
        const close = misses > MOST_MISSES ? -1 : groupEnd(text, k);
        if (close < 0) {
          missed();
          return k + 1;
        }
        k = close + 1;
        groups += 1;
      } else if (c === '[') {
        const close = text.indexOf(']', k);
        if (close < 0 || close > k + 200) return k + 1;
        k = close + 1;
      } else if (c === '\\' && groups === 0) {
        k += 1;
        while (k < to && isLetter(text.charCodeAt(k))) k += 1;
        groups = 1;
      } else if (/[\s*]/.test(c) && (groups < 2 || c === '*')) k += 1;
      else break;
      if (groups === 2) break;
    }
    return k;
  }

  function inlineVerbatim(name: string, from0: number): number {
    let k = from0;
    if (text.charAt(k) === '*') k += 1;
    if (name !== 'verb') {
      if (text.charAt(k) === '[') k = Math.max(k, text.indexOf(']', k) + 1);
      if (name === 'mintinline' && text.charAt(k) === '{') k = Math.max(k, groupEnd(text, k) + 1);
      if (text.charAt(k) === '{') {
        const close = groupEnd(text, k);
        return close < 0 ? k + 1 : close + 1;
      }
    }
    const sign = text.charAt(k);
    const close = sign === '' ? -1 : text.indexOf(sign, k + 1);
    const line = lineEnd(text, k, to);
    return close < 0 || close > line ? k : close + 1;
  }

  function begin(at: number, k: number): number {
    if (text.charAt(k) !== '{') return k;
    const nameEnd = text.indexOf('}', k);
    if (nameEnd < 0 || nameEnd > k + 60) return k + 1;
    const name = text.slice(k + 1, nameEnd);
    const plain = name.replace(/\*$/, '');
    const contentStart = nameEnd + 1;
    if (VERBATIM.has(plain)) {
      const closer = `\\end{${name}}`;
      const end = text.indexOf(closer, contentStart);
      const stop = end < 0 ? to : end;
      let language: string | null = null;
      let bodyStart = contentStart;
      if (plain === 'minted' || plain === 'lstlisting') {
        let body = contentStart;
        if (text.charAt(body) === '[') {
          const close = text.indexOf(']', body);
          if (close > 0 && close < stop) {
            language = /language\s*=\s*\{?(?:\[[^\]]*\])?([\w+#]+)/.exec(text.slice(body, close))?.[1] ?? null;
            body = close + 1;
          }
        }
        if (plain === 'minted' && text.charAt(body) === '{') {
          const close = text.indexOf('}', body);
          if (close > 0 && close < stop) {
            language = text.slice(body + 1, close);
            body = close + 1;
          }
        }
        bodyStart = body;
      }
      const finish = end < 0 ? to : end + closer.length;
      if (language !== null) out.push({ start: at, end: finish, contentStart: bodyStart, contentEnd: stop, kind: 'code', environment: plain, language: language.toLowerCase(), formulas: [] });
      return finish;
    }
    if (!MATH.has(plain)) return contentStart;
    let bodyStart = contentStart;
    if (/at$/.test(plain) || plain === 'IEEEeqnarray' || plain === 'empheq') {
      while (text.charAt(bodyStart) === '[') {
        const close = text.indexOf(']', bodyStart);
        if (close < 0 || close > bodyStart + 200) break;
        bodyStart = close + 1;
      }
      if (text.charAt(bodyStart) === '{') {
        const close = groupEnd(text, bodyStart);
        if (close > 0 && close < bodyStart + 200) bodyStart = close + 1;
      }
    }
    const end = misses > MOST_MISSES ? -1 : environmentEnd(text, contentStart, to, name);
    if (end < 0) {
      missed();
      return contentStart;
    }
    const finish = end + `\\end{${name}}`.length;
    math(at, finish, bodyStart, end, 'environment', name);
    return finish;
  }
}

const isLetter = (c: number): boolean => (c >= 65 && c <= 90) || (c >= 97 && c <= 122) || c === 64;

/** Only blanks up to the next line end. */
function isBlankLine(text: string, from: number): boolean {
  for (let i = from; i < text.length; i += 1) {
    const c = text.charCodeAt(i);
    if (c === 10) return true;
    if (c !== 32 && c !== 9 && c !== 13) return false;
  }
  return false;
}

function lineEnd(text: string, from: number, to: number): number {
  const line = text.indexOf('\n', from);
  return line < 0 || line > to ? to : line + 1;
}

/** The closing dollar of inline mathematics: outside braces where `balanced`, before a blank line; -1 where there is none. */
const inlineEnd = (text: string, from: number, to: number, balanced: boolean): number => dollarEnd(text, from, to, (_, braces) => braces <= 0 || !balanced);

const displayEnd = (text: string, from: number, to: number): number => dollarEnd(text, from, to, (i, braces) => braces <= 0 && text.charCodeAt(i + 1) === 36);

/** The first dollar that `closes`, escapes and comments passed over, before a blank line; -1 where there is none. */
function dollarEnd(text: string, from: number, to: number, closes: (at: number, braces: number) => boolean): number {
  let braces = 0;
  for (let i = from; i < to; i += 1) {
    const c = text.charCodeAt(i);
    if (c === 92) i += 1;
    else if (c === 37) i = lineEnd(text, i, to) - 1;
    else if (c === 123) braces += 1;
    else if (c === 125) braces -= 1;
    else if (c === 36 && closes(i, braces)) return i;
    else if (c === 10 && isBlankLine(text, i + 1)) return -1;
  }
  return -1;
}

function delimiterEnd(text: string, from: number, to: number, closer: string): number {
  for (let i = from; i < to; i += 1) {
    const c = text.charCodeAt(i);
    if (c === 92) {
      if (text.startsWith(closer, i)) return i;
      i += 1;
    } else if (c === 37) i = lineEnd(text, i, to) - 1;
    else if (c === 10 && isBlankLine(text, i + 1)) return -1;
  }
  return -1;
}

/** Start of the `\end` that closes the environment, inner ones of the same name skipped. A blank line does not end it. */
function environmentEnd(text: string, from: number, to: number, name: string): number {
  const open = `\\begin{${name}}`;
  const close = `\\end{${name}}`;
  let depth = 0;
  for (let i = from; i < to; i += 1) {
    const c = text.charCodeAt(i);
    if (c === 37) i = lineEnd(text, i, to) - 1;
    else if (c === 92) {
      if (text.startsWith(close, i)) {
        if (depth === 0) return i;
        depth -= 1;
      } else if (text.startsWith(open, i)) depth += 1;
      i += 1;
    }
  }
  return -1;
}
