/** An exact form in place of the expression, in the document's own language, with the lines that its file needs. */
import { libraryPrefix } from '../../../engine.ts';
import { readPlain } from '../../../read/index.ts';
import { codeLanguage, toCode, toLatex } from '../../../write/index.ts';
import type { FormsRequest, Proposal } from '../types.ts';
import { bracketed } from './helper.ts';
import { importEdits } from './imports.ts';

/** One proposal a form, in the order given; one without edits where the language cannot say the form. */
export function forms(request: FormsRequest): readonly Proposal[] {
  return request.forms.map((form) => proposal(form, request));
}

function proposal(form: string, { text, language, place, format }: FormsRequest): Proposal {
  const none: Proposal = { kind: 'replace', preview: form, edits: [] };
  const read = readPlain(form);
  if (!read.ok) return none;
  if (!codeLanguage(language)) return language === 'plain' ? put(form, []) : put(toLatex(read.value), []);
  const written = toCode(read.value, { language, ...(format === 'binary32' || format === 'binary64' ? { format } : {}), ...libraryPrefix(text.slice(place.start, place.end), text, language) });
  return written.ok && keepsCalls(form, written.value.text) ? put(written.value.text, written.value.imports) : none;

  function put(code: string, imports: readonly string[]): Proposal {
    return { kind: 'replace', preview: code, edits: [...importEdits(text, imports), { ...place, text: bracketed(text, place, code) }] };
  }
}

/** Functions that make a form exact to the last places; a language without them would be given the difference that they avoid. */
const EXACT_CALLS: readonly (readonly [RegExp, RegExp])[] = [
  [/\bexpm1\(/, /expm1|exp_m1/i],
  [/\blog1p\(/, /log1p|ln_1p/i],
];
const keepsCalls = (form: string, code: string): boolean => EXACT_CALLS.every(([plain, written]) => !plain.test(form) || written.test(code));
