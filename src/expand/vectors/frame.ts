/**
 * The vectors of one formula as symbols of scalars: a length |a| for each, a dot product a.b for each pair, a triple product a.(b x c).
 * A vector is a combination of these letters and of their cross products; every product of vectors is multilinear in them.
 */
import { build, type Expression, Q, type Rational, setBold } from '../../expression/index.ts';

/** A key of the basis: the index of a letter (`2`), or two ascending indices of a cross product (`0x2`). */
export type BasisKey = string;

interface Letter {
  readonly node: Expression;
  /** Weight in s: 1 for a small vector, -1 for a large one, 0 for a fixed one. */
  readonly weight: Rational;
  /** Symbol of its length; null for a unit vector. */
  readonly length: string | null;
}

/** A scalar symbol and what it stands for. */
export interface Quantity {
  readonly meaning: Expression;
  readonly weight: Rational;
}

export class Frame {
  readonly #letters: Letter[] = [];
  readonly #index = new Map<string, number>();
  /** Every symbol handed out, by name. */
  readonly quantities = new Map<string, Quantity>();
  /** Lengths written as plain letters: `r` for |\mathbf{r}|. */
  readonly lengths = new Map<string, Expression>();
  /** Unit vectors whose length was used. */
  readonly units = new Set<string>();

  /** Index of a letter; it is entered on first sight. */
  enter(name: string, weight: Rational, unit: boolean): number {
    const key = letterKey(name);
    const known = this.#index.get(key);
    if (known !== undefined) return known;
    const node: Expression = { kind: 'vector', operation: 'symbol', name, args: [] };
    const index = this.#letters.length;
    this.#letters.push({ node, weight, length: unit ? null : lengthName(name) });
    this.#index.set(key, index);
    return index;
  }

  find = (name: string): number | undefined => this.#index.get(letterKey(name));

  length(index: number): Expression {
    const letter = this.#letter(index);
    if (letter.length === null) return this.#unit(letter);
    const meaning: Expression = { kind: 'vector', operation: 'norm', args: [letter.node] };
    const plain = /^\\mathbf|^\|/.test(letter.length) ? meaning : build.symbol(letter.length);
    if (plain !== meaning) this.lengths.set(letter.length, letter.node);
    return this.#symbol(letter.length, plain, letter.weight);
  }

  /** Enters the lengths that stand among the names as plain letters. */
  lengthsAmong(names: ReadonlySet<string>): void {
    this.#letters.forEach((letter, i) => letter.length !== null && names.has(letter.length) && this.length(i));
  }

