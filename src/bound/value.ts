/** f, the sum, the error and the percentage at one argument. */
import { freeSymbols, type Assumption, type Expression, substitute, walk } from '../expression/index.ts';
import type { Expansion } from '../expand/index.ts';
import { describe } from '../functions/index.ts';
import { type Budget, Declined } from '../outcome.ts';
import { type Ball, encloseReal, real } from '../rigorous/index.ts';
import { encloseWithIntegrals } from './integral.ts';
import { sumOf } from './local.ts';
import { parameterBalls, compareReal } from './region.ts';
import { variableName } from './remainder.ts';
import type { ValueAt } from './types.ts';

const WANTED_DIGITS = 10;

export function valueAtArgument(expansion: Expansion, argument: Expression, assumptions: readonly Assumption[], budget: Budget): ValueAt {
  const variable = variableName(expansion);
  const names = freeSymbols(expansion.function).filter((name) => name !== variable);
  const parameters = parameterBalls(names, assumptions);
  const side = expansion.left && expansion.point !== 'inf' && expansion.point !== '-inf' && compareReal(argument, expansion.point, assumptions) < 0 ? expansion.left : expansion;
  const sum = sumOf(side);
  const integral = [...walk(side.function)].some((node) => node.kind === 'integral');
  for (let precision = 96; precision <= 6144; precision *= 2) {
    budget.check();
    const x = encloseReal(argument, parameters, precision, describe);
    if (x === null) throw new Declined('bad-request', 'The argument has no real value; give a number such as 0.3 or pi/6.');
    const environment = new Map([...parameters, [variable, x] as const]);
    const f = integral ? encloseWithIntegrals(substitute(side.function, variable, argument), parameters, precision, budget) : encloseReal(side.function, environment, precision, describe);
    const s = encloseReal(sum, environment, precision, describe);
    if (f === null || s === null) {
      if (precision < 400) continue;
      const open = names.filter((name) => !parameters.has(name));
      if (open.length > 0) throw new Declined('needs-assumption', `The value depends on ${open.join(', ')}; assume a value, such as ${open[0] ?? 'a'} = 1.`);
      throw new Declined('undecided', 'The function has no real value at this argument; choose another one.');
    }
    const error = real.subtract(f, s, precision);
    const good = parameters.size > 0 || real.relativeAccuracy(error) > WANTED_DIGITS * 3.33 || (error.mid === 0n && error.rad === 0n);
    if (!good && precision < 6144) continue;
    const ratio = real.divide(real.absolute(error), real.absolute(f), 64);
    return {
      value: decimals(f),
      sum: decimals(s),
      error: decimals(error),
      percentage: ratio === null ? null : decimals(real.multiply(ratio, real.fromInteger(100), 64)),
    };
  }
  throw new Declined('undecided', 'The error at this argument is too small to be resolved.');
}

const decimals = (x: Ball): { readonly low: string; readonly high: string } => ({ low: real.toDecimalDown(x, 12), high: real.toDecimalUp(x, 12) });
