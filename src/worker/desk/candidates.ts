/** Symbols and dimensionless ratios near a place that could be the small quantity, likeliest first. Only a proposal: nothing is expanded by it. */
import type { Place } from './types.ts';

const LETTERS = /\\(?:epsilon|varepsilon|delta|theta|vartheta|alpha|beta|gamma|lambda|eta|mu|nu|omega|phi|varphi|tau|rho|sigma|xi|zeta|kappa|hbar)(?:_(?:\{[^{}]*\}|[A-Za-z0-9]))?(?![A-Za-z])|(?<![\\A-Za-z{])[A-Za-z](?:_(?:\{[^{}]*\}|[A-Za-z0-9]))?(?![A-Za-z])/g;
const RATIO = /\\[dt]?frac\s*\{\s*([A-Za-z](?:_\w)?|\\[a-z]+)\s*\}\s*\{\s*([A-Za-z](?:_\w)?|\\[a-z]+)\s*\}|\b([A-Za-z])\s*(?:\^\s*\d)?\s*\/\s*([A-Za-z])\b/g;
const IDENTIFIER = /(?<![\w.])[A-Za-z_]\w*(?!\w*\s*\()/g;
const NOT_SMALL = new Set(['e', 'i', 'd', 'O', 'o', 'f', 'g', 'N', 'return', 'double', 'float', 'const', 'let', 'var', 'int', 'def', 'fn', 'if', 'else', 'for', 'in', 'real', 'auto', 'static', 'math', 'np', 'std', 'Math', 'pi', 'PI', 'self', 'this']);
const MOST = 8;

export function candidatesIn(text: string, language: string, selection: Place): readonly string[] {
  const around = selection.end > selection.start ? text.slice(selection.start, selection.end) : lineAround(text, selection.start);
  const prose = language === 'latex' || language === 'markdown';
  const found = prose ? [...ratios(around), ...symbols(around, LETTERS)] : symbols(around, IDENTIFIER);
  return [...new Set(found)].slice(0, MOST);
}

function ratios(text: string): readonly string[] {
  return [...text.matchAll(RATIO)].map((match) => (match[1] !== undefined ? `\\frac{${match[1]}}{${match[2] ?? ''}}` : `${match[3] ?? ''}/${match[4] ?? ''}`));
}

function symbols(text: string, pattern: RegExp): readonly string[] {
  const counts = new Map<string, number>();
  for (const [symbol] of text.matchAll(pattern)) if (!NOT_SMALL.has(symbol)) counts.set(symbol, (counts.get(symbol) ?? 0) + 1);
  return [...counts].sort((a, b) => b[1] - a[1]).map(([symbol]) => symbol);
}

function lineAround(text: string, at: number): string {
  const start = text.lastIndexOf('\n', at - 1) + 1;
  const end = text.indexOf('\n', at);
  return text.slice(start, end < 0 ? text.length : end);
}
