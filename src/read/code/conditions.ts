/** Choices as piecewise expressions. Logical operators become nested choices, which is exact. */
import type { Expression, Span } from '../../expression/index.ts';
import { Declined } from '../../outcome.ts';
import type { Environment, Meaning } from './environment.ts';
import { isComparison, operatorMeaning } from './operators.ts';
import type { Code } from './syntax.ts';
import { combine } from './types.ts';

/** Each logical operator may copy a branch: more than this many in one condition are declined. */
const MOST_OPERATORS = 6;

type Branches = readonly { readonly condition: Expression | null; readonly value: Expression }[];
const branchesOf = (e: Expression): Branches => (e.kind === 'piecewise' ? e.branches : [{ condition: null, value: e }]);

/** condition ? then : otherwise. */
export function choose(condition: Code, then: Meaning, otherwise: Meaning, span: Span, env: Environment, read: (code: Code) => Meaning): Meaning {
  let left = MOST_OPERATORS;
  const decide = (code: Code, yes: Expression, no: Expression): Expression => {
    if (code.kind === 'group') return decide(code.inner, yes, no);
    if (code.kind === 'block' && code.body.length === 1 && code.body[0]) return decide(code.body[0], yes, no);
    if (code.kind === 'name' && /^\.?true\.?$/i.test(code.text)) return yes;
    if (code.kind === 'name' && /^\.?false\.?$/i.test(code.text)) return no;
    if (code.kind === 'unary' && operatorMeaning(code.operator, env.language) === 'not') return decide(code.operand, no, yes);
    if (code.kind === 'binary') {
      const meaning = operatorMeaning(code.operator, env.language);
      if (meaning === 'and' || meaning === 'or') {
        left -= 1;
        if (left < 0) throw new Declined('unreadable', 'This condition joins too many comparisons; split it.', { start: code.start, end: code.end });
        return meaning === 'and' ? decide(code.left, decide(code.right, yes, no), no) : decide(code.left, yes, decide(code.right, yes, no));
      }
      if (isComparison(meaning)) {
        const relation: Expression = {
          kind: 'relation',
          sides: [read(code.left).expression, read(code.right).expression],
          relations: [meaning],
          relationSpans: [{ start: code.operatorStart, end: code.operatorStart + code.operator.length }],
          span: { start: code.start, end: code.end },
        };
        return { kind: 'piecewise', branches: [{ condition: relation, value: yes }, ...branchesOf(no)], span };
      }
    }
    throw new Declined('unreadable', 'This condition is no comparison of numbers; select one of the branches.', { start: code.start, end: code.end });
  };
  return { expression: { ...decide(condition, then.expression, otherwise.expression), span }, type: combine(then.type, otherwise.type) };
}
