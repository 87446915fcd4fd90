/** Names for algebraic numbers in the expansion of a root: x_1 for polynomialRoot(...), explained in the assumptions. */
import { build, type Expression, freeSymbols, sameExpression, walk } from '../../expression/index.ts';
import { rootArguments, rootBall } from '../../functions/index.ts';
import { complex, real } from '../../rigorous/index.ts';
import { plainText } from '../../series/index.ts';
import type { Expansion } from '../expansion.ts';

/** Letters for the numbers where the unknown cannot take an index. */
const SPARE = ['\\xi', '\\eta', '\\zeta', '\\rho'];
const DIGITS = 12;

/** The expansions with their algebraic numbers named, each with the definitions of those that occur in it. */
export function withRootsNamed(expansions: readonly Expansion[], equation: Expression, unknown: Expression): readonly Expansion[] {
  const values: Expression[] = [];
  const inside = (x: Expansion): Expression[] => {
    const found: Expression[] = [];
    for (const tree of [...x.terms.map((t) => t.coefficient), ...(x.prefactor ? [x.prefactor] : [])]) {
      for (const node of walk(tree)) if (node.kind === 'call' && node.function === 'polynomialRoot' && !found.some((v) => sameExpression(v, node))) found.push(node);
    }
    return found;
  };
  const each = expansions.map(inside);
  for (const v of each.flat()) if (!values.some((w) => sameExpression(v, w))) values.push(v);
  if (values.length === 0) return expansions;
  const taken = new Set(freeSymbols(equation));
  const free = (letter: string): boolean => !/[_^]/.test(letter) && values.every((_, k) => !taken.has(`${letter}_${k + 1}`));
  const own = unknown.kind === 'symbol' ? unknown.name : '';
  const letter = [own, ...SPARE].find((l) => l !== '' && free(l)) ?? '\\xi';
  const symbols = values.map((_, k) => build.symbol(`${letter}_${k + 1}`));
  return expansions.map((x, k) => {
    const names = (each[k] ?? []).flatMap((value) => {
      const symbol = symbols[values.findIndex((v) => sameExpression(v, value))];
      return symbol ? [{ symbol, value }] : [];
    });
    return names.length === 0 ? x : { ...x, names, assumptions: [...names.map((n) => definition(n.symbol, n.value, own === '' ? build.symbol('x') : unknown)), ...x.assumptions] };
  });
}

/** `x_1 = 1.1673039783, the real root of x^5 - x - 1 = 0`. */
function definition(symbol: Expression, value: Expression, unknown: Expression): string {
  const args = value.kind === 'call' ? rootArguments(value.args) : null;
  const ball = args && rootBall(args.coefficients, args.index, 64);
  if (!args || !ball) return `${plainText(symbol)} = ${plainText(value)}`;
  const n = args.coefficients.length - 1;
  const terms = args.coefficients.flatMap((c, i) => {
    if (c === 0n) return [];
    const size = c < 0n ? -c : c;
    const power = n - i === 1 ? unknown : build.power(unknown, n - i);
    const term = n === i ? build.number(size) : size === 1n ? power : build.product(build.number(size), power);
    return [c < 0n ? build.negation(term) : term];
  });
  const isReal = complex.isReal(ball);
  const onlyReal = isReal && args.index === 1 && rootBall(args.coefficients, 2, 64)?.im.mid !== 0n;
  const decimal = (x: typeof ball.re): string => `${Number(real.toDouble(x).toPrecision(DIGITS))}`;
  const size = isReal ? decimal(ball.re) : `${decimal(ball.re)} ${real.isNegative(ball.im) ? '-' : '+'} ${decimal(real.absolute(ball.im))} I`;
  return `${plainText(symbol)} = ${size}..., ${onlyReal ? 'the real' : 'a'} root of ${plainText(build.sum(...terms))} = 0`;
}
