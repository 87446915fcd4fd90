/** The forms for programs: a polynomial in place of a call, and a guarded form of what cancels. */
import type { CoefficientAnswer, FitAnswer } from '../protocol.ts';
import { codeControls } from './controls.ts';
import { type Child, h } from './dom.ts';
import { shortened } from './figures.ts';
import { t } from './language.ts';
import type { CodeControls, Shown } from './messages.ts';
import { fitErrorPlot } from './plot.ts';

type Fitted = Extract<Shown, { readonly kind: 'fit' }>;
type Guarded = Extract<Shown, { readonly kind: 'guard' }>;

export function fitSection(shown: Fitted, into: HTMLElement, width: number, settle: (controls: CodeControls) => void): Child[] {
  const { answer } = shown;
  const controls = codeControls('fit', shown.controls, settle);
  if (!answer) return [controls];
  if (!answer.ok) return [controls, complaint(answer.error.message)];
  const { bound } = answer;
  const parts: readonly (readonly [string, string])[] = [
    [t('approximation'), bound.approximation],
    [t('rounding'), bound.rounding],
    [t('evaluation'), bound.evaluation],
  ];
  return [
    controls,
    h(
      'div',
      { class: 'facts', 'aria-live': 'polite' },
      h('p', {}, t('degree', answer.degree), answer.taylorDegree !== null && h('span', { class: 'muted' }, `; ${t('taylor', answer.taylorDegree)}`)),
      allowance(bound.total, bound.measure === shown.controls.measure ? shown.controls.tolerance : '', bound.measure === 'ulp' ? ' ulp' : ''),
      answer.reduction && h('p', {}, h('span', { class: 'muted' }, `${t('reduced')} `), answer.reduction.method),
      answer.operations && h('p', { class: 'muted' }, operationsText(answer.operations)),
      answer.speed && speedLine(answer.speed),
    ),
    into,
    answer.plot && answer.plot.x.length > 1 && h('section', { class: 'plots' }, h('h2', {}, `${t('fitErrorPlot')} (${t(answer.plot.measure)})`), fitErrorPlot(answer.plot, width)),
    h('section', {}, h('h2', {}, `${t('bound')} (${t(bound.measure)})`), h('table', { class: 'figures' }, h('tbody', {}, ...parts.map(([name, value]) => h('tr', {}, h('th', { scope: 'row' }, name), h('td', {}, value))), h('tr', { class: 'total' }, h('th', { scope: 'row' }, t('total')), h('td', {}, bound.total)))), h('p', { class: 'muted' }, bound.method)),
    code(answer.code),
    h('details', {}, h('summary', {}, t('coefficients')), ...coefficientTables(answer)),
    assumptions(answer.assumptions ?? []),
  ];
}

export function guardSection(shown: Guarded, into: HTMLElement, settle: (controls: CodeControls) => void): Child[] {
  const { answer } = shown;
  const controls = codeControls('guard', shown.controls, settle);
  if (!answer) return [controls];
  if (!answer.ok) return [controls, complaint(answer.error.message)];
  return [
    controls,
    h('div', { class: 'facts', 'aria-live': 'polite' }, h('p', {}, h('span', { class: 'muted' }, `${t('worst')} `), h('strong', {}, answer.bound.whole), answer.interval && h('span', { class: 'muted' }, ` ${t('onInterval', ...answer.interval)}${answer.format ? `, ${answer.format}` : ''}`)), answer.switch !== null && h('p', {}, t('switch', brief(answer.switch)))),
    into,
    answer.ranges.length > 0 &&
      h(
        'section',
        {},
        h('h2', {}, t('ranges')),
        h('table', { class: 'figures' }, h('thead', {}, h('tr', {}, ...[t('range'), t('form'), t('worst')].map((name) => h('th', { scope: 'col' }, name)))), h('tbody', {}, ...answer.ranges.map((range) => h('tr', {}, h('td', { title: `${range.from} … ${range.to}` }, h('div', {}, `${brief(range.from)} …`), h('div', {}, brief(range.to))), h('td', { class: 'form' }, h('code', {}, range.form)), h('td', {}, range.bound))))),
      ),
    answer.forms.length > 0 && h('section', {}, h('h2', {}, t('forms')), h('table', { class: 'figures' }, h('tbody', {}, ...answer.forms.map((form) => h('tr', {}, h('td', { class: 'form' }, h('code', {}, form.text), ...(form.identities ?? []).map((identity) => h('div', { class: 'muted' }, identity))), h('td', {}, form.bound)))))),
    code(answer.code),
    assumptions(answer.assumptions),
  ];
}

