/** Walking and rebuilding trees. All walks use an explicit stack or bounded recursion through `mapChildren`; readers cap nesting. */
import type { Expression } from './expression.ts';

/** The direct children in reading order. */
export function children(e: Expression): readonly Expression[] {
  switch (e.kind) {
    case 'number':
    case 'constant':
    case 'symbol':
    case 'dots':
      return [];
    case 'sum':
      return e.terms;
    case 'product':
      return e.factors;
    case 'quotient':
      return [e.numerator, e.denominator];
    case 'negation':
      return [e.operand];
    case 'power':
      return [e.base, e.exponent];
    case 'root':
      return [e.degree, e.radicand];
    case 'call':
    case 'apply':
    case 'vector':
      return e.args;
    case 'order':
      return [e.argument];
    case 'derivative':
      return [e.body, e.variable];
    case 'integral':
      return [...(e.lower ? [e.lower] : []), ...(e.upper ? [e.upper] : []), e.body, e.variable];
    case 'indexedSum':
    case 'indexedProduct':
      return [e.index, e.lower, e.upper, e.body];
    case 'limit':
      return [e.variable, e.target, e.body];
    case 'piecewise':
      return e.branches.flatMap((b) => (b.condition ? [b.value, b.condition] : [b.value]));
    case 'relation':
      return e.sides;
  }
}

/** Negations, sums, products and quotients: the operations of a field, which keep what all their operands have (analytic, real). */
export const isFieldOperation = (e: Expression): boolean => e.kind === 'negation' || e.kind === 'sum' || e.kind === 'product' || e.kind === 'quotient';

/** The same node with every direct child replaced by `f(child)`; the node itself where no child changed. */
export function mapChildren(e: Expression, f: (child: Expression) => Expression): Expression {
  const list = (items: readonly Expression[]): readonly Expression[] => {
    const mapped = items.map(f);
    return mapped.every((m, i) => m === items[i]) ? items : mapped;
  };
  const changed = <T extends Expression>(node: T, parts: Partial<T>): Expression =>
    (Object.keys(parts) as (keyof T)[]).every((k) => node[k] === parts[k]) ? node : { ...node, ...parts };
  switch (e.kind) {
    case 'number':
    case 'constant':
    case 'symbol':
    case 'dots':
      return e;
    case 'sum':
      return changed(e, { terms: list(e.terms) });
    case 'product':
      return changed(e, { factors: list(e.factors) });
    case 'quotient':
      return changed(e, { numerator: f(e.numerator), denominator: f(e.denominator) });
    case 'negation':
      return changed(e, { operand: f(e.operand) });
    case 'power':
      return changed(e, { base: f(e.base), exponent: f(e.exponent) });
    case 'root':
      return changed(e, { degree: f(e.degree), radicand: f(e.radicand) });
    case 'call':
      return changed(e, { args: list(e.args) });
    case 'apply':
      return changed(e, { args: list(e.args) });
    case 'vector':
      return changed(e, { args: list(e.args) });
    case 'order':
      return changed(e, { argument: f(e.argument) });
    case 'derivative':
      return changed(e, { body: f(e.body), variable: f(e.variable) });
    case 'integral':
      return changed(e, {
        body: f(e.body),
        variable: f(e.variable),
        ...(e.lower ? { lower: f(e.lower) } : {}),
        ...(e.upper ? { upper: f(e.upper) } : {}),
      });
    case 'indexedSum':
    case 'indexedProduct':
      return changed(e, { body: f(e.body), index: f(e.index), lower: f(e.lower), upper: f(e.upper) });
    case 'limit':
      return changed(e, { body: f(e.body), variable: f(e.variable), target: f(e.target) });
    case 'piecewise':
      return {
        ...e,
        branches: e.branches.map((b) => ({ condition: b.condition ? f(b.condition) : null, value: f(b.value) })),
      };
    case 'relation':
      return changed(e, { sides: list(e.sides) });
  }
}

/** Every node, parents before children. */
export function* walk(root: Expression): Generator<Expression> {
  const stack: Expression[] = [root];
  for (let e = stack.pop(); e; e = stack.pop()) {
    yield e;
    const below = children(e);
    for (let i = below.length - 1; i >= 0; i -= 1) stack.push(below[i] as Expression);
  }
}

