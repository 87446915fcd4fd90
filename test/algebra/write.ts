/** Elements as plain text, for readable expectations. */
import { Q, type Expression } from '../../src/expression/index.ts';

export function text(e: Expression): string {
  const grouped = (x: Expression): string => (['number', 'symbol', 'constant', 'call', 'apply'].includes(x.kind) && !(x.kind === 'number' && x.value.den !== 1n) ? text(x) : x.kind === 'sum' ? text(x) : `(${text(x)})`);
  switch (e.kind) {
    case 'number':
      return Q.toText(e.value);
    case 'constant':
    case 'symbol':
      return e.name;
    case 'sum':
      return `(${e.terms.map(text).join(' + ').replaceAll('+ -', '- ')})`;
    case 'product':
      return e.factors.map((f) => (f.kind === 'quotient' || f.kind === 'negation' ? grouped(f) : text(f))).join('*');
    case 'quotient':
      return `${e.numerator.kind === 'product' || e.numerator.kind === 'power' ? text(e.numerator) : grouped(e.numerator)}/${e.denominator.kind === 'power' ? text(e.denominator) : grouped(e.denominator)}`;
    case 'negation':
      return `-${text(e.operand)}`;
    case 'power':
      return e.exponent.kind === 'number' && Q.equal(e.exponent.value, Q.HALF) ? `sqrt(${text(e.base).replace(/^\((.*)\)$/, '$1')})` : `${grouped(e.base)}^${grouped(e.exponent)}`;
    case 'call':
      return `${e.function}(${e.args.map(text).join(', ').replace(/^\((.*)\)$/, '$1')})`;
    case 'apply':
      return `${e.name}${"'".repeat(e.derivatives[0] ?? 0)}(${e.args.map(text).join(', ')})`;
    default:
      return `<${e.kind}>`;
  }
}
