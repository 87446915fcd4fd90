/** Series and polynomials that programs already hold: branches beside a direct form, and polynomial code in one variable. */
import { type Expression, freeSymbols, mapChildren, type Span } from '../../expression/index.ts';
import { attempt } from '../../outcome.ts';
import type { Environment, Meaning, Remark } from './environment.ts';
import { type Bindings, compoundValue, execute, functionValue, valueNow, type Watcher } from './execute.ts';
import type { CodeLanguage, FloatFormat } from './languages/index.ts';
import { isWorthExpanding } from './locate.ts';
import { segments } from './paths.ts';
import { type Coefficients, polynomialIn } from './polynomial.ts';
import { environmentAt, scopeAt } from './scope.ts';
import { type Code, partsOf, type Program, walkWithin } from './syntax.ts';
import type { ValueType } from './types.ts';

export interface SeriesBranch {
  /** The whole choice. */
  readonly span: Span;
  /** The comparison that chooses the series, where it is a single one; else null. `negated`: the series serves where it does not hold. */
  readonly condition: Expression | null;
  readonly conditionSpan: Span;
  readonly negated: boolean;
  /** Locals filled in. */
  readonly series: Expression;
  readonly seriesSpan: Span;
  readonly direct: Expression;
  readonly directSpan: Span;
  readonly function: string | null;
  /** Of the direct form; the language's default where the code does not show it. */
  readonly format: FloatFormat;
}

export interface PolynomialCode {
  readonly span: Span;
  /** Locals and named numbers of the file filled in: only `variable` is free. */
  readonly expression: Expression;
  readonly variable: string;
  /** Exact, lowest power first. */
  readonly coefficients: Coefficients;
  readonly degree: number;
  /** The variable it goes to, or null. */
  readonly target: string | null;
  readonly function: string | null;
  readonly format: FloatFormat;
}

/** Every function with a body, and the program's own level, each with the environment inside it. */
function bodies(program: Program, text: string, language: CodeLanguage): readonly { readonly code: Code; readonly environment: Environment; readonly name: string | null }[] {
  const remarks: Remark[] = [];
  const found: { readonly code: Code; readonly environment: Environment; readonly name: string | null }[] = [];
  const stack: Code[] = [program.root];
  for (let code = stack.pop(); code; code = stack.pop()) {
    if ((code.kind === 'function' || code.kind === 'lambda') && code.body) {
      const scope = scopeAt(program.root, code.body.start, code.body.end);
      found.push({ code, environment: environmentAt(scope, text, language, remarks), name: code.kind === 'function' ? code.name : null });
    }
    const parts = partsOf(code);
    for (let i = parts.length - 1; i >= 0; i -= 1) {
      const part = parts[i];
      if (part) stack.push(part);
    }
  }
  const scope = scopeAt(program.root, program.root.start, program.root.end);
  if (program.root.kind !== 'function' && program.root.kind !== 'lambda') found.unshift({ code: program.root, environment: environmentAt(scope, text, language, remarks), name: null });
  return found.sort((a, b) => a.code.start - b.code.start);
}

const span = (code: { readonly start: number; readonly end: number }): Span => ({ start: code.start, end: code.end });

/** Watches one body run; what cannot be followed ends the run without a word. */
function watch(body: { readonly code: Code; readonly environment: Environment }, watcher: Watcher): void {
  const { code, environment } = body;
  attempt(() => (code.kind === 'function' || code.kind === 'lambda' ? functionValue(code, environment, watcher) : execute(code, environment, watcher)));
}

export function seriesBranches(program: Program, text: string, language: CodeLanguage): readonly SeriesBranch[] {
  const found = new Map<string, SeriesBranch>();
  for (const body of bodies(program, text, language)) {
    const add = (whole: Code, condition: Code, yes: Meaning, no: Meaning, yesSpan: Span, noSpan: Span, bindings: Bindings, env: Environment): void => {
      const [seriesFirst, seriesLast] = [isSeriesBeside(yes.expression, no.expression), isSeriesBeside(no.expression, yes.expression)];
      if (!seriesFirst && !seriesLast) return;
      const comparison = attempt(() => conditionOf(condition, env, bindings));
      const format = (seriesFirst ? no : yes).type.format ?? language.literalFormat;
      found.set(`${whole.start}:${whole.end}`, {
        span: span(whole),
        condition: comparison.ok ? comparison.value : null,
        conditionSpan: span(condition),
        negated: !seriesFirst,
        series: (seriesFirst ? yes : no).expression,
        seriesSpan: seriesFirst ? yesSpan : noSpan,
        direct: (seriesFirst ? no : yes).expression,
        directSpan: seriesFirst ? noSpan : yesSpan,
        function: body.name,
        format,
      });
    };
    watch(body, {
      statement: (statement, bindings, env) => {
        const outer = statement.kind === 'if' ? statement.condition : statement;
        if (outer.kind === 'block' || outer.kind === 'opaque') return;
        for (const code of walkWithin(outer)) {
          const parts = choiceParts(code);
          if (!parts) continue;
          const values = attempt(() => [valueNow(parts.then, env, bindings).meaning, valueNow(parts.otherwise, env, bindings).meaning] as const);
          if (values.ok) add(code, parts.condition, values.value[0], values.value[1], span(parts.then), span(parts.otherwise), bindings, env);
        }
      },
      choice: (code, then, otherwise, bindings, env) => add(code, code.condition, then, otherwise, then.expression.span ?? span(code.then), otherwise.expression.span ?? span(code), bindings, env),
    });
  }
  return [...found.values()].sort((a, b) => a.span.start - b.span.start);
}

