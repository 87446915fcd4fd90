/** Arguments and report lines that the exhaustive scripts share. */

export interface RunOptions {
  /** Every how manieth float; 1 is all of them. */
  readonly every: number;
  /** Cases by number, from the first to before the last. */
  readonly from: number;
  readonly to: number;
}

/** `--every N --from I --to J`; throws RangeError for anything else. */
export function runOptions(argv: readonly string[], cases: number): RunOptions {
  const values = new Map<string, number>([['--every', 1], ['--from', 0], ['--to', cases]]);
  for (let k = 0; k < argv.length; k += 2) {
    const [name = '', value = ''] = argv.slice(k, k + 2);
    if (!values.has(name) || !/^\d+$/.test(value)) throw new RangeError(`${name} ${value}: use --every N, --from I, --to J`);
    values.set(name, Number(value));
  }
  return { every: Math.max(1, values.get('--every') ?? 1), from: values.get('--from') ?? 0, to: Math.min(cases, values.get('--to') ?? cases) };
}

export interface ReportLine {
  readonly subject: string;
  readonly bound: number;
  readonly worst: number;
  readonly at: number;
  /** Largest allowed bound / worst. */
  readonly most: number;
  readonly seen: string;
  readonly seconds: number;
}

/** True where the bound holds and is not looser than allowed. */
export const good = ({ bound, worst, most }: ReportLine): boolean => worst <= bound && bound <= most * worst;

export function lineOf(line: ReportLine): string {
  const { subject, bound, worst, at, most, seen, seconds } = line;
  const verdict = !(worst <= bound) ? 'FAILS' : good(line) ? 'holds' : 'LOOSE';
  return `${verdict} ${subject}: bound ${bound.toExponential(4)} worst ${worst.toExponential(4)} at ${at}, ratio ${(bound / worst).toFixed(3)} (at most ${most}), ${seen}, ${seconds.toFixed(1)} s`;
}

/** Prints the last line and sets the exit code. */
export function summarise(lines: readonly ReportLine[], what: string): void {
  const bad = lines.filter((l) => !good(l)).length;
  const ratios = lines.map((l) => l.bound / l.worst);
  process.stdout.write(`${lines.length} ${what}, ${bad} bad; ratio of bound to worst from ${Math.min(...ratios).toFixed(3)} to ${Math.max(...ratios).toFixed(3)}; ${lines.reduce((s, l) => s + l.seconds, 0).toFixed(0)} s\n`);
  process.exitCode = bad > 0 || lines.length === 0 ? 1 : 0;
}
