/** Expression -> one line of Unicode text for hovers, titles and terminals: `x − x³/6 + O(x⁵)`. */
import { build, type ConstantName, type Expression, Q } from '../expression/index.ts';
import { runs } from './layout.ts';
import { atom, Binding, type Dialect, enclosed, type Piece, writeLinear } from './linear.ts';
import { asPiece } from './mpmath.ts';
import { describe } from './names.ts';
import { primes, superscript, unicodeSymbol } from './symbols.ts';
import { enclosedArguments } from './template.ts';

const CONSTANTS: Readonly<Record<ConstantName, string>> = { pi: 'π', e: 'e', i: 'i', eulerGamma: 'γ', catalan: 'G', glaisher: 'A', infinity: '∞' };
const RELATIONS: Readonly<Record<string, string>> = { about: '≈', tilde: '∼', to: '→', define: ':=', '<=': '≤', '>=': '≥', '!=': '≠', propto: '∝', ll: '≪', gg: '≫' };

/** One line; no sign in it is ambiguous: powers that Unicode cannot raise are written `x^(−3/2)`. */
export function toUnicode(expression: Expression): string {
  return writeLinear(expression, UNICODE).text;
}

const list = (args: readonly Expression[], write: (e: Expression) => Piece): string => args.map((a) => write(a).text).join(', ');
const signed = (text: string): string => text.replace(/-/g, '−');

const UNICODE: Dialect = {
  minus: '−',
  times: '·',
  spaceAroundSum: true,
  dividesLast: false,
  number: (value, written) => {
    const exact = written !== undefined && /^\d*\.\d+$/.test(written) ? Q.fromDecimal(written) : null;
    if (exact && Q.equal(exact, value)) return atom(written ?? '');
    return value.den === 1n ? atom(`${value.num}`) : { text: `${value.num}/${value.den}`, binding: Binding.Product };
  },
  constant: (name) => atom(CONSTANTS[name]),
  symbol: (name) => atom(unicodeSymbol(name)),
  power(base, exponent, write) {
    if (exponent.kind === 'number' && Q.equal(exponent.value, Q.HALF)) return squareRoot(base, write);
    const inner = write(base);
    const upper = write(exponent);
    if (base.kind === 'call' && exponent.kind === 'number' && Q.isInteger(exponent.value) && exponent.value.num > 1n) {
      const raised = superscript(upper.text);
      const call = /^([\p{L}\p{N}]+)(\(.*\))$/u.exec(inner.text);
      if (raised !== null && call && describe(base.function)?.names.unicodeForm === undefined) return atom(`${call[1]}${raised}${call[2]}`);
    }
    const bottom = base.kind === 'call' && inner.binding === Binding.Atom ? inner.text : enclosed(inner, Binding.Atom);
    const integer = exponent.kind === 'number' ? Q.isInteger(exponent.value) : exponent.kind === 'symbol' && exponent.name === 'n';
    const raised = integer ? superscript(upper.text) : null;
    if (raised !== null && !/[⁰¹²³⁴⁵⁶⁷⁸⁹ⁿ]$/.test(bottom)) return { text: `${bottom}${raised}`, binding: Binding.Power };
    const simple = upper.binding === Binding.Atom && /^[\p{L}\p{N}]$/u.test(upper.text);
    return { text: `${bottom}^${simple ? upper.text : `(${upper.text})`}`, binding: Binding.Power };
  },
  root(degree, radicand, write) {
    const inner = write(radicand);
    const sign = degree.kind === 'number' ? ({ '3': '∛', '4': '∜' } as Record<string, string>)[`${degree.value.num}`] : undefined;
    if (sign !== undefined) return { text: `${sign}${enclosed(inner, Binding.Atom)}`, binding: Binding.Power };
    return atom(`root(${inner.text}, ${write(degree).text})`);
  },
  call(id, args, write) {
    const texts = args.map((a) => write(a).text);
    if (id === 'abs') return atom(`|${texts.join(', ')}|`);
    if (id === 'exp' && args[0]) return UNICODE.power(build.constant('e'), args[0], write);
    if (id === 'factorial' && args[0]) return { text: `${enclosed(write(args[0]), Binding.Atom)}!`, binding: Binding.Power };
    const form = describe(id)?.names.unicodeForm;
    if (form) {
      const safe = enclosedArguments(form, args.length);
      return asPiece(signed(form(args.map((a, i) => (safe[i] === true ? (texts[i] ?? '') : enclosed(write(a), Binding.Atom))))));
    }
    return atom(`${unicodeName(id)}(${texts.join(', ')})`);
  },
  other(e, write) {
    const bare = (inner: Expression): string => write(inner).text;
    switch (e.kind) {
      case 'apply': {
        const [only = 0] = e.derivatives;
        const name = unicodeSymbol(e.name);
        const mark = e.derivatives.length > 1 ? (e.derivatives.some((d) => d > 0) ? `^(${e.derivatives.join(',')})` : '') : only <= 3 ? primes(only) : `⁽${superscript(`${only}`) ?? only}⁾`;
        return atom(`${name}${mark}${e.args.length === 0 ? '' : `(${list(e.args, write)})`}`);
      }
      case 'order':
        return atom(`${e.little ? 'o' : 'O'}(${bare(e.argument)})`);
      case 'dots':
        return atom('⋯');
      case 'derivative': {
        const over = e.times === 1 ? '' : (superscript(`${e.times}`) ?? `^${e.times}`);
        return { text: `d${over}/d${bare(e.variable)}${over} ${enclosed(write(e.body), Binding.Power)}`, binding: Binding.Sum };
      }
      case 'integral': {
        const limits = e.lower || e.upper ? `[${e.lower ? bare(e.lower) : ''}, ${e.upper ? bare(e.upper) : ''}]` : '';
        return { text: `∫${limits} ${enclosed(write(e.body), Binding.Product)} d${bare(e.variable)}`, binding: Binding.Sum };
      }
      case 'indexedSum':
      case 'indexedProduct':
        return { text: `${e.kind === 'indexedSum' ? '∑' : '∏'}[${bare(e.index)}=${bare(e.lower)}..${bare(e.upper)}] ${enclosed(write(e.body), Binding.Product)}`, binding: Binding.Sum };
      case 'limit':
        return { text: `lim[${bare(e.variable)}→${bare(e.target)}] ${enclosed(write(e.body), Binding.Product)}`, binding: Binding.Sum };
      case 'piecewise':
        return atom(`{${e.branches.map((b) => `${bare(b.value)}${b.condition ? ` if ${bare(b.condition)}` : ' otherwise'}`).join('; ')}}`);
      case 'relation':
        return {
          text: e.sides.map((s) => enclosed(write(s), Binding.Sum)).reduce((left, right, i) => `${left} ${RELATIONS[e.relations[i - 1] ?? '='] ?? e.relations[i - 1]} ${right}`),
          binding: Binding.Relation,
        };
      case 'vector':
        return vectorPiece(e, write);
      default:
        return write(e);
    }
  },
  standsTogether,
};

