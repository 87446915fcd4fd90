/** The page's forms for code: what fills them, and the request that they make. */
import type * as vscode from 'vscode';
import type { FitAnswer, FitRequest, GuardAnswer, GuardRequest } from '../protocol.ts';
import type { CodeControls, Shown } from '../webview/messages.ts';
import type { Place } from '../worker/desk/types.ts';
import type { Consultation } from './consultant.ts';
import { engineLanguage, isCode } from './languages.ts';
import type { Services } from './services.ts';
import { settingsFor } from './settings.ts';

/** Fits and guards are asked for by hand and may take longer than a hover. */
const LEAST_BUDGET_MS = 20_000;
/** Calls that are fitted in two variables. */
const OF_TWO = /hypot|a(?:rc)?tan2|sqrt/i;

export type FormMode = 'fit' | 'guard';

export const EMPTY_FORM: CodeControls = { form: 0, from: '', to: '', tolerance: '1e-6', measure: 'absolute', format: '', point: '0', variable: '', second: '', secondFrom: '', secondTo: '', reduction: 'auto', words: '', assertion: false };

export const emptyForm = (mode: FormMode, controls: CodeControls): Shown => (mode === 'guard' ? { kind: 'guard', answer: null, controls } : { kind: 'fit', answer: null, controls });

/** A new form, without what was said of another expression. */
export const renewed = (controls: CodeControls): CodeControls => ({ ...controls, form: controls.form + 1, from: '', to: '', point: '0', variable: '', second: '', secondFrom: '', secondTo: '' });

/** What notes, memory and settings say about the expression fills the form; what is not said stays empty. */
export function prefilled(controls: CodeControls, { answer, asked, candidates }: Consultation, text: string): CodeControls {
  const reading = answer.ok ? answer.reading : undefined;
  const [from, to] = asked.interval ?? ['', ''];
  const [first, other] = candidates;
  const pair = candidates.length === 2 && OF_TWO.test(text);
  return {
    ...controls,
    from,
    to,
    tolerance: asked.tolerance ?? '1e-6',
    measure: asked.measure ?? 'absolute',
    point: reading?.point ?? asked.point ?? '0',
    variable: reading?.variable ?? asked.variable ?? (candidates.length === 1 || pair ? (first ?? '') : ''),
    second: pair ? (other ?? '') : '',
  };
}

/** Null where the form does not say enough yet: a polynomial needs an interval. */
export async function formRequest(services: Services, document: vscode.TextDocument, selection: Place, mode: FormMode, controls: CodeControls): Promise<FitRequest | GuardRequest | null> {
  const interval = controls.from !== '' && controls.to !== '' ? ([controls.from, controls.to] as const) : null;
  if (mode === 'fit' && !interval) return null;
  const language = engineLanguage(document);
  const settings = settingsFor(document);
  const text = document.getText();
  const common = {
    text,
    files: await services.companions.of({ uri: document.uri, text, language }),
    selection,
    language,
    emit: language === 'plain' || !isCode(language) ? 'c' : language,
    budget_ms: Math.max(settings.budget, LEAST_BUDGET_MS),
    ...(controls.format === '' ? {} : { format: controls.format }),
    ...(controls.variable === '' ? {} : { variable: controls.variable }),
  } as const;
  return mode === 'fit' && interval ? { ask: 'fit', ...common, ...fitOptions(controls, interval), form: settings.form, details: ['plot'] } : { ask: 'guard', ...common, point: controls.point || '0', ...(interval ? { interval } : {}) };
}

/** What the form says beyond the interval, left out where it says nothing. */
function fitOptions({ tolerance, measure, variable, second, secondFrom, secondTo, reduction, words, assertion }: CodeControls, interval: readonly [string, string]): Pick<FitRequest, 'interval' | 'intervals' | 'tolerance' | 'measure' | 'reduction' | 'words' | 'assertion'> {
  return {
    interval,
    tolerance,
    measure,
    ...(second !== '' && secondFrom !== '' && secondTo !== '' ? { intervals: { [variable]: interval, [second]: [secondFrom, secondTo] } } : {}),
    ...(reduction === 'auto' ? {} : { reduction }),
    ...(words === '' ? {} : { words: words === '1' ? 1 : 2 }),
    ...(assertion ? { assertion } : {}),
  };
}

/** What the new function is called with. */
export const argumentsOf = (answer: FitAnswer | GuardAnswer, { variable }: CodeControls): string => ('arguments' in answer && answer.arguments ? answer.arguments.join(', ') : variable);