const operationsText = ({ multiplications, additions, fused }: NonNullable<FitAnswer['operations']>): string => (fused > 0 ? t('operationsFused', multiplications, additions, fused) : t('operations', multiplications, additions));

/** Few digits: it is an estimate from counted operations. */
function speedLine({ ratio }: NonNullable<FitAnswer['speed']>): HTMLElement {
  const digits = (factor: number): string => String(Number(factor.toPrecision(2)));
  return ratio >= 1 ? h('p', { class: 'muted' }, t('faster', digits(ratio))) : h('p', { class: 'caution' }, t('slower', digits(1 / ratio)));
}

/** One table for each polynomial: of the whole interval, of each piece, or of each function of the reduced argument. */
function coefficientTables({ coefficients, centre, denominator, pieces, reduction }: FitAnswer): HTMLElement[] {
  const about = (middle: string | undefined): string => (middle === undefined ? '' : `; ${t('about', middle)}`);
  if (reduction) return reduction.kernels.map((kernel) => coefficientTable(kernel.coefficients, `${kernel.function} ${t('onInterval', kernel.from, kernel.to)}${about(kernel.centre)}`));
  if (pieces) return pieces.map((piece) => coefficientTable(piece.coefficients, `${t('onInterval', brief(piece.from), brief(piece.to))}${about(piece.centre)}`));
  if (denominator) return [coefficientTable(coefficients, t('numerator')), coefficientTable(denominator, t('denominator'))];
  return [coefficientTable(coefficients, centre === undefined ? '' : t('about', centre))];
}

const coefficientTable = (list: readonly CoefficientAnswer[], caption: string): HTMLElement =>
  h(
    'table',
    { class: 'figures' },
    caption !== '' && h('caption', {}, caption),
    h('thead', {}, h('tr', {}, ...[t('power'), t('value'), t('hex')].map((name) => h('th', { scope: 'col' }, name)))),
    h('tbody', {}, ...list.map((c) => h('tr', {}, h('th', { scope: 'row' }, String(c.power)), h('td', {}, c.value), h('td', {}, c.hex)))),
  );

/** The proven error as a part of what was allowed. */
function allowance(total: string, allowed: string, unit: string): Child {
  const [used, whole] = [Number(total), Number(allowed)];
  if (!(used >= 0) || !(whole > 0) || !Number.isFinite(whole)) return null;
  const said = t('allowance', `${shortened(total, 'above')}${unit}`, `${allowed}${unit}`);
  return h('p', {}, h('meter', { min: 0, max: whole, value: used, 'aria-label': said }), ` ${said}`);
}

/** A long end of a range as shown; its exact value is in the title. */
function brief(end: string): string {
  const sign = end.startsWith('-') ? '-' : '';
  const size = end.slice(sign.length);
  return size.length > 10 ? `${sign}${shortened(size, 'below', 6)}` : end;
}

const complaint = (message: string): HTMLElement => h('p', { class: 'caution message', role: 'status' }, message);
const code = (text: string): HTMLElement => h('section', {}, h('h2', {}, t('code')), h('pre', { tabindex: '0' }, h('code', {}, text)));
const assumptions = (list: readonly string[]): Child => list.length > 0 && h('section', {}, h('h2', {}, t('assumptions')), h('ul', { class: 'plain' }, ...list.map((item) => h('li', {}, item))));
