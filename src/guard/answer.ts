/** The chosen form written down: its code, its ranges and what it rests on. */
import { Q, type Rational } from '../expression/index.ts';
import { roundToFormat, shortestDecimal, toPlain } from '../write/index.ts';
import type { Candidate } from './candidate.ts';
import { guardCode } from './code.ts';
import type { Setting } from './setting.ts';
import type { Guarded, GuardProblem, GuardRange } from './types.ts';
import { commentOf, decimal } from './words.ts';

export function answer(best: Candidate, candidates: readonly Candidate[], problem: GuardProblem, setting: Setting, grows: boolean): Guarded {
  const { format, library, language, variable, function: f, point } = problem;
  const exact = candidates.filter((c) => c.form.identities.length > 0).sort((a, b) => a.whole - b.whole);
  const assumptions = [
    ...(setting.proposed ? [`no interval was given: [${setting.text.join(', ')}] is proposed`] : []),
    'round to nearest, subnormal numbers kept, no optimisation that changes values (such as fast-math)',
    `each library call is within ${library} ulp; square roots are correctly rounded`,
    'holds with and without fusing of products and sums (a*b + c)',
    `where the value is below the smallest normal ${format.name} number the relative bound does not apply`,
    ...(language === 'glsl' || language === 'hlsl' ? ['the device rounds additions, multiplications, divisions and square roots correctly'] : []),
    ...(grows ? [`nor where the value is beyond half the largest ${format.name} number`] : []),
  ];
  const written = guardCode({
    name: problem.name ?? ['guarded'],
    variable,
    language,
    format,
    comment: commentOf({ function: f, variable, interval: setting.text, format, whole: best.whole, series: best.seriesBound, direct: best.directBound, switchText: best.switch ? shortestDecimal(best.switch, format.name) : null, terms: best.series?.terms ?? null, assumptions: assumptions.slice(setting.proposed ? 1 : 0) }),
    direct: best.form.tree,
    ...(problem.prefix === undefined ? {} : { prefix: problem.prefix }),
    series: best.series && best.switch && typeof point !== 'string' ? { form: best.series, point, switch: best.switch, closed: best.directBound === null } : null,
  });
  return {
    forms: exact.map((c) => ({ tree: c.form.tree, text: toPlain(c.form.tree), bound: c.whole, identities: c.form.identities })),
    ranges: rangesOf(best, problem, setting),
    switch: best.switch,
    terms: best.series?.terms ?? null,
    bound: { series: best.seriesBound, direct: best.directBound, whole: best.whole },
    code: written.code,
    imports: written.imports,
    assumptions,
    interval: setting.text,
  };
}

/** One row for each range of the argument and form. */
function rangesOf(best: Candidate, problem: GuardProblem, setting: Setting): GuardRange[] {
  const text = toPlain(best.form.tree);
  const [low, high] = setting.text;
  const { point, format } = problem;
  if (!best.series || !best.switch || typeof point === 'string') return [{ from: low, to: high, form: text, bound: best.whole }];
  const at = (d: Rational): string => {
    const value = roundToFormat(Q.add(point, d), format.name);
    return value ? shortestDecimal(value, format.name) : decimal(Q.toDouble(Q.add(point, d)));
  };
  const rows: GuardRange[] = [];
  const touches = (direction: 1 | -1): boolean => setting.sides.some((s) => s.direction === direction);
  const direct = best.directBound;
  if (direct === null) return [{ from: low, to: high, form: best.seriesText, bound: best.whole }];
  if (touches(-1)) rows.push({ from: low, to: at(Q.negate(best.switch)), form: text, bound: direct });
  rows.push({ from: touches(-1) ? at(Q.negate(best.switch)) : low, to: touches(1) ? at(best.switch) : high, form: best.seriesText, bound: best.seriesBound ?? 0 });
  if (touches(1)) rows.push({ from: at(best.switch), to: high, form: text, bound: direct });
  return rows;
}
