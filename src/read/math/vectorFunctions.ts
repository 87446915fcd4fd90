/** Vector functions: a bold letter with arguments, `\mathbf{u}(t)`, `\mathbf{E}(\mathbf{r})`. */
import { BOLD, type Expression, walk } from '../../expression/index.ts';
import { bracketArguments } from './calls.ts';
import { isName } from './facts.ts';
import { fail, isMark, node, peek, type State } from './state.ts';
import type { Token } from './tokens.ts';

/** The call behind a bold letter that has just been read; null where the bracket is a factor. Primes are derivatives where the argument is a number: `\mathbf{x}'(t)`. */
export function vectorFunction(p: State, from: number, name: string): Expression | null {
  if (!takesArguments(p)) return null;
  const args = bracketArguments(p);
  const ofPlace = args.some((a) => [...walk(a)].some((e) => e.kind === 'vector'));
  const primes = ofPlace ? '' : (/'+/.exec(name)?.[0] ?? '');
  return node(p, from, { kind: 'apply', name: name.replace(primes, ''), args, derivatives: args.map((_, i) => (i === 0 ? primes.length : 0)) });
}

const isBold = (t: Token | undefined): boolean => t?.kind === 'command' && BOLD.has(t.text);
const isPlus = (t: Token): boolean => isMark(t, '+', '-');
const isSmallLetter = (t: Token | undefined): boolean => t !== undefined && isName(t) && /^\p{Ll}/u.test(t.text);

/**
 * One name, a list, a place (`\mathbf{x} + \mathbf{h}`) and a later time or a step (`t + \tau`, `x + \Delta x`, `x + h`) are arguments; what holds other numbers or functions is a factor.
 * Fails where a sum or ratio of names leaves it open.
 */
function takesArguments(p: State): boolean {
  if (!isMark(peek(p), '(')) return false;
  const inner = p.tokens.slice(p.at + 1, Math.max(p.at, p.match[p.at] ?? p.at)).filter((t) => t.kind !== 'space');
  const [first] = inner;
  if (!first) return false;
  if (inner.some((t) => isMark(t, ','))) return true;
  const bold = inner.flatMap((t, k) => (isBold(t) ? [inner.slice(k + 1).find((x) => x.kind !== 'open')] : []));
  if (bold.length > 0) return first.kind !== 'digit' && bold.every(isSmallLetter);
  if (first.kind === 'digit') return inner.length === 1;
  if (!inner.every((t) => isName(t) || t.kind === 'digit' || t.kind === 'open' || t.kind === 'close' || isMark(t, '_', "'", '+', '-', '/', '*'))) return false;
  const names = inner.filter((t, k) => isName(t) && !isMark(inner[k - 1], '_') && inner[k - 1]?.kind !== 'open');
  if (names.length === 1 && !inner.some((t) => isPlus(t) || isMark(t, '/', '*'))) return true;
  const step = inner.some((t, k) => isPlus(t) && ['h', 'k', 'delta', 'Delta'].includes(inner[k + 1]?.text ?? ''));
  if (step || names.some((t) => t.text === 't')) return true;
  return fail(p, 'It is not plain whether this bracket holds the argument of a vector function or a factor; write the factor before the vector, or one letter as the argument.');
}