  weightOf = (key: BasisKey): Rational => indices(key).reduce((sum, i) => Q.add(sum, this.#letter(i).weight), Q.ZERO);

  /** The letter or cross product itself, as a symbol: vectors that a result is a combination of. */
  element(key: BasisKey): Expression {
    const meaning = this.node(key);
    return this.#symbol(`vector ${key}`, meaning, this.weightOf(key));
  }
  node(key: BasisKey): Expression {
    const [i = 0, j] = indices(key);
    return j === undefined ? this.#letter(i).node : { kind: 'vector', operation: 'cross', args: [this.#letter(i).node, this.#letter(j).node] };
  }

  dot(a: BasisKey, b: BasisKey): Expression {
    const [i = 0, j] = indices(a);
    const [k = 0, l] = indices(b);
    if (j === undefined && l === undefined) return this.#gram(i, k);
    if (j === undefined) return this.#triple(i, k, l ?? 0);
    if (l === undefined) return this.#triple(k, i, j);
    // (a x b).(c x d) = (a.c)(b.d) - (a.d)(b.c).
    return build.difference(build.product(this.#gram(i, k), this.#gram(j, l)), build.product(this.#gram(i, l), this.#gram(j, k)));
  }

  /** Coefficients of the cross product of two elements of the basis. */
  cross(a: BasisKey, b: BasisKey): readonly (readonly [BasisKey, Expression])[] {
    const [i = 0, j] = indices(a);
    const [k = 0, l] = indices(b);
    if (j === undefined && l === undefined) {
      if (i === k) return [];
      return i < k ? [[`${i}x${k}`, build.number(1)]] : [[`${k}x${i}`, build.number(-1)]];
    }
    // (a x b) x c = b (a.c) - a (b.c).
    if (l === undefined) return [[`${j ?? 0}`, this.#gram(i, k)], [`${i}`, build.negation(this.#gram(j ?? 0, k))]];
    if (j === undefined) return [[`${k}`, this.#gram(i, l)], [`${l}`, build.negation(this.#gram(i, k))]];
    // (a x b) x (c x d) = [a b d] c - [a b c] d.
    return [[`${k}`, this.#triple(i, j, l)], [`${l}`, build.negation(this.#triple(i, j, k))]];
  }

  #gram(i: number, j: number): Expression {
    if (i === j) return this.#letter(i).length === null ? this.#unit(this.#letter(i)) : build.power(this.length(i), 2);
    const [a, b] = i < j ? [i, j] : [j, i];
    const meaning: Expression = { kind: 'vector', operation: 'dot', args: [this.#letter(a).node, this.#letter(b).node] };
    return this.#symbol(`dot ${a} ${b}`, meaning, Q.add(this.#letter(a).weight, this.#letter(b).weight));
  }

  #triple(...of: readonly [number, number, number]): Expression {
    const [a, b, c] = [...of].sort((x, y) => x - y) as [number, number, number];
    if (a === b || b === c) return build.number(0);
    const [i, j, k] = of;
    const even = (i < j ? 1 : -1) * (j < k ? 1 : -1) * (i < k ? 1 : -1) === 1;
    const cross: Expression = { kind: 'vector', operation: 'cross', args: [this.#letter(b).node, this.#letter(c).node] };
    const meaning: Expression = { kind: 'vector', operation: 'dot', args: [this.#letter(a).node, cross] };
    const value = this.#symbol(`triple ${a} ${b} ${c}`, meaning, [a, b, c].reduce((sum, x) => Q.add(sum, this.#letter(x).weight), Q.ZERO));
    return even ? value : build.negation(value);
  }

  #unit(letter: Letter): Expression {
    if (letter.node.kind === 'vector') this.units.add(letter.node.name ?? '');
    return build.number(1);
  }
  #symbol(name: string, meaning: Expression, weight: Rational): Expression {
    if (!this.quantities.has(name)) this.quantities.set(name, { meaning, weight });
    return build.symbol(name);
  }
  #letter(i: number): Letter {
    const letter = this.#letters[i];
    if (!letter) throw new Error(`no vector ${i}`);
    return letter;
  }
}

const indices = (key: BasisKey): readonly number[] => key.split('x').map(Number);

/** The letter without what makes it bold: the same for `\mathbf{r}'` and `\vec{r'}`. */
export const letterKey = (name: string): string => bareName(name).replace(/[{}\s]/g, '');

/** `r'` for `\mathbf{r}'`, `r_0` for `\vec{r}_0`. */
function bareName(name: string): string {
  let bare = name;
  for (let last = ''; last !== bare; ) {
    last = bare;
    bare = bare.replace(/\\(?:vec|mathbf|bm|boldsymbol|overrightarrow|pmb|mathbfit)\{([^{}]*)\}/, '$1');
  }
  return bare;
}

/** Greek by its word, no braces. */
export const plainLetter = (name: string): string => bareName(name).replace(/\\(?:wide)?hat\{([^{}]*)\}/, '$1').replace(/\\([A-Za-z]+)/g, '$1').replace(/[{}]/g, '');

/** The vector for a line of plain text: `𝐫'`, `𝐚_0`, `𝐧̂`, `vector xi`. */
export function boldLetter(name: string): string {
  const [letter = '', index] = plainLetter(name).split('_');
  const hat = /\\(?:wide)?hat\{/.test(name) ? '\u0302' : '';
  const single = /^([A-Za-z])('*)$/.exec(letter);
  return `${single ? `${setBold(single[1] ?? '')}${hat}${single[2] ?? ''}` : `vector ${letter}`}${index === undefined ? '' : `_${index}`}`;
}

/** Letters that readers would take for a constant or an O-term are not used for a length. */
const TAKEN = /^(?:[eijOo]|\\pi|\\partial)(?![A-Za-z])/;
function lengthName(name: string): string {
  const bare = bareName(name);
  return TAKEN.test(bare) || /[{}]/.test(bare.replace(/_\{[^{}]*\}/, '')) ? `|${name}|` : bare;
}
