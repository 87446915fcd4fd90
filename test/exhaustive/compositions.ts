/**
 * Random compositions of functions, expanded at 0, 0 from the right, 1 and infinity and judged by complex balls at shrinking distances: the error divided by the stated
 * remainder must not grow, and what is called exact must agree. Every row that is wrong, late or declined is printed with its reason; the last lines count.
 * Time is processor time of this process, so that a busy machine changes nothing; 300 ms a case, late beyond max(20 %, 20 ms).
 * Run: npx esbuild test/exhaustive/compositions.ts --bundle --platform=node --format=esm --outfile=.cache/compositions.mjs && node .cache/compositions.mjs <first seed> <count> [depth] [elementary|special]
 */
import { build, type Expression, Q, type Rational, substitute, walk } from '../../src/expression/index.ts';
import { expand, type Expansion, partialSum, remainderScale } from '../../src/expand/index.ts';
import { describe } from '../../src/functions/index.ts';
import { budget } from '../../src/outcome.ts';
import { type Ball, complex, enclose, real } from '../../src/rigorous/index.ts';
import { toPlain } from '../../src/write/index.ts';
import { generator } from '../rigorous/random.ts';

const BUDGET_MS = 300;
const LATE_MS = BUDGET_MS + Math.max(0.2 * BUDGET_MS, 20);
const TERMS = 3;
const { call, constant, number, power, product, quotient, sum } = build;
const x = build.symbol('x');

const ELEMENTARY = ['sin', 'cos', 'tan', 'exp', 'log', 'sqrt', 'sinh', 'cosh', 'tanh', 'asin', 'acos', 'atan', 'asinh', 'atanh', 'acosh'] as const;
const SPECIAL: readonly ((a: Expression) => Expression)[] = [
  ...['gamma', 'digamma', 'erf', 'erfc', 'sinIntegral', 'expIntegralEi', 'airyAi', 'zeta'].map((id) => (a: Expression) => call(id, a)),
  ...([['besselJ', 0], ['besselJ', 1], ['besselK', 0], ['besselI', 0], ['lambertW', 0], ['polylog', 2]] as const).map(([id, order]) => (a: Expression) => call(id, number(order), a)),
];

/** The first numbers of neighbouring seeds resemble each other; they are left out. */
function randomOf(seed: number): () => number {
  const random = generator(seed);
  for (let k = 0; k < 12; k += 1) random();
  return random;
}

function composition(random: () => number, depth: number, special: boolean): Expression {
  const pick = <T>(first: T, ...others: readonly T[]): T => [first, ...others][Math.floor(random() * (others.length + 1))] ?? first;
  const go = (d: number): Expression => {
    if (d === 0) {
      const r = random();
      if (r < 0.6) return x;
      if (r < 0.9) return pick(number(1), number(2), number(3), number(Q.HALF), number(-1), number(Q.rational(1, 3)));
      return pick(constant('pi'), power(x, 2));
    }
    const r = random();
    if (r < 0.45) {
      if (special && random() >= 0.6) return pick((a) => call('erf', a), ...SPECIAL)(go(d - 1));
      const id = pick('sin', ...ELEMENTARY);
      return id === 'sqrt' ? build.squareRoot(go(d - 1)) : call(id, go(d - 1));
    }
    if (r >= 0.94) return power(go(d - 1), pick(number(2), number(3), number(-1), number(-2), number(Q.HALF)));
    const [a, b] = [go(d - 1), go(Math.floor(random() * d))];
    if (r < 0.6) return sum(a, b);
    if (r < 0.7) return build.difference(a, b);
    return r < 0.82 ? product(a, b) : quotient(a, b);
  };
  for (;;) {
    const f = go(depth);
    if ([...walk(f)].some((e) => e.kind === 'symbol')) return f;
  }
}

/** The one side of the point that the judge goes down, nearer with each. */
function approaches(point: Expansion['point'], left: boolean, closer: boolean): readonly Rational[] {
  if (point === 'inf' || point === '-inf') return (closer ? [200, 1000, 5000] : [20, 50, 100]).map((n) => Q.rational(point === 'inf' ? n : -n));
  const a = point.kind === 'number' ? point.value : Q.ZERO;
  return (closer ? [12, 14, 16] : [3, 4, 5]).map((n) => Q.add(a, Q.rational(left ? -1n : 1n, 10n ** BigInt(n))));
}

type Verdict = { readonly kind: 'right' | 'wrong' | 'unjudged'; readonly detail: string };

/** |f - sum| and the remainder's scale at x, each with more bits where the first ones are all lost. */
function errorAt(found: Expansion, at: Rational): { readonly error: Ball; readonly scale: Ball } | null {
  for (const bits of [300, 1500]) {
    const environment = new Map([['x', complex.fromRational(at, bits + 64)]]);
    const [f, s, scale] = [found.function, partialSum(found), remainderScale(found)].map((e) => enclose(e, environment, bits, describe));
    if (!f || !s || !scale) return null;
    const difference = complex.subtract(f, s, bits);
    const row = { error: complex.absolute(difference, bits), scale: complex.absolute(scale, bits) };
    if (!complex.containsZero(difference)) return row;
    if (found.exact && bits > 300) return row;
  }
  return null;
}

/** Where the error grows at first, nearer to the point: coefficients may be large, erfc(3) stands below in some. */
function judgeSide(found: Expansion, left: boolean): Verdict {
  const first = judgeAlong(found, left, false);
  return first.kind === 'wrong' && !found.exact ? judgeAlong(found, left, true) : first;
}

