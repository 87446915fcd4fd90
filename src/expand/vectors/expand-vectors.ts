/** Expansions of formulas with vectors: in a small or large vector, in several, or in a scalar of such a formula. */
import { type Assumption, build, type Expression, freeSymbols, mapChildren, Q, type Rational, walk } from '../../expression/index.ts';
import { type Budget, Declined } from '../../outcome.ts';
import type { Expansion, ExpansionProblem, ExpansionTerm, SmallProblem } from '../expansion.ts';
import { expandScaled, type ScaledSymbol } from '../scaled.ts';
import { boldLetter, Frame, letterKey, plainLetter } from './frame.ts';
import { fieldOf, lower, type Lowering, stepName } from './lower.ts';

type Size = Pick<ExpansionProblem, 'terms' | 'order' | 'assumptions'>;
interface Mover {
  /** A vector letter, or a scalar symbol. */
  readonly node: Expression;
  readonly weight: Rational;
}

/** Operations that belong to vectors; commutators and traces belong to operators. */
const VECTOR_OPERATIONS = new Set(['symbol', 'norm', 'dot', 'cross', 'tuple', 'directional']);
export const hasVectors = (e: Expression): boolean => [...walk(e)].some((n) => n.kind === 'vector' && VECTOR_OPERATIONS.has(n.operation));

/** Whether the formula makes sense with its bold letters as vectors; a matrix in it does not. */
export function isVectorFormula(f: Expression): boolean {
  if ([...walk(f)].some((n) => n.kind === 'vector' && !VECTOR_OPERATIONS.has(n.operation))) return false;
  try {
    lower(open(f, [], []), f);
    return true;
  } catch (error) {
    if (error instanceof Declined) return false;
    throw error;
  }
}

/** The vector that a variable names: `\mathbf{d}`, `|\mathbf{d}|`, `d` where d is no symbol of its own, `d/r`. Null for a scalar. */
export function vectorNamed(variable: Expression, f: Expression): Expression | null {
  switch (variable.kind) {
    case 'vector':
      return variable.operation === 'symbol' ? variable : variable.operation === 'norm' && variable.args[0]?.kind === 'vector' ? vectorNamed(variable.args[0], f) : null;
    case 'symbol':
      return freeSymbols(f).includes(variable.name) ? null : ([...walk(f)].find((n) => n.kind === 'vector' && n.operation === 'symbol' && letterKey(n.name ?? '') === letterKey(variable.name)) ?? null);
    case 'quotient': {
      const above = vectorNamed(variable.numerator, f);
      return above && vectorNamed(variable.denominator, f) ? above : null;
    }
    default:
      return null;
  }
}

/** The expansion in one variable. `scalar` expands a formula without vectors. */
export function expandVectors(problem: ExpansionProblem, budget: Budget, scalar: (inner: ExpansionProblem) => Expansion): Expansion {
  const vector = vectorNamed(problem.variable, problem.function);
  if (!vector) {
    if (problem.variable.kind === 'vector') throw new Declined('bad-request', 'This vector does not occur in the formula; name one that does.');
    return inScalar(problem, scalar);
  }
  const large = problem.point === 'inf' || problem.point === '-inf';
  const atZero = typeof problem.point === 'object' && problem.point.kind === 'number' && Q.isZero(problem.point.value);
  if (!large && !atZero) throw new Declined('bad-request', 'A vector is expanded where it is small or large; write \\mathbf{a} + \\mathbf{h} for a vector near another one and expand in \\mathbf{h}.');
  return inMovers(problem.function, [{ node: vector, weight: large ? Q.rational(-1) : Q.ONE }], problem, budget);
}

/** The expansion in several small quantities, vectors and scalars. */
export function expandSmallVectors(problem: SmallProblem, budget: Budget): Expansion {
  if (problem.iterated) throw new Declined('bad-request', 'Vectors are expanded by weights; give the small quantities weights such as \\mathbf{a} ~ b^2.');
  const movers = problem.quantities.map((q): Mover => {
    if (q.point && !(q.point.kind === 'number' && Q.isZero(q.point.value))) throw new Declined('bad-request', 'Beside vectors every small quantity tends to zero; write the formula in the deviations.');
    return { node: vectorNamed(q.symbol, problem.function) ?? q.symbol, weight: q.weight };
  });
  return inMovers(problem.function, movers, problem, budget);
}

