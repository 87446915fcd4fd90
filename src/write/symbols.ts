/** Names of symbols in each notation. Canonical names are LaTeX without needless braces, or identifiers of code. */

import { BOLD, setBold } from '../expression/index.ts';

const GREEK: Readonly<Record<string, string>> = {
  alpha: 'α', beta: 'β', gamma: 'γ', delta: 'δ', epsilon: 'ϵ', varepsilon: 'ε', zeta: 'ζ', eta: 'η', theta: 'θ', vartheta: 'ϑ', iota: 'ι', kappa: 'κ', lambda: 'λ', mu: 'μ',
  nu: 'ν', xi: 'ξ', omicron: 'ο', pi: 'π', varpi: 'ϖ', rho: 'ρ', varrho: 'ϱ', sigma: 'σ', varsigma: 'ς', tau: 'τ', upsilon: 'υ', phi: 'ϕ', varphi: 'φ', chi: 'χ', psi: 'ψ', omega: 'ω',
  Gamma: 'Γ', Delta: 'Δ', Theta: 'Θ', Lambda: 'Λ', Xi: 'Ξ', Pi: 'Π', Sigma: 'Σ', Upsilon: 'Υ', Phi: 'Φ', Psi: 'Ψ', Omega: 'Ω', hbar: 'ℏ', ell: 'ℓ', partial: '∂', nabla: '∇',
};
const SUBSCRIPT_DIGITS = '₀₁₂₃₄₅₆₇₈₉';
const SUPERSCRIPTS: Readonly<Record<string, string>> = { '0': '⁰', '1': '¹', '2': '²', '3': '³', '4': '⁴', '5': '⁵', '6': '⁶', '7': '⁷', '8': '⁸', '9': '⁹', '-': '⁻', '−': '⁻', n: 'ⁿ' };

/** The symbol in LaTeX. Identifiers of code that LaTeX would take apart are set upright with their underscores escaped. */
export function latexSymbol(name: string): string {
  if (/^[\p{L}]$/u.test(name) || /[\\{}^']/.test(name)) return name;
  const subscripted = /^([\p{L}])_([\p{L}\p{N}])$/u.exec(name);
  if (subscripted) return name;
  if (/^[\p{L}]_[\p{L}\p{N}]+$/u.test(name)) return `${name.slice(0, 2)}{${name.slice(2)}}`;
  return `\\mathrm{${name.replace(/([_#$%&])/g, '\\$1')}}`;
}

/** Combining characters over a letter. Source: Unicode code charts, Combining Diacritical Marks and Combining Diacritical Marks for Symbols. */
const ACCENTS: Readonly<Record<string, string>> = { hat: '\u0302', widehat: '\u0302', tilde: '\u0303', widetilde: '\u0303', bar: '\u0304', overline: '\u0304', dot: '\u0307', ddot: '\u0308', dddot: '\u20db' };
const ACCENTED = new RegExp(`\\\\(${Object.keys(ACCENTS).join('|')})\\s*\\{([^{}]*)\\}`, 'g');
const BOLD_TEXT = new RegExp(`\\\\(?:${[...BOLD].join('|')})\\s*\\{([^{}]*)\\}`, 'g');

const greekLetters = (text: string): string => text.replace(/\\([A-Za-z]+)\s*/g, (whole, word: string) => GREEK[word] ?? word);
/** `ẋ`, `θ̈₁`; over several letters a mark would stand beside the middle, so that it goes behind the first. */
const accented = (whole: string, accent: string, letters: string): string => {
  const [first = '', ...rest] = [...greekLetters(letters)];
  return `${first}${ACCENTS[accent] ?? ''}${rest.join('')}`.normalize('NFC');
};

/** Primes as one character up to three: `y″`. */
export const primes = (count: number): string => (['', '′', '″', '‴'][count] ?? '′'.repeat(count));

/** One-line Unicode: `\epsilon` -> ϵ, `v_0` -> v₀, `\ddot{x}` -> ẍ, `\mathbf{r}` -> 𝐫; `k_B` stays. */
export function unicodeSymbol(name: string): string {
  const plain = greekLetters(
    name
      .replace(/\^(?:\\dagger|\{\\dagger\})/g, '†')
      .replace(BOLD_TEXT, (whole, letters: string) => setBold(greekLetters(letters)))
      .replace(/\\(?:mathrm|mathit|text|operatorname)\s*\{([^{}]*)\}/g, '$1')
      .replace(ACCENTED, accented),
  )
    .replace(/\{([^{}]*)\}/g, '$1')
    .replace(/'+/g, (marks) => primes(marks.length));
  return plain.replace(/_(\d+)/g, (whole, digits: string) => [...digits].map((d) => SUBSCRIPT_DIGITS[Number(d)]).join(''));
}

/** Raised digits, or null where the text has a sign that Unicode cannot raise. */
export function superscript(text: string): string | null {
  let raised = '';
  for (const sign of text) {
    const upper = SUPERSCRIPTS[sign];
    if (upper === undefined) return null;
    raised += upper;
  }
  return raised;
}

/** A bare identifier for the symbol: letters, digits, underscores, never empty, never starting with a digit. */
export function identifierOf(name: string): string {
  const marks = name.replace(/'/g, '_prime').replace(/\\(?:mathrm|mathbf|mathit|text|operatorname|boldsymbol|bm|vec|pmb)\s*(?=\{)/g, '').replace(/\\cdot(?![A-Za-z])/g, ' dot ').replace(/\\times(?![A-Za-z])/g, ' cross ').replace(/\\(?:left|right)(?![A-Za-z])/g, ' ');
  const words = marks.replace(/\\([A-Za-z]+)/g, ' $1 ').replace(/[^\p{L}\p{N}_]+/gu, ' ').trim();
  const ascii = words.replace(/[^\x20-\x7e]/gu, (sign) => greekWord(sign)).replace(/\s*_\s*/g, '_').replace(/\s+/g, '_');
  const safe = ascii.replace(/[^A-Za-z0-9_]/g, '');
  return safe === '' || /^_*$/.test(safe) ? 'v' : /^[0-9]/.test(safe) ? `v${safe}` : safe;
}

function greekWord(sign: string): string {
  const found = Object.entries(GREEK).find(([, letter]) => letter === sign);
  return found ? ` ${found[0]} ` : `u${sign.codePointAt(0)?.toString(16) ?? ''}`;
}

export const isGreekWord = (word: string): boolean => word in GREEK;
