/** The tolerance that the sentence around a printed expansion states for it, before or behind the formula, and the interval it is stated for. */
import { Q, type Expression, type Rational, type Span } from '../expression/index.ts';
import { intervalNear, type StatedInterval } from './intervals.ts';

export interface Statement {
  /** Where the number stands, its unit included. */
  readonly place: Span;
  readonly printed: string;
  /** An error of at most this is what is stated. */
  readonly tolerance: Rational;
  /** The statement is false, however loosely it is meant, where the error exceeds this; at least the tolerance. */
  readonly refuting: Rational;
  readonly measure: 'absolute' | 'relative';
  readonly percent: boolean;
  /** Printed as a number that a right one can replace. */
  readonly plain: boolean;
  /** Null where the text names none. */
  readonly interval: StatedInterval | null;
  /** Why it is open whether the statement is about this formula; null where that is plain. */
  readonly doubt: string | null;
}

/** The surroundings of one formula; offsets are those of the text. */
export interface Surroundings {
  readonly text: string;
  /** The claim as printed: none of its numbers states a tolerance. */
  readonly claim: Span;
  /** How far the words go that may speak of it. */
  readonly from: number;
  readonly to: number;
  /** End of the claim before and start of the claim behind. */
  readonly since: number | null;
  readonly until: number | null;
  readonly conditions: readonly Expression[];
  readonly variable: string;
  /** The claim is about the variable near 0. */
  readonly small: boolean;
}

/** Stands for a character of the claim. */
const BLANK = '\u25A1';
const COUNTS = ['one', 'two', 'three', 'four', 'five', 'six', 'seven', 'eight', 'nine', 'ten'];
const COUNT = String.raw`(\d{1,2}|${COUNTS.join('|')})`;
const SPACE = String.raw`(?:\\[,;:! ]|[\s~$])*`;
const FLOAT = String.raw`(?:\d+(?:\.\d+)?|\.\d+)`;
/** A number that is no exponent, coefficient, equation number or part of a longer word. */
const NUMBER = String.raw`(?<![\w^_{}/.\\])(?!\d+\))(?:(${FLOAT})\s*(?:\\times|\\cdot|×|\*|·)\s*10\s*\^\s*\{?\s*([-−]\s*\d+)\s*\}?|10\s*\^\s*\{?\s*([-−]\s*\d+)\s*\}?|(${FLOAT}(?:[eE][-+]?\d+)?))(?![\dA-Za-z^_/(]|\.\d)`;
const PERCENT = String.raw`\\?%|per\s?cent\b`;
const KEYWORD = String.raw`\berrors?\b|\baccura(?:te(?:ly)?|cy)\b|\bwithin\b|\bcorrect to\b|\bprecision\b|\bprecise to\b|\bdeviat\w+\b|\bbetter than\b|\b(?:good|holds|valid|agrees?) to\b`;
const GAP = String.raw`(?:(?!\b(?:for|when|if|where|on|digits?|decimals?|places?|figures?)\b)[^.;\n0-9${BLANK}]|\n(?!\s*\n)|${BLANK}+(?!${BLANK})){0,50}?`;
const PARTS = String.raw`(?:one|1)${SPACE}part${SPACE}in${SPACE}(?:10\s*\^\s*\{?\s*(\d+)\s*\}?|(\d[\d,]*))`;
const PLACES = String.raw`${COUNT}${SPACE}(?:(decimal(?:s|\s+(?:places|digits|figures))?\b)|(?:significant|sig\.?)\s+(?:decimal\s+)?(?:digits?|figures?)\b)`;
/** Quantities that are no error of a value: physical units, lengths of sums, bits. */
const OTHER_UNIT = String.raw`(?!${SPACE}(?:\^|°|\\circ|\\degree|(?:degrees?|rad(?:ians?)?|arcsec\w*|[mckn]m|m|km|s|ms|[kMG]?Hz|K|N|kg|g|V|mV|eV|dB|ulps?|bits?|digits?|decimals?|significant|terms?|orders?|steps?|iterations?|points?|times|parts?)\b))`;
const STATED = new RegExp(String.raw`(${KEYWORD})(${GAP})(?:${PARTS}|${PLACES}|${NUMBER}(?:${SPACE}(${PERCENT}))?${OTHER_UNIT})`, 'gi');

