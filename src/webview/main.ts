/** The Expansion page: shows the state that the host sends and tells the host what is chosen. It computes nothing itself. */
import 'katex/dist/katex.css';
import './style.css';
import type { Question } from '../worker/desk/types.ts';
import { expandControls } from './controls.ts';
import { fitSection, guardSection } from './codeSections.ts';
import { claimsSection } from './claimsSection.ts';
import { type Child, h } from './dom.ts';
import { expansionSection } from './expansionSection.ts';
import { t, useWords } from './language.ts';
import type { CodeControls, CopyKind, FromPage, Kept, Mode, PageState, ToPage } from './messages.ts';

const api = acquireVsCodeApi<Kept>();
const found = document.getElementById('page');
if (!found) throw new Error('the page has no root');
const root: HTMLElement = found;
useWords(root.dataset['words']);

let state: PageState | null = null;
let openDetails: ReadonlySet<string> = new Set();
const send = (message: FromPage): void => api.postMessage(message);
const choose = (question: Question): void => send({ kind: 'choose', question });
const settle = (controls: CodeControls): void => send({ kind: 'code', controls });

window.addEventListener('message', (event: MessageEvent<ToPage>) => {
  if (event.data.kind !== 'state') return;
  state = event.data.state;
  if (event.data.kept) api.setState(event.data.kept);
  draw();
});
let drawnWidth = 0;
new ResizeObserver(() => {
  if (Math.abs(root.clientWidth - drawnWidth) > 8) draw();
}).observe(root);
document.addEventListener('keydown', (event) => {
  if (event.target instanceof HTMLInputElement || event.target instanceof HTMLSelectElement || event.ctrlKey || event.metaKey || event.altKey) return;
  if (state?.shown.kind !== 'expansion') return;
  const count = state.shown.answer.terms.length;
  if (event.key === '+' || event.key === '=') choose({ terms: count + 1 });
  else if (event.key === '-' && count > 1) choose({ terms: count - 1 });
});
send({ kind: 'ready', kept: api.getState() ?? null });

/** Draws everything anew and puts the focus, the text under the cursor and the scroll position back. */
function draw(): void {
  if (!state) return;
  drawnWidth = root.clientWidth;
  openDetails = new Set([...root.querySelectorAll('details[open]')].map((details) => details.querySelector('summary')?.textContent ?? ''));
  const active = document.activeElement;
  const focused = active instanceof HTMLElement && root.contains(active) ? active.id : '';
  const typed = active instanceof HTMLInputElement ? { value: active.value, from: active.selectionStart, to: active.selectionEnd, given: active.defaultValue } : null;
  const unsent = typedInForm();
  const scroll = document.documentElement.scrollTop;
  root.replaceChildren(...flat(content(state)));
  for (const details of root.querySelectorAll('details')) if (openDetails.has(details.querySelector('summary')?.textContent ?? '')) details.open = true;
  const form = root.querySelector<HTMLFormElement>('form[data-form]');
  if (unsent && form?.dataset['form'] === unsent.form) for (const [id, value] of unsent.values) setValue(form.querySelector(`#${id}`), value);
  const again = focused ? document.getElementById(focused) : null;
  if (again) {
    again.focus({ preventScroll: true });
    if (typed && again instanceof HTMLInputElement && again.type === 'text' && typed.value !== typed.given) {
      again.value = typed.value;
      again.setSelectionRange(typed.from, typed.to);
    }
  }
  document.documentElement.scrollTop = scroll;
}

/** What stands in the fields of a form for code and was not sent yet. */
function typedInForm(): { readonly form: string; readonly values: readonly (readonly [string, string])[] } | null {
  const form = root.querySelector<HTMLFormElement>('form[data-form]');
  if (!form) return null;
  const typed = [...form.querySelectorAll<HTMLInputElement>('input[type=text]')].filter((input) => input.value !== input.defaultValue);
  return { form: form.dataset['form'] ?? '', values: typed.map(({ id, value }) => [id, value] as const) };
}
function setValue(field: Element | null, value: string): void {
  if (field instanceof HTMLInputElement) field.value = value;
}

const flat = (children: readonly Child[]): Node[] => children.flatMap((child) => (Array.isArray(child) ? flat(child as readonly Child[]) : child instanceof Node ? [child] : typeof child === 'string' ? [document.createTextNode(child)] : []));

