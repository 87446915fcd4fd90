/** The habits of a document, so that what is inserted looks like the author's own. */
import { languageOf } from './languages.ts';
import { type MacroTable, NO_MACROS } from './math/macros.ts';

export interface DocumentStyle {
  /** The O of order terms, ready for a bracket: `O`, `\mathcal{O}`, `\order`, a macro of the author's. */
  readonly order: string;
  /** The O takes its argument in braces (`\order{x^3}`) instead of a bracket. */
  readonly orderTakesGroup: boolean;
  /** Whether truncated expansions end in an order term after an equality sign, or stand behind an approximation sign. */
  readonly remainder: 'order' | 'approximation' | 'dots';
  readonly approximation: '\\approx' | '\\simeq' | '\\sim' | '≈';
  readonly fraction: '\\frac' | '\\tfrac' | '\\dfrac';
  /** `\frac{1}{2}x` or `\frac{x}{2}` or `x/2`. */
  readonly coefficient: 'before' | 'over' | 'slash';
  readonly logarithm: '\\ln' | '\\log';
  readonly dots: '\\cdots' | '\\dots' | '\\ldots' | '...';
  /** `2!` kept where coefficients are printed as factorials. */
  readonly factorials: boolean;
  /** `\,` between a coefficient and what follows. */
  readonly thinSpaces: boolean;
  readonly epsilon: '\\epsilon' | '\\varepsilon';
  /** `\left( \right)` around tall arguments. */
  readonly leftRight: boolean;
  /** Expansions run from high to low powers. */
  readonly descending: boolean;
}

const count = (text: string, pattern: RegExp): number => (text.match(pattern) ?? []).length;

function most<T extends string>(choices: readonly (readonly [T, number])[]): T {
  let [best, seen] = choices[0] as readonly [T, number];
  for (const [choice, times] of choices) if (times > seen) [best, seen] = [choice, times];
  return best;
}

