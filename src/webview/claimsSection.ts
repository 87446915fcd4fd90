/** Every printed expansion of the document with its verdict, so that silence is never mistaken for approval. */
import type { Verdict } from '../protocol.ts';
import { choice, field } from './controls.ts';
import { type Child, h } from './dom.ts';
import { t } from './language.ts';
import type { Shown } from './messages.ts';

type Claims = Extract<Shown, { readonly kind: 'claims' }>;
type Filter = Verdict | 'all';

/** Kept across redraws of the page. */
let filter: Filter = 'all';

export function claimsSection(shown: Claims, into: HTMLElement, reveal: (index: number) => void, redraw: () => void): Child[] {
  const summary = h('p', { class: 'summary', role: 'status' }, shown.summary);
  if (shown.rows.length === 0) return [summary, h('p', { class: 'muted' }, t('noClaims'))];
  const rows = shown.rows.map((row, index) => ({ row, index })).filter(({ row }) => filter === 'all' || row.verdict === filter);
  const filters: readonly (readonly [Filter, string])[] = [
    ['all', t('all')],
    ['fails', t('fails')],
    ['undecided', t('undecided')],
    ['holds', t('holds')],
  ];
  const chooser = choice(filter, filters, (wanted) => {
    filter = wanted;
    redraw();
  });
  return [
    summary,
    h('div', { class: 'controls' }, field('filter', t('show'), chooser)),
    into,
    h(
      'table',
      { class: 'claims' },
      h('thead', {}, h('tr', {}, ...[t('line'), t('verdict'), t('claim')].map((name) => h('th', { scope: 'col' }, name)))),
      h(
        'tbody',
        {},
        rows.map(({ row, index }) =>
          h(
            'tr',
            { class: row.verdict },
            h('td', {}, h('button', { type: 'button', class: 'link', id: `claim-${index}`, on: { click: () => reveal(index) } }, String(row.line))),
            h('td', { class: 'verdict' }, t(row.verdict)),
            h('td', {}, h('code', {}, row.claim), row.label !== '' && h('span', { class: 'muted' }, ` ${row.label}`), h('div', { class: 'muted' }, row.reason)),
          ),
        ),
      ),
    ),
  ];
}
