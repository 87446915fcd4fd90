/** Short writings of the trade written out before a claim is judged: u for u(x) beside u(x + h), grid values y_{i+1}, real parts. */
import { build, dependsOn, mapChildren, sameExpression, substitute, walk, type Expression } from '../expression/index.ts';
import { fold } from './fold.ts';

/** Both sides with short writings written out. */
export function normalise(f: Expression, side: Expression, variable: string | null): { readonly f: Expression; readonly side: Expression } {
  const bases = basePoints(build.sum(f, side), variable);
  const grid = gridNames(build.sum(f, side));
  const turn = (e: Expression): Expression => {
    const parts = realParts(e);
    if (parts) return turn(parts);
    const written = binomialOf(e);
    if (written) return turn(written);
    if (e.kind === 'symbol') return functionOf(e.name, bases) ?? (grid && variable !== null ? (gridValue(e.name, variable) ?? e) : e);
    if (e.kind === 'apply' && e.args.length === 0) {
      const base = bases.get(e.name);
      return base ? { ...e, args: [base] } : e;
    }
    if (e.kind === 'derivative' && e.variable.kind === 'symbol') {
      const body = turn(e.body);
      const [only] = body.kind === 'apply' ? body.args : [];
      if (body.kind === 'apply' && body.args.length === 1 && only?.kind === 'symbol' && only.name === e.variable.name) {
        return { ...body, derivatives: [(body.derivatives[0] ?? 0) + e.times], ...(e.span ? { span: e.span } : {}) };
      }
      return body === e.body ? e : { ...e, body };
    }
    return mapChildren(e, turn);
  };
  return { f: turn(f), side: turn(side) };
}

/** Functions of which only one value occurs, theta(t) in sin theta(t), as quantities of their own; their argument must stand nowhere else. Places are kept. */
export function valuesAsQuantities(f: Expression, side: Expression): { readonly f: Expression; readonly side: Expression } {
  const applied = [...walk(f), ...walk(side)].filter((n) => n.kind === 'apply');
  const names = [...new Set(applied.map((n) => n.name))].filter((name) => {
    const [first, ...more] = applied.filter((n) => n.name === name);
    return first?.args.length === 1 && first.args[0]?.kind === 'symbol' && first.derivatives.every((d) => d === 0) && more.every((n) => sameExpression(n, first));
  });
  if (names.length === 0 || names.length < new Set(applied.map((n) => n.name)).size) return { f, side };
  const turn = (e: Expression): Expression => {
    const value = (e.kind === 'apply' || e.kind === 'symbol') && names.includes(e.name) ? applied.find((n) => n.name === e.name) : undefined;
    const [argument] = value?.args ?? [];
    return argument?.kind === 'symbol' ? { ...build.symbol(`${e.kind === 'apply' || e.kind === 'symbol' ? e.name : ''}(${argument.name})`), ...(e.span ? { span: e.span } : {}) } : mapChildren(e, turn);
  };
  const [left, right] = [turn(f), turn(side)];
  const loose = applied.some((n) => n.args.some((a) => a.kind === 'symbol' && (dependsOn(left, a.name) || dependsOn(right, a.name))));
  return loose || left.kind === 'symbol' ? { f, side } : { f: left, side: right };
}

/** u(x + h), u(x - h): the argument at h = 0, for functions whose argument moves with the variable. */
function basePoints(e: Expression, variable: string | null): ReadonlyMap<string, Expression> {
  const out = new Map<string, Expression>();
  for (const node of walk(e)) {
    if (node.kind !== 'apply' || node.args.length !== 1) continue;
    const [argument] = node.args;
    if (!argument) continue;
    const moved = variable === null ? null : dependsOn(argument, variable) ? fold(substitute(argument, variable, build.number(0))) : argument;
    if (moved && moved.kind !== 'number' && !out.has(node.name)) out.set(node.name, moved);
  }
  return out;
}

/** u, u', u_x, u_{xx} beside u(x + h). */
function functionOf(name: string, bases: ReadonlyMap<string, Expression>): Expression | null {
  const direct = bases.get(name);
  if (direct) return { kind: 'apply', name, args: [direct], derivatives: [0] };
  const primes = /^(.+?)('+)$/.exec(name);
  const primed = primes ? bases.get(primes[1] ?? '') : undefined;
  if (primes && primed) return { kind: 'apply', name: primes[1] ?? '', args: [primed], derivatives: [(primes[2] ?? '').length] };
  const index = /^(.+?)_(?:\{([^{}]+)\}|(\w))$/.exec(name);
  const base = index ? bases.get(index[1] ?? '') : undefined;
  if (!index || base?.kind !== 'symbol') return null;
  const letters = (index[2] ?? index[3] ?? '').replace(/\s/g, '');
  const count = letters.length / base.name.length;
  return Number.isInteger(count) && letters === base.name.repeat(count) ? { kind: 'apply', name: index[1] ?? '', args: [base], derivatives: [count] } : null;
}

const GRID = /^([A-Za-z]+|\\[A-Za-z]+)('*)_(?:\{([ijkn])\s*([+-]\s*\d+)?\}|([ijkn]))$/;

/** Values on a grid, one of them shifted: y_{i+1} beside y_i. */
function gridNames(e: Expression): boolean {
  return [...walk(e)].some((n) => n.kind === 'symbol' && GRID.exec(n.name)?.[4] !== undefined);
}

/** y_{i+k} is y(x_i + k h). */
function gridValue(name: string, step: string): Expression | null {
  const match = GRID.exec(name);
  if (!match) return null;
  const index = match[3] ?? match[5] ?? 'i';
  const shift = match[4] === undefined ? 0 : Number(match[4].replace(/\s/g, ''));
  const at = build.symbol(`x_${index}`);
  const moved = shift === 0 ? at : build.sum(at, build.product(build.number(shift), build.symbol(step)));
  return { kind: 'apply', name: match[1] ?? 'y', args: [moved], derivatives: [(match[2] ?? '').length] };
}

/** Re and Im where everything but the imaginary unit is real. */
function realParts(e: Expression): Expression | null {
  if (e.kind !== 'call' || !/^(?:re|im|Re|Im|realPart|imaginaryPart)$/.test(e.function)) return null;
  const [inner] = e.args;
  if (!inner) return null;
  const conjugate = (n: Expression): Expression => (n.kind === 'constant' && n.name === 'i' ? build.negation(n) : mapChildren(n, conjugate));
  const other = conjugate(inner);
  return /^(?:re|Re|realPart)$/.test(e.function) ? build.quotient(build.sum(inner, other), build.number(2)) : build.quotient(build.difference(inner, other), build.product(build.number(2), build.constant('i')));
}

/** A binomial coefficient with a small whole lower index as a product over a factorial, so that it can be compared with one. */
function binomialOf(e: Expression): Expression | null {
  if (e.kind !== 'call' || e.function !== 'binomial') return null;
  const [n, k] = e.args;
  if (!n || n.kind === 'number' || k?.kind !== 'number' || k.value.den !== 1n || k.value.num < 0n || k.value.num > 12n) return null;
  const count = Number(k.value.num);
  const factors = Array.from({ length: count }, (_, j) => (j === 0 ? n : build.difference(n, build.number(j))));
  return { ...build.quotient(build.product(...factors), build.call('factorial', k)), ...(e.span ? { span: e.span } : {}) };
}

/** A grid value as a function, where the claim's own name is one. */
export const isGridName = (e: Expression): boolean => e.kind === 'symbol' && GRID.exec(e.name)?.[4] !== undefined;
