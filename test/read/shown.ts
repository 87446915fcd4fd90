/** A compact, unambiguous writing of trees, for tables of expected readings. */
import type { Expression } from '../../src/expression/index.ts';

export function shown(e: Expression): string {
  const s = shown;
  switch (e.kind) {
    case 'number':
      return e.value.den === 1n ? `${e.value.num}` : `${e.value.num}:${e.value.den}`;
    case 'constant':
      return `#${e.name}`;
    case 'symbol':
      return e.name;
    case 'sum':
      return `(${e.terms.map(s).join(' + ')})`;
    case 'product':
      return `[${e.factors.map(s).join(' ')}]`;
    case 'quotient':
      return `{${s(e.numerator)} / ${s(e.denominator)}}`;
    case 'negation':
      return `-${s(e.operand)}`;
    case 'power':
      return `${s(e.base)}^${s(e.exponent)}`;
    case 'root':
      return `root${s(e.degree)}(${s(e.radicand)})`;
    case 'call':
      return `${e.function}(${e.args.map(s).join(', ')})`;
    case 'apply':
      return `@${e.name}<${e.derivatives.join(',')}>(${e.args.map(s).join(', ')})`;
    case 'order':
      return `${e.little ? 'o' : 'O'}(${s(e.argument)})`;
    case 'dots':
      return '...';
    case 'derivative':
      return `d${e.times}/d${s(e.variable)}(${s(e.body)})`;
    case 'integral':
      return `integral(${e.lower && e.upper ? `${s(e.lower)} to ${s(e.upper)}, ` : ''}${s(e.body)} d${s(e.variable)})`;
    case 'indexedSum':
    case 'indexedProduct':
      return `${e.kind === 'indexedSum' ? 'sum' : 'product'}(${s(e.index)} = ${s(e.lower)} to ${s(e.upper)}, ${s(e.body)})`;
    case 'limit':
      return `limit(${s(e.variable)} to ${s(e.target)}, ${s(e.body)})`;
    case 'piecewise':
      return `cases(${e.branches.map((b) => `${s(b.value)} if ${b.condition ? s(b.condition) : 'else'}`).join('; ')})`;
    case 'relation':
      return e.sides.map((side, i) => s(side) + (i < e.relations.length ? ` ${e.relations[i]} ` : '')).join('');
    case 'vector':
      return `${e.operation}<${e.name ?? ''}>(${e.args.map(s).join(', ')})`;
  }
}