function judgeAlong(found: Expansion, left: boolean, closer: boolean): Verdict {
  const rows = approaches(found.point, left, closer).map((at) => errorAt(found, at));
  if (found.exact) {
    const wrong = rows.find((r) => r && !real.containsZero(r.error));
    if (wrong) return { kind: 'wrong', detail: `called exact, but off by ${real.toDouble(wrong.error)}` };
    return rows.some((r) => r) ? { kind: 'right', detail: '' } : { kind: 'unjudged', detail: 'no enclosure' };
  }
  const ratios = rows.flatMap((r) => {
    const ratio = r && real.divide(r.error, r.scale, 100);
    return ratio ? [ratio] : [];
  });
  const [first, last] = [ratios[0], ratios.at(-1)];
  const before = ratios.at(-2);
  if (!first || !last || !before || ratios.length < 2) return { kind: 'unjudged', detail: 'no enclosure' };
  const grows = (from: Ball, by: number): boolean => real.compare(last, real.multiply(from, real.fromInteger(by), 100)) === 1;
  if (grows(first, 30) && grows(before, 3)) return { kind: 'wrong', detail: `error over remainder ${ratios.map((r) => real.toDouble(r).toPrecision(3)).join(', ')}` };
  return { kind: 'right', detail: '' };
}

function judge(found: Expansion, asked: 'both' | 'right'): Verdict {
  if (found.left) {
    const [right, left] = [judgeSide(found, false), judgeSide(found.left, true)];
    return left.kind === 'wrong' ? { ...left, detail: `left: ${left.detail}` } : right;
  }
  const restriction = found.assumptions.find((a) => /^x [<>]/.test(a));
  if (restriction) return judgeSide(found, restriction.startsWith('x <'));
  const right = judgeSide(found, false);
  if (right.kind === 'wrong' || asked === 'right' || found.point === 'inf') return right;
  const left = judgeSide(found, true);
  return left.kind === 'wrong' ? { ...left, detail: `left: ${left.detail}` } : right;
}

let readAt = -Infinity;
let reading = 0;
/** Processor time of this process in milliseconds, at most one millisecond of the clock old: asking the system is dear. */
const processorTime = (): number => {
  const now = performance.now();
  if (now - readAt >= 1) {
    readAt = now;
    const { user, system } = process.cpuUsage();
    reading = (user + system) / 1000;
  }
  return reading;
};

const POINTS = [
  { name: '0', point: number(0), side: 'both' },
  { name: '0+', point: number(0), side: 'right' },
  { name: '1', point: number(1), side: 'both' },
  { name: 'inf', point: 'inf', side: 'both' },
] as const;

/** Declined because it is known that there is no expansion, not because none is known. */
const provesNone = (code: string, message: string): boolean => code === 'no-expansion' && !/\b(known|is not expanded|are not expanded)\b/.test(message);

const [firstSeed = NaN, count = NaN, depth = 3] = process.argv.slice(2, 5).map(Number);
const special = process.argv[5] === 'special';
if (![firstSeed, count, depth].every((n) => Number.isSafeInteger(n) && n > 0) || !['special', 'elementary', undefined].includes(process.argv[5])) throw new RangeError('use <first seed> <count> [depth] [elementary|special]');

const counts = { right: 0, 'proven no expansion': 0, declined: 0, unjudged: 0, late: 0, wrong: 0 };
const reasons = new Map<string, number>();
for (let k = 0; k < 20; k += 1) expand({ function: substitute(call('sin', x), 'x', sum(x, number(k))), variable: x, point: number(0), side: 'both', terms: TERMS, assumptions: [] }, budget(1000));
for (let seed = firstSeed; seed < firstSeed + count; seed += 1) {
  const random = randomOf(seed);
  const f = composition(random, depth, special);
  const { name, point, side } = POINTS[Math.floor(random() * POINTS.length)] ?? POINTS[0];
  const print = (verdict: string, detail: string): void => void process.stdout.write(`${verdict} ${seed} | ${toPlain(f)} @ ${name} | ${detail}\n`);
  const start = processorTime();
  const found = expand({ function: f, variable: x, point, side, terms: TERMS, assumptions: [] }, budget(BUDGET_MS, processorTime));
  const spent = processorTime() - start;
  if (spent > LATE_MS) {
    counts.late += 1;
    print('late', `${spent.toFixed(0)} ms`);
  }
  if (!found.ok) {
    const { code, message } = found.error;
    counts[provesNone(code, message) ? 'proven no expansion' : 'declined'] += 1;
    const reason = `${code}: ${message}`;
    reasons.set(reason, (reasons.get(reason) ?? 0) + 1);
    if (!provesNone(code, message)) print('declined', reason);
    continue;
  }
  const verdict = judge(found.value, side);
  counts[verdict.kind] += 1;
  if (verdict.kind !== 'right') print(verdict.kind, `${toPlain(partialSum(found.value))} | ${verdict.detail}`);
}
for (const [reason, n] of [...reasons].sort((a, b) => b[1] - a[1])) process.stdout.write(`  ${n} ${reason}\n`);
process.stdout.write(`${count} compositions of depth ${depth}, ${special ? 'all' : 'elementary'} functions: ${Object.entries(counts).map(([what, n]) => `${n} ${what}`).join(', ')}\n`);
process.exitCode = counts.wrong + counts.late > 0 ? 1 : 0;
