/** The two plots as SVG in the theme's colours, each with a title and a description in words. */
import type { ExpandAnswer, FitPlotAnswer, PlotAnswer } from '../protocol.ts';
import type { Question } from '../worker/desk/types.ts';
import { h, svg } from './dom.ts';
import { t } from './language.ts';
import { shortened } from './figures.ts';
import { decades, errors, noiseFloor, ordinate, pathThrough, powerOfTen, type Range, short, signedSpan, ticks, validity, worst } from './plotMath.ts';

const HEIGHT = 148;
const LEFT = 44;
const RIGHT = 10;
const TOP = 8;
const BOTTOM = 20;
let serial = 0;

interface Frame {
  readonly width: number;
  readonly x: Range;
  readonly y: Range;
  toX(x: number): number;
  toY(y: number): number;
}

function frame(width: number, x: Range, y: Range): Frame {
  const spread = (range: Range): number => range.high - range.low || 1;
  return {
    width,
    x,
    y,
    toX: (value) => LEFT + ((value - x.low) / spread(x)) * (width - LEFT - RIGHT),
    toY: (value) => HEIGHT - BOTTOM - ((value - y.low) / spread(y)) * (HEIGHT - TOP - BOTTOM),
  };
}

function axes(area: Frame, yTicks: readonly { readonly at: number; readonly label: string }[]): SVGElement[] {
  const bottom = HEIGHT - BOTTOM;
  return [
    ...yTicks.flatMap(({ at, label }) => [
      svg('line', { class: 'grid', x1: LEFT, x2: area.width - RIGHT, y1: area.toY(at).toFixed(1), y2: area.toY(at).toFixed(1) }),
      svg('text', { class: 'tick', x: LEFT - 5, y: (area.toY(at) + 3.5).toFixed(1), 'text-anchor': 'end' }, label),
    ]),
    svg('line', { class: 'axis', x1: LEFT, x2: area.width - RIGHT, y1: bottom, y2: bottom }),
    ...ticks(area.x, Math.max(2, Math.floor(area.width / 90))).flatMap((at) => [
      svg('line', { class: 'axis', x1: area.toX(at).toFixed(1), x2: area.toX(at).toFixed(1), y1: bottom, y2: bottom + 3 }),
      svg('text', { class: 'tick', x: area.toX(at).toFixed(1), y: bottom + 14, 'text-anchor': 'middle' }, short(at)),
    ]),
  ];
}

function picture(width: number, title: string, description: string, content: readonly (SVGElement | null)[]): SVGElement {
  serial += 1;
  const [titleId, descriptionId] = [`plot-title-${serial}`, `plot-description-${serial}`];
  return svg(
    'svg',
    { role: 'img', width, height: HEIGHT, viewBox: `0 0 ${width} ${HEIGHT}`, 'aria-labelledby': `${titleId} ${descriptionId}` },
    svg('title', { id: titleId }, title),
    svg('desc', { id: descriptionId }, description),
    ...content,
  );
}

const key = (kind: string, text: string): HTMLElement => h('span', { class: 'key' }, svg('svg', { class: `swatch ${kind}`, width: 22, height: 8, 'aria-hidden': 'true' }, svg('line', { x1: 1, x2: 21, y1: 4, y2: 4 })), text);

export function functionPlot(plot: PlotAnswer, termCount: number, width: number): HTMLElement {
  const x = spanOf(plot.x);
  const area = frame(width, x, ordinate(plot));
  const clip = `clip-${(serial += 1)}`;
  const words = `${t('function')} ${short(plot.f.find((v) => v !== null) ?? 0)} … ${short([...plot.f].reverse().find((v) => v !== null) ?? 0)}, x ${short(x.low)} … ${short(x.high)}`;
  const image = picture(width, t('functionAndSum'), words, [
    svg('clipPath', { id: clip }, svg('rect', { x: LEFT, y: TOP, width: Math.max(1, width - LEFT - RIGHT), height: HEIGHT - TOP - BOTTOM })),
    ...axes(
      area,
      ticks(area.y, 4).map((at) => ({ at, label: short(at) })),
    ),
    svg(
      'g',
      { 'clip-path': `url(#${clip})` },
      svg('path', { class: 'curve function', d: pathThrough(plot.x, plot.f, area.toX, area.toY, area.y) }),
      svg('path', { class: 'curve sum', d: pathThrough(plot.x, plot.sum, area.toX, area.toY, area.y) }),
    ),
  ]);
  return h('figure', {}, image, h('figcaption', {}, key('function', t('function')), key('sum', t('sum', termCount))));
}

