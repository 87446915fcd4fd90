/** A definite integral with nothing left to expand in: its value, enclosed. */
import { definiteIntegral } from '../bound/index.ts';
import { type Expression, freeSymbols, Q, walk } from '../expression/index.ts';
import { type Budget, failure, type Outcome, success } from '../outcome.ts';
import type { ExpandAnswer, ExpandRequest } from '../protocol.ts';
import { toLatex } from '../write/index.ts';
import { readAllAssumptions } from './assumptions.ts';

/** Enclosures are as narrow as this where no tolerance is asked for: ten decimals, as tables print them. */
const DEFAULT_TOLERANCE = '1e-10';

/** Null where the expression is no such integral. */
export function integralAnswer(target: Expression, request: ExpandRequest, time: Budget): Outcome<ExpandAnswer> | null {
  if (freeSymbols(target).length > 0 || ![...walk(target)].some((e) => e.kind === 'integral' && e.lower && e.upper)) return null;
  const tolerance = Q.fromDecimal(String(request.tolerance ?? DEFAULT_TOLERANCE));
  if (!tolerance || tolerance.num <= 0n) return failure('bad-request', `The tolerance "${request.tolerance ?? ''}" must be a positive number such as 1e-6.`);
  const assumptions = readAllAssumptions(request.assume);
  if (!assumptions.ok) return assumptions;
  const value = definiteIntegral(target, tolerance, assumptions.value, time);
  if (!value.ok) return value;
  const { low, high, proof } = value.value;
  const shown = commonDigits(low, high);
  return success({
    ok: true,
    terms: [],
    remainder: null,
    exact: false,
    latex: shown,
    text: shown,
    equation: `${toLatex(target)} = ${shown}`,
    numeric: { syntax: 'mpmath', sum: shown.replace('…', ''), scale: '0', symbols: {} },
    assumptions: [],
    value: { low, high },
    proof,
  });
}

/** The digits that both ends share, then an ellipsis; the lower end where they share none. */
function commonDigits(low: string, high: string): string {
  if (low === high) return low;
  const [a, b] = [/^(-?[\d.]+)(e.*)?$/.exec(low), /^(-?[\d.]+)(e.*)?$/.exec(high)];
  if (!a || !b || a[2] !== b[2]) return low;
  const [x = '', y = ''] = [a[1], b[1]];
  let k = 0;
  while (k < x.length && x[k] === y[k]) k += 1;
  return k < 3 ? low : `${x.slice(0, k)}…${a[2] ?? ''}`;
}
