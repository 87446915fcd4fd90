/** What is shown of an expansion: formula, facts, ladder, plots, proof, assumptions. */
import type { ExpandAnswer } from '../protocol.ts';
import type { Question } from '../worker/desk/types.ts';
import { expandControls } from './controls.ts';
import { type Child, h } from './dom.ts';
import { shortened } from './figures.ts';
import { ladder } from './ladder.ts';
import { t } from './language.ts';
import { math } from './math.ts';
import type { Shown } from './messages.ts';
import { errorPlot, functionPlot } from './plot.ts';

type Expanded = Extract<Shown, { readonly kind: 'expansion' }>;

export function expansionSection(shown: Expanded, into: HTMLElement, width: number, choose: (question: Question) => void): Child[] {
  const { answer, asked, origins } = shown;
  const { reading } = answer;
  return [
    formula(answer),
    into,
    expandControls(
      {
        asked,
        origins,
        variable: asked.variable ?? asked.small?.join(', ') ?? reading?.variable ?? '',
        point: asked.point ?? reading?.point ?? '0',
        candidates: reading?.candidates ?? [],
        termCount: answer.terms.length,
        constants: reading?.constants ?? [],
      },
      choose,
    ),
    facts(answer, asked, shown.unbounded),
    replaced(answer, asked),
    components(answer),
    ladder(answer, asked, choose),
    plots(answer, asked, width),
    ...details(answer),
  ];
}

function formula(answer: ExpandAnswer): HTMLElement {
  const whole = answer.equation ?? (answer.reading ? `${answer.reading.latex} = ${answer.latex}` : answer.latex);
  return h('div', { class: 'formula', id: 'formula', tabindex: '0', role: 'group', 'aria-label': answer.text }, math(whole, true), answer.left && h('div', { class: 'other' }, h('span', { class: 'muted' }, t('left2')), math(answer.left.latex, true)));
}

function facts(answer: ExpandAnswer, asked: Question, noBound: string | undefined): HTMLElement {
  const lines: Child[] = [];
  const add = (text: Child, kind = ''): void => void lines.push(h('p', { class: kind || null }, text));
  if (answer.exact) add(t('exact'), 'good');
  if (answer.divergent) add(t('divergent'), 'caution');
  if (answer.oscillating) add(t('oscillating'));
  if (noBound) add(noBound, 'caution');
  if (answer.bound) {
    if (answer.bound.value === null) add(t('unbounded', answer.bound.place ?? '?'), 'caution');
    else add([h('span', { class: 'muted' }, `${asked.interval ? t('boundOn', ...asked.interval.map((end) => end.replaceAll('-', '−'))) : t('bound')} `), h('strong', { id: 'bound', title: answer.bound.value }, shortened(answer.bound.value, 'above')), answer.bound.factor ? [' · ', h('code', {}, answer.bound.factor)] : against(answer.bound.value, asked.tolerance)]);
  }
  if (answer.needed) lines.push(...neededLines(answer, asked));
  if (answer.value) add(t('integral', answer.value.low, answer.value.high), 'good');
  if (answer.leastTerm) add(t('leastTerm', answer.at?.argument ?? asked.at ?? '', answer.leastTerm.terms, shortened(answer.leastTerm.size, 'above')), 'caution');
  if (answer.at) add(`${t('at')} ${t('atRow', answer.at.argument, answer.at.function, answer.at.sum, answer.at.error)}`);
  if (answer.radius) add(answer.radius.value === 'inf' ? t('entire') : t('radius', answer.radius.value), 'muted');
  return h('div', { class: 'facts', 'aria-live': 'polite' }, lines);
}

/** A bound is an upper end, so only "within" is certain; above means that this number of terms is not proved to do. */
function against(bound: string, tolerance: string | undefined): Child {
  if (!tolerance || !(Number(tolerance) > 0)) return null;
  const within = Number(bound) <= Number(tolerance);
  return h('span', { class: within ? 'muted' : 'above' }, ` ${t(within ? 'within' : 'above')}`);
}

