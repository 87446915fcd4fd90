/** The controls above the result. A value is sent when it is settled (Enter, change of focus, choice), never while typing. */
import type { Question } from '../worker/desk/types.ts';
import type { ConstantAnswer } from '../protocol.ts';
import { type Child, h } from './dom.ts';
import { constantsText } from './figures.ts';
import { t } from './language.ts';
import type { CodeControls, Origins } from './messages.ts';

const STEP_LIMIT = 100;

export function field(id: string, label: string, control: HTMLElement, origin?: string): HTMLElement {
  control.id = id;
  if (origin) control.setAttribute('aria-describedby', `${id}-origin`);
  return h('div', { class: 'field' }, h('label', { for: id }, label), control, origin && h('span', { class: 'origin', id: `${id}-origin`, title: origin }, origin));
}

export function entry(value: string, settle: (value: string) => void, options: { readonly list?: string; readonly placeholder?: string } = {}): HTMLInputElement {
  const input = h('input', { type: 'text', value, spellcheck: 'false', autocomplete: 'off', list: options.list, placeholder: options.placeholder });
  input.addEventListener('change', () => settle(input.value.trim()));
  return input;
}

export function choice<T extends string>(value: T, items: readonly (readonly [T, string])[], settle: (value: T) => void): HTMLSelectElement {
  const select = h('select', {}, ...items.map(([item, label]) => h('option', { value: item, selected: item === value }, label)));
  select.addEventListener('change', () => {
    const chosen = items.find(([item]) => item === select.value);
    if (chosen) settle(chosen[0]);
  });
  return select;
}

export interface ExpandValues {
  readonly asked: Question;
  readonly origins: Origins;
  readonly variable: string;
  readonly point: string;
  readonly candidates: readonly string[];
  readonly termCount: number;
  readonly constants: readonly ConstantAnswer[];
}

export function expandControls(values: ExpandValues, choose: (question: Question) => void): HTMLElement {
  const { asked, origins } = values;
  const [from, to] = asked.interval ?? ['', ''];
  const ends = { from, to };
  const settleInterval = (change: Partial<typeof ends>): void => {
    Object.assign(ends, change);
    if (ends.from !== '' && ends.to !== '') choose({ interval: [ends.from, ends.to] });
    else if (ends.from === '' && ends.to === '') choose({ interval: undefined });
  };
  const suggestions = h('datalist', { id: 'candidates' }, ...values.candidates.map((candidate) => h('option', { value: candidate })));
  return h(
    'form',
    { class: 'controls', on: { submit: (event) => event.preventDefault() } },
    suggestions,
    field('variable', t('variable'), entry(values.variable, (variable) => choose({ variable }), { list: 'candidates' }), origins.variable),
    field('point', t('point'), entry(values.point, (point) => choose({ point })), origins.point),
    field(
      'side',
      t('side'),
      choice(asked.side ?? 'both', [
        ['both', t('both')],
        ['right', t('right')],
        ['left', t('left')],
      ], (side) => choose({ side })),
    ),
    h(
      'div',
      { class: 'field', role: 'group', 'aria-label': t('interval') },
      h('label', { for: 'from' }, t('interval')),
      h(
        'span',
        { class: 'pair' },
        named(entry(from, (value) => settleInterval({ from: value }), { placeholder: t('from') }), 'from', `${t('interval')} ${t('from')}`),
        named(entry(to, (value) => settleInterval({ to: value }), { placeholder: t('to') }), 'to', `${t('interval')} ${t('to')}`),
      ),
      asked.interval && origins.interval && h('span', { class: 'origin', title: origins.interval }, origins.interval),
    ),
    field('tolerance', t('tolerance'), entry(asked.tolerance ?? '', (tolerance) => choose({ tolerance })), origins.tolerance),
    field(
      'measure',
      t('measure'),
      choice(asked.measure ?? 'absolute', [
        ['absolute', t('absolute')],
        ['relative', t('relative')],
      ], (measure) => choose({ measure })),
    ),
    termStepper(values.termCount, (terms) => choose({ terms }), origins.terms),
    values.constants.length > 0 && constantsChoice(values, choose),
  );
}