/** Names that the node binds: the integration variable, the summation index. A derivative's variable stays free (it is where the derivative is taken). */
function boundName(e: Expression): string | null {
  if (e.kind === 'integral' || e.kind === 'limit') return e.variable.kind === 'symbol' ? e.variable.name : null;
  if (e.kind === 'indexedSum' || e.kind === 'indexedProduct') return e.index.kind === 'symbol' ? e.index.name : null;
  return null;
}

/** Free symbols in order of first appearance. An antiderivative without limits leaves its variable free. */
export function freeSymbols(root: Expression): readonly string[] {
  const found = new Set<string>();
  const visit = (e: Expression, bound: ReadonlySet<string>): void => {
    if (e.kind === 'symbol') {
      if (!bound.has(e.name)) found.add(e.name);
      return;
    }
    const name = boundName(e);
    if (name === null || (e.kind === 'integral' && !e.lower && !e.upper)) {
      for (const child of children(e)) visit(child, bound);
      return;
    }
    const inner = new Set(bound).add(name);
    const outside = e.kind === 'integral' ? [e.lower, e.upper] : e.kind === 'limit' ? [e.target] : e.kind === 'indexedSum' || e.kind === 'indexedProduct' ? [e.lower, e.upper] : [];
    for (const child of outside) if (child) visit(child, bound);
    if ('body' in e) visit(e.body, inner);
  };
  visit(root, new Set());
  return [...found];
}

export function dependsOn(e: Expression, name: string): boolean {
  return freeSymbols(e).includes(name);
}

/** Replaces free occurrences of the symbol. Bound variables that would capture a symbol of the replacement are renamed. */
export function substitute(root: Expression, name: string, replacement: Expression): Expression {
  const free = new Set(freeSymbols(replacement));
  const visit = (e: Expression): Expression => {
    if (e.kind === 'symbol') return e.name === name ? replacement : e;
    const binds = boundName(e);
    if (binds === null || (e.kind === 'integral' && !e.lower && !e.upper)) return mapChildren(e, visit);
    if (binds === name) {
      if (e.kind === 'integral') return { ...e, ...(e.lower ? { lower: visit(e.lower) } : {}), ...(e.upper ? { upper: visit(e.upper) } : {}) };
      if (e.kind === 'indexedSum' || e.kind === 'indexedProduct') return { ...e, lower: visit(e.lower), upper: visit(e.upper) };
      if (e.kind === 'limit') return { ...e, target: visit(e.target) };
      return e;
    }
    if (!free.has(binds)) return mapChildren(e, visit);
    let fresh = `${binds}'`;
    while (free.has(fresh) || freeSymbols(root).includes(fresh)) fresh += "'";
    return mapChildren(mapChildren(e, (child) => substitute(child, binds, { kind: 'symbol', name: fresh })), visit);
  };
  return visit(root);
}

/** Structural equality that ignores spans, literal spelling and written names. */
export function sameExpression(a: Expression, b: Expression): boolean {
  return a === b || structureKey(a) === structureKey(b);
}

/** A text that is equal for two trees exactly if they are structurally equal (spans and spelling aside). */
export function structureKey(e: Expression): string {
  const inner = (): string => children(e).map(structureKey).join(',');
  switch (e.kind) {
    case 'number':
      return `${e.value.num}/${e.value.den}`;
    case 'constant':
      return `#${e.name}`;
    case 'symbol':
      return `$${e.name}`;
    case 'call':
      return `${e.function}(${inner()})`;
    case 'apply':
      return `@${e.name}[${e.derivatives.join(',')}](${inner()})`;
    case 'order':
      return `${e.little ? 'o' : 'O'}(${inner()})`;
    case 'derivative':
      return `derivative${e.times}(${inner()})`;
    case 'integral':
      return `integral${e.lower ? 'l' : ''}${e.upper ? 'u' : ''}(${inner()})`;
    case 'relation':
      return `relation<${e.relations.join(' ')}>(${inner()})`;
    case 'vector':
      return `vector-${e.operation}-${e.name ?? ''}(${inner()})`;
    case 'piecewise':
      return `piecewise<${e.branches.map((b) => (b.condition ? 'c' : 'e')).join('')}>(${inner()})`;
    default:
      return `${e.kind}(${inner()})`;
  }
}