export function errorPlot(plot: PlotAnswer, answer: ExpandAnswer, asked: Question, width: number): HTMLElement {
  const relative = asked.measure === 'relative';
  const error = errors(plot, relative);
  const floor = noiseFloor(plot, relative);
  const tolerance = Number(asked.tolerance);
  const bound = answer.bound?.value && !answer.bound.factor ? Number(answer.bound.value) : null;
  const seen = error.filter((e): e is number => e !== null && e > floor);
  const marks = [tolerance, ...(bound ? [bound] : [])].filter((value) => value > 0 && Number.isFinite(value));
  const largest = Math.max(...seen, ...marks, floor * 10);
  const smallest = Math.max(Math.min(...seen, ...marks), largest * 1e-14, 1e-300);
  const y = { low: Math.log10(smallest) - 0.4, high: Math.log10(largest) + 0.4 };
  const area = frame(width, spanOf(plot.x), y);
  // What is left below the noise of doubles says nothing about the remainder.
  const logs = error.map((e) => (e === null || e <= floor ? null : Math.max(Math.log10(e), y.low)));
  const kept = tolerance > 0 ? validity(plot.x, error, Math.max(tolerance, floor)) : null;
  const words = kept ? t('holdsFrom', short(kept.low), short(kept.high)) : tolerance > 0 ? t('holdsNowhere') : '';
  const clip = `clip-${(serial += 1)}`;
  const level = (value: number): string => area.toY(Math.log10(value)).toFixed(1);
  const inner = { x: LEFT, width: Math.max(1, width - LEFT - RIGHT) };
  const image = picture(width, t('errorPlot'), words, [
    svg('clipPath', { id: clip }, svg('rect', { x: LEFT, y: TOP, width: inner.width, height: HEIGHT - TOP - BOTTOM })),
    svg(
      'g',
      { 'clip-path': `url(#${clip})` },
      tolerance > 0 ? svg('rect', { class: 'band', x: LEFT, width: inner.width, y: level(tolerance), height: HEIGHT }) : null,
      kept ? svg('rect', { class: 'valid', x: area.toX(kept.low).toFixed(1), width: Math.max(1, area.toX(kept.high) - area.toX(kept.low)).toFixed(1), y: TOP, height: HEIGHT - TOP - BOTTOM }) : null,
    ),
    ...axes(
      area,
      decades(y, 5).map((exponent) => ({ at: exponent, label: powerOfTen(exponent) })),
    ),
    svg(
      'g',
      { 'clip-path': `url(#${clip})` },
      tolerance > 0 ? svg('line', { class: 'tolerance', x1: LEFT, x2: width - RIGHT, y1: level(tolerance), y2: level(tolerance) }) : null,
      bound ? svg('line', { class: 'bound', x1: LEFT, x2: width - RIGHT, y1: level(bound), y2: level(bound) }) : null,
      svg('path', { class: 'curve error', d: pathThrough(plot.x, logs, area.toX, area.toY, y) }),
    ),
  ]);
  return h(
    'figure',
    {},
    image,
    h('figcaption', {}, key('error', t('error')), tolerance > 0 && key('tolerance', t('toleranceBand', asked.tolerance ?? '')), bound !== null && key('bound', t('provenBound', shortened(answer.bound?.value ?? '', 'above')))),
    words && h('p', { class: 'note' }, words),
  );
}

/** The signed error of a polynomial between plus and minus the proven bound and the tolerance, in the unit of the measure. */
export function fitErrorPlot(plot: FitPlotAnswer, width: number): HTMLElement {
  const { bound, tolerance, measure } = plot;
  const y = signedSpan(plot);
  const area = frame(width, spanOf(plot.x), y);
  const unit = measure === 'ulp' ? ' ulp' : '';
  const peak = worst(plot.x, plot.error);
  const drawn = tolerance !== null && tolerance < y.high;
  const value = (size: number): string => `${short(size)}${unit}`;
  // A bound is shown rounded up.
  const proven = t('provenBound', `${shortened(String(bound), 'above')}${unit}`);
  const said = [
    peak ? t('fitWorst', value(Math.abs(peak.error)), short(peak.at)) : '',
    proven,
    tolerance === null ? '' : drawn ? t('toleranceBand', value(tolerance)) : t('toleranceOutside', value(tolerance)),
  ].filter(Boolean);
  const level = (kind: string, size: number): SVGElement[] => [size, -size].map((at) => svg('line', { class: kind, x1: LEFT, x2: width - RIGHT, y1: area.toY(at).toFixed(1), y2: area.toY(at).toFixed(1) }));
  const image = picture(width, t('fitErrorPlot'), said.join('; '), [
    drawn ? svg('rect', { class: 'band', x: LEFT, width: Math.max(1, width - LEFT - RIGHT), y: area.toY(tolerance).toFixed(1), height: (area.toY(-tolerance) - area.toY(tolerance)).toFixed(1) }) : null,
    ...axes(
      area,
      ticks(y, 6).map((at) => ({ at, label: short(at) })),
    ),
    ...(drawn ? level('tolerance', tolerance) : []),
    ...level('bound', bound),
    svg('path', { class: 'curve error', d: pathThrough(plot.x, plot.error, area.toX, area.toY, y) }),
  ]);
  return h(
    'figure',
    { id: 'fit-plot' },
    image,
    h('figcaption', {}, key('error', t('error')), key('bound', proven), drawn && key('tolerance', t('toleranceBand', value(tolerance)))),
    h('p', { class: 'note' }, said.filter((part, i) => part !== proven && !(drawn && i === said.length - 1)).join('; ')),
    h('p', { class: 'muted note' }, t('fitPlotNote')),
  );
}

function spanOf(x: readonly number[]): Range {
  return { low: x[0] ?? 0, high: x.at(-1) ?? 1 };
}