/** A polynomial (a constant too) in the variables of a direct form that is none. */
function isSeriesBeside(series: Expression, direct: Expression): boolean {
  if (!isWorthExpanding(direct) || isWorthExpanding(series) || series.kind === 'piecewise') return false;
  const names = freeSymbols(direct);
  return freeSymbols(series).every((name) => names.includes(name));
}

function choiceParts(code: Code): { readonly condition: Code; readonly then: Code; readonly otherwise: Code } | null {
  if (code.kind === 'conditional') return code;
  if (code.kind === 'if' && code.otherwise) return { condition: code.condition, then: code.then, otherwise: code.otherwise };
  if (code.kind !== 'call' || code.args.length !== 3) return null;
  const name = segments(code.callee)?.at(-1);
  const [a, b, c] = code.args;
  if (!a || !b || !c) return null;
  if (name === 'where' || name === 'ifelse' || name === 'select') return { condition: a, then: b, otherwise: c };
  return name?.toLowerCase() === 'merge' ? { condition: c, then: a, otherwise: b } : null;
}

function conditionOf(code: Code, environment: Environment, bindings: Bindings): Expression | null {
  if (code.kind === 'group') return conditionOf(code.inner, environment, bindings);
  if (code.kind === 'block' && code.body.length === 1 && code.body[0]) return conditionOf(code.body[0], environment, bindings);
  if (code.kind !== 'binary') return null;
  // A choice between two numbers reads the comparison for us.
  const probe: Code = { kind: 'conditional', condition: code, then: literal('1', code), otherwise: literal('0', code), start: code.start, end: code.end };
  const { expression } = valueNow(probe, environment, bindings).meaning;
  if (expression.kind !== 'piecewise' || expression.branches.length !== 2) return null;
  const [first] = expression.branches;
  return first?.value.kind === 'number' ? first.condition : null;
}
const literal = (text: string, at: Code): Code => ({ kind: 'literal', text, start: at.start, end: at.end });

/** The code after a branch is met once for each way, that of a loop once as it stands and once with everything filled in. */
const MOST_LOOKS = 2;

/** Polynomials of degree 2 or more with at least two terms, in exactly one variable. Those that only feed a larger one are left out. */
export function polynomialCode(program: Program, text: string, language: CodeLanguage): readonly PolynomialCode[] {
  const found: (PolynomialCode & { readonly through: ReadonlySet<string>; readonly body: Code })[] = [];
  for (const body of bodies(program, text, language)) {
    const seen = new Map<Code, number>();
    const look = (code: Code, env: Environment, bindings: Bindings, target: string | null, type: ValueType | null): void => {
      const times = (seen.get(code) ?? 0) + 1;
      if (times > MOST_LOOKS || found.some((p) => p.span.start === code.start && p.span.end === code.end)) return;
      seen.set(code, times);
      if (code.kind === 'function' || code.kind === 'lambda') return;
      if (mayBePolynomial(code)) {
        const now = attempt(() => valueNow(code, env, bindings));
        if (now.ok) {
          const expression = filled(now.value.meaning.expression, env);
          const free = freeSymbols(expression);
          const [variable] = free;
          const coefficients = variable !== undefined && free.length === 1 && body.environment.typeOf(variable).kind !== 'integer' ? polynomialIn(expression, variable) : null;
          if (variable !== undefined && coefficients && coefficients.length > 2 && coefficients.filter((c) => c.num !== 0n).length > 1) {
            const own = now.value.meaning.type;
            found.push({ span: span(code), expression, variable, coefficients, degree: coefficients.length - 1, target, function: body.name, format: (own.weak ? (type?.format ?? own.format) : own.format) ?? language.literalFormat, through: now.value.through, body: body.code });
            return;
          }
        }
      }
      for (const part of partsOf(code)) look(part, env, bindings, null, null);
    };
    watch(body, {
      statement: (statement, bindings, env) => {
        if (statement.kind === 'block' || statement.kind === 'if' || statement.kind === 'opaque') return;
        const target = statement.kind === 'declare' ? statement.name : statement.kind === 'assign' && statement.target.kind === 'name' ? statement.target.text : null;
        const changed = statement.kind === 'assign' && !/^:?=$/.test(statement.operator) ? compoundValue(statement, env) : null;
        const value = changed ?? (statement.kind === 'declare' || statement.kind === 'assign' || statement.kind === 'return' ? statement.value : statement);
        const type = target === null ? null : body.environment.typeOf(target);
        if (value) look(value, env, bindings, target, type);
      },
    });
  }
  return found
    .filter((p) => p.target === null || !found.some((q) => q !== p && q.body === p.body && q.span.start > p.span.start && p.target !== null && q.through.has(p.target)))
    .map(({ through: _through, body: _body, ...rest }) => rest)
    .sort((a, b) => a.span.start - b.span.start);
}

/** Named numbers of the file filled in. */
function filled(expression: Expression, environment: Environment): Expression {
  const visit = (e: Expression): Expression => (e.kind === 'symbol' ? (environment.constantOf(e.name) ?? e) : mapChildren(e, visit));
  return visit(expression);
}

function mayBePolynomial(code: Code): boolean {
  return code.kind === 'binary' || code.kind === 'call' || code.kind === 'unary' || code.kind === 'group' || code.kind === 'cast';
}

