/** Derivatives written as subscripts: in `u(x+h) + u(x-h) = 2u + h^2 u_{xx}` u is u(x) and u_{xx} its second derivative. */
import { type Expression, freeSymbols, mapChildren, walk } from '../../expression/index.ts';

/** The same formula with bare and subscripted names of functions of one argument applied to the variable that all their arguments share. */
export function withIndexDerivatives(root: Expression): Expression {
  const shared = new Map<string, readonly string[]>();
  for (const e of walk(root)) {
    if (e.kind !== 'apply' || e.args.length !== 1) continue;
    const symbols = e.args.flatMap(freeSymbols);
    const before = shared.get(e.name);
    shared.set(e.name, before ? before.filter((s) => symbols.includes(s)) : symbols);
  }
  if (shared.size === 0) return root;
  const bases = new Map<string, string>();
  for (const e of walk(root)) {
    const match = e.kind === 'symbol' ? /^(.+?)_\{?((.)\3*)\}?$/.exec(e.name) : null;
    const [, name = '', letters = '', letter = ''] = match ?? [];
    if (match && letters.length > 0 && shared.get(name)?.includes(letter)) bases.set(name, letter);
  }
  if (bases.size === 0) return root;
  const visit = (e: Expression): Expression => {
    if (e.kind !== 'symbol') return mapChildren(e, visit);
    const at = (name: string, variable: string, times: number): Expression => ({ kind: 'apply', name, args: [{ kind: 'symbol', name: variable }], derivatives: [times], span: e.span });
    const plain = bases.get(e.name);
    if (plain !== undefined) return at(e.name, plain, 0);
    const match = /^(.+?)_\{?((.)\3*)\}?$/.exec(e.name);
    const [, name = '', letters = '', letter = ''] = match ?? [];
    return match && bases.get(name) === letter ? at(name, letter, letters.length) : e;
  };
  return visit(root);
}
