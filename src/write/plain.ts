/** Expression -> the exact strings of the protocol: plain notation that the plain reader reads back to the same value. */
import type { Expression } from '../expression/index.ts';
import { ASCII, asciiPower } from './ascii.ts';
import { atom, Binding, type Dialect, enclosed, LINEAR_RELATIONS, type Piece, writeLinear } from './linear.ts';

/** `-17/45`, `sqrt(2)/2`, `a^(3/2)`, `log(2)`, `I*pi/2`. Total; cost linear in the text. */
export function toPlain(expression: Expression): string {
  return writeLinear(expression, PLAIN).text;
}

const list = (args: readonly Expression[], write: (e: Expression) => Piece): string => args.map((a) => write(a).text).join(', ');

const PLAIN: Dialect = {
  ...ASCII,
  symbol: (name) => atom(plainSymbol(name)),
  power: asciiPower('^'),
  root: (degree, radicand, write) =>
    degree.kind === 'number' && degree.value.num === 3n ? atom(`cbrt(${write(radicand).text})`) : atom(`root(${write(radicand).text}, ${write(degree).text})`),
  call: (id, args, write) => atom(`${id}(${list(args, write)})`),
  other(e, write) {
    const bare = (inner: Expression): string => write(inner).text;
    switch (e.kind) {
      case 'apply': {
        const marks = e.derivatives.length <= 1 ? "'".repeat(e.derivatives[0] ?? 0) : e.derivatives.some((d) => d > 0) ? `^(${e.derivatives.join(',')})` : '';
        return atom(`${plainSymbol(e.name)}${marks}(${list(e.args, write)})`);
      }
      case 'order':
        return atom(`${e.little ? 'o' : 'O'}(${bare(e.argument)})`);
      case 'dots':
        return atom('...');
      case 'derivative':
        return atom(`diff(${bare(e.body)}, ${bare(e.variable)}${e.times === 1 ? '' : `, ${e.times}`})`);
      case 'integral':
        return atom(`int(${[e.body, e.variable, ...(e.lower ? [e.lower] : []), ...(e.upper ? [e.upper] : [])].map(bare).join(', ')})`);
      case 'indexedSum':
      case 'indexedProduct':
        return atom(`${e.kind === 'indexedSum' ? 'sum' : 'product'}(${[e.body, e.index, e.lower, e.upper].map(bare).join(', ')})`);
      case 'limit':
        return atom(`limit(${[e.body, e.variable, e.target].map(bare).join(', ')})`);
      case 'piecewise':
        return atom(`piecewise(${e.branches.map((b) => (b.condition ? `${bare(b.condition)}, ${bare(b.value)}` : bare(b.value))).join(', ')})`);
      case 'relation':
        return { text: e.sides.map((s) => enclosed(write(s), Binding.Sum)).reduce((left, right, i) => `${left} ${LINEAR_RELATIONS[e.relations[i - 1] ?? '=']} ${right}`), binding: Binding.Relation };
      case 'vector':
        return vectorPiece(e, write);
      default:
        return write(e);
    }
  },
};

/** Vectors have no plain notation: they are written as in LaTeX, which readers of exact strings take too. */
function vectorPiece(e: Extract<Expression, { kind: 'vector' }>, write: (e: Expression) => Piece): Piece {
  const inner = (x: Expression): string => enclosed(write(x), Binding.Power);
  switch (e.operation) {
    case 'symbol':
      return atom(e.name ?? 'v');
    case 'norm':
      return atom(`|${list(e.args, write)}|`);
    case 'dot':
    case 'cross':
      return atom(`(${e.args.map(inner).join(e.operation === 'dot' ? ' \\cdot ' : ' \\times ')})`);
    case 'ordered':
      return { text: e.args.map(inner).join('*'), binding: Binding.Product };
    case 'commutator':
      return atom(`[${list(e.args, write)}]`);
    case 'anticommutator':
      return atom(`\\{${list(e.args, write)}\\}`);
    case 'trace':
    case 'determinant':
      return atom(`${e.operation === 'trace' ? 'tr' : 'det'}(${list(e.args, write)})`);
    case 'directional':
      return atom(`${e.args.slice(1).map((a) => `(${inner(a)} \\cdot \\nabla)`).join('')}${list(e.args.slice(0, 1), write)}`);
    case 'tuple':
      return atom(`(${list(e.args, write)})`);
  }
}

/** Greek by its word, subscripts without braces. */
function plainSymbol(name: string): string {
  return name.replace(/\\([A-Za-z]+)\s*/g, '$1').replace(/\{([^{}]*)\}/g, '$1').replace(/\s+/g, '_');
}
