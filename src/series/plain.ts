/** Trees as plain notation for messages and assumptions: `2*a - 1 > 0`. Not for documents: write/ does those. */
import { type Expression, Q } from '../expression/index.ts';

type Level = 0 | 1 | 2 | 3;

/** One line of plain notation, readable by the reader of assumptions for arithmetic, powers and calls. */
export function plainText(e: Expression, level: Level = 0): string {
  const wrap = (text: string, own: Level): string => (own < level ? `(${text})` : text);
  switch (e.kind) {
    case 'number':
      return e.value.den === 1n ? (e.value.num < 0n ? wrap(Q.toText(e.value), 0) : Q.toText(e.value)) : wrap(Q.toText(e.value), 1);
    case 'constant':
      return { pi: 'pi', e: 'e', i: 'I', eulerGamma: 'euler', catalan: 'catalan', glaisher: 'glaisher', infinity: 'inf' }[e.name];
    case 'symbol':
      return e.name;
    case 'sum':
      return wrap(
        e.terms.map((t, k) => (t.kind === 'negation' ? `${k === 0 ? '-' : ' - '}${plainText(t.operand, 1)}` : `${k === 0 ? '' : ' + '}${plainText(t, k === 0 ? 0 : 1)}`)).join(''),
        0,
      );
    case 'negation':
      return wrap(`-${plainText(e.operand, 1)}`, 0);
    case 'product':
      return wrap(e.factors.map((f) => plainText(f, 2)).join('*'), 1);
    case 'quotient':
      return wrap(`${plainText(e.numerator, 1)}/${plainText(e.denominator, 2)}`, 1);
    case 'power':
      return wrap(`${plainText(e.base, 3)}^${plainText(e.exponent, 3)}`, 2);
    case 'root':
      return `root(${plainText(e.degree)}, ${plainText(e.radicand)})`;
    case 'call':
      return `${e.function}(${e.args.map((a) => plainText(a)).join(', ')})`;
    case 'apply':
      return `${e.name}${"'".repeat(e.derivatives.reduce((a, b) => a + b, 0))}(${e.args.map((a) => plainText(a)).join(', ')})`;
    default:
      return `[${e.kind}]`;
  }
}
