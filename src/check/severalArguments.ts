/** Unspecified functions of several arguments beside f(x + h, y + k): f, f_x, f_{xy}, \partial f/\partial x are values and derivatives at (x, y). */
import { type ApplyNode, build, type Expression, freeSymbols, mapChildren, walk } from '../expression/index.ts';

export interface Displaced {
  readonly f: Expression;
  readonly side: Expression;
  /** The symbols by which the arguments are displaced: h and k. */
  readonly steps: readonly string[];
}

/** Both sides with short writings of the one function written out; null where no function of several arguments is displaced. Places are kept. */
export function displacedArguments(f: Expression, side: Expression): Displaced | null {
  const moved = [...walk(f), ...walk(side)].find((n): n is ApplyNode => n.kind === 'apply' && n.args.length > 1 && n.args.some((a) => a.kind === 'sum'));
  const bases = moved && basesOf(moved, [...walk(f), ...walk(side)]);
  if (!moved || !bases) return null;
  const steps = [...new Set(moved.args.flatMap((a) => freeSymbols(a)).filter((name) => !bases.includes(name)))];
  const at = (letters: readonly string[], place: Expression, args: readonly Expression[] = bases.map((b) => build.symbol(b))): Expression => ({
    kind: 'apply',
    name: moved.name,
    args,
    derivatives: bases.map((b) => letters.filter((letter) => letter === b).length),
    ...(place.span ? { span: place.span } : {}),
  });
  const turn = (e: Expression): Expression => {
    if (e.kind === 'symbol' || e.kind === 'apply') {
      const letters = lettersOf(e.name, moved.name, bases);
      if (letters && (e.kind === 'symbol' || e.args.length === bases.length) && !(e.kind === 'apply' && e.name === moved.name)) return at(letters, e, e.kind === 'apply' ? e.args : undefined);
      return e;
    }
    const derivative = e.kind === 'derivative' ? derivativeLetters(e, moved.name, bases) : null;
    return derivative ? at(derivative, e) : mapChildren(e, turn);
  };
  return steps.length === 0 ? null : { f: turn(f), side: turn(side), steps };
}

/** The symbol of each argument that is its base: one that stands alone as an argument, or as an index, elsewhere; else the first. Null where an argument has none of its own. */
function basesOf(moved: ApplyNode, nodes: readonly Expression[]): readonly string[] | null {
  const alone = new Set(nodes.flatMap((n) => (n.kind === 'apply' && n.args.length === moved.args.length ? n.args.flatMap((a) => (a.kind === 'symbol' ? [a.name] : [])) : [])));
  const index = new Set(nodes.flatMap((n) => (n.kind === 'symbol' || n.kind === 'apply' ? [/_\{?(\w)\w*\}?$/.exec(n.name)?.[1] ?? ''] : [])));
  const bases = moved.args.map((a) => {
    const symbols = freeSymbols(a);
    return symbols.find((s) => alone.has(s)) ?? symbols.find((s) => index.has(s)) ?? symbols[0];
  });
  const known = bases.filter((b) => b !== undefined);
  return known.length === bases.length && new Set(known).size === known.length ? known : null;
}

/** f: none, f_x: x, f_{xy}: x and y; null for other names. */
function lettersOf(name: string, of: string, bases: readonly string[]): readonly string[] | null {
  if (name === of) return [];
  const match = name.startsWith(`${of}_`) ? name.slice(of.length + 1).replace(/^\{(.*)\}$/, '$1').replace(/\s/g, '') : '';
  const letters = [...match];
  if (letters.length === 0) return null;
  if (letters.every((letter) => bases.includes(letter))) return letters;
  // f_x(a, b): x, y, z name the arguments by their places.
  const places = letters.map((letter) => bases['xyz'.indexOf(letter)]).filter((base) => base !== undefined);
  return places.length === letters.length && !bases.some((base) => /^[xyz]$/.test(base)) ? places : null;
}

function derivativeLetters(e: Expression, name: string, bases: readonly string[]): readonly string[] | null {
  if (e.kind === 'symbol' || e.kind === 'apply') return e.name === name ? [] : null;
  if (e.kind !== 'derivative' || e.variable.kind !== 'symbol' || !bases.includes(e.variable.name)) return null;
  const inner = derivativeLetters(e.body, name, bases);
  const own = e.variable.name;
  return inner && [...inner, ...Array.from({ length: e.times }, () => own)];
}
