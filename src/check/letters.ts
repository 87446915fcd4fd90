/** Letters of the printed side that the function does not hold: constants of the trade, the imaginary unit. */
import { build, dependsOn, type Expression, freeSymbols, mapChildren } from '../expression/index.ts';
import type { Claim } from './claims.ts';
import type { Setting } from './context.ts';
import { judge, type Judgement } from './judge.ts';
import { withoutMarks } from './truncated.ts';

/** Symbols of the printed side that the function does not hold. */
export function unknownSymbols(f: Expression, side: Expression, setting: Setting): readonly string[] {
  // How far a sum goes is no quantity of the function.
  const open = (e: Expression): Expression => (e.kind === 'indexedSum' && e.upper.kind === 'symbol' && !dependsOn(e.body, e.upper.name) ? { ...e, upper: build.constant('infinity') } : mapChildren(e, open));
  return freeSymbols(open(withoutMarks(side))).filter((name) => name !== setting.variable && !dependsOn(f, name));
}

/** i or j read as a symbol on both sides may be the imaginary unit. */
export function withImaginaryUnit(f: Expression, claim: Claim): { readonly f: Expression; readonly claim: Claim } | null {
  const name = ['j', 'i'].find((n) => dependsOn(f, n) && dependsOn(claim.side, n));
  return name === undefined ? null : { f: named(f, name, build.constant('i')), claim: { ...claim, side: named(claim.side, name, build.constant('i')) } };
}

/** Letters by which the trade names constants. */
const CONSTANT_LETTERS: Readonly<Record<string, readonly Expression[]>> = {
  '\\gamma': [build.constant('eulerGamma')],
  '\\gamma_E': [build.constant('eulerGamma')],
  '\\gamma_e': [build.constant('eulerGamma')],
  C: [build.constant('eulerGamma'), build.constant('catalan')],
  G: [build.constant('catalan')],
  K: [build.constant('catalan')],
  A: [build.constant('glaisher')],
  e: [build.constant('e')],
};

const stieltjes = (name: string): Expression | null => {
  const index = /^\\gamma_(?:\{(\d+)\}|(\d))$/.exec(name);
  return index ? build.call('stieltjes', build.number(Number(index[1] ?? index[2]))) : null;
};

/** The claim with its unknown letters read as constants of the trade: the reading that agrees furthest. */
export function withConstants(f: Expression, claim: Claim, unknown: readonly string[], setting: Setting): { readonly claim: Claim; readonly judgement: Judgement; readonly left: readonly string[] } | null {
  let readings: readonly (readonly [Expression, readonly string[]])[] = [[claim.side, []]];
  for (const name of unknown) {
    const values = [...(CONSTANT_LETTERS[name] ?? []), ...(stieltjes(name) ? [stieltjes(name) as Expression] : [])];
    readings = values.length === 0 ? readings.map(([side, left]) => [side, [...left, name]] as const) : readings.flatMap(([side, left]) => values.map((v) => [named(side, name, v), left] as const));
    if (readings.length > 6) return null;
  }
  let best: { readonly claim: Claim; readonly judgement: Judgement; readonly left: readonly string[] } | null = null;
  for (const [side, left] of readings) {
    if (side === claim.side) continue;
    const judgement = judge(f, side, claim.relation, setting);
    const candidate = { claim: { ...claim, side }, judgement, left };
    if (judgement.kind === 'holds') return candidate;
    if (!best || (judgement.kind === 'fails' && best.judgement.kind === 'fails' && judgement.failure.matched > best.judgement.failure.matched)) best = candidate;
  }
  return best;
}

/** The symbol replaced, places kept. */
function named(e: Expression, name: string, value: Expression): Expression {
  return e.kind === 'symbol' && e.name === name ? { ...value, ...(e.span ? { span: e.span } : {}) } : mapChildren(e, (c) => named(c, name, value));
}
