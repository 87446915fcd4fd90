/** `implements eq:…`: a polynomial in code is held against the labelled equation that it says to implement. */
import * as vscode from 'vscode';
import type { CheckAnswer, ReadingAnswer } from '../protocol.ts';
import type { ConsultAnswer, NoteReading, Place } from '../worker/desk/types.ts';
import { rangeOf } from './edits.ts';
import { findLabel } from './equationLinks.ts';
import { engineLanguage } from './languages.ts';
import type { Services } from './services.ts';
import { settingsFor } from './settings.ts';

const LINES_BELOW = 4;

export async function checkImplementations(services: Services, document: vscode.TextDocument, notes: readonly NoteReading[], signal: AbortSignal): Promise<vscode.Diagnostic[]> {
  const problems: vscode.Diagnostic[] = [];
  for (const note of notes) {
    if (note.implements === undefined || signal.aborted) continue;
    const problem = await checkOne(services, document, note, note.implements, signal);
    if (problem) problems.push(problem);
  }
  return problems;
}

async function checkOne(services: Services, document: vscode.TextDocument, note: NoteReading, label: string, signal: AbortSignal): Promise<vscode.Diagnostic | null> {
  const warn = (place: Place, message: string, code: string, severity: vscode.DiagnosticSeverity): vscode.Diagnostic => {
    const problem = new vscode.Diagnostic(rangeOf(document, place.start, place.end), message, severity);
    problem.source = 'Leading Order';
    problem.code = code;
    return problem;
  };
  const place = statementBelow(document, note);
  if (!place) return null;
  const equation = await findLabel(label);
  if (!equation) return warn(note, vscode.l10n.t('No file of the workspace has the label {0}.', label), 'note', vscode.DiagnosticSeverity.Warning);
  const at = equation.text.indexOf(`\\label{${label}}`) - 1;
  const ask = async (text: string, language: string, selection: Place): Promise<ReadingAnswer | string> => {
    const files = language === 'latex' ? await services.companions.of({ uri: equation.uri, text, language }) : [];
    const told: ConsultAnswer | { readonly ok: false; readonly error: { readonly message: string } } = await services.client.consult({ desk: 'consult', text, language, selection, files, details: ['reading'] }, signal);
    if (!('answer' in told)) return told.error.message;
    return told.answer.ok ? (told.answer.reading ?? '') : told.answer.error.message;
  };
  const function_ = await ask(equation.text, equation.uri.path.endsWith('.tex') ? 'latex' : 'markdown', { start: at, end: at });
  if (typeof function_ === 'string') return warn(place, vscode.l10n.t('The equation {0} cannot be expanded: {1}', label, function_), 'undecided', vscode.DiagnosticSeverity.Hint);
  const polynomial = await ask(document.getText(), engineLanguage(document), place);
  if (typeof polynomial === 'string') return warn(place, polynomial, 'undecided', vscode.DiagnosticSeverity.Hint);
  const claim = `\\[ ${function_.latex} \\approx ${renamed(polynomial, function_)} \\]`;
  const answer = await services.client.ask<CheckAnswer>({ ask: 'check', text: claim, language: 'latex' }, signal);
  const finding = answer.ok ? answer.findings[0] : undefined;
  if (!finding || finding.verdict === 'holds') return null;
  const message = vscode.l10n.t('Against the equation {0}: {1}', label, finding.reason);
  return finding.verdict === 'fails' ? warn(place, message, 'fails', settingsFor(document).severity) : warn(place, message, 'undecided', vscode.DiagnosticSeverity.Hint);
}

/** The code's name of the variable becomes the equation's. */
function renamed(polynomial: ReadingAnswer, equation: ReadingAnswer): string {
  const [from, to] = [polynomial.variableLatex, equation.variableLatex];
  if (from === to) return polynomial.latex;
  const escaped = from.replace(/[.*+?^${}()|[\]\\]/g, '\\$&');
  return polynomial.latex.replace(new RegExp(`(?<![A-Za-z\\\\])${escaped}(?![A-Za-z])`, 'g'), () => to);
}

/** What is returned or assigned below a note, up to the end of the statement. */
function statementBelow(document: vscode.TextDocument, note: NoteReading): Place | null {
  const first = document.positionAt(note.end).line + 1;
  for (let line = first; line < Math.min(first + LINES_BELOW, document.lineCount); line += 1) {
    const { text } = document.lineAt(line);
    const head = /^\s*(?:return\b\s*|[^=/#!]*[^=!<>]=(?!=)\s*)/.exec(text)?.[0];
    if (head === undefined) continue;
    const body = text.slice(head.length).replace(/\s*(?:;|\/\/|#|!).*$/, '').trimEnd();
    if (body === '') return null;
    const start = document.offsetAt(new vscode.Position(line, head.length));
    return { start, end: start + body.length };
  }
  return null;
}
