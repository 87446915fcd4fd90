/** Answers as text for a terminal. */
import type { Answer, ExpandAnswer, FitAnswer, GuardAnswer, NeededAnswer, ReplacedAnswer } from '../protocol.ts';

const row = (label: string, value: string): string => `  ${label.padEnd(12)}${value}`;

function needed(answer: NeededAnswer): string {
  if (answer.terms !== null) {
    const bound = answer.bound === undefined ? '' : `, bound ${answer.bound}`;
    return `${answer.terms} terms${answer.order === undefined ? '' : ` (order ${answer.order})`}${bound}${answer.minimal ? '; one fewer is not enough (proven)' : ''}`;
  }
  const reach = answer.reach ? `; within distance ${answer.reach.distance} of the point${answer.reach.closed === false ? ' (not reached)' : answer.reach.closed === undefined ? ' (at it: not decided)' : ''} it can` : '';
  const best = answer.best ? `; best: ${answer.best.terms} terms, bound ${answer.best.bound}` : '';
  return `no number of terms keeps it: ${answer.reason ?? 'not reached'}${best}${reach}`;
}

function expansion(answer: ExpandAnswer, request: Readonly<Record<string, unknown>>): string[] {
  const lines: string[] = [answer.text];
  if (answer.value) lines.push(row('value', `between ${answer.value.low} and ${answer.value.high}`));
  if (answer.exact) lines.push(row('remainder', 'none: this is exact'));
  else if (answer.remainder) lines.push(row('order', answer.remainder.latex));
  if (answer.bound) {
    const where = Array.isArray(request['interval']) ? ` on [${request['interval'].join(', ')}]` : '';
    const { value, factor, place, method } = answer.bound;
    lines.push(value === null ? row('bound', `none${where}: unbounded at ${place ?? 'a point of the interval'}`) : row('bound', `${value}${factor ? ` * ${factor}` : ''}${where}, proven (${method})`));
  }
  if (answer.needed) lines.push(row('needed', needed(answer.needed)));
  for (const { terms, distance } of answer.reach ?? []) lines.push(row('reach', `${terms} ${terms === 1 ? 'term' : 'terms'}: ${reachOf(distance, request)}`));
  if (answer.at) lines.push(row('at', `${answer.at.argument}: function ${answer.at.function}, sum ${answer.at.sum}, error ${answer.at.error}${answer.at.percent === null ? '' : ` (${answer.at.percent} %)`}`));
  if (answer.leastTerm) lines.push(row('best', `${answer.leastTerm.terms} terms at this argument; the first one left out is at most ${answer.leastTerm.size} there`));
  for (const piece of answer.replaced ?? []) lines.push(row('replaced', `${piece.from} by ${piece.to}${relativeError(piece)}`));
  for (const { unknown, expansion: found } of answer.components ?? []) lines.push(row('component', `${unknown}: ${found.text}`));
  if (answer.radius) lines.push(row('radius', `${answer.radius.value}${answer.radius.nearest ? ` (nearest singularity ${answer.radius.nearest})` : ''}`));
  if (answer.divergent) lines.push(row('series', 'divergent (asymptotic)'));
  if (answer.general) lines.push(row('general', answer.general));
  if (answer.assumptions.length > 0) lines.push(row('assuming', answer.assumptions.join(', ')));
  lines.push(row('latex', answer.latex));
  for (const line of answer.left ? expansion(answer.left, {}) : []) lines.push(`  from the left: ${line.trim()}`);
  for (const branch of answer.branches ?? []) lines.push(`  branch: ${branch.text}`);
  return lines;
}

function reachOf(distance: string | null, request: Readonly<Record<string, unknown>>): string {
  const tolerance = typeof request['tolerance'] === 'number' || typeof request['tolerance'] === 'string' ? ` ${request['tolerance']}` : '';
  if (distance === null) return `no distance from the point was proved within which the tolerance${tolerance} is kept`;
  return distance === 'inf' ? `the tolerance${tolerance} is kept everywhere` : `the tolerance${tolerance} is kept within distance ${distance} of the point, proven`;
}

function relativeError({ relativeError: error }: ReplacedAnswer): string {
  const parts = [...(error?.percent ? [`${error.percent} % there`] : []), ...(error?.bound ? [`at most ${error.bound} on the interval, proven`] : [])];
  return parts.length === 0 ? '' : `; relative error ${parts.join(', ')}`;
}

function fit(answer: FitAnswer): string[] {
  const { total, approximation, rounding, evaluation, measure } = answer.bound;
  return [
    answer.code.trimEnd(),
    row('degree', `${answer.degree}${answer.taylorDegree === null ? '' : ` (a truncated expansion needs ${answer.taylorDegree})`}`),
    row('bound', `${total} ${measure}: approximation ${approximation}, coefficients ${rounding}, evaluation ${evaluation}`),
  ];
}

function guard(answer: GuardAnswer): string[] {
  return [
    answer.code.trimEnd(),
    ...answer.ranges.map((r) => row('range', `[${r.from}, ${r.to}]: ${r.form}, relative error at most ${r.bound}`)),
    ...answer.forms.map((f) => row('exact form', `${f.text}, relative error at most ${f.bound}`)),
    ...(answer.assumptions.length > 0 ? [row('assuming', answer.assumptions.join('; '))] : []),
  ];
}

export function humanText(answer: Answer, request: Readonly<Record<string, unknown>>): string {
  if (!answer.ok) {
    const { error } = answer;
    const place = error.start === undefined ? '' : ` (at character ${error.start + 1})`;
    return `${error.code}: ${error.message}${place}`;
  }
  if ('findings' in answer) return answer.findings.map((f) => `${f.verdict}: ${f.reason}`).join('\n');
  if ('ranges' in answer) return guard(answer).join('\n');
  if ('coefficients' in answer) return fit(answer).join('\n');
  return expansion(answer, request).join('\n');
}