/** The first statement of an accuracy that is, or may be, about the claim. */
export function statementAround(around: Surroundings): Statement | null {
  const { text, claim, from, to } = around;
  const blankTo = Math.min(claim.end, to);
  const window = text.slice(from, Math.min(claim.start, to)) + BLANK.repeat(Math.max(0, blankTo - claim.start)) + text.slice(claim.end, to);
  for (const match of window.matchAll(STATED)) {
    const [whole, keyword = '', gap = ''] = match;
    const size = isUpperBound(gap) ? sizeOf(match) : null;
    if (!size) continue;
    const end = from + match.index + whole.trimEnd().length;
    const start = from + match.index + keyword.length + gap.length;
    const owner = ownership(around, { start: from + match.index, end });
    if (owner === 'other') continue;
    const beside = window.slice(Math.max(0, match.index - 40), match.index + whole.length + 25);
    return {
      ...size,
      place: { start, end },
      printed: text.slice(start, end),
      measure: size.measure === 'relative' || /\brelative\b/i.test(beside) ? 'relative' : 'absolute',
      interval: intervalNear(around.conditions, window.replaceAll(BLANK, ' '), around.variable, match.index + whole.length, around.small),
      doubt: owner === 'own' ? doubtIn(window.slice(0, match.index), window.slice(match.index)) : owner,
    };
  }
  return null;
}