function vectorPiece(e: Extract<Expression, { kind: 'vector' }>, write: (e: Expression) => Piece): Piece {
  const [first] = e.args;
  const inner = (x: Expression): string => enclosed(write(x), Binding.Power);
  switch (e.operation) {
    case 'symbol':
      return atom(unicodeSymbol(e.name ?? 'v'));
    case 'norm':
      return atom(`|${list(e.args, write)}|`);
    case 'dot':
    case 'cross':
      return { text: e.args.map(inner).join(e.operation === 'dot' ? '·' : '×'), binding: Binding.Product };
    case 'directional':
      return { text: `${runs(e.args.slice(1)).map(({ factor, count }) => `(${inner(factor)}·∇)${raised(count)}`).join('')}${first ? inner(first) : ''}`, binding: Binding.Power };
    case 'ordered': {
      const pieces = runs(e.args).map(({ factor, count }) => (count === 1 ? inner(factor) : `${enclosed(write(factor), Binding.Atom)}${raised(count)}`));
      return { text: pieces.join(''), binding: Binding.Power };
    }
    case 'commutator':
      return atom(`[${list(e.args, write)}]`);
    case 'anticommutator':
      return atom(`{${list(e.args, write)}}`);
    case 'trace':
    case 'determinant':
      return atom(`${e.operation === 'trace' ? 'tr' : 'det'}(${list(e.args, write)})`);
    case 'tuple':
      return atom(`(${list(e.args, write)})`);
  }
}
const raised = (count: number): string => (count === 1 ? '' : (superscript(`${count}`) ?? `^${count}`));

function squareRoot(base: Expression, write: (e: Expression) => Piece): Piece {
  const inner = write(base);
  const simple = inner.binding === Binding.Atom && (/^[\p{L}]$/u.test(inner.text) || /^\d+$/.test(inner.text) || inner.text.startsWith('('));
  return { text: `√${simple ? inner.text : `(${inner.text})`}`, binding: Binding.Power };
}

function unicodeName(id: string): string {
  if (id === 'log') return 'ln';
  const [first] = describe(id)?.names.latex ?? [];
  if (first === undefined) return id;
  const operator = /^\\operatorname\*?\{(.*)\}$/.exec(first);
  const name = operator?.[1] ?? unicodeSymbol(first);
  return /^[\p{L}\p{M}\p{N}′″‴₀-₉]+$/u.test(name) ? name : id;
}

/** Factors that need no dot between them: a number before letters, single letters, a parenthesis after a number. */
function standsTogether(left: string, leftFactor: Expression, right: string, rightFactor: Expression): boolean {
  if (leftFactor.kind === 'dots' || rightFactor.kind === 'dots') return false;
  const letterStarts = /^[\p{L}√]/u.test(right);
  const oneLetter = (e: Expression): boolean => {
    const base = e.kind === 'power' ? e.base : e;
    return (base.kind === 'symbol' && /^\p{L}\p{M}*[₀-₉′″‴]*$/u.test(unicodeSymbol(base.name))) || (base.kind === 'constant' && base.name === 'pi');
  };
  const afterNumber = leftFactor.kind === 'number' && /^\d+$/.test(left);
  if (afterNumber) return letterStarts || right.startsWith('(');
  if (!oneLetter(leftFactor) || left.startsWith('√')) return false;
  if (leftFactor.kind === 'power' && /\^/.test(left)) return false;
  return oneLetter(rightFactor) && letterStarts;
}
