/** An expansion at a place in a document: weighs what was chosen, noted, remembered and set, asks the engine, and says where each part came from. */
import type { Engine } from '../../engine.ts';
import type { Detail, ErrorAnswer, ExpandAnswer, ExpandRequest } from '../../protocol.ts';
import { settingsAt } from '../../read/index.ts';
import { notesOf, questionOf } from './notes.ts';
import type { ConsultAnswer, ConsultRequest, Question, Source, Sources } from './types.ts';

export async function consult(request: ConsultRequest, engine: Engine): Promise<ConsultAnswer> {
  const { text, language, selection } = request;
  const notes = notesOf(text, language);
  const above = settingsAt(
    notes.filter((note) => note.scope === 'next'),
    selection.start,
  );
  const file = settingsAt(
    notes.filter((note) => note.scope === 'file'),
    selection.start,
  );
  if (above.skip) return declined('A note above says to skip this formula.');
  const layers: readonly Layer[] = [
    ['chosen', request.chosen ?? {}],
    ['note', questionOf(above)],
    ['fileNote', questionOf(file)],
    ['remembered', request.remembered ?? {}],
  ];
  const noted = Object.keys(above).length > 0;
  const found = await consultWith(layers, noted, request, engine);
  const { sources } = found;
  const owner = sources.variable ?? sources.small;
  if ((owner !== 'fileNote' && owner !== 'remembered') || !isFree(found.answer)) return found;
  // What was settled for a whole file is about the formulas that hold the quantity.
  const own = await consultWith(layers.map(([source, question]) => [source, source === 'fileNote' || source === 'remembered' ? withoutQuantity(question) : question]), noted, request, engine);
  return own.answer.ok || own.candidates.length > 1 ? own : found;
}

type Layer = readonly [Source, Question];

async function consultWith(layers: readonly Layer[], noted: boolean, request: ConsultRequest, engine: Engine): Promise<ConsultAnswer> {
  const { text, selection } = request;
  const { asked, sources } = weigh(layers);
  const told = { ...request.setting };
  // Small quantities of the settings are a list of habits: the first that occurs in the formula counts, and only where nothing else was said.
  const habits = told.small ?? [];
  const base: Question = { ...withoutSmall(told), ...asked };
  const settled = asked.variable !== undefined || asked.small !== undefined;
  const tries: readonly { readonly question: Question; readonly variable: Source }[] = [
    ...(settled ? [] : habits.map((variable) => ({ question: { ...base, variable }, variable: 'setting' as const }))),
    { question: base, variable: sources.variable ?? sources.small ?? 'text' },
  ];
  for (const { question, variable } of tries) {
    if (variable === 'setting' && !mentions(text, question.variable ?? '', selection.start, selection.end)) continue;
    const { answer, unbounded } = await expansionAnyway(request, question, engine);
    if (!answer.ok && variable === 'setting') continue;
    const reading = answer.ok ? answer.reading : undefined;
    return {
      answer,
      asked: question,
      sources: complete(question, { ...sources, variable }, request),
      place: reading ? { start: reading.start, end: reading.end } : placeOf(answer, request),
      candidates: (answer.ok ? reading?.candidates : answer.error.candidates) ?? [],
      ...(unbounded === undefined ? {} : { unbounded }),
      worthwhile: !answer.ok || noted || saysSomething(answer),
    };
  }
  return declined('Nothing could be asked about this place; select an expression.');
}

/** Where a bound cannot be had (a parameter without range, an interval that leaves the domain) the expansion is still worth showing, with the reason beside it. */
async function expansionAnyway(request: ConsultRequest, question: Question, engine: Engine): Promise<{ readonly answer: ExpandAnswer | ErrorAnswer; readonly unbounded?: string }> {
  const answer = (await engine.ask(toRequest(request, question))) as ExpandAnswer | ErrorAnswer;
  if (answer.ok || question.interval === undefined || !['needs-assumption', 'undecided', 'bad-request', 'over-budget'].includes(answer.error.code)) return { answer };
  const { interval: _interval, ...rest } = question;
  const plain = (await engine.ask(toRequest(request, rest))) as ExpandAnswer | ErrorAnswer;
  return plain.ok ? { answer: plain, unbounded: answer.error.message } : { answer };
}

