/** Folds over a list that the file holds: `C.iter().rev().fold(0.0, |r, c| r * x + c)`, `reduce(lambda r, c: r * x + c, coeffs, 0.0)`. */
import { type Expression, mapChildren, Q, walk } from '../../expression/index.ts';
import { Declined } from '../../outcome.ts';
import type { Environment, Meaning } from './environment.ts';
import { type Item, sequence } from './lists.ts';
import { segments } from './paths.ts';
import type { CallCode, Code, LambdaCode } from './syntax.ts';
import { combine, INTEGER } from './types.ts';

/** Written out, a fold may have so many nodes. */
const MOST_NODES = 20_000;

interface Fold {
  readonly items: readonly Item[];
  readonly first: Code | null;
  readonly lambda: LambdaCode;
}

/** The value of a fold; null where the call is none, or its list is not known. */
export function readFold(code: CallCode, env: Environment, read: (code: Code) => Meaning): Meaning | null {
  const fold = foldOf(code, env);
  if (!fold) return null;
  const [total, entry] = fold.lambda.parameters.map((p) => p.name.replace(/^(?:&|mut\s+)+/, ''));
  if (total === undefined || entry === undefined || fold.lambda.parameters.length !== 2) return null;
  const meaningOf = (item: Item): Meaning | null =>
    item.kind === 'entry' ? read(item.code) : item.kind === 'whole' ? { expression: { kind: 'number', value: Q.rational(item.value) }, type: INTEGER } : null;
  const [head, ...rest] = fold.items;
  let value = fold.first ? read(fold.first) : head ? meaningOf(head) : null;
  const body = read(fold.lambda.body);
  let size = 1;
  const own = [...walk(body.expression)];
  const uses = own.filter((e) => e.kind === 'symbol' && e.name === total).length;
  for (const item of fold.first ? fold.items : rest) {
    const next = meaningOf(item);
    if (!value || !next) return null;
    size = own.length + uses * size;
    if (size > MOST_NODES) throw new Declined('unreadable', 'This fold grows too long when it is written out.', { start: code.start, end: code.end });
    const known = new Map<string, Expression>([[total, value.expression], [entry, next.expression], [`*${entry}`, next.expression]]);
    value = { expression: filled(body.expression, known), type: combine(combine(value.type, next.type), body.type) };
  }
  return value && { expression: { ...value.expression, span: { start: code.start, end: code.end } }, type: value.type };
}

function filled(expression: Expression, known: ReadonlyMap<string, Expression>): Expression {
  const visit = (e: Expression): Expression => (e.kind === 'symbol' ? (known.get(e.name) ?? e) : mapChildren(e, visit));
  return visit(expression);
}

function foldOf({ callee, args }: CallCode, env: Environment): Fold | null {
  const [a, b, c] = args;
  const lambdaIn = (code: Code | undefined): LambdaCode | null => (code?.kind === 'lambda' ? code : null);
  const over = (code: Code, lambda: LambdaCode | null, first: Code | undefined, falling: boolean): Fold | null => {
    const items = lambda ? sequence(code, env) : null;
    return lambda && items ? { items: falling ? [...items].reverse() : items, first: first ?? null, lambda } : null;
  };
  if (callee.kind === 'member' && a) {
    switch (callee.name) {
      case 'fold':
      case 'Aggregate':
        return b && args.length === 2 ? over(callee.object, lambdaIn(b), a, false) : null;
      case 'rfold':
        return b && args.length === 2 ? over(callee.object, lambdaIn(b), a, true) : null;
      case 'reduceRight':
      case 'reduce':
        if (a.kind === 'lambda' && args.length <= 2) return over(callee.object, a, b, callee.name === 'reduceRight');
        break;
      default:
    }
  }
  const name = segments(callee)?.at(-1) ?? '';
  return /^reduce$/i.test(name) && a && b && args.length <= 3 ? over(b, lambdaIn(a), c, false) : null;
}
