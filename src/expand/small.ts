/** Several small quantities at once: one bookkeeping parameter s with weights, or one quantity far smaller than the other. */
import { createField } from '../algebra/index.ts';
import { type Assumption, build, type Expression, Q } from '../expression/index.ts';
import { describe } from '../functions/index.ts';
import { attempt, type Budget, Declined, type Outcome } from '../outcome.ts';
import { compareExponents, exactOf, insertFormal, isRational, monomial, type Multi } from '../series/index.ts';
import { requireShallow } from './depth.ts';
import { evaluate } from './evaluate.ts';
import type { Expansion, ExpansionTerm, SmallProblem, SmallQuantity } from './expansion.ts';
import { inVariable } from './expand.ts';
import { factorTree, rawTerms } from './flatten.ts';
import { expandSmallOperators, lettersOf } from './noncommuting/index.ts';
import { excludesValuesOfFresh, openSession } from './session.ts';
import { openContext } from './open-side.ts';
import { expandScaled } from './scaled.ts';
import { expandSmallVectors, hasVectors, isVectorFormula, requireLinearInFunctions } from './vectors/index.ts';

/**
 * Each quantity q becomes point + s^weight q, the function is expanded in s -> 0+, then s = 1: terms are blocks of equal weight, coefficients are homogeneous in the quantities.
 * The remainder's scale is max(|q|^(1/weight))^power. With `iterated` each quantity is smaller than every power of the one before it.
 */
export function expandSmall(problem: SmallProblem, budget: Budget): Outcome<Expansion> {
  return attempt(() => {
    requireShallow(problem.function);
    requireLinearInFunctions(problem.function);
    const vectors = hasVectors(problem.function);
    const letters = vectors && isVectorFormula(problem.function) ? null : lettersOf(problem.function, problem.assumptions);
    if (problem.quantities.length === 0 || problem.quantities.some((q) => q.symbol.kind !== 'symbol' && !vectors)) throw new Declined('bad-request', 'Name the small quantities, each by one symbol.');
    if (problem.quantities.some((q) => Q.signOf(q.weight) <= 0)) throw new Declined('bad-request', 'The weight of a small quantity must be positive.');
    if ((problem.terms === undefined) === (problem.order === undefined)) throw new Declined('bad-request', 'Ask for a number of terms or for an order, not both.');
    if (letters) return expandSmallOperators(problem, letters, budget, (inner) => inVariable(inner, budget));
    if (vectors) return expandSmallVectors(problem, budget);
    return problem.iterated ? iterated(problem, budget) : weighted(problem, budget);
  });
}

const nameOf = (q: SmallQuantity): string => (q.symbol.kind === 'symbol' ? q.symbol.name : '');
const isAtZero = (q: SmallQuantity): boolean => q.point === undefined || (q.point.kind === 'number' && Q.isZero(q.point.value));

function weighted(problem: SmallProblem, budget: Budget): Expansion {
  const scaled = problem.quantities.map((q) => ({ name: nameOf(q), weight: q.weight, ...(isAtZero(q) || !q.point ? {} : { point: q.point }) }));
  const found = expandScaled({ ...problem, scaled }, budget);
  const sizes = problem.quantities.map((q) => {
    const size = build.call('abs', isAtZero(q) ? q.symbol : build.difference(q.symbol, q.point as Expression));
    return Q.isOne(q.weight) ? size : build.power(size, Q.reciprocal(q.weight));
  });
  const local = sizes.length === 1 && sizes[0] ? sizes[0] : build.call('max', ...sizes);
  const first = problem.quantities[0] as SmallQuantity;
  return {
    function: problem.function,
    variable: first.symbol,
    point: first.point ?? build.number(0),
    side: 'both',
    local,
    logarithm: build.call('log', local),
    prefactor: null,
    ...found,
    exact: found.remainder === null,
    oscillating: false,
  };
}

/** The first quantity is t; each further one is smaller than every power of it. */
function iterated(problem: SmallProblem, budget: Budget): Expansion {
  const [outer, ...inner] = problem.quantities;
  if (!outer || inner.length !== 1 || problem.quantities.some((q) => !isAtZero(q))) throw new Declined('bad-request', 'An iterated expansion takes two quantities that tend to zero, such as y << x.');
  const x = nameOf(outer);
  const positive: Assumption[] = problem.quantities.map((q) => ({ kind: 'relation', left: q.symbol, relation: '>', right: build.number(0) }));
  const field = createField([...problem.assumptions, ...positive], budget, describe);
  const c = openContext(field, budget, x, outer.symbol, build.negation(build.call('log', outer.symbol)), false);
  const bindings = new Map<string, Multi>([[x, monomial(c, c.scale.local, Q.ONE)]]);
  for (const q of inner) bindings.set(nameOf(q), monomial(c, insertFormal(c, nameOf(q)), Q.ONE));
  const series = evaluate(openSession(c, bindings), problem.function);
  const terms: ExpansionTerm[] = [];
  let remainder: Expansion['remainder'] = null;
  for (const term of rawTerms(c, series)) {
    const shown: ExpansionTerm = { coefficient: exactOf(c, term.coefficient), power: exactOf(c, term.power), log: term.log, scale: factorTree(c, term.factors) };
    const full = problem.terms !== undefined ? terms.length >= problem.terms : terms.length > 0 && isRational(term.power) && compareExponents(c, term.power, problem.order ?? Q.ZERO) >= 0;
    if (full || term.order) {
      remainder = { power: shown.power, log: shown.log, scale: shown.scale };
      break;
    }
    terms.push(term.log % 2 === 0 ? shown : { ...shown, coefficient: exactOf(c, field.negate(term.coefficient)) });
  }
  const order = `${nameOf(inner[0] as SmallQuantity)} << ${x}`;
  return {
    function: problem.function,
    variable: outer.symbol,
    point: build.number(0),
    side: 'right',
    local: outer.symbol,
    logarithm: build.call('log', outer.symbol),
    prefactor: null,
    terms,
    remainder,
    exact: remainder === null,
    divergent: c.notes.divergent && remainder !== null,
    oscillating: false,
    assumptions: [order, ...positive.map((a) => (a.kind === 'relation' && a.left.kind === 'symbol' ? `${a.left.name} > 0` : '')), ...c.notes.assumptions, ...[...field.needed].filter((a) => !excludesValuesOfFresh(a))],
  };
}
