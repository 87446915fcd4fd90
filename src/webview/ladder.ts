/** Terms against proven bound. Each row is a choice; its bar is the bound on a logarithmic scale, with the tolerance as a mark. */
import type { ExpandAnswer } from '../protocol.ts';
import type { Question } from '../worker/desk/types.ts';
import { h, svg } from './dom.ts';
import { shortened } from './figures.ts';
import { t } from './language.ts';

const BAR = 96;
const BAR_HEIGHT = 10;

export function ladder(answer: ExpandAnswer, asked: Question, choose: (question: Question) => void): HTMLElement | null {
  const rows = answer.ladder ?? [];
  if (rows.length === 0) return reachTable(answer, asked, choose);
  const bounds = rows.map((row) => (row.bound === null ? null : Number(row.bound)));
  const tolerance = Number(asked.tolerance);
  const logs = [...bounds, tolerance].filter((b): b is number => b !== null && b > 0 && Number.isFinite(b)).map(Math.log10);
  const low = Math.min(...logs) - 0.5;
  const high = Math.max(...logs) + 0.2;
  const along = (value: number): number => Math.min(BAR, Math.max(0, ((Math.log10(value) - low) / (high - low || 1)) * BAR));
  return section(
    t('ladder'),
    h('thead', {}, h('tr', {}, h('th', { scope: 'col' }, t('terms')), h('th', { scope: 'col' }, t('order')), h('th', { scope: 'col' }, t('bound')), h('td', { 'aria-hidden': 'true' }))),
    rows.map((row, i) => {
      const bound = bounds[i];
      const bar =
        bound !== null && bound !== undefined && bound > 0
          ? svg(
              'svg',
              { class: 'bar', width: BAR, height: BAR_HEIGHT, 'aria-hidden': 'true' },
              svg('rect', { class: tolerance > 0 && bound <= tolerance ? 'within' : 'beyond', x: 0, y: 2, height: BAR_HEIGHT - 4, width: Math.max(1, along(bound)).toFixed(1) }),
              tolerance > 0 && svg('line', { class: 'mark', x1: along(tolerance).toFixed(1), x2: along(tolerance).toFixed(1), y1: 0, y2: BAR_HEIGHT }),
            )
          : null;
      return line(row.terms, answer, choose, [row.order, row.bound === null ? '–' : shortened(row.bound, 'above')], bar);
    }),
  );
}

/** Without an interval: how far each number of terms keeps the tolerance. */
function reachTable(answer: ExpandAnswer, asked: Question, choose: (question: Question) => void): HTMLElement | null {
  const rows = answer.reach ?? [];
  if (rows.length === 0) return null;
  return section(
    `${t('reach')} (${asked.tolerance ?? ''})`,
    h('thead', {}, h('tr', {}, h('th', { scope: 'col' }, t('terms')), h('th', { scope: 'col' }, t('order')), h('th', { scope: 'col' }, t('distance')))),
    rows.map((row) => line(row.terms, answer, choose, [row.order, row.distance === 'inf' ? '∞' : row.distance === null ? '–' : shortened(row.distance, 'below')], null)),
  );
}

function section(title: string, head: HTMLElement, rows: readonly HTMLElement[]): HTMLElement {
  return h('section', {}, h('h2', {}, title), h('table', { class: 'ladder' }, head, h('tbody', { on: { keydown: walk } }, rows)));
}

function line(terms: number, answer: ExpandAnswer, choose: (question: Question) => void, cells: readonly string[], bar: SVGElement | null): HTMLElement {
  const current = answer.terms.length === terms;
  const needed = answer.needed?.terms === terms;
  return h(
    'tr',
    { class: [current ? 'current' : '', needed ? 'needed' : ''].join(' ').trim() || null, on: { click: () => choose({ terms }) } },
    h('th', { scope: 'row' }, h('button', { type: 'button', class: 'row', id: `rung-${terms}`, 'aria-pressed': String(current) }, String(terms)), needed && h('span', { class: 'tag' }, t('needed'))),
    ...cells.map((cell) => h('td', {}, cell)),
    bar && h('td', { class: 'barcell' }, bar),
  );
}

/** Arrow keys walk the rows. */
function walk(event: KeyboardEvent): void {
  if (event.key !== 'ArrowDown' && event.key !== 'ArrowUp') return;
  const row = (event.target as Element).closest('tr');
  const next = event.key === 'ArrowDown' ? row?.nextElementSibling : row?.previousElementSibling;
  const button = next?.querySelector<HTMLButtonElement>('button.row');
  if (!button) return;
  event.preventDefault();
  button.focus();
}
