/** Library calls that are arithmetic written as a call: powers, roots, fused multiply-add, choices. */
import { build, type Expression, Q, type Span } from '../../expression/index.ts';
import { codeCall } from '../../functions/index.ts';
import { Declined } from '../../outcome.ts';
import { choose } from './conditions.ts';
import { divide, literalInteger } from './division.ts';
import type { Environment, Meaning } from './environment.ts';
import type { Arithmetic } from './languages/language.ts';
import { PI } from './languages/constants.ts';
import type { Code } from './syntax.ts';
import { combine, type ValueType } from './types.ts';

/** Null where the number of arguments is not that of this call. */
export function libraryArithmetic(what: Arithmetic, prefix: string, written: string, args: readonly Code[], span: Span, env: Environment, read: (code: Code) => Meaning): Meaning | null {
  const plain = args.filter((a) => a.kind !== 'named');
  const odd = args.find((a) => a.kind === 'named' && !(a.name === 'base' && (what === 'logBase' || what === 'logBaseFirst')));
  if (odd?.kind === 'named') throw new Declined('unreadable', `The argument ${odd.name}= of ${written} is not understood; select an expression without it.`, span);
  const [a, b, c] = what === 'logBase' ? args.map((arg) => (arg.kind === 'named' ? arg.value : arg)) : plain;
  const one = (make: (x: Expression, m: Meaning) => Expression): Meaning | null => {
    if (args.length !== 1 || !a) return null;
    const inner = read(a);
    return { expression: { ...make(inner.expression, inner), span }, type: float(inner.type) };
  };
  const two = (make: (x: Expression, y: Expression) => Expression | null): Meaning | null => {
    if (args.length !== 2 || !a || !b) return null;
    const [x, y] = [read(a), read(b)];
    const made = make(x.expression, y.expression);
    return made ? { expression: { ...made, span }, type: combine(x.type, y.type) } : null;
  };
  const three = (make: (x: Expression, y: Expression, z: Expression) => Expression): Meaning | null => {
    if (args.length !== 3 || !a || !b || !c) return null;
    const [x, y, z] = [read(a), read(b), read(c)];
    return { expression: { ...make(x.expression, y.expression, z.expression), span }, type: combine(combine(x.type, y.type), z.type) };
  };
  switch (what) {
    case 'power': {
      const made = two((x, y) => build.power(x, y));
      return made && a ? { ...made, type: b && read(b).type.kind === 'integer' ? read(a).type : made.type } : null;
    }
    case 'squareRoot':
      return one((x) => build.squareRoot(x));
    case 'reciprocalSquareRoot':
      return one((x) => build.quotient(build.number(1), build.squareRoot(x)));
    case 'cubeRoot':
      return one((x) => build.root(3, x));
    case 'realRoot':
      return two((x, n) => {
        const degree = literalInteger(n);
        return degree === 2n ? build.squareRoot(x) : degree !== null && degree >= 3n ? { kind: 'root', degree: n, radicand: x } : build.power(x, build.quotient(build.number(1), n));
      });
    case 'square':
      return one((x) => build.power(x, 2));
    case 'reciprocal':
      return one((x) => build.quotient(build.number(1), x));
    case 'negate':
      return one((x) => build.negation(x));
    case 'identity': {
      if (!a || args.length < 1 || args.length > 2) return null;
      return { ...read(a), type: float(read(a).type) };
    }
    case 'truncate': {
      if (args.length !== 1 || !a) return null;
      const inner = read(a);
      if (inner.type.kind === 'integer' || literalInteger(inner.expression) !== null) return inner;
      throw new Declined('unreadable', `The conversion ${written} drops the fraction; select an expression without it.`, span);
    }
    case 'multiplyAdd':
      return three((x, y, z) => build.sum(build.product(x, y), z));
    case 'addProduct':
      return three((x, y, z) => build.sum(x, build.product(y, z)));
    case 'logBase':
      return two((x, base) => logarithm(x, base, env));
    case 'logBaseFirst':
      return two((base, x) => logarithm(x, base, env));
    case 'scaleBinary':
      return two((x, n) => build.product(x, build.power(build.number(2), n)));
    case 'add':
      return two((x, y) => build.sum(x, y));
    case 'subtract':
      return two((x, y) => build.difference(x, y));
    case 'multiply':
      return two((x, y) => build.product(x, y));
    case 'divide':
      return args.length === 2 && a && b ? divide(read(a), read(b), span, env) : null;
    case 'radians':
      return one((x) => build.quotient(build.product(PI, x), build.number(180)));
    case 'degrees':
      return one((x) => build.quotient(build.product(build.number(180), x), PI));
    case 'choose':
      return args.length === 3 && a && b && c ? choose(a, read(b), read(c), span, env, read) : null;
    case 'merge':
      return args.length === 3 && a && b && c ? choose(c, read(a), read(b), span, env, read) : null;
    case 'horner falling':
      return args.length === 2 && a && b ? (/polynomial/.test(prefix) ? polynomial(b, a, false, span, env, read) : polynomial(a, b, true, span, env, read)) : null;
    case 'horner rising':
      return args.length === 2 && a && b ? polynomial(b, a, false, span, env, read) : null;
  }
}

const float = (type: ValueType): ValueType => (type.kind === 'integer' ? { ...type, kind: 'float', flexible: false, pending: false } : type);

const logarithm = (x: Expression, base: Expression, env: Environment): Expression => {
  const plain = (e: Expression): Expression => build.call('log', e);
  const ten = base.kind === 'number' && Q.equal(base.value, Q.rational(10)) ? codeCall(env.language.family, 'log10', [x]) : null;
  return ten ?? build.quotient(plain(x), plain(base));
};

/** The polynomial of a list of coefficients. */
function polynomial(list: Code, argument: Code, falling: boolean, span: Span, env: Environment, read: (code: Code) => Meaning): Meaning | null {
  const items = list.kind === 'list' ? list.items : list.kind === 'name' ? (env.listOf(list.text)?.items ?? null) : null;
  if (!items || items.length === 0) return null;
  const x = read(argument);
  const values = items.map(read);
  const rising = falling ? [...values].reverse() : values;
  const terms = rising.map((value, k): Expression => (k === 0 ? value.expression : build.product(value.expression, k === 1 ? x.expression : build.power(x.expression, k))));
  return { expression: { ...build.sum(...terms), span }, type: values.map((v) => v.type).reduce((p, q) => combine(p, q), x.type) };
}
