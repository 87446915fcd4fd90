/** Sentences that hover, menus and page share. */
import * as vscode from 'vscode';
import type { Question, Source, Sources } from '../worker/desk/types.ts';
import { filled, type Recognised, recogniser } from './sentences.ts';

let recognise: ((message: string) => Recognised | null) | null = null;

/** An engine's sentence in the user's language; what is filled in may be such a sentence, or a word of the engine's, itself. */
export function said(message: string): string {
  const { bundle } = vscode.l10n;
  if (!bundle) return message;
  recognise ??= recogniser(Object.keys(bundle));
  const known = recognise(message);
  if (!known) return bundle[message] ?? message;
  return filled(bundle[known.sentence] ?? known.sentence, known.values.map((value) => (value.length < message.length ? said(value) : value)));
}

/** Several sentences in a row, each by itself where they are not known as a whole. */
export function saidEach(text: string): string {
  const whole = said(text);
  return whole !== text ? whole : text.split(/(?<=\.)\s+(?=\S)/).map(said).join(' ');
}

export function sourceName(source: Source | undefined): string {
  switch (source) {
    case 'chosen':
      return vscode.l10n.t('chosen on the page');
    case 'note':
      return vscode.l10n.t('from the note above');
    case 'fileNote':
      return vscode.l10n.t('from the note for this file');
    case 'remembered':
      return vscode.l10n.t('remembered for this file');
    case 'setting':
      return vscode.l10n.t('from the settings');
    case 'text':
      return vscode.l10n.t('read from the text');
    default:
      return vscode.l10n.t('assumed');
  }
}

/** `x → 0`, `n → ∞`, `x → 1⁺`: the limit that an expansion is about, in Unicode. */
export function limitText(variable: string, point: string, side: string): string {
  const target = point === 'inf' ? '∞' : point === '-inf' ? '−∞' : point.replaceAll('-', '−').replaceAll('\\pi', 'π').replace(/\bpi\b/g, 'π');
  const mark = side === 'right' ? '⁺' : side === 'left' ? '⁻' : '';
  return `${plainSymbol(variable)} → ${target}${mark}`;
}

const GREEK: Readonly<Record<string, string>> = {
  alpha: 'α', beta: 'β', gamma: 'γ', delta: 'δ', epsilon: 'ε', varepsilon: 'ε', zeta: 'ζ', eta: 'η', theta: 'θ', vartheta: 'ϑ', iota: 'ι', kappa: 'κ', lambda: 'λ', mu: 'μ', nu: 'ν', xi: 'ξ', pi: 'π', rho: 'ρ', sigma: 'σ', tau: 'τ', upsilon: 'υ', phi: 'φ', varphi: 'φ', chi: 'χ', psi: 'ψ', omega: 'ω', hbar: 'ħ', Gamma: 'Γ', Delta: 'Δ', Theta: 'Θ', Lambda: 'Λ', Xi: 'Ξ', Pi: 'Π', Sigma: 'Σ', Phi: 'Φ', Psi: 'Ψ', Omega: 'Ω',
};
/** A symbol's LaTeX as a person would say it in a line of text. */
export const plainSymbol = (latex: string): string =>
  latex
    .replace(/\\(?:mathrm|mathit|mathbf|mathsf|text|operatorname)\s*\{([^{}]*)\}/g, '$1')
    .replace(/\\[dt]?frac\s*\{([^{}]*)\}\s*\{([^{}]*)\}/g, (_whole, over: string, under: string) => `${over}/${under}`)
    .replace(/\\([A-Za-z]+)\s*/g, (whole, name: string) => GREEK[name] ?? whole)
    .replaceAll(/[{}]/g, '');

/** Where the parts of a question came from, each source once. */
export const sourcesText = (sources: Sources, parts: readonly (keyof Question)[]): string => [...new Set(parts.map((part) => sourceName(sources[part])))].join(', ');

/** The first words of a long line of text. */
export const shorten = (text: string, longest: number): string => (text.length <= longest ? text : `${text.slice(0, longest - 1).trimEnd()}…`);