const declined = (message: string): ConsultAnswer => ({ answer: { ok: false, error: { code: 'bad-request', message } }, asked: {}, sources: {}, place: null, candidates: [], worthwhile: false });
const withoutQuantity = ({ variable: _variable, small: _small, point: _point, side: _side, interval: _interval, ...rest }: Question): Question => rest;
/** The formula does not hold the quantity. */
const isFree = (answer: ExpandAnswer | ErrorAnswer): boolean => answer.ok && answer.exact && answer.prefactor === undefined && answer.terms.every(({ power, log, scale }) => power === '0' && log === 0 && scale === undefined);
const withoutSmall = ({ small: _small, ...rest }: Question): Question => rest;

/** Every part from the strongest source that has it. A variable and several small quantities exclude each other; a point goes with its variable. */
function weigh(layers: readonly Layer[]): { readonly asked: Question; readonly sources: Sources } {
  const asked: Record<string, unknown> = {};
  const sources: Partial<Record<keyof Question, Source>> = {};
  const owner = (): Source | undefined => sources.variable ?? sources.small;
  for (const [source, question] of layers) {
    const taken = owner();
    for (const [key, value] of Object.entries(question) as [keyof Question, unknown][]) {
      if (value === undefined || key in asked) continue;
      if ((key === 'variable' || key === 'small') && taken !== undefined) continue;
      if ((key === 'point' || key === 'side') && taken !== undefined && taken !== 'chosen' && taken !== source) continue;
      if (key === 'order' && 'terms' in asked) continue;
      if (key === 'terms' && 'order' in asked) continue;
      asked[key] = value;
      sources[key] = source;
    }
  }
  return { asked: asked as Question, sources };
}

function complete(question: Question, sources: Sources, request: ConsultRequest): Sources {
  const setting = request.setting ?? {};
  const filled: Partial<Record<keyof Question, Source>> = { ...sources };
  for (const key of Object.keys(question) as (keyof Question)[]) if (filled[key] === undefined && key in setting) filled[key] = 'setting';
  // Where the text left no choice of the quantity, it also said where that tends to.
  const point: Source = filled.variable === 'text' || filled.small === 'text' ? 'text' : 'default';
  return { point, side: 'default', terms: 'default', ...filled };
}

/** Without an interval nothing is bounded, and a tolerance serves only the reach. An order replaces the number of terms. */
function toRequest(request: ConsultRequest, question: Question): ExpandRequest {
  const { terms, order, ...rest } = question;
  return {
    ask: 'expand',
    text: request.text,
    language: request.language,
    selection: request.selection,
    ...rest,
    ...(order === undefined ? { terms } : { order }),
    details: [...new Set<Detail>(['reading', 'insertion', ...(request.details ?? [])])],
    ...(request.files === undefined || request.files.length === 0 ? {} : { files: request.files }),
    ...(request.budget_ms === undefined ? {} : { budget_ms: request.budget_ms }),
  };
}

function placeOf(answer: ExpandAnswer | ErrorAnswer, { selection }: ConsultRequest): { readonly start: number; readonly end: number } | null {
  if (selection.end > selection.start) return selection;
  if (answer.ok || answer.error.start === undefined || answer.error.end === undefined) return null;
  return { start: answer.error.start, end: answer.error.end };
}

/** A polynomial that is its own expansion has nothing to say. */
function saysSomething(answer: ExpandAnswer): boolean {
  if (!answer.exact || answer.prefactor !== undefined) return true;
  return !answer.terms.every((term) => /^\d+$/.test(term.power) && term.log === 0 && term.scale === undefined);
}

const mentions = (text: string, symbol: string, start: number, end: number): boolean => {
  const around = text.slice(Math.max(0, start - 400), end + 400);
  return symbol !== '' && around.includes(symbol);
};
