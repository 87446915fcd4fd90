/** A constant such as T_0 that stands only on the printed side, as a factor of the whole: the leading terms say what it is, the rest is then judged. */
import { build, dependsOn, freeSymbols, mapChildren, type Expression } from '../expression/index.ts';
import type { Setting } from './context.ts';
import { compareSizes, leading } from './size.ts';
import { withoutMarks } from './truncated.ts';

/** The side with the constant replaced by its value times itself removed; the side itself where there is no such constant. */
export function calibrated(f: Expression, side: Expression, setting: Setting): Expression {
  const name = onlyFactor(f, side, setting);
  if (name === null) return side;
  const [left, right] = [leading(setting, withoutMarks(f)), leading(setting, withoutMarks(side))];
  if (left.kind !== 'monomial' || right.kind !== 'monomial' || compareSizes(left.size, right.size) !== 0) return side;
  const value = build.quotient(build.product(build.symbol(name), left.coefficient), right.coefficient);
  const turn = (e: Expression): Expression => (e.kind === 'symbol' && e.name === name ? { ...value, ...(e.span ? { span: e.span } : {}) } : mapChildren(e, turn));
  return turn(side);
}

/** A symbol with index 0 (or a bare capital) that the function does not hold and that multiplies everything printed. */
function onlyFactor(f: Expression, side: Expression, setting: Setting): string | null {
  if (side.kind !== 'product') return null;
  const factor = side.factors.find((x) => x.kind === 'symbol' && x.name !== setting.variable && !dependsOn(f, x.name) && /_(?:0|\{0\}|\\infty|\{\\infty\})$/.test(x.name));
  if (factor?.kind !== 'symbol') return null;
  const others = side.factors.filter((x) => x !== factor);
  return others.some((x) => freeSymbols(x).includes(factor.name)) || !others.some((x) => dependsOn(x, setting.variable)) ? null : factor.name;
}