const nameOf = (e: Expression): string => (e.kind === 'symbol' || e.kind === 'vector' ? (e.name ?? '') : '');

function open(f: Expression, movers: readonly Mover[], moving: readonly string[]): Lowering {
  const weights = new Map(movers.filter((m) => m.node.kind === 'vector').map((m) => [letterKey(nameOf(m.node)), m.weight]));
  const frame = new Frame();
  const weightOf = (name: string): Rational => weights.get(letterKey(name)) ?? Q.ZERO;
  // Letters first, so that \hat{r} before \mathbf{r} still means its direction.
  for (const n of walk(f)) if (n.kind === 'vector' && n.operation === 'symbol' && !/^\\(?:wide)?hat\{/.test(n.name ?? '')) frame.enter(n.name ?? '', weightOf(n.name ?? ''), false);
  // r beside \mathbf{r} is its length, also where no bars say so.
  const scalars = new Set(freeSymbols(f));
  frame.lengthsAmong(scalars);
  return { frame, weightOf, moving, directions: [], fields: new Map() };
}

/** Twice: the first pass finds along which directions the arguments of fields move. */
function lowered(l: Lowering, f: Expression): Expression {
  lower(l, f);
  l.fields.clear();
  const value = lower(l, f);
  if ('scalar' in value) return value.scalar;
  const parts = [...value.parts].map(([key, c]) => build.product(c, l.frame.element(key)));
  return build.sum(...parts);
}

function inMovers(f: Expression, movers: readonly Mover[], size: Size, budget: Budget): Expansion {
  const scalars = movers.filter((m) => m.node.kind === 'symbol');
  const l = open(f, movers, scalars.map((m) => nameOf(m.node)));
  const tree = lowered(l, f);
  const scaled: ScaledSymbol[] = [...l.frame.quantities].filter(([, q]) => Q.signOf(q.weight) !== 0).map(([name, q]) => ({ name, weight: q.weight }));
  for (const m of scalars) scaled.push({ name: nameOf(m.node), weight: m.weight });
  for (const key of l.directions) if (Q.signOf(l.frame.weightOf(key)) > 0) scaled.push({ name: stepName(key), weight: l.frame.weightOf(key), unit: true });
  const found = expandScaled({ function: tree, scaled, assumptions: [...size.assumptions, ...lengthsPositive(l)], ...(size.terms === undefined ? {} : { terms: size.terms }), ...(size.order === undefined ? {} : { order: size.order }) }, budget);
  const large = movers.some((m) => Q.signOf(m.weight) < 0);
  const sizes = movers.map((m) => {
    const measure = m.node.kind === 'vector' ? lift(l, l.frame.length(l.frame.find(nameOf(m.node)) ?? 0)) : build.call('abs', m.node);
    return Q.isOne(Q.absolute(m.weight)) ? measure : build.power(measure, Q.reciprocal(Q.absolute(m.weight)));
  });
  const [first] = sizes;
  const together = sizes.length === 1 && first ? first : build.call('max', ...sizes);
  const local = large ? build.quotient(build.number(1), together) : together;
  const small = new Set(movers.filter((m) => m.node.kind === 'vector').map((m) => lengthText(l, m.node)));
  return lifted(l, {
    function: f,
    variable: movers[0]?.node ?? build.number(0),
    point: large ? 'inf' : build.number(0),
    side: 'both',
    local,
    logarithm: build.call('log', local),
    prefactor: null,
    ...found,
    // A length is not negative by nature.
    assumptions: found.assumptions.filter((a) => ![...small].some((name) => a === `${name} > 0`)),
    exact: found.remainder === null,
    oscillating: false,
  });
}

const lengthText = (l: Lowering, node: Expression): string => nameOf(l.frame.length(l.frame.find(nameOf(node)) ?? 0));

/** Lengths of vectors, all positive: a vector that is zero everywhere is none. */
function lengthsPositive(l: Lowering): readonly Assumption[] {
  return [...l.frame.quantities].filter(([name, q]) => q.meaning.kind === 'symbol' || name.startsWith('|')).map(([name]): Assumption => ({ kind: 'relation', left: build.symbol(name), relation: '>', right: build.number(0) }));
}

/** In a scalar of the formula the vectors are constants. */
function inScalar(problem: ExpansionProblem, scalar: (inner: ExpansionProblem) => Expansion): Expansion {
  const moving = freeSymbols(problem.variable);
  const l = open(problem.function, [], moving);
  const tree = lowered(l, problem.function);
  const found = scalar({ ...problem, function: tree, assumptions: [...problem.assumptions, ...lengthsPositive(l)] });
  const all = (x: Expansion): Expansion => lifted(l, { ...x, function: problem.function, ...(x.left ? { left: all(x.left) } : {}), ...(x.branches ? { branches: x.branches.map(all) } : {}) });
  return all(found);
}

/** Symbols written as the products and lengths they stand for, also in the assumptions. */
function lifted(l: Lowering, x: Expansion): Expansion {
  const back = (e: Expression): Expression => lift(l, e);
  const maybe = (e: Expression | null): Expression | null => (e === null ? null : back(e));
  const terms = x.terms.map((t): ExpansionTerm => ({ ...t, coefficient: back(t.coefficient), power: back(t.power), scale: maybe(t.scale) }));
  const used = new Set([...terms.map((t) => t.coefficient), x.local].flatMap(freeSymbols));
  const names = [...l.frame.lengths].filter(([name]) => used.has(name)).map(([name, node]) => `${plainLetter(name)} = |${boldLetter(nameOf(node))}|`);
  const divisors = new Set(terms.flatMap((t) => divided(t.coefficient)));
  const fixed = [...used].filter((name) => divisors.has(name)).filter((name) => l.frame.lengths.has(name) && Q.signOf(l.frame.quantities.get(name)?.weight ?? Q.ONE) === 0).map((name) => `${plainLetter(name)} > 0`);
  const texts = x.assumptions.map((a) => [...l.frame.quantities].reduce((text, [name, q]) => (/ /.test(name) ? text.replaceAll(name, meaningText(q.meaning)) : text), a));
  return {
    ...x,
    terms,
    remainder: x.remainder && { ...x.remainder, power: maybe(x.remainder.power), scale: maybe(x.remainder.scale) },
    prefactor: maybe(x.prefactor),
    ...(x.general ? { general: back(x.general) } : {}),
    ...(x.radius ? { radius: { value: maybe(x.radius.value), ...(x.radius.nearest ? { nearest: back(x.radius.nearest) } : {}) } } : {}),
    assumptions: [...new Set([...texts, ...fixed, ...names, ...[...l.frame.units].map((name) => `|${boldLetter(name)}| = 1`)])],
  };
}

/** Symbols that are divided by. */
function divided(e: Expression): readonly string[] {
  return [...walk(e)].flatMap((n) => (n.kind === 'quotient' ? freeSymbols(n.denominator) : n.kind === 'power' && n.exponent.kind === 'number' && (n.exponent.value.num < 0n || n.exponent.value.den !== 1n) ? freeSymbols(n.base) : []));
}

function lift(l: Lowering, e: Expression): Expression {
  if (e.kind === 'symbol') return l.frame.quantities.get(e.name)?.meaning ?? e;
  const field = e.kind === 'apply' ? fieldOf(l, e.name) : undefined;
  if (e.kind !== 'apply' || !field) return mapChildren(e, (child) => lift(l, child));
  const moved = l.directions.length;
  const rest = e.args.slice(moved).map((a) => lift(l, a));
  const value: Expression = { kind: 'apply', name: field.name, args: [lift(l, field.place), ...rest], derivatives: [0, ...e.derivatives.slice(moved)] };
  const along = l.directions.flatMap((key, k) => Array.from({ length: e.derivatives[k] ?? 0 }, () => l.frame.node(key)));
  return along.length === 0 ? value : { kind: 'vector', operation: 'directional', args: [value, ...along] };
}

function meaningText(e: Expression): string {
  if (e.kind !== 'vector') return nameOf(e);
  const inner = e.args.map(meaningText);
  switch (e.operation) {
    case 'dot':
      return `(${inner.join('·')})`;
    case 'cross':
      return `(${inner.join('×')})`;
    case 'norm':
      return `|${inner.join('')}|`;
    default:
      return boldLetter(nameOf(e));
  }
}
