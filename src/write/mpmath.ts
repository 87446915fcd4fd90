/** Expression -> a Python expression in the names of the mpmath library, for numeric checks. */
import { type Expression, Q } from '../expression/index.ts';
import { ASCII, asciiPower } from './ascii.ts';
import { toLatex } from './latex.ts';
import { atom, Binding, type Dialect, enclosed, type Piece, writeLinear } from './linear.ts';
import { describe } from './names.ts';
import { RESERVED_NUMERIC } from './reserved.ts';
import { identifierOf } from './symbols.ts';

/** One-to-one names for symbols: each asked symbol gets one identifier that is no name of mpmath, no keyword, and no other symbol's. */
export class NumericSymbols {
  readonly #byName = new Map<string, string>();
  readonly #taken = new Set<string>();

  nameOf(symbol: string): string {
    const known = this.#byName.get(symbol);
    if (known !== undefined) return known;
    let name = identifierOf(symbol);
    while (RESERVED_NUMERIC.has(name) || this.#taken.has(name)) name += '_';
    this.#byName.set(symbol, name);
    this.#taken.add(name);
    return name;
  }

  /** Identifier -> LaTeX, for every symbol asked so far. */
  table(): Readonly<Record<string, string>> {
    return Object.fromEntries([...this.#byName].map(([latex, name]) => [name, latex]));
  }
}

/**
 * The expression as mpmath text; `symbols` collects the names. Rationals are written `1/3`, always as one division after all products
 * (`17*x**6/45`), so that the text is exact for a reader that makes integers multi-precision first.
 */
export function toMpmath(expression: Expression, symbols: NumericSymbols = new NumericSymbols()): string {
  return writeLinear(expression, dialect(symbols)).text;
}

function dialect(symbols: NumericSymbols): Dialect {
  return {
    ...ASCII,
    symbol: (name) => atom(symbols.nameOf(name)),
    power: asciiPower('**'),
    root,
    call: (id, args, write) => {
      const texts = args.map((a) => write(a).text);
      if (id === 'abs') return atom(`fabs(${texts.join(', ')})`);
      const known = describe(id);
      return asPiece(known ? known.names.mpmath(texts) : `${id}(${texts.join(', ')})`);
    },
    other,
  };

  /** The real root of odd degree: mpmath's own root is the principal one, which is complex for a negative radicand. */
  function root(degree: Expression, radicand: Expression, write: (e: Expression) => Piece): Piece {
    const inner = write(radicand).text;
    const n = write(degree).text;
    const odd = degree.kind === 'number' && Q.isInteger(degree.value) && degree.value.num % 2n !== 0n;
    const positive = radicand.kind === 'number' && radicand.value.num > 0n;
    if (!odd || positive) return atom(`root(${inner},${n})`);
    return { text: `sign(${inner})*root(fabs(${inner}),${n})`, binding: Binding.Product };
  }

  function other(e: Expression, write: (e: Expression) => Piece): Piece {
    const bare = (inner: Expression): string => write(inner).text;
    switch (e.kind) {
      case 'apply': {
        const orders = e.derivatives.some((d) => d > 0) ? `_${e.derivatives.join('_')}` : '';
        const name = symbols.nameOf(`${e.name}${orders}`);
        return atom(e.args.length === 0 ? name : `${name}(${e.args.map(bare).join(', ')})`);
      }
      case 'derivative':
        return atom(`diff(lambda ${bare(e.variable)}: ${bare(e.body)}, ${bare(e.variable)}, ${e.times})`);
      case 'integral': {
        const variable = bare(e.variable);
        return atom(`quad(lambda ${variable}: ${bare(e.body)}, [${e.lower ? bare(e.lower) : '0'}, ${e.upper ? bare(e.upper) : variable}])`);
      }
      case 'indexedSum':
        return atom(`nsum(lambda ${bare(e.index)}: ${bare(e.body)}, [${bare(e.lower)}, ${bare(e.upper)}])`);
      case 'indexedProduct':
        return atom(`nprod(lambda ${bare(e.index)}: ${bare(e.body)}, [${bare(e.lower)}, ${bare(e.upper)}])`);
      case 'limit':
        return atom(`limit(lambda ${bare(e.variable)}: ${bare(e.body)}, ${bare(e.target)})`);
      case 'order':
        return atom(`${e.little ? 'o' : 'O'}(${bare(e.argument)})`);
      case 'dots':
        return atom('...');
      case 'piecewise': {
        const text = e.branches.reduceRight((rest, b) => (b.condition ? `(${bare(b.value)}) if ${bare(b.condition)} else ${rest === '' ? 'nan' : rest}` : `(${bare(b.value)})`), '');
        return atom(`(${text})`);
      }
      case 'relation':
        return { text: e.sides.map((s) => enclosed(write(s), Binding.Sum)).reduce((left, right, i) => `${left} ${pythonRelation(e.relations[i - 1] ?? '=')} ${right}`), binding: Binding.Relation };
      case 'vector':
        return vectorPiece(e, symbols, write);
      default:
        return write(e);
    }
  }
}

/** Lengths, dot products and derivatives along directions are quantities with names of their own; products of operators keep their order. */
function vectorPiece(e: Extract<Expression, { kind: 'vector' }>, symbols: NumericSymbols, write: (e: Expression) => Piece): Piece {
  const inner = (x: Expression): string => enclosed(write(x), Binding.Power);
  const [first, second] = e.args;
  switch (e.operation) {
    case 'ordered':
      return e.args.length === 1 && first ? write(first) : { text: e.args.map(inner).join('*'), binding: Binding.Product };
    case 'commutator':
    case 'anticommutator':
      return first && second ? atom(`(${inner(first)}*${inner(second)} ${e.operation === 'commutator' ? '-' : '+'} ${inner(second)}*${inner(first)})`) : atom('0');
    default:
      return atom(symbols.nameOf(toLatex(e)));
  }
}

const pythonRelation = (relation: string): string => (['<', '<=', '>', '>=', '!='].includes(relation) ? relation : '==');

/** How tightly a foreign text binds, judged by the operators outside its parentheses. */
export function asPiece(text: string): Piece {
  let depth = 0;
  let weakest: Binding = Binding.Atom;
  for (let i = 0; i < text.length; i += 1) {
    const sign = text[i];
    if (sign === '(' || sign === '[') depth += 1;
    else if (sign === ')' || sign === ']') depth -= 1;
    else if (depth === 0 && (sign === '+' || sign === '-' || sign === '−')) weakest = i === 0 ? Math.min(weakest, Binding.Unary) : Binding.Sum;
    else if (depth === 0 && (sign === '*' || sign === '/')) {
      const double = sign === '*' && (text[i + 1] === '*' || text[i - 1] === '*');
      weakest = Math.min(weakest, double ? Binding.Power : Binding.Product);
    } else if (depth === 0 && sign === '^') weakest = Math.min(weakest, Binding.Power);
    else if (depth === 0 && sign === ' ') weakest = Math.min(weakest, Binding.Sum);
  }
  return { text, binding: weakest };
}