/** Constants that the code defines beside the expression: symbols, or their values. The quantity is said too, so that filling in cannot change it. */
function constantsChoice({ constants, variable, asked }: ExpandValues, choose: (question: Question) => void): HTMLElement {
  const box = h('input', { type: 'checkbox', id: 'constants', checked: constants.some(({ filled }) => filled) });
  box.addEventListener('change', () => choose({ constants: box.checked ? 'values' : 'symbols', ...(asked.small ? {} : { variable }) }));
  return h('div', { class: 'field check' }, h('label', { for: 'constants' }, box, ' ', t('fillIn', constantsText(constants))));
}

function termStepper(count: number, settle: (terms: number) => void, origin: string | undefined): HTMLElement {
  const step = (by: number, label: string, text: string): HTMLElement =>
    h('button', { type: 'button', class: 'step', id: by < 0 ? 'fewer' : 'more', title: label, 'aria-label': label, disabled: count + by < 1 || count + by > STEP_LIMIT, on: { click: () => settle(count + by) } }, text);
  const input = entry(String(count), (value) => {
    const wanted = Number(value);
    if (Number.isInteger(wanted) && wanted >= 1 && wanted <= STEP_LIMIT) settle(wanted);
  });
  input.inputMode = 'numeric';
  input.id = 'terms';
  return h(
    'div',
    { class: 'field' },
    h('label', { for: 'terms' }, t('terms')),
    h('span', { class: 'stepper' }, step(-1, t('fewer'), '−'), input, step(1, t('more'), '+')),
    origin && h('span', { class: 'origin', title: origin }, origin),
  );
}

function named<E extends HTMLElement>(element: E, id: string, label: string): E {
  element.id = id;
  element.setAttribute('aria-label', label);
  return element;
}

const TYPED = ['variable', 'from', 'to', 'tolerance', 'point'] as const;
function typedIn(form: HTMLFormElement): Partial<Pick<CodeControls, (typeof TYPED)[number]>> {
  return Object.fromEntries(
    TYPED.flatMap((name) => {
      const control = form.querySelector(`#${name}`);
      return control instanceof HTMLInputElement ? [[name, control.value.trim()]] : [];
    }),
  );
}

export function codeControls(kind: 'fit' | 'guard', controls: CodeControls, settle: (controls: CodeControls) => void): HTMLElement {
  let current = controls;
  const change = (part: Partial<CodeControls>): void => {
    current = { ...current, ...part };
  };
  const now = (part: Partial<CodeControls>): void => {
    change(part);
    settle(current);
  };
  const formats: readonly (readonly [string, string])[] = [['', t('asInCode')], ...['binary64', 'binary32', 'binary16', 'bfloat16'].map((name) => [name, name] as const)];
  const shared: Child[] = [
    field('variable', t('argument'), entry(controls.variable, (variable) => change({ variable }))),
    h(
      'div',
      { class: 'field', role: 'group', 'aria-label': t('interval') },
      h('label', { for: 'from' }, t('interval')),
      h('span', { class: 'pair' }, named(entry(controls.from, (from) => change({ from }), { placeholder: t('from') }), 'from', `${t('interval')} ${t('from')}`), named(entry(controls.to, (to) => change({ to }), { placeholder: t('to') }), 'to', `${t('interval')} ${t('to')}`)),
    ),
    field('format', t('format'), choice(controls.format, formats, (format) => now({ format }))),
  ];
  const own: Child[] =
    kind === 'fit'
      ? [
          field('tolerance', t('tolerance'), entry(controls.tolerance, (tolerance) => change({ tolerance }))),
          field(
            'measure',
            t('measure'),
            choice(controls.measure, [
              ['absolute', t('absolute')],
              ['relative', t('relative')],
              ['ulp', t('ulp')],
            ], (measure) => now({ measure })),
          ),
        ]
      : [field('point', t('point'), entry(controls.point, (point) => change({ point })))];
  return h(
    'form',
    {
      class: 'controls',
      on: {
        submit: (event) => {
          event.preventDefault();
          // What was typed while the page was drawn anew is in the fields only.
          if (event.currentTarget instanceof HTMLFormElement) change(typedIn(event.currentTarget));
          settle(current);
        },
      },
    },
    shared,
    own,
    h('button', { type: 'submit', class: 'primary compute', id: 'compute' }, t('compute')),
  );
}
