/** A formula with vectors -> a formula in scalars: lengths, dot products and triple products as symbols, fields f(x + h) as functions of the amounts by which their argument moves. */
import { build, dependsOn, type Expression, isVectorName, mapChildren, Q, type Rational, substitute, walk } from '../../expression/index.ts';
import { Declined } from '../../outcome.ts';
import type { BasisKey, Frame } from './frame.ts';

/** A combination of the basis with scalar coefficients. */
export interface VectorValue {
  readonly parts: ReadonlyMap<BasisKey, Expression>;
}
export type Value = { readonly scalar: Expression } | VectorValue;

/** A field at a place: f at x. Its symbol is an unspecified function of how far the argument moves along each direction. */
export interface FieldAt {
  readonly name: string;
  readonly place: Expression;
}

export interface Lowering {
  readonly frame: Frame;
  readonly weightOf: (name: string) => Rational;
  /** Scalar symbols that vary. */
  readonly moving: readonly string[];
  /** Directions along which arguments of fields move, in the order found. */
  readonly directions: BasisKey[];
  readonly fields: Map<string, FieldAt>;
}

const isScalar = (v: Value): v is { readonly scalar: Expression } => 'scalar' in v;
const ONE = build.number(1);

const plus = (a: Expression, b: Expression): Expression => (isZero(a) ? b : isZero(b) ? a : build.sum(a, b));
const times = (a: Expression, b: Expression): Expression => (isZero(a) || isZero(b) ? build.number(0) : build.isOneNumber(a) ? b : build.isOneNumber(b) ? a : build.product(a, b));
const isZero = (e: Expression): boolean => e.kind === 'number' && Q.isZero(e.value);

function combine(entries: Iterable<readonly [BasisKey, Expression]>): VectorValue {
  const parts = new Map<BasisKey, Expression>();
  for (const [key, c] of entries) parts.set(key, plus(parts.get(key) ?? build.number(0), c));
  for (const [key, c] of parts) if (isZero(c)) parts.delete(key);
  return { parts };
}

function inner(frame: Frame, a: VectorValue, b: VectorValue): Expression {
  let total: Expression = build.number(0);
  for (const [i, c] of a.parts) for (const [j, d] of b.parts) total = plus(total, times(times(c, d), frame.dot(i, j)));
  return total;
}

function outer(frame: Frame, a: VectorValue, b: VectorValue): VectorValue {
  return combine([...a.parts].flatMap(([i, c]) => [...b.parts].flatMap(([j, d]) => frame.cross(i, j).map(([key, e]) => [key, times(times(c, d), e)] as const))));
}

export function lower(l: Lowering, e: Expression): Value {
  switch (e.kind) {
    case 'vector':
      return lowerVector(l, e);
    case 'symbol': {
      const hat = unitVector(l, e.name);
      return hat ?? { scalar: e };
    }
    case 'sum': {
      const values = e.terms.map((t) => lower(l, t));
      if (values.every(isScalar)) return { scalar: { ...e, terms: values.map((v) => v.scalar) } };
      if (e.terms.some((t) => [...walk(t)].some((n) => n.kind === 'apply' && isVectorName(n.name)))) return refuse('A vector function and other vectors are not added here; write the others as functions too, such as \\mathbf{v}(t).');
      const vectors = values.map((v, k) => (isScalar(v) ? refuse(`A number and a vector are added here (${k + 1}. term); check the formula.`) : v));
      return combine(vectors.flatMap((v) => [...v.parts]));
    }
    case 'negation': {
      const v = lower(l, e.operand);
      return isScalar(v) ? { scalar: build.negation(v.scalar) } : scaled(v, build.number(-1));
    }
    case 'product': {
      const values = e.factors.map((f) => lower(l, f));
      const scalars = values.filter(isScalar).map((v) => v.scalar);
      const vectors = values.filter((v): v is VectorValue => !isScalar(v));
      const [only] = vectors;
      if (!only) return { scalar: { ...e, factors: scalars } };
      if (vectors.length > 1) return refuse('Two vectors stand side by side; write \\cdot or \\times between them.');
      return scalars.length === 0 ? only : scaled(only, build.product(...scalars));
    }
    case 'quotient': {
      const below = scalarOf(l, e.denominator, 'A vector cannot be divided by; write its length or a dot product.');
      const above = lower(l, e.numerator);
      return isScalar(above) ? { scalar: { ...e, numerator: above.scalar, denominator: below } } : scaled(above, build.quotient(ONE, below));
    }
    case 'power': {
      const base = lower(l, e.base);
      const exponent = scalarOf(l, e.exponent, 'A vector cannot be an exponent; write a dot product.');
      if (isScalar(base)) return { scalar: { ...e, base: base.scalar, exponent } };
      if (exponent.kind !== 'number' || exponent.value.den !== 1n || exponent.value.num % 2n !== 0n || exponent.value.num <= 0n) return refuse('A vector has even powers only, such as \\mathbf{r}^2; write its length for others.');
      const square = inner(l.frame, base, base);
      return { scalar: exponent.value.num === 2n ? square : build.power(square, exponent.value.num / 2n) };
    }
    case 'apply':
      return lowerField(l, e);
    case 'call': {
      // |v| may be read as an absolute value where the bars hold more than letters.
      const values = e.args.map((a) => lower(l, a));
      const [first] = values;
      if (e.function === 'abs' && first && !isScalar(first)) return { scalar: lengthOf(l, first) };
      return { scalar: { ...e, args: values.map((v) => (isScalar(v) ? v.scalar : refuse('A function of a vector needs a scalar argument; write a dot product or a length.'))) } };
    }
    default:
      return { scalar: mapChildren(e, (child) => scalarOf(l, child, 'A vector stands where a number is needed; write a dot product or a length.')) };
  }
}

