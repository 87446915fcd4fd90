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
  const now = { from, to };
  const settleInterval = (change: Partial<typeof now>): void => {
    Object.assign(now, change);
    if (now.from !== '' && now.to !== '') choose({ interval: [now.from, now.to] });
    else if (now.from === '' && now.to === '') choose({ interval: undefined });
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
    ends(t('interval'), ['from', 'to'], [from, to], (value) => settleInterval({ from: value }), (value) => settleInterval({ to: value }), asked.interval && origins.interval),
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

const TYPED = ['variable', 'from', 'to', 'tolerance', 'point', 'second', 'secondFrom', 'secondTo'] as const;
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
    ends(t('interval'), ['from', 'to'], [controls.from, controls.to], (from) => change({ from }), (to) => change({ to })),
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
      'data-form': controls.form,
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
    kind === 'fit' && moreOptions(controls, change, now),
  );
}

/** What few fits need: another argument, the reduction of the argument, the leading coefficient, an assertion of the range. */
function moreOptions(controls: CodeControls, change: (part: Partial<CodeControls>) => void, now: (part: Partial<CodeControls>) => void): HTMLElement {
  const asserts = h('input', { type: 'checkbox', id: 'assertion', checked: controls.assertion });
  asserts.addEventListener('change', () => now({ assertion: asserts.checked }));
  return h(
    'details',
    { class: 'options', open: controls.second !== '' },
    h('summary', { id: 'options' }, t('options')),
    h(
      'div',
      { class: 'inner' },
      field('second', t('second'), entry(controls.second, (second) => change({ second }), { placeholder: t('none') })),
      ends(t('secondInterval'), ['secondFrom', 'secondTo'], [controls.secondFrom, controls.secondTo], (secondFrom) => change({ secondFrom }), (secondTo) => change({ secondTo })),
      field(
        'reduction',
        t('reduction'),
        choice(controls.reduction, [
          ['auto', t('whereNeeded')],
          ['none', t('never')],
          ['always', t('always')],
        ], (reduction) => now({ reduction })),
      ),
      field(
        'words',
        t('words'),
        choice(controls.words, [
          ['', t('whereNeeded')],
          ['1', t('oneFloat')],
          ['2', t('twoFloats')],
        ], (words) => now({ words })),
      ),
      h('div', { class: 'field check' }, h('label', { for: 'assertion' }, asserts, ' ', t('assertion'))),
    ),
  );
}

function ends(label: string, [low, high]: readonly [string, string], [from, to]: readonly [string, string], settleFrom: (end: string) => void, settleTo: (end: string) => void, origin?: string): HTMLElement {
  return h(
    'div',
    { class: 'field', role: 'group', 'aria-label': label },
    h('label', { for: low }, label),
    h('span', { class: 'pair' }, named(entry(from, settleFrom, { placeholder: t('from') }), low, `${label} ${t('from')}`), named(entry(to, settleTo, { placeholder: t('to') }), high, `${label} ${t('to')}`)),
    origin && h('span', { class: 'origin', title: origin }, origin),
  );
}
