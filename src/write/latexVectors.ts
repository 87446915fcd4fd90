/** Vectors and operators in LaTeX: products of them, derivatives along a direction, commutators, traces. */
import type { Expression, VectorOperation } from '../expression/index.ts';
import type { LatexWriter } from './latex.ts';
import { atom, glue, Level, type Written } from './latexPieces.ts';
import { runs } from './layout.ts';

/** `name` is that of a vector's symbol, `args` what the operation takes. */
export function writeVector(w: LatexWriter, operation: VectorOperation, name: string | undefined, args: readonly Expression[]): Written {
  const [first] = args;
  const list = (): string => args.map((a) => w.write(a).text).join(', ');
  switch (operation) {
    case 'symbol':
      return atom(name?.startsWith('\\') ? name : `\\mathbf{${name ?? ''}}`);
    case 'norm':
      return atom(`\\left|${list()}\\right|`);
    case 'dot':
    case 'cross':
      return { text: args.map((a) => w.at(a, Level.Power).text).join(operation === 'dot' ? ' \\cdot ' : ' \\times '), level: Level.Product, tall: false };
    case 'directional': {
      const along = runs(args.slice(1)).map(({ factor, count }) => ({ text: `${w.at(factor, Level.Power).text} \\cdot \\nabla`, count }));
      const [only] = along;
      const operator = along.length === 1 && only?.count === 1 ? only.text : along.map(({ text, count }) => `(${text})${raisedTo(count)}`).join('');
      return { text: `${operator} ${first ? w.at(first, Level.Power).text : ''}`, level: Level.Product, tall: false };
    }
    case 'ordered': {
      const pieces = runs(args).map(({ factor, count }) => {
        const inner = w.at(factor, count === 1 ? Level.Power : Level.Atom).text;
        return /^\S*\^/.test(inner) && count > 1 ? `(${inner})${raisedTo(count)}` : `${inner}${raisedTo(count)}`;
      });
      return { text: pieces.reduce(glue, ''), level: pieces.length === 1 ? Level.Power : Level.Product, tall: false };
    }
    case 'commutator':
      return atom(`[${list()}]`);
    case 'anticommutator':
      return atom(`\\{${list()}\\}`);
    case 'trace':
    case 'determinant': {
      const sign = operation === 'trace' ? '\\operatorname{tr}' : '\\det';
      const inner = first ? w.write(first) : atom('');
      return /^(?:[A-Za-z]|\\mathbf\{[A-Za-z]\})$/.test(inner.text) ? { text: `${sign} ${inner.text}`, level: Level.Product, tall: false } : { text: `${sign}(${inner.text})`, level: Level.Power, tall: false };
    }
    case 'tuple':
      return atom(`\\left(${list()}\\right)`);
  }
}

const raisedTo = (count: number): string => (count === 1 ? '' : `^${count < 10 ? count : `{${count}}`}`);
