/** A truncated expansion as one line of code in Horner form, for `Replace by ...`. */
import { build, Q, type Expression } from '../../expression/index.ts';
import type { Expansion } from '../../expand/expansion.ts';
import { attempt, Declined, type Outcome } from '../../outcome.ts';
import { termTree } from '../expansionTree.ts';
import { codeWriter } from './expression.ts';
import type { Code, CodeOptions } from './options.ts';
import { polynomialTree } from './polynomial.ts';

/**
 * The sum of the expansion's terms. Rational coefficients with powers in an arithmetic progression become Horner form in the local variable, others a plain sum of terms.
 * Coefficients stay exact where the language can say them (`1.0/6.0`). Fails like toCode.
 */
export function hornerExpression(expansion: Expansion, options: CodeOptions): Outcome<Code> {
  return attempt(() => {
    const writer = codeWriter(options);
    const { text } = writer.write(sumTree(expansion));
    return { text, imports: [...writer.imports] };
  });
}

function sumTree(expansion: Expansion): Expression {
  const { prefactor } = expansion;
  if (expansion.terms.length === 0) return build.number(0);
  const inside = hornerTree(expansion) ?? build.sum(...expansion.terms.map((t) => termTree(expansion, t)));
  return prefactor ? build.product(prefactor, inside) : inside;
}

function hornerTree(expansion: Expansion): Expression | null {
  if (expansion.terms.some((t) => t.log !== 0 || t.scale)) return null;
  const exponents = expansion.terms.map((t) => (t.power.kind === 'number' && t.coefficient.kind === 'number' ? t.power.value : null));
  const coefficients = expansion.terms.map((t) => (t.coefficient.kind === 'number' ? t.coefficient.value : null));
  const known = exponents.filter((e) => e !== null);
  const first = known[0];
  if (!first || known.length !== expansion.terms.length) return null;
  const integers = known.every(Q.isInteger);
  const lowest = known.reduce((a, b) => (Q.compare(a, b) <= 0 ? a : b));
  if (!integers && !known.every((e) => Q.isInteger(Q.subtract(e, lowest)))) return null;
  const outside = !integers || lowest.num < 0n ? lowest : Q.ZERO;
  const terms = known.map((e, i) => ({ power: Number(Q.subtract(e, outside).num), value: coefficients[i] ?? Q.ZERO }));
  if (terms.some((t) => t.power > 1000)) throw new Declined('bad-request', 'This expansion has powers beyond 1000; ask for fewer terms.');
  const { local } = expansion;
  const inverse = local.kind === 'quotient' && build.isOneNumber(local.numerator) ? local.denominator : null;
  const tree = polynomialTree(terms, local, { form: 'horner', fma: false });
  if (Q.isZero(outside)) return tree;
  const front = inverse ? build.power(inverse, Q.negate(outside)) : build.power(local, outside);
  return build.isOneNumber(tree) ? front : outside.num < 0n && Q.isInteger(outside) && !inverse ? build.quotient(tree, build.power(local, Q.negate(outside))) : build.product(front, tree);
}