/** Habits of a text by counting; where nothing shows, what is most usual in print. Linear. */
export function documentStyle(text: string, options: { readonly language?: string; readonly macros?: MacroTable } = {}): DocumentStyle {
  const macros = options.macros ?? NO_MACROS;
  const plain = options.language !== undefined && languageOf(options.language).reader === 'plain';
  const [order, orderTakesGroup] = orderHabit(text, macros);
  const approximations: readonly (readonly [DocumentStyle['approximation'], number])[] = [
    ['\\approx', count(text, /\\approx(?![A-Za-z])/g)],
    ['\\simeq', count(text, /\\simeq(?![A-Za-z])/g)],
    ['\\sim', count(text, /\\sim(?![A-Za-z])/g) / 3],
    ['≈', count(text, /≈/g)],
  ];
  const signs = approximations.reduce((total, [, times]) => total + times, 0);
  const orders = count(text, /(?:\\mathcal\s*\{?O\}?|\\order|(?<![A-Za-z\\])O)\s*(?:\\left)?\s*[({]/g) + userOrders(text, macros);
  const dotted = count(text, /\+\s*\\?[a-z]*dots|\+\s*\.\.\.|-\s*\\[a-z]*dots/g);
  return {
    order,
    orderTakesGroup,
    remainder: orders >= signs && orders >= dotted ? 'order' : signs >= dotted ? 'approximation' : 'dots',
    approximation: plain ? '≈' : most(approximations),
    fraction: most<DocumentStyle['fraction']>([
      ['\\frac', count(text, /\\frac(?![A-Za-z])/g)],
      ['\\tfrac', count(text, /\\tfrac(?![A-Za-z])/g)],
      ['\\dfrac', count(text, /\\dfrac(?![A-Za-z])/g)],
    ]),
    coefficient: most<DocumentStyle['coefficient']>([
      ['over', count(text, /\\[td]?frac\s*\{[^{}]*[A-Za-z][^{}]*\}\s*\{\s*\d+!?\s*\}/g)],
      ['before', count(text, /\\[td]?frac\s*(?:\{\s*\d+\s*\}\s*\{\s*\d+!?\s*\}|\d\s*\d)\s*\\?[,!]?\s*(?:[a-zA-Z(]|\\[a-z])/g)],
      ['slash', plain ? 1 : count(text, /[a-z0-9}]\s*\/\s*\d/g) / 2],
    ]),
    logarithm: most<DocumentStyle['logarithm']>([
      ['\\ln', count(text, /\\ln(?![A-Za-z])/g)],
      ['\\log', count(text, /\\log(?![A-Za-z_])/g)],
    ]),
    dots: most<DocumentStyle['dots']>([
      ['\\cdots', count(text, /[+-]\s*\\(?:cdots|dotsb)(?![A-Za-z])/g)],
      ['\\dots', count(text, /[+-]\s*\\dots(?![A-Za-z])/g)],
      ['\\ldots', count(text, /[+-]\s*\\ldots(?![A-Za-z])/g)],
      ['...', count(text, /[+-]\s*(?:\.\.\.|…)/g)],
    ]),
    factorials: count(text, /\{\s*[2-9]!\s*\}|\/\s*[2-9]!/g) > 1,
    thinSpaces: count(text, /\}\\,\s*[a-z\\]/g) > 2,
    epsilon: most<DocumentStyle['epsilon']>([
      ['\\epsilon', count(text, /\\epsilon(?![A-Za-z])/g)],
      ['\\varepsilon', count(text, /\\varepsilon(?![A-Za-z])/g)],
    ]),
    leftRight: count(text, /\\left\s*\(/g) > 0 || count(text, /\\frac/g) === 0,
    descending: false,
  };
}

/** Macros of the author's whose body is an O: name -> takes an argument. */
export function orderMacros(macros: MacroTable): readonly (readonly [string, boolean])[] {
  return [...macros.values()]
    .filter((m) => /^\s*(?:\\ensuremath\s*)?\{?\s*(?:\\mathcal\s*\{?\s*O\s*\}?|\\mathscr\s*\{?O\}?|\\mathrm\s*\{?O\}?|\\operatorname\s*\{O\}|O|\{\\cal O\})\s*\}?\s*(?:\\!|\\mathopen\{\}|\\left|\\[bB]igg?l?)*\s*(?:[([{]\s*#1|$)/.test(m.body))
    .map((m) => [`\\${m.name}`, m.parameters > 0] as const);
}
const escaped = (name: string): string => name.replace(/\\/g, '\\\\');
const userOrders = (text: string, macros: MacroTable): number => orderMacros(macros).reduce((total, [name]) => total + count(text, new RegExp(`${escaped(name)}(?![A-Za-z])`, 'g')), 0);

function orderHabit(text: string, macros: MacroTable): readonly [string, boolean] {
  const own = orderMacros(macros).map(([name, group]) => ({ name, group, times: count(text, new RegExp(`${escaped(name)}(?![A-Za-z])(?!\\s*\\}?\\s*(?:\\[\\d\\])?\\s*\\{)`, 'g')) + count(text, new RegExp(`${escaped(name)}\\s*\\{(?!\\s*\\\\(?:mathcal|left|ensuremath))`, 'g')) }));
  const usual = [
    { name: 'O', group: false, times: count(text, /(?<![A-Za-z\\{])O\s*(?:\\left)?\s*\(/g) },
    { name: '\\mathcal{O}', group: false, times: count(text, /\\mathcal\s*(?:\{O\}|\s+O)\s*(?:\\!|\\left|\\[bB]igg?l?)*\s*\(/g) },
    { name: '\\order', group: true, times: macros.has('order') ? 0 : count(text, /\\order\s*\{/g) },
  ];
  const defined = own.find((o) => o.times > 0);
  let best = usual[0] as { name: string; group: boolean; times: number };
  for (const habit of [...usual, ...own]) if (habit.times > best.times) best = habit;
  return best.times === 0 && defined ? [defined.name, defined.group] : [best.name, best.group];
}
