/** The settings, read and normalised in one place. A value of the wrong kind counts as not set. */
import * as vscode from 'vscode';
import type { Measure } from '../protocol.ts';
import type { OrderStyle, Question } from '../worker/desk/types.ts';
import { splitInterval } from './interval.ts';

export interface Settings {
  readonly question: Question;
  readonly smallQuantities: readonly string[];
  readonly hover: 'picture' | 'text' | 'off';
  readonly inlayHints: 'off' | 'order' | 'bound';
  readonly check: 'typing' | 'save' | 'command';
  readonly severity: vscode.DiagnosticSeverity;
  readonly orderTerm: OrderStyle;
  readonly form: 'horner' | 'estrin';
  readonly budget: number;
}

const SECTION = 'leadingOrder';

export function settingsFor(scope?: { readonly uri: vscode.Uri; readonly languageId: string }): Settings {
  const section = vscode.workspace.getConfiguration(SECTION, scope);
  const oneOf = <T extends string>(name: string, values: readonly T[], fallback: T): T => {
    const value = section.get<unknown>(name);
    return values.find((v) => v === value) ?? fallback;
  };
  const integer = (name: string, least: number, most: number, fallback: number): number => {
    const value = section.get<unknown>(name);
    return typeof value === 'number' && Number.isInteger(value) ? Math.min(most, Math.max(least, value)) : fallback;
  };
  const text = (name: string): string => {
    const value = section.get<unknown>(name);
    return typeof value === 'string' ? value.trim() : '';
  };
  const interval = splitInterval(text('interval'));
  const tolerance = text('tolerance');
  const small = section.get<unknown>('smallQuantities');
  return {
    question: {
      terms: integer('terms', 1, 100, 4),
      tolerance: Number(tolerance) > 0 ? tolerance : '1e-6',
      measure: oneOf<Measure>('measure', ['absolute', 'relative'], 'absolute'),
      ...(interval ? { interval } : {}),
    },
    smallQuantities: Array.isArray(small) ? small.filter((item): item is string => typeof item === 'string' && item.trim() !== '') : [],
    hover: oneOf('hover', ['picture', 'text', 'off'], 'picture'),
    inlayHints: oneOf('inlayHints', ['off', 'order', 'bound'], 'off'),
    check: oneOf('check', ['typing', 'save', 'command'], 'typing'),
    severity: { error: vscode.DiagnosticSeverity.Error, warning: vscode.DiagnosticSeverity.Warning, information: vscode.DiagnosticSeverity.Information }[
      oneOf('severity', ['error', 'warning', 'information'], 'warning')
    ],
    orderTerm: oneOf('orderTerm', ['auto', 'O', '\\mathcal{O}', '\\order', 'about'], 'auto'),
    form: oneOf('form', ['horner', 'estrin'], 'horner'),
    budget: integer('budget', 100, 600_000, 5000),
  };
}
