/** Expression -> one line of plain operators, shared by the numeric text, the exact strings of the protocol and program code: a dialect says how the pieces look. */
import { build, type ConstantName, type Expression, Q, type Rational, type Relation } from '../expression/index.ts';
import { splitSign } from './factors.ts';

export const enum Binding {
  Relation = 0,
  Sum = 1,
  Product = 2,
  /** A leading minus: binds below a power, so that -x^2 is -(x^2). */
  Unary = 3,
  Power = 4,
  Atom = 5,
}

export interface Piece {
  readonly text: string;
  readonly binding: Binding;
}

export interface Dialect {
  readonly minus: string;
  readonly times: string;
  readonly spaceAroundSum: boolean;
  /** Divisions come after all products (`17*x^6/45`), so that a whole number is divided; otherwise each stands where the tree has it. */
  readonly dividesLast: boolean;
  /** A non-negative number. */
  number(value: Rational, written: string | undefined): Piece;
  constant(name: ConstantName): Piece;
  symbol(name: string): Piece;
  power(base: Expression, exponent: Expression, write: (e: Expression) => Piece): Piece;
  root(degree: Expression, radicand: Expression, write: (e: Expression) => Piece): Piece;
  call(id: string, args: readonly Expression[], write: (e: Expression) => Piece): Piece;
  /** Everything that is not arithmetic: derivatives, integrals, sums over an index, O-terms. */
  other(e: Expression, write: (e: Expression) => Piece): Piece;
  /** True where two neighbouring factors need no sign between them; by default all do. */
  standsTogether?(left: string, leftFactor: Expression, right: string, rightFactor: Expression): boolean;
}

export const atom = (text: string): Piece => ({ text, binding: Binding.Atom });
export const enclosed = (piece: Piece, binding: Binding): string => (piece.binding >= binding ? piece.text : `(${piece.text})`);

/** The expression in the dialect. */
export function writeLinear(expression: Expression, dialect: Dialect): Piece {
  const write = (e: Expression): Piece => {
    switch (e.kind) {
      case 'number':
        if (e.value.num >= 0n) return dialect.number(e.value, e.written);
        return { text: `${dialect.minus}${enclosed(dialect.number(Q.negate(e.value), undefined), Binding.Product)}`, binding: Binding.Unary };
      case 'constant':
        return dialect.constant(e.name);
      case 'symbol':
        return dialect.symbol(e.name);
      case 'negation':
        return negated(write(e.operand));
      case 'sum':
        return writeSum(e.terms);
      case 'product':
        return writeProduct(e.factors);
      case 'quotient':
        return writeQuotient(e.numerator, e.denominator);
      case 'power':
        return dialect.power(e.base, e.exponent, write);
      case 'root':
        return dialect.root(e.degree, e.radicand, write);
      case 'call':
        return dialect.call(e.function, e.args, write);
      default:
        return dialect.other(e, write);
    }
  };

  /** Never two signs in a row: `--x` is another operator in some languages. */
  const negated = (piece: Piece): Piece => {
    const inner = enclosed(piece, Binding.Product);
    return { text: `${dialect.minus}${inner.startsWith(dialect.minus) ? `(${inner})` : inner}`, binding: Binding.Unary };
  };

  const writeSum = (terms: readonly Expression[]): Piece => {
    const gap = dialect.spaceAroundSum ? ' ' : '';
    const text = terms
      .map((term, i) => {
        const { negative, magnitude } = splitSign(term);
        const bare = enclosed(write(magnitude), Binding.Product);
        const piece = bare.startsWith(dialect.minus) ? `(${bare})` : bare;
        if (i === 0) return negative ? `${dialect.minus}${piece}` : piece;
        return `${gap}${negative ? dialect.minus : '+'}${gap}${piece}`;
      })
      .join('');
    return { text, binding: Binding.Sum };
  };

  const writeProduct = (factors: readonly Expression[]): Piece => {
    const { negative, magnitude } = splitSign({ kind: 'product', factors });
    if (negative) return negated(write(magnitude));
    const above: Expression[] = [];
    const below: Expression[] = [];
    for (const factor of dialect.dividesLast ? factors : []) {
      if (factor.kind === 'number' && factor.value.den !== 1n && factor.value.num > 0n && factor.written === undefined) {
        if (factor.value.num !== 1n) above.push(build.number(factor.value.num));
        below.push(build.number(factor.value.den));
      } else if (factor.kind === 'quotient' && !splitSign(factor).negative) {
        if (!build.isOneNumber(factor.numerator)) above.push(factor.numerator);
        below.push(factor.denominator);
      } else above.push(factor);
    }
    if (!dialect.dividesLast) above.push(...factors);
    if (below.length > 0) return writeQuotient(build.product(...above), build.product(...below));
    let text = '';
    let lastPiece = '';
    above.forEach((factor, i) => {
      const piece = enclosed(write(factor), i === 0 && dialect.dividesLast ? Binding.Product : Binding.Power);
      const previous = above[i - 1];
      if (!previous) text = piece;
      else text += `${dialect.standsTogether?.(lastPiece, previous, piece, factor) ? '' : dialect.times}${piece}`;
      lastPiece = piece;
    });
    return { text, binding: Binding.Product };
  };

  const writeQuotient = (numerator: Expression, denominator: Expression): Piece => {
    const { negative, magnitude } = splitSign(numerator);
    if (negative && magnitude.kind !== 'sum') return negated(writeQuotient(magnitude, denominator));
    return { text: `${enclosed(write(numerator), Binding.Product)}/${enclosed(write(denominator), Binding.Power)}`, binding: Binding.Product };
  };

  return write(expression);
}

export const LINEAR_RELATIONS: Readonly<Record<Relation, string>> = {
  '=': '=', about: '~=', tilde: '~', to: '->', define: ':=', '<': '<', '<=': '<=', '>': '>', '>=': '>=', '!=': '!=', propto: '~', ll: '<<', gg: '>>',
};
