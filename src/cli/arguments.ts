/** The command line's options, turned into protocol requests. */
import { parseArgs } from 'node:util';
import { failure, type Outcome, success } from '../outcome.ts';

export const HELP = `leading-order <command> [options]

  expand '<text>'      first terms, order, remainder bound, terms needed
  fit    '<text>'      polynomial on an interval, with a proven error
  guard  '<text>'      stable replacement for an expression that cancels
  check  <files...>    every printed expansion in documents and comments
  batch                requests as JSON Lines on standard input

Common options
  --language L         latex (default), markdown, plain, c, cpp, python, ...
  --variable V         the quantity that becomes small or large
  --small Q            one of several small quantities (may be repeated)
  --point P            0 (default), inf, -inf or an exact expression
  --side S             both (default), right, left
  --assume A           for instance 'a > 0' (may be repeated)
  --budget MS          time budget in milliseconds
  --json               the engine's answer as JSON
expand
  --terms N | --order P   --interval A B (as one text 'A, B')   --tolerance T
  --measure absolute|relative   --at X   --unknown Y   --near V
fit
  --interval 'A, B'   --tolerance T | --degree N   --measure absolute|relative|ulp
  --format binary32|binary64   --emit LANGUAGE   --form horner|estrin
  --method minimax|taylor|economized|rational   --pieces N|auto
  --reduction auto|none|always   --words 1|2   --exact N   --assertion
  --intervals 'x: A, B; y: C, D' (functions of two variables)
guard
  --point P   --interval 'A, B'   --format F   --emit LANGUAGE
check
  --format text|json|sarif

A text of - is read from standard input. Documentation: README.md`;

const OPTIONS = {
  language: { type: 'string', short: 'l' },
  variable: { type: 'string', short: 'v' },
  small: { type: 'string', multiple: true },
  point: { type: 'string', short: 'p' },
  side: { type: 'string' },
  unknown: { type: 'string' },
  near: { type: 'string' },
  assume: { type: 'string', multiple: true },
  budget: { type: 'string' },
  terms: { type: 'string', short: 'n' },
  order: { type: 'string' },
  interval: { type: 'string', short: 'i' },
  tolerance: { type: 'string', short: 't' },
  measure: { type: 'string' },
  at: { type: 'string' },
  degree: { type: 'string' },
  format: { type: 'string' },
  emit: { type: 'string' },
  basis: { type: 'string' },
  form: { type: 'string' },
  contraction: { type: 'string' },
  method: { type: 'string' },
  pieces: { type: 'string' },
  reduction: { type: 'string' },
  words: { type: 'string' },
  exact: { type: 'string' },
  assertion: { type: 'boolean' },
  intervals: { type: 'string' },
  library: { type: 'string' },
  of: { type: 'string' },
  json: { type: 'boolean' },
  help: { type: 'boolean', short: 'h' },
  version: { type: 'boolean' },
} as const;

export type CommandName = 'expand' | 'fit' | 'guard' | 'check' | 'batch';
export type Values = ReturnType<typeof parseArgs<{ options: typeof OPTIONS; allowPositionals: true }>>['values'];
export interface CommandLine {
  readonly command: CommandName | 'help' | 'version';
  readonly operands: readonly string[];
  readonly values: Values;
}

const COMMANDS: readonly string[] = ['expand', 'fit', 'guard', 'check', 'batch'];

/** `--point -1` and `--order -2` look like options to the parser: glue a value that starts with a minus sign to its option. */
function glueNegativeValues(argv: readonly string[]): string[] {
  const glued: string[] = [];
  for (let i = 0; i < argv.length; i += 1) {
    const word = argv[i] ?? '';
    const next = argv[i + 1];
    const takesValue = /^--(point|near|order|at|interval|assume)$/.test(word);
    if (takesValue && next !== undefined && /^-[^-]/.test(next)) {
      glued.push(`${word}=${next}`);
      i += 1;
    } else glued.push(word);
  }
  return glued;
}

export function readArguments(argv: readonly string[]): Outcome<CommandLine> {
  let parsed: { values: Values; positionals: string[] };
  try {
    parsed = parseArgs({ args: glueNegativeValues(argv), options: OPTIONS, allowPositionals: true });
  } catch (error) {
    return failure('bad-request', `${error instanceof Error ? error.message.split('. ')[0] : String(error)}; see leading-order --help.`);
  }
  const { values, positionals } = parsed;
  if (values.version) return success({ command: 'version', operands: [], values });
  const [command, ...operands] = positionals;
  if (values.help || command === undefined) return success({ command: 'help', operands: [], values });
  if (!COMMANDS.includes(command)) return failure('bad-request', `There is no command ${command}; see leading-order --help.`);
  return success({ command: command as CommandName, operands, values });
}

/** The two ends of `a, b` or `[a, b]`; commas inside parentheses do not part them. */
export function splitInterval(text: string): readonly string[] {
  const inner = /^\s*\[(.*)\]\s*$/s.exec(text)?.[1] ?? text;
  const parts: string[] = [''];
  let depth = 0;
  for (const ch of inner) {
    if (ch === '(' || ch === '{') depth += 1;
    if (ch === ')' || ch === '}') depth -= 1;
    if (ch === ',' && depth === 0) parts.push('');
    else parts[parts.length - 1] += ch;
  }
  return parts.map((p) => p.trim());
}

/** `x: a, b; y: c, d` by variable; a part without a colon is kept under the empty name, which the engine refuses. */
export function splitIntervals(text: string): Readonly<Record<string, readonly string[]>> {
  return Object.fromEntries(
    text.split(';').filter((part) => part.trim() !== '').map((part): [string, readonly string[]] => {
      const [, name = '', ends = part] = /^([^:]*):(.*)$/s.exec(part) ?? [];
      return [name.trim(), splitInterval(ends)];
    }),
  );
}

/** The request object; the engine validates it. */
export function requestOf(command: Exclude<CommandName, 'batch' | 'check'>, text: string, values: Values): Readonly<Record<string, unknown>> {
  const count = (value: string | undefined): number | undefined => (value === undefined ? undefined : Number(value));
  const all: Record<string, unknown> = {
    ask: command,
    text,
    language: values.language ?? 'latex',
    variable: values.variable,
    small: values.small,
    point: values.point,
    side: values.side,
    unknown: values.unknown,
    near: values.near,
    assume: values.assume,
    budget_ms: count(values.budget),
    terms: count(values.terms),
    order: values.order,
    interval: values.interval === undefined ? undefined : splitInterval(values.interval),
    tolerance: values.tolerance,
    measure: values.measure,
    at: values.at,
    degree: count(values.degree),
    format: values.format,
    emit: values.emit,
    basis: values.basis,
    form: values.form,
    contraction: values.contraction,
    method: values.method,
    pieces: values.pieces === undefined || values.pieces === 'auto' ? values.pieces : Number(values.pieces),
    reduction: values.reduction,
    words: count(values.words),
    exact: count(values.exact),
    assertion: values.assertion,
    intervals: values.intervals === undefined ? undefined : splitIntervals(values.intervals),
    library: count(values.library),
  };
  return Object.fromEntries(Object.entries(all).filter(([, value]) => value !== undefined));
}