function content(now: PageState): Child[] {
  const { shown } = now;
  root.setAttribute('aria-busy', String(now.busy));
  return [
    head(now),
    now.stale !== null && h('p', { class: 'caution message', role: 'status' }, t('stale')),
    ...(shown.kind === 'nothing' ? [h('p', { class: 'muted message' }, t('empty'))] : []),
    ...(shown.kind === 'failure' ? failure(shown.message, shown.candidates, shown.asked) : []),
    ...(shown.kind === 'expansion' ? expansionSection(shown, into(now), Math.max(220, root.clientWidth - 2), choose) : []),
    ...(shown.kind === 'fit' ? fitSection(shown, into(now), Math.max(220, root.clientWidth - 2), settle) : []),
    ...(shown.kind === 'claims' ? claimsSection(shown, into(now), (index) => send({ kind: 'claim', index }), draw) : []),
    ...(shown.kind === 'guard' ? guardSection(shown, into(now), settle) : []),
    history(now),
  ];
}

function head(now: PageState): HTMLElement {
  const { kind } = now.shown;
  const mode: Mode = kind === 'fit' || kind === 'guard' || kind === 'claims' ? kind : 'expand';
  const modes: readonly (readonly [Mode, string])[] = [
    ['expand', t('expand')],
    ['fit', t('fit')],
    ['guard', t('guard')],
    ['claims', t('claims')],
  ];
  return h(
    'header',
    {},
    now.place !== '' && h('nav', { 'aria-label': t('expand') }, ...modes.map(([name, label]) => h('button', { type: 'button', id: `mode-${name}`, class: 'mode', 'aria-pressed': String(mode === name), on: { click: () => send({ kind: 'mode', mode: name }) } }, label))),
    h(
      'div',
      { class: 'where' },
      now.place !== '' && h('button', { type: 'button', class: 'link', id: 'reveal', title: t('reveal'), on: { click: () => send({ kind: 'reveal' }) } }, now.place),
      now.place !== '' && kind !== 'claims' && h('button', { type: 'button', class: 'link', id: 'pin', 'aria-pressed': String(now.pinned), on: { click: () => send({ kind: 'pin', pinned: !now.pinned }) } }, now.pinned ? t('unpin') : t('pin')),
      now.busy && h('span', { class: 'busy', role: 'status' }, t('busy'), ' ', h('button', { type: 'button', class: 'link', id: 'stop', on: { click: () => send({ kind: 'cancel' }) } }, t('stop'))),
    ),
  );
}

function failure(message: string, candidates: readonly string[], asked: Question): Child[] {
  return [
    h('p', { class: 'caution message', role: 'status', id: 'failure' }, message),
    candidates.length > 1 && h('div', { class: 'candidates', role: 'group', 'aria-label': t('notSure') }, h('span', {}, t('notSure')), ...candidates.map((candidate, i) => h('button', { type: 'button', id: `candidate-${i}`, on: { click: () => choose({ variable: candidate }) } }, candidate))),
    expandControls({ asked, origins: {}, variable: asked.variable ?? '', point: asked.point ?? '0', candidates, termCount: asked.terms ?? 4, constants: [] }, choose),
  ];
}

/** What can be done with the result: edits first, copies beside. */
function into(now: PageState): HTMLElement {
  const expansion = now.shown.kind === 'expansion';
  const copies: readonly (readonly [CopyKind, string])[] = expansion
    ? [
        ['latex', t('copyLatex')],
        ['unicode', t('copyUnicode')],
        ['code', t('copyCode')],
        ['request', t('copyRequest')],
      ]
    : now.shown.kind === 'claims'
      ? [['report', t('copyReport')]]
      : [['code', t('copyCode')]];
  const ready = expansion || now.shown.kind === 'claims' || now.actions.length > 0;
  return h(
    'div',
    { class: 'into' },
    now.actions.length > 0 && h('div', { class: 'edits', role: 'group', 'aria-label': t('actions') }, ...now.actions.map(({ label, title }, i) => h('button', { type: 'button', title, id: `apply-${i}`, class: i === 0 ? 'primary' : 'secondary', on: { click: () => send({ kind: 'apply', index: i }) } }, label))),
    ready && h('div', { class: 'copies', role: 'group', 'aria-label': t('copy') }, h('span', { class: 'muted', 'aria-hidden': 'true' }, t('copy')), ...copies.map(([what, label]) => h('button', { type: 'button', class: 'link', id: `copy-${what}`, 'aria-label': `${t('copy')} ${label}`, on: { click: () => send({ kind: 'copy', what }) } }, label))),
  );
}

function history(now: PageState): Child {
  if (now.history.length === 0) return null;
  return h('details', { class: 'history' }, h('summary', {}, t('history')), h('ol', { class: 'plain' }, ...now.history.map((entry, i) => h('li', {}, h('button', { type: 'button', class: 'link', id: `recall-${i}`, on: { click: () => send({ kind: 'recall', index: i }) } }, h('code', {}, entry.label)), h('div', { class: 'muted' }, entry.detail)))));
}
