/** Which letters of a formula do not commute: those declared so, and those whose notation says it. */
import { type Assumption, type Expression, walk } from '../../expression/index.ts';

/** Spellings of the identity. A bold 1 is read as the number. */
const IDENTITY = /^(?:I|\\(?:mathbb|mathbf|hat|bm|boldsymbol|mathrm)\{(?:I|1)\})$/;
const HATTED_CAPITAL = /^\\(?:wide)?hat\{[A-Z]/;
const CAPITAL = /^(?:\\(?:mathbf|boldsymbol|bm|hat|widehat|mathcal)\{)?[A-Z]/;

export interface Letters {
  /** Nodes by canonical name, in order of appearance. */
  readonly operators: ReadonlyMap<string, Expression>;
  /** The letter that stands for the identity, where the formula has one. */
  readonly identity: Expression | null;
}

export const letterName = (e: Expression): string | null => (e.kind === 'symbol' ? e.name : e.kind === 'vector' && e.operation === 'symbol' ? (e.name ?? null) : null);
const OPERATIONS = new Set(['commutator', 'anticommutator', 'trace', 'determinant', 'ordered']);

/**
 * Null where nothing speaks of operators. One letter under a hat alone commutes with itself: its formula is left to the commuting rules.
 * Bold capitals are operators here; whoever calls has ruled out that they are vectors.
 */
export function lettersOf(f: Expression, assumptions: readonly Assumption[]): Letters | null {
  const declared = new Set(assumptions.flatMap((a) => (a.kind === 'domain' && a.domain === 'operator' ? [a.symbol] : [])));
  const operators = new Map<string, Expression>();
  let identity: Expression | null = null;
  const special = [...walk(f)].filter((n) => n.kind === 'vector' && OPERATIONS.has(n.operation));
  const inside = new Set(special.flatMap((n) => [...walk(n)].map(letterName)));
  const bracketed = new Set(special.flatMap((n) => (n.kind === 'vector' && /commutator$/.test(n.operation) ? n.args.map(letterName) : [])));
  let bold = false;
  for (const n of walk(f)) {
    const name = letterName(n);
    if (name === null) continue;
    const isBold = n.kind === 'vector' && CAPITAL.test(name);
    if (isBold) bold = true;
    if (!declared.has(name) && IDENTITY.test(name)) identity = n;
    else if (declared.has(name) || HATTED_CAPITAL.test(name) || bracketed.has(name) || isBold || (inside.has(name) && CAPITAL.test(name))) operators.set(name, n);
  }
  const speaks = [...operators.keys()].some((name) => declared.has(name)) || special.length > 0 || bold || operators.size > 1;
  return speaks && operators.size > 0 ? { operators, identity } : null;
}

/**
 * Plain capitals that an author may have meant as operators, where commuting changes the answer: two of them among several exponentials and inverses that stand side by side
 * (`e^{\epsilon A} B e^{-\epsilon A}`, `P^{-1} A P`), or in a sum that is inverted by `^{-1}`. What is divided by is a number. Names in plain notation, sorted.
 */
export function commutingCapitals(f: Expression, variable: Expression): readonly string[] {
  const numbers = new Set([...walk(f)].flatMap((n) => (n.kind === 'quotient' ? capitalsIn(n.denominator) : [])));
  const found = new Set<string>();
  for (const n of walk(f)) {
    const places = n.kind === 'product' && orderMatters(n.factors) ? n.factors.filter((x) => capitalsIn(x).length > 0) : n.kind === 'power' && isInverse(n) && n.base.kind === 'sum' ? n.base.terms.filter((x) => capitalsIn(x).length > 0) : [];
    const capitals = new Set(places.flatMap(capitalsIn).filter((name) => !numbers.has(name) && name !== letterName(variable)));
    if (places.length > 1 && capitals.size > 1) for (const name of capitals) found.add(name);
  }
  return [...found].sort();
}
const capitalsIn = (e: Expression): readonly string[] => [...walk(e)].flatMap((n) => (n.kind === 'symbol' && /^[A-Z](?:_|$)/.test(n.name) ? [n.name] : []));
/** Two exponentials or inverses, or one with a capital on both of its sides: of `N e^{-E/T}` the terms are the same either way. */
function orderMatters(factors: readonly Expression[]): boolean {
  const shaped = factors.filter(isOperatorShape).length;
  const names = factors.flatMap((x) => [...new Set(capitalsIn(x))]);
  return shaped > 1 || (shaped === 1 && new Set(names).size < names.length);
}
const isInverse = (e: Extract<Expression, { kind: 'power' }>): boolean => (e.exponent.kind === 'negation' && e.exponent.operand.kind === 'number') || (e.exponent.kind === 'number' && e.exponent.value.num < 0n && e.exponent.value.den === 1n);
const isOperatorShape = (e: Expression): boolean => capitalsIn(e).length > 0 && ((e.kind === 'power' && (isInverse(e) || (e.base.kind === 'constant' && e.base.name === 'e'))) || (e.kind === 'call' && e.function === 'exp'));