/** The statement is denied, wished for or put as a condition rather than made. */
const NOT_STATED = /\b(?:not|n't|no longer|never|cannot|hardly|barely|fails?|failed|insufficient\w*|needs?|needed|requires?|required|must|should|would|want\w*|wish\w*|desired|suffices?|if an?|unless|until|to (?:reach|achieve|obtain|get|keep|attain|bring))\b/i;
const NOT_MORE = /\b(?:not|never|no|cannot|without|nowhere)\s+(?:\w+\s+)?(?:exceed\w*|more|larger|greater|bigger|above|worse)/gi;
/** Another formula is spoken of: one with more terms, or one that is only referred to. */
const OTHER_FORMULA = /\b(?:another|other|next|instead|higher|improved|more terms|adding|including|keeping|further|extra|additional)\b|\b(?:eqs?|equations?|formulas?|refs?|sections?|tables?)\b\.?[\s~]*(?:\(|\d|\\)|\\(?:eq)?ref\b|\\cite\b/i;

function doubtIn(before: string, behind: string): string | null {
  const words = `${before}${behind}`.replace(NOT_MORE, '');
  if (NOT_STATED.test(words)) return 'Whether this sentence states the accuracy or denies or demands it is not plain.';
  return OTHER_FORMULA.test(before.slice(lastSentence(before))) ? 'Whether the stated tolerance is about this formula is not plain.' : null;
}

/** `exceeds 1 %` states that the error is large. */
function isUpperBound(gap: string): boolean {
  const rest = gap.replace(NOT_MORE, '');
  return !/\b(?:exceed\w*|above|at least|more than|greater|larger|bigger|over|worse|beyond|not)\b|>|\\g(?:e|t|eq|eqslant)\b|≥/i.test(rest);
}

/** What the number, in whichever form it is written, allows. */
function sizeOf(match: RegExpMatchArray): Pick<Statement, 'tolerance' | 'refuting' | 'measure' | 'percent' | 'plain'> | null {
  const [, , gap = '', partPower, partNumber, count, decimals, mantissa, exponent, power, plain, unit] = match;
  const ten = (e: bigint): Rational => Q.power(Q.rational(10), e);
  if (partPower !== undefined || partNumber !== undefined) {
    const whole = partPower !== undefined ? (partPower.length > 3 ? null : ten(BigInt(partPower))) : Q.fromDecimal((partNumber ?? '').replace(/,/g, ''));
    if (!whole || Q.signOf(whole) <= 0) return null;
    const tolerance = Q.divide(Q.ONE, whole);
    return { tolerance, refuting: tolerance, measure: 'relative', percent: false, plain: false };
  }
  if (count !== undefined) {
    const index = COUNTS.indexOf(count.toLowerCase());
    const n = BigInt(index >= 0 ? index + 1 : count);
    // Some mean half a unit of the last digit, some a whole one; a unit of the n-th significant digit is between 10^-n and 10^(1-n) of the value.
    const tolerance = Q.divide(ten(-n), Q.rational(2));
    return decimals !== undefined ? { tolerance, refuting: ten(-n), measure: 'absolute', percent: false, plain: false } : { tolerance, refuting: ten(1n - n), measure: 'relative', percent: false, plain: false };
  }
  const integer = (digits: string): bigint => BigInt(digits.replace(/[\s−]/g, (c) => (c === '−' ? '-' : '')));
  const front = mantissa === undefined ? Q.ONE : Q.fromDecimal(mantissa);
  const shift = exponent ?? power;
  if (shift !== undefined && shift.length > 6) return null;
  const value = shift !== undefined ? front && Q.multiply(front, ten(integer(shift))) : Q.fromDecimal(plain ?? '');
  if (!value || Q.signOf(value) <= 0) return null;
  const percent = unit !== undefined;
  const tolerance = percent ? Q.divide(value, Q.rational(100)) : value;
  const loose = /\b(?:about|around|approximately|roughly|some|order(?: of)?)\b[^a-z]*$|[≈~]\s*\$?$|\\(?:approx|sim)\s*$/i.test(gap) ? (power !== undefined ? 10n : 2n) : 1n;
  return { tolerance, refuting: Q.multiply(tolerance, Q.rational(loose)), measure: percent ? 'relative' : 'absolute', percent, plain: true };
}

/** Words that begin a clause of its own. */
const CLAUSE = /;|\b(?:and|while|whereas|but|so|hence|therefore|thus|because|since|although|though)\b/i;
/** What an accuracy may be said of before the formula is named. */
const ABOUT_FORMULA = /\b(?:approximat\w+|formula\w*|expansions?|series|polynomials?|errors?|truncat\w+|we|one|it|this|that|these|you|which)\b/i;
/** Errors that no formula makes. */
const OTHER_ERROR = /\b(?:measur\w+|round(?:ing|-?off)|statistical|sampling|instrument\w*|sensor\w*|systematic|standard|calibration|experimental|reading|data|discreti[sz]ation|integration|quadrature|modell?ing)\s+$/i;
/** A new sentence begins behind it. */
export const SENTENCE = /\n\s*\n|[.!?][$)\]]*\s+(?=(?:\\[([]|\$)?\s*\\?[A-Z$\\(])|\\(?:item|(?:sub)*section|paragraph|chapter|caption|end)\b|\n\s*(?:[-*+]|#+|\d+\.)\s/g;

type Owner = 'own' | 'other' | string;

/** Whether a statement is about the claim, about its neighbour, or why that is open. */
function ownership({ text, claim, since, until }: Surroundings, statement: Span): Owner {
  const sameSentence = (from: number, to: number): boolean => text.slice(from, to).search(SENTENCE) < 0;
  if (OTHER_ERROR.test(text.slice(Math.max(0, statement.start - 40), statement.start))) return 'other';
  const several = (since !== null && sameSentence(since, claim.start)) || (until !== null && sameSentence(claim.end, until));
  if (several && /\brespectively\b|\brespective\b/i.test(text.slice(statement.end, statement.end + 80))) return 'Which of the stated tolerances belongs to which formula of this sentence is not plain.';
  if (statement.start < claim.start && statement.end > claim.end) return 'own';
  if (statement.start >= claim.end) {
    if (until === null || until < statement.end || !sameSentence(statement.end, until)) return 'own';
    if (!sameSentence(claim.end, statement.start)) return 'other';
    const parted = CLAUSE.test(text.slice(claim.end, statement.start));
    if (!parted) return 'own';
    return CLAUSE.test(text.slice(statement.end, until)) ? 'Which formula of this sentence the stated tolerance belongs to is not plain.' : 'other';
  }
  const between = text.slice(statement.end, claim.start);
  if (since !== null && since <= statement.start && sameSentence(since, claim.start)) return CLAUSE.test(text.slice(since, statement.start)) && !CLAUSE.test(between) ? 'own' : 'other';
  const head = text.slice(Math.max(0, statement.start - 120), statement.start);
  const begin = head.slice(lastSentence(head));
  const foreign = /\b(?:is|are|was|were|has|have|had|works?|measures?|gives?|needs?|wants?|requires?)\b/i.test(begin) && !ABOUT_FORMULA.test(begin);
  return foreign || CLAUSE.test(between) ? 'Whether the stated tolerance is about this formula is not plain.' : 'own';
}

/** Where the last sentence of the words begins. */
export function lastSentence(words: string): number {
  let begin = 0;
  for (const match of words.matchAll(SENTENCE)) if (!/\b(?:e\.g|i\.e|cf|[Ee]qs?|[Ff]igs?|[Rr]efs?|[Ss]ec|approx|resp)$/.test(words.slice(0, match.index))) begin = match.index + match[0].length;
  return begin;
}