function lowerVector(l: Lowering, e: Extract<Expression, { kind: 'vector' }>): Value {
  const [first, second] = e.args;
  switch (e.operation) {
    case 'symbol':
      return unitVector(l, e.name ?? '') ?? single(`${l.frame.enter(e.name ?? '', l.weightOf(e.name ?? ''), isHat(e.name ?? ''))}`);
    case 'norm': {
      const v = first ? lower(l, first) : refuse('These bars are empty; write a vector between them.');
      return { scalar: isScalar(v) ? build.call('abs', v.scalar) : lengthOf(l, v) };
    }
    case 'dot':
    case 'cross': {
      const [a, b] = [first, second].map((arg) => (arg ? lower(l, arg) : refuse('A factor is missing beside this product sign; add it.')));
      if (!a || !b || isScalar(a) || isScalar(b)) return refuse('A dot or cross product needs a vector on both sides; check the formula.');
      return e.operation === 'dot' ? { scalar: inner(l.frame, a, b) } : outer(l.frame, a, b);
    }
    default:
      return refuse('This vector notation is not expanded; write dot products, lengths and sums of vectors.');
  }
}

const single = (key: BasisKey): VectorValue => ({ parts: new Map([[key, ONE]]) });
const scaled = (v: VectorValue, factor: Expression): VectorValue => combine([...v.parts].map(([key, c]) => [key, times(factor, c)] as const));
const isHat = (name: string): boolean => /^\\(?:wide)?hat\{/.test(name);

/** A letter under a hat is the direction of the vector of that letter where the formula has one. */
function unitVector(l: Lowering, name: string): VectorValue | null {
  const inside = /^\\(?:wide)?hat\{(.*)\}('*(?:_.*)?)$/.exec(name);
  if (!inside) return null;
  const index = l.frame.find(`${inside[1] ?? ''}${inside[2] ?? ''}`);
  return index === undefined ? null : { parts: new Map([[`${index}`, build.quotient(ONE, l.frame.length(index))]]) };
}

function lengthOf(l: Lowering, v: VectorValue): Expression {
  const [only] = v.parts;
  if (v.parts.size === 0) return build.number(0);
  if (v.parts.size === 1 && only && !only[0].includes('x')) {
    const [key, c] = only;
    const length = l.frame.length(Number(key));
    return c.kind === 'number' ? times(build.number(Q.absolute(c.value)), length) : times(build.call('abs', c), length);
  }
  return build.squareRoot(inner(l.frame, v, v));
}

function scalarOf(l: Lowering, e: Expression, message: string): Expression {
  const v = lower(l, e);
  return isScalar(v) ? v.scalar : refuse(message);
}

/**
 * f(x + d) with a moving d = sum of c_j e_j becomes an unspecified function of the c_j; its derivatives at 0 are (e_j . nabla)^k f(x).
 * Further scalar arguments follow behind.
 */
function lowerField(l: Lowering, e: Extract<Expression, { kind: 'apply' }>): Value {
  const values = e.args.map((a) => lower(l, a));
  const [first, ...rest] = values;
  if (!first || values.every(isScalar)) return { scalar: { ...e, args: values.map((v) => (isScalar(v) ? v.scalar : build.number(0))) } };
  if (isScalar(first) || !rest.every(isScalar)) return refuse(`The vector must be the first argument of ${e.name}, and the only vector; reorder the arguments.`);
  if (e.derivatives.some((d) => d !== 0)) return refuse(`The prime on ${e.name} does not say along which direction it differentiates; write the expansion for the function itself.`);
  const place: Expression[] = [];
  const amounts = new Map<BasisKey, Expression>();
  for (const [key, c] of first.parts) {
    const weight = l.frame.weightOf(key);
    if (Q.signOf(weight) < 0) throw new Declined('no-expansion', `The behaviour of the field ${e.name} far away is not known; let a vector be small instead.`);
    if (Q.signOf(weight) > 0) {
      amounts.set(key, times(c, build.symbol(stepName(key))));
      continue;
    }
    const rests = restOf(l, c);
    if (!isZero(rests)) place.push(times(rests, l.frame.node(key)));
    if (rests !== c) amounts.set(key, build.difference(c, rests));
  }
  for (const key of amounts.keys()) if (!l.directions.includes(key)) l.directions.push(key);
  const at = place.length === 0 ? build.number(0) : build.sum(...place);
  const name = fieldName(l, e.name, at);
  const moved = l.directions.map((key) => amounts.get(key) ?? build.number(0));
  return { scalar: { kind: 'apply', name, args: [...moved, ...rest.map((v) => v.scalar)], derivatives: [...moved, ...rest].map(() => 0) } };
}

/** How far an argument moves along a small vector, in units of it: a symbol that is s^weight. */
export const stepName = (key: BasisKey): string => `step ${key}`;

/** The value of a coefficient where all that moves is zero. */
function restOf(l: Lowering, c: Expression): Expression {
  const movingNames = [...l.moving, ...[...l.frame.quantities].filter(([, q]) => Q.signOf(q.weight) > 0).map(([name]) => name)].filter((name) => dependsOn(c, name));
  if (movingNames.length === 0) return c;
  const rest = withoutZeros(movingNames.reduce((tree, name) => substitute(tree, name, build.number(0)), c));
  const plain = [...walk(rest)].every((n) => n.kind !== 'call' && n.kind !== 'apply' && !(n.kind === 'quotient' && isZero(n.denominator)));
  if (!plain) throw new Declined('no-expansion', 'The place at which the field is expanded is not plain here; write its argument as a fixed vector and a small one.');
  return rest;
}

/** Factors and terms that are zero taken out, so that places that are equal look equal. */
function withoutZeros(e: Expression): Expression {
  const inner = mapChildren(e, withoutZeros);
  switch (inner.kind) {
    case 'product':
      return inner.factors.some(isZero) ? build.number(0) : inner;
    case 'negation':
      return isZero(inner.operand) ? build.number(0) : inner;
    case 'sum':
      return build.sum(...inner.terms.filter((t) => !isZero(t)));
    case 'quotient':
      return isZero(inner.numerator) && !isZero(inner.denominator) ? build.number(0) : inner;
    case 'power':
      return isZero(inner.base) && inner.exponent.kind === 'number' && inner.exponent.value.num > 0n ? build.number(0) : inner;
    default:
      return inner;
  }
}

function fieldName(l: Lowering, name: string, place: Expression): string {
  const key = `${name} at ${JSON.stringify(place, (k, v: unknown) => (k === 'span' ? undefined : typeof v === 'bigint' ? `${v}` : v))}`;
  const known = [...l.fields.keys()].indexOf(key);
  const id = known >= 0 ? known : l.fields.size;
  if (known < 0) l.fields.set(key, { name, place });
  return `field ${id}`;
}

/** The field that a lowered name stands for. */
export const fieldOf = (l: Lowering, name: string): FieldAt | undefined => (name.startsWith('field ') ? [...l.fields.values()][Number(name.slice(6))] : undefined);

function refuse(message: string): never {
  throw new Declined('bad-request', message);
}
