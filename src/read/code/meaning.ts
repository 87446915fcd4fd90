/** Neutral code -> expression. Reads what the language would compute, in exact arithmetic; what it cannot be sure of it declines. */
import { build, type Expression, type Span } from '../../expression/index.ts';
import { Declined } from '../../outcome.ts';
import { readCall, readMember, readName } from './calls.ts';
import { choose } from './conditions.ts';
import { divide, floorDivide, languageName, literalInteger } from './division.ts';
import type { Environment, Meaning } from './environment.ts';
import { readLiteral } from './literals.ts';
import { entryOf, positionOf } from './lists.ts';
import { operatorMeaning } from './operators.ts';
import type { BinaryCode, Code, IndexCode, LiteralCode } from './syntax.ts';
import { combine, declaredType, floating, INTEGER, UNKNOWN, type ValueType } from './types.ts';

const spanOf = (code: { readonly start: number; readonly end: number }): Span => ({ start: code.start, end: code.end });
const at = <T extends Expression>(expression: T, span: Span): T => ({ ...expression, span });
const sourceOf = (code: Code, env: Environment): string => env.text.slice(code.start, code.end).replace(/\s+/g, '');

/** Operands inside one another beyond this are declined; long sums and products are chains, not nesting. */
const MAX_NESTING = 600;

/** The expression of a piece of code. Throws Declined with the place. */
export function readMeaning(code: Code, env: Environment, depth = 0): Meaning {
  if (depth > MAX_NESTING) throw new Declined('unreadable', 'This expression is nested too deeply; select a smaller one.', spanOf(code));
  const read = (inner: Code): Meaning => readMeaning(inner, env, depth + 1);
  switch (code.kind) {
    case 'literal':
      return literalMeaning(code, env);
    case 'name':
      return readName(code, env);
    case 'member':
      return readMember(code, env, read);
    case 'group':
      return read(code.inner);
    case 'unary':
      return unaryMeaning(code.operator, code.operand, spanOf(code), env, read);
    case 'binary':
      return binaryMeaning(code, env, read);
    case 'call':
      return readCall(code, env, read);
    case 'cast':
      return castMeaning(code.type, code.operand, spanOf(code), env, read);
    case 'conditional':
      return choose(code.condition, read(code.then), read(code.otherwise), spanOf(code), env, read);
    case 'if':
      if (code.otherwise) return choose(code.condition, read(code.then), read(code.otherwise), spanOf(code), env, read);
      throw new Declined('unreadable', 'This choice has no other branch; give it one so that it has a value everywhere.', spanOf(code));
    case 'block': {
      const [only] = code.body;
      if (only && code.body.length === 1) return read(only);
      throw new Declined('unreadable', 'This block has several statements; select the expression inside it.', spanOf(code));
    }
    case 'return':
      if (code.value) return read(code.value);
      throw new Declined('unreadable', 'Nothing is returned here; select an expression.', spanOf(code));
    case 'index':
      return indexMeaning(code, env, read);
    case 'declare':
    case 'assign':
      if (code.value && (code.kind === 'declare' || /^:?=$/.test(code.operator))) return read(code.value);
      throw new Declined('unreadable', 'This statement changes a variable by its old value; select the expression on its right side.', spanOf(code));
    case 'named':
      return read(code.value);
    case 'list':
      throw new Declined('unreadable', 'A list of values is no expression; select one of its entries.', spanOf(code));
    case 'lambda':
      throw new Declined('unreadable', 'A function is no expression; select the expression that it returns.', spanOf(code));
    case 'function':
    case 'import':
    case 'opaque':
      throw new Declined('unreadable', `This ${code.kind === 'opaque' ? code.what : code.kind} cannot be read as mathematics; select an arithmetic expression.`, spanOf(code));
  }
}

/** The entry of a list; outside a loop that is followed, an entry stays a name of its own. */
function indexMeaning(code: IndexCode, env: Environment, read: (code: Code) => Meaning): Meaning {
  if (env.counters) return read(entryOf(code.object, code.args, spanOf(code), env));
  const [index] = code.args;
  const known = index && index.kind !== 'literal' && code.object.kind === 'name' ? positionOf(code.object, code.args, env) : null;
  if (known !== null) return { expression: { kind: 'symbol', name: `${sourceOf(code.object, env)}[${known}]`, span: spanOf(code) }, type: UNKNOWN };
  return { expression: { kind: 'symbol', name: sourceOf(code, env), span: spanOf(code) }, type: UNKNOWN };
}

function literalMeaning(code: LiteralCode, env: Environment): Meaning {
  const literal = readLiteral(code.text, env.language);
  if (!literal) throw new Declined('unreadable', `The number ${code.text.slice(0, 40)} cannot be read; write it as a decimal.`, spanOf(code));
  const { language } = env;
  const number: Expression = { kind: 'number', value: literal.value, written: code.text, span: spanOf(code) };
  const type: ValueType = literal.integer
    ? { ...INTEGER, flexible: true }
    : literal.format
      ? floating(literal.format, 'suffix')
      : floating(language.literalFormat, 'literal', language.literalAdapts);
  if (!literal.imaginary) return { expression: number, type };
  return { expression: at(build.product(number, build.constant('i')), spanOf(code)), type: floating(null, null) };
}