function neededLines(answer: ExpandAnswer, asked: Question): Child[] {
  const { needed } = answer;
  if (!needed) return [];
  const tolerance = asked.tolerance ?? '';
  if (needed.terms !== null) {
    const text = needed.terms === 1 ? t('neededOne', tolerance) : t('neededFor', needed.terms, tolerance);
    const beside = [needed.bound ? `${t('bound')} ${shortened(needed.bound, 'above')}` : '', needed.minimal ? t('neededMinimal') : ''].filter(Boolean).join('; ');
    return [h('p', { class: 'good', id: 'needed' }, text, beside && h('span', { class: 'muted' }, ` (${beside})`))];
  }
  const more = [
    needed.reach ? t('reachNone', shortened(needed.reach.distance, 'below')) : '',
    needed.best ? t('best', needed.best.terms, shortened(needed.best.bound, 'above')) : '',
    needed.fittedDegree !== undefined ? t('fitted', needed.fittedDegree) : '',
  ].filter(Boolean);
  return [h('p', { class: 'caution', id: 'needed' }, [t('neededNone', tolerance, needed.reason ?? ''), ...more].join(' '))];
}

/** The pieces of an equation that was simplified in place. */
function replaced(answer: ExpandAnswer, { at, interval }: Question): Child {
  const { replaced: pieces } = answer;
  if (!pieces || pieces.length === 0) return null;
  const errors = pieces.map(({ relativeError: e }) => [e?.percent ? t('percent', shortened(e.percent, 'above'), at ?? '') : '', e?.bound && interval ? t('atMost', shortened(e.bound, 'above'), ...interval) : ''].filter(Boolean).join('; '));
  const judged = errors.some((text) => text !== '');
  const columns = [t('piece'), t('instead'), ...(judged ? [t('relativeError')] : [])];
  return h(
    'section',
    {},
    h('h2', {}, t('replaced')),
    h(
      'table',
      { class: 'figures' },
      h('thead', {}, h('tr', {}, ...columns.map((name) => h('th', { scope: 'col' }, name)))),
      h('tbody', {}, ...pieces.map(({ from, to }, i) => h('tr', {}, h('td', {}, math(from)), h('td', {}, math(to)), judged && h('td', {}, errors[i] || '–')))),
    ),
  );
}

/** Of a system, every unknown function. */
const components = ({ components: all }: ExpandAnswer): Child =>
  all && all.length > 1 && h('section', {}, h('h2', {}, t('components')), h('ul', { class: 'plain' }, ...all.map(({ unknown, expansion }) => h('li', {}, math(`${unknown} = ${expansion.latex}`)))));

function plots(answer: ExpandAnswer, asked: Question, width: number): HTMLElement | null {
  const { plot } = answer;
  if (!plot || plot.x.length < 2) return answer.exact || answer.value || answer.components ? null : h('p', { class: 'muted note' }, t('noPlot'));
  return h('section', { class: 'plots' }, h('h2', {}, t('functionAndSum')), functionPlot(plot, answer.terms.length, width), h('h2', {}, t('errorPlot')), errorPlot(plot, answer, asked, width), h('p', { class: 'muted note' }, t('plotNote')));
}

function details(answer: ExpandAnswer): Child[] {
  const proof = answer.bound?.proof ?? [];
  const { bound } = answer;
  return [
    bound &&
      h(
        'details',
        { id: 'proof' },
        h('summary', {}, t('proof')),
        h('p', {}, bound.method),
        proof.length > 0 && h('ol', {}, ...proof.map((step) => h('li', {}, step))),
        bound.lower !== null && h('p', { class: 'muted' }, t('lower', shortened(bound.lower, 'below'))),
      ),
    answer.value && answer.proof && answer.proof.length > 0 && h('details', { id: 'proof' }, h('summary', {}, t('proof')), h('ol', {}, ...answer.proof.map((step) => h('li', {}, step)))),
    answer.assumptions.length > 0 && h('section', {}, h('h2', {}, t('assumptions')), h('ul', { class: 'plain' }, ...answer.assumptions.map((assumption) => h('li', {}, h('code', {}, assumption))))),
    answer.general && h('section', {}, h('h2', {}, t('general')), math(answer.general)),
    answer.branches && answer.branches.length > 0 && h('section', {}, h('h2', {}, t('branches')), h('ol', {}, ...answer.branches.map((branch) => h('li', {}, math(branch.latex))))),
  ];
}