function unaryMeaning(operator: string, operand: Code, span: Span, env: Environment, read: (code: Code) => Meaning): Meaning {
  switch (operator) {
    case '+':
    case '&':
      return read(operand);
    case '-':
    case '−':
    case '.-': {
      const inner = read(operand);
      return { expression: { kind: 'negation', operand: inner.expression, span }, type: inner.type };
    }
    case '*':
      // A counter or an entry that a loop hands out by reference.
      if (operand.kind === 'name' && env.counters) return read(operand);
      return { expression: { kind: 'symbol', name: sourceOf({ kind: 'group', inner: operand, ...span }, env), span }, type: UNKNOWN };
    case '√':
    case '∛': {
      const inner = read(operand);
      const expression = operator === '√' ? build.squareRoot(inner.expression) : build.root(3, inner.expression);
      return { expression: at(expression, span), type: floating(inner.type.format, inner.type.evidence, inner.type.weak) };
    }
    default:
      throw new Declined('unreadable', `The operator ${operator} is no arithmetic; select an expression without it.`, span);
  }
}

function castMeaning(type: string, operand: Code, span: Span, env: Environment, read: (code: Code) => Meaning): Meaning {
  const inner = read(operand);
  const target = declaredType(type, env.language);
  if (target.kind === 'integer' && inner.type.kind !== 'integer') {
    if (literalInteger(inner.expression) !== null) return { expression: inner.expression, type: INTEGER };
    throw new Declined('unreadable', `The conversion to ${type} drops the fraction; select an expression without it.`, span);
  }
  return { expression: inner.expression, type: target.kind === 'unknown' ? inner.type : target };
}

interface Step {
  readonly sign: '+' | '-' | '*' | '/';
  readonly code: BinaryCode;
}

/** Chains of one precedence are read along their left spine, so that long sums need no deep recursion and become one node. */
function binaryMeaning(code: BinaryCode, env: Environment, read: (code: Code) => Meaning): Meaning {
  const span = spanOf(code);
  const meaning = operatorMeaning(code.operator, env.language);
  switch (meaning) {
    case 'add':
    case 'subtract':
    case 'multiply':
    case 'divide':
      return chainMeaning(code, meaning === 'add' || meaning === 'subtract', env, read);
    case 'left divide':
      return divide(read(code.right), read(code.left), span, env);
    case 'exact ratio': {
      const [a, b] = [read(code.left), read(code.right)];
      return { expression: { kind: 'quotient', numerator: a.expression, denominator: b.expression, span }, type: UNKNOWN };
    }
    case 'floor divide':
      return floorDivide(read(code.left), read(code.right), span);
    case 'power': {
      const [a, b] = [read(code.left), read(code.right)];
      return { expression: { kind: 'power', base: a.expression, exponent: b.expression, span }, type: b.type.kind === 'integer' ? a.type : combine(a.type, b.type) };
    }
    case 'exclusive or':
      throw new Declined('bad-request', `In ${languageName(env)} ^ is the exclusive or of bits; write ${POWERS[env.language.family] ?? 'pow(x, y)'} for a power.`, { start: code.operatorStart, end: code.operatorStart + code.operator.length });
    case 'matrix product':
      throw new Declined('unreadable', 'A matrix product is no arithmetic of numbers; select a scalar expression.', span);
    case 'remainder':
      throw new Declined('unreadable', 'A remainder is not smooth; select an expression without it.', span);
    default:
      throw new Declined('unreadable', `The operator ${code.operator} gives no number; select an arithmetic expression.`, span);
  }
}

const POWERS: Readonly<Record<string, string>> = { python: 'x**y', javascript: 'x**y', rust: 'x.powf(y)', java: 'Math.pow(x, y)', csharp: 'Math.Pow(x, y)', go: 'math.Pow(x, y)', cpp: 'std::pow(x, y)', kotlin: 'x.pow(y)', fortran: 'x**y' };

function chainMeaning(code: BinaryCode, additive: boolean, env: Environment, read: (code: Code) => Meaning): Meaning {
  const steps: Step[] = [];
  let head: Code = code;
  while (head.kind === 'binary') {
    const meaning = operatorMeaning(head.operator, env.language);
    const sign = meaning === 'add' ? '+' : meaning === 'subtract' ? '-' : meaning === 'multiply' ? '*' : meaning === 'divide' ? '/' : null;
    if (sign === null || (sign === '+' || sign === '-') !== additive) break;
    // A coefficient binds tighter than a written sign, and is a product of its own.
    if (head.operator === 'juxtaposed' && head !== code) break;
    steps.push({ sign, code: head });
    head = head.left;
    if (steps[0]?.code.operator === 'juxtaposed') break;
  }
  steps.reverse();
  return additive ? sumOf(head, steps, read) : productOf(head, steps, env, read);
}

function sumOf(head: Code, steps: readonly Step[], read: (code: Code) => Meaning): Meaning {
  const first = read(head);
  const terms: Expression[] = [first.expression];
  let { type } = first;
  let end = head.end;
  for (const { sign, code } of steps) {
    const term = read(code.right);
    type = combine(type, term.type);
    end = code.end;
    terms.push(sign === '+' ? term.expression : { kind: 'negation', operand: term.expression, span: { start: code.operatorStart, end } });
  }
  return { expression: { kind: 'sum', terms, span: { start: head.start, end } }, type };
}

function productOf(head: Code, steps: readonly Step[], env: Environment, read: (code: Code) => Meaning): Meaning {
  let whole = read(head);
  let open: Expression[] | null = null;
  for (const { sign, code } of steps) {
    const next = read(code.right);
    const span = { start: head.start, end: code.end };
    if (sign === '/') {
      whole = divide(whole, next, span, env);
      open = null;
    } else {
      open = open ? [...open, next.expression] : [whole.expression, next.expression];
      whole = { expression: { kind: 'product', factors: open, span }, type: combine(whole.type, next.type) };
    }
  }
  return whole;
}
