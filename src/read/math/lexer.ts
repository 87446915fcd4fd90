/**
 * Text -> tokens, with macros expanded. A token that comes from a macro's body carries the place of the whole use;
 * a token that comes from an argument carries its own place. Linear in the text plus what macros expand to.
 */
import { groupEnd, type Macro, type MacroTable } from './macros.ts';
import { MAX_DEPTH, MAX_TOKENS, TOO_DEEP, type Token, type TokenKind, Unreadable } from './tokens.ts';
import { FRACTIONS, SUBSCRIPTS, SUPERSCRIPTS, UNICODE_COMMANDS } from './unicode.ts';

export interface LexOptions {
  readonly notation: 'latex' | 'plain';
  readonly macros: MacroTable;
  /** The stretch of the text to read; all of it where absent. */
  readonly from?: number;
  readonly to?: number;
  /** Row ends (`\\\\`) outside `cases` are read past: continued rows of one formula. */
  readonly joinRows?: boolean;
}

/** A stretch of text to be read: the original (fixed null), a macro body, or an argument. */
interface Source {
  readonly text: string;
  readonly from: number;
  readonly to: number;
  /** Place of the use, for text that stands in a macro's body; null where offsets are those of the text itself. */
  readonly fixed: { readonly start: number; readonly end: number } | null;
  readonly args: readonly Source[];
  readonly depth: number;
}

const MAX_EXPANSION = 60;
/** Commands without meaning for the mathematics. */
const IGNORED = new Set('displaystyle textstyle scriptstyle scriptscriptstyle limits nolimits nonumber notag allowbreak nobreak break strut mathstrut null relax bf it rm sf tt cal scr centering hfill tiny small normalsize large Large smash boldmath protect phantomsection smallskip medskip bigskip noindent par left right middle big Big bigg Bigg bigl Bigl biggl Biggl bigr Bigr biggr Biggr bigm Bigm biggm Biggm begingroup endgroup bgroup egroup ensuremath qty'.split(' '));
/** Commands that are ignored together with one braced argument. */
const IGNORED_WITH_ARGUMENT = new Set('label tag color hspace vspace mspace phantom hphantom vphantom ref eqref cite footnote mathchoice colorbox setcounter kern mkern hskip mskip index gls href url'.split(' '));
/** Commands whose argument is simply read. */
const TRANSPARENT = new Set('mathord mathop mathbin mathrel mathopen mathclose mathpunct mathinner boxed fbox cancel bcancel xcancel underline overline mathnormal mathit'.split(' '));
const SPACES = new Set([',', ';', ':', '>', ' ', 'quad', 'qquad', 'enspace', 'enskip', 'thinspace', 'medspace', 'thickspace', 'hfil', 'hfill']);
const TEXTS = new Set('text textrm textnormal textit textbf textsf texttt mbox hbox intertext shortintertext emph textup'.split(' '));
const NAMES = new Set('operatorname mathrm mathsf mathtt operatornamewithlimits mathup symup upright'.split(' '));
const BEFORE_DELIMITER = new Set('left right middle big Big bigg Bigg bigl Bigl biggl Biggl bigr Bigr biggr Biggr bigm Bigm biggm Biggm'.split(' '));
const LAYOUT = new Set('split aligned alignedat gathered equation align alignat gather multline eqnarray flalign displaymath math IEEEeqnarray subequations dmath xalignat xxalignat empheq multlined'.split(' '));
const MARKS = ['...', '~=', '=~', '!=', '<=', '>=', ':=', '<<', '>>', '->', '=>', '==', '**', '\\\\'];
const LETTER = /\p{L}/u;

export function lex(text: string, options: LexOptions): Token[] {
  const out: Token[] = [];
  const from = options.from ?? 0;
  const to = options.to ?? text.length;
  const doubled = hasDoubledBackslashes(from === 0 && to === text.length ? text : text.slice(from, to));
  const quoted = isQuoted(text, from, to);
  /** Nesting of environments whose rows and cells mean something. */
  let tables = 0;
  lexSource({ text, from, to, fixed: null, args: [], depth: 0 });
  out.push({ kind: 'end', text: '', start: to, end: to, spaced: false });
  return out;

  function lexSource(source: Source): void {
    if (source.depth > MAX_DEPTH) throw new Unreadable(TOO_DEEP, source.fixed ?? { start: source.from, end: source.to });
    const body = source.text;
    let i = source.from;
    let spaced = false;
    const place = (start: number, end: number): { start: number; end: number } => source.fixed ?? { start, end };
    const push = (kind: TokenKind, value: string, start: number, end: number, extra?: { upright: boolean }): void => {
      if (out.length >= MAX_TOKENS) throw new Unreadable('This formula is too long to read; select a smaller piece.', place(start, end));
      out.push({ kind, text: value, ...place(start, end), spaced, ...extra });
      spaced = false;
    };
    const blank = (from: number): number => {
      let k = from;
      while (k < source.to && (body.charCodeAt(k) <= 32 || body.charCodeAt(k) === 160)) k += 1;
      return k;
    };
    /** The argument at `from`: a braced group without its braces, one command, or one character. */
    const argument = (from: number): Source | null => {
      const at = blank(from);
      if (at >= source.to) return null;
      let start = at;
      let end = at + 1;
      if (body.charAt(at) === '{') {
        const close = groupEnd(body, at);
        if (close < 0 || close >= source.to) throw new Unreadable('The brace opened here is never closed; close it with }.', place(at, at + 1));
        start = at + 1;
        end = close;
      } else if (body.charAt(at) === '#' && source.args.length > 0) {
        const given = source.args[Number(body.charAt(at + 1)) - 1];
        if (given) return given;
      } else if (body.charAt(at) === '\\') {
        const name = /^\\(?:[A-Za-z@]+|.)/s.exec(body.slice(at, at + 80));
        end = at + (name?.[0].length ?? 1);
      }
      return { text: body, from: start, to: end, fixed: source.fixed, args: source.args, depth: source.depth + 1 };
    };
    const after = (given: Source, from: number): number => {
      if (given.text !== body || given.from < from) return blank(from) + 2;
      return body.charAt(given.from - 1) === '{' && body.charAt(blank(from)) === '{' ? given.to + 1 : given.to;
    };
    const optional = (from: number): { content: string; end: number } | null => {
      const at = blank(from);
      if (body.charAt(at) !== '[') return null;
      let depth = 0;
      for (let k = at + 1; k < source.to; k += 1) {
        const c = body.charAt(k);
        if (c === '\\') k += 1;
        else if (c === '{') depth += 1;
        else if (c === '}') depth -= 1;
        else if (c === ']' && depth === 0) return { content: body.slice(at + 1, k), end: k + 1 };
      }
      return null;
    };

    while (i < source.to) {
      const c = body.charAt(i);
      const code = body.charCodeAt(i);
      if (code <= 32 || code === 160 || (code >= 0x2000 && code <= 0x200b) || code === 0xfeff) {
        spaced = true;
        i += 1;
      } else if (c === '%' && options.notation === 'latex') {
        const line = body.indexOf('\n', i);
        i = line < 0 ? source.to : Math.min(line + 1, source.to);
      } else if (c === '\\') {
        i = command(i);
      } else if (c === '#' && source.args.length > 0 && /[1-9]/.test(body.charAt(i + 1))) {
        const given = source.args[Number(body.charAt(i + 1)) - 1];
        if (given) lexSource(given);
        i += 2;
      } else if (c === '{' && body.charAt(i + 1) === '\\') {
        const bold = /^\{\\bf\s+([A-Za-z])\s*\}/.exec(body.slice(i, Math.min(source.to, i + 40)));
        const name = bold ?? fontSwitch(i);
        if (bold) boldLetter(bold, i);
        else if (name) push('word', name[1] ?? '', i, i + name[0].length, { upright: true });
        else push('open', c, i, i + 1);
        i += name?.[0].length ?? 1;
      } else if (c === '{' || c === '}') {
        push(c === '{' ? 'open' : 'close', c, i, i + 1);
        i += 1;
      } else if (code >= 48 && code <= 57) {
        push('digit', c, i, i + 1);
        i += 1;
      } else if (c === '$' || c === '&') {
        if (c === '&' && tables > 0) push('mark', '&', i, i + 1);
        i += 1;
      } else if (c === '>' && quoted && source.fixed === null && startsLine(body, i)) {
        spaced = true;
        i += 1;
      } else if (c === '~' && body.charAt(i + 1) !== '=' && options.notation === 'latex') {
        spaced = true;
        i += 1;
      } else {
        i = character(i);
      }
    }

    /** `{\bf r}` as `\mathbf{r}`. */
    function boldLetter(found: RegExpExecArray, at: number): void {
      const end = at + found[0].length;
      push('command', 'mathbf', at, end);
      push('open', '{', at, end);
      push('letter', found[1] ?? '', at, end);
      push('close', '}', at, end);
    }

    /** `{\rm d}`, `{\cal O}`: an old font switch around one name. */
    function fontSwitch(at: number): RegExpExecArray | null {
      return /^\{\\(?:rm|sf|it|cal|mathrm|tt)\s+([A-Za-z]+)\s*\}/.exec(body.slice(at, Math.min(source.to, at + 40)));
    }

    function character(at: number): number {
      const c = String.fromCodePoint(body.codePointAt(at) ?? 0);
      const width = c.length;
      if (c in SUPERSCRIPTS || c in SUBSCRIPTS) {
        const table = c in SUPERSCRIPTS ? SUPERSCRIPTS : SUBSCRIPTS;
        let value = '';
        let k = at;
        for (; k < source.to; k += 1) {
          const next = table[body.charAt(k)];
          if (next === undefined) break;
          value += next;
        }
        push(table === SUPERSCRIPTS ? 'super' : 'sub', value, at, k);
        return k;
      }
      const fraction = FRACTIONS[c];
      if (fraction) {
        for (const part of ['(', String(fraction[0]), '/', ...String(fraction[1]), ')']) push(/\d/.test(part) ? 'digit' : 'mark', part, at, at + width);
        return at + width;
      }
      const named = UNICODE_COMMANDS[c];
      if (named !== undefined) {
        if (named === 'bigO') push('word', 'O', at, at + width);
        else push('command', named, at, at + width);
        return at + width;
      }
      if (c === '−' || c === '–') {
        push('mark', '-', at, at + width);
        return at + width;
      }
      if (c === '’' || c === '′' || c === '″') {
        for (let k = c === '″' ? 2 : 1; k > 0; k -= 1) push('mark', "'", at, at + width);
        return at + width;
      }
      if (options.notation === 'plain') {
        const word = /^[A-Za-z](?:[A-Za-z0-9]|_(?=[A-Za-z0-9]))*/.exec(body.slice(at, Math.min(source.to, at + 100)));
        if (word && word[0].length > 1) {
          push('word', word[0], at, at + word[0].length);
          return at + word[0].length;
        }
      }
      if (LETTER.test(c)) {
        const plainForm = c.normalize('NFKC');
        if (/^[A-Za-z]$/.test(plainForm)) push('letter', plainForm, at, at + width);
        else if (UNICODE_COMMANDS[plainForm] !== undefined) push('command', UNICODE_COMMANDS[plainForm] ?? '', at, at + width);
        else push('letter', c, at, at + width);
        return at + width;
      }
      for (const mark of MARKS) {
        // `n!=x` sets a factorial equal; only with a space before it is it a sign of its own.
        if (mark === '!=' && options.notation === 'latex' && !spaced) continue;
        if (body.startsWith(mark, at) && at + mark.length <= source.to) {
          push('mark', mark, at, at + mark.length);
          return at + mark.length;
        }
      }
      push('mark', c, at, at + width);
      return at + width;
    }

    function command(at: number): number {
      const step = doubled && body.charAt(at + 1) === '\\' ? 2 : 1;
      const match = /^(?:[A-Za-z@]+|.)/s.exec(body.slice(at + step, Math.min(source.to, at + step + 80)));
      if (!match) throw new Unreadable('A backslash stands alone here; finish the command or remove it.', place(at, at + 1));
      const name = match[0];
      let end = at + step + name.length;
      const macro = options.macros.get(name);
      if (macro) return expand(macro, at, end);
      if (name === '\\') {
        // `\\\\[ ... \\\\]`: display delimiters out of a string literal.
        if (body.charAt(end) === ']' || (body.charAt(end) === '[' && body.indexOf('\\\\]', end) > 0)) return end + 1;
        const size = optional(end);
        if (size && /^\s*-?[\d.]+\s*(?:em|ex|pt|mm|cm|in|\\\w+)\s*$/.test(size.content)) end = size.end;
        if (body.charAt(end) === '*') end += 1;
        if (!(options.joinRows && tables === 0)) push('mark', '\\\\', at, end);
        spaced = true;
        return end;
      }
      if (name === 'begin' || name === 'end') return environment(name, at, end);
      if (name === '(' || name === ')' || name === '[' || name === ']') return end;
      if (SPACES.has(name) || name === '\n' || name === '\t') {
        push('space', name, at, end);
        spaced = true;
        return end;
      }
      if (name === '!' || name === '/' || name === '-' || name === '*') return end;
      if (name === '{' || name === '}') {
        push('mark', `\\${name}`, at, end);
        return end;
      }
      if (name === '|') {
        push('command', 'Vert', at, end);
        return end;
      }
      if ('%$&#_'.includes(name)) {
        push('mark', name, at, end);
        return end;
      }
      if (BEFORE_DELIMITER.has(name)) return delimiter(name, at, end);
      if (TEXTS.has(name) || NAMES.has(name)) return named(name, at, end);
      if (IGNORED.has(name)) {
        spaced = true;
        return end;
      }
      if (IGNORED_WITH_ARGUMENT.has(name)) {
        if (body.charAt(end) === '*') end += 1;
        if (name === 'kern' || name === 'mkern' || name === 'hskip' || name === 'mskip') {
          return end + (/^\s*-?[\d.]+\s*(?:em|ex|pt|mu|mm|cm)/.exec(body.slice(end, end + 30))?.[0].length ?? 0);
        }
        const given = argument(end);
        return given ? after(given, end) : end;
      }
      if (name === 'textcolor' || name === 'colorbox') {
        const colour = argument(optional(end)?.end ?? end);
        if (colour) end = after(colour, optional(end)?.end ?? end);
        return end;
      }
      if (name === 'stackrel' || name === 'overset' || name === 'underset') {
        const over = argument(end);
        if (!over) return end;
        const behind = after(over, end);
        const base = argument(behind);
        if (!base) return behind;
        lexSource(base);
        return after(base, behind);
      }
      if (name === 'underbrace' || name === 'overbrace') {
        const given = argument(end);
        if (!given) return end;
        const close = after(given, end);
        push('open', '{', at, end);
        lexSource(given);
        push('close', '}', close - 1, close);
        // The words at the brace are for people.
        const sign = blank(close);
        const words = body.charAt(sign) === '_' || body.charAt(sign) === '^' ? argument(sign + 1) : null;
        return words ? after(words, sign + 1) : close;
      }
      if (name === 'dd' || name === 'dif' || name === 'diff' || name === 'differential') {
        push('word', 'd', at, end, { upright: true });
        const given = body.charAt(blank(end)) === '{' ? argument(end) : null;
        if (!given) return end;
        lexSource(given);
        return after(given, end);
      }
      if (TRANSPARENT.has(name)) return end;
      push('command', name, at, end);
      return end;
    }

    /** `\begin{split}` and its like only lay out; `cases` and matrices stay as brackets of their own. */
    function environment(name: string, at: number, from: number): number {
      const given = argument(from);
      if (!given) throw new Unreadable(`\\${name} has no environment name yet; add it in braces.`, place(at, from));
      let end = after(given, from);
      const title = given.text.slice(given.from, given.to).trim().replace(/\*$/, '');
      if (LAYOUT.has(title)) {
        if (name === 'begin' && /at$/.test(title)) {
          const columns = argument(end);
          if (columns) end = after(columns, end);
        }
        if (name === 'begin') end = optional(end)?.end ?? end;
        spaced = true;
        return end;
      }
      if (name === 'begin' && title === 'array') {
        const columns = argument(optional(end)?.end ?? end);
        if (columns) end = after(columns, optional(end)?.end ?? end);
      }
      tables += name === 'begin' ? 1 : -1;
      push('mark', `${name}{${/cases$/.test(title) ? 'cases' : 'table'}}`, at, end);
      return end;
    }

    function delimiter(name: string, at: number, from: number): number {
      const k = blank(from);
      const next = body.charAt(k);
      const opens = name === 'left' || name.endsWith('l');
      const closes = name === 'right' || name.endsWith('r');
      if (next === '.' && (opens || closes)) {
        push('mark', opens ? 'left.' : 'right.', at, k + 1);
        return k + 1;
      }
      if (next === '|' || body.startsWith('\\vert', k)) {
        const end = next === '|' ? k + 1 : k + 5;
        push('mark', opens ? 'l|' : closes ? 'r|' : '|', at, end);
        return end;
      }
      spaced = false;
      return from;
    }

    function named(name: string, at: number, from: number): number {
      let start = from;
      if (body.charAt(start) === '*') start += 1;
      const given = argument(start);
      if (!given) throw new Unreadable(`The command \\${name} has no argument yet; add it in braces.`, place(at, from));
      const end = after(given, start);
      const content = given.text.slice(given.from, given.to);
      if (TEXTS.has(name)) {
        push('text', content, at, end);
        return end;
      }
      const letters = content.replace(/\\[,!;: ]|[\s{}~]/g, '');
      if (/^\p{L}[\p{L}0-9-]*$/u.test(letters)) push('word', letters, at, end, { upright: true });
      else lexSource(given);
      return end;
    }

    function expand(macro: Macro, at: number, from: number): number {
      if (source.depth >= MAX_EXPANSION) throw new Unreadable(`The macro \\${macro.name} calls itself; give it a definition that ends.`, place(at, from));
      const args: Source[] = [];
      let end = from;
      let wanted = macro.parameters;
      if (macro.optional !== undefined && wanted > 0) {
        const given = optional(end);
        const at0 = blank(end) + 1;
        args.push(
          given
            ? { text: body, from: at0, to: given.end - 1, fixed: source.fixed, args: source.args, depth: source.depth + 1 }
            : { text: macro.optional, from: 0, to: macro.optional.length, fixed: place(at, from), args: [], depth: source.depth + 1 },
        );
        if (given) end = given.end;
        wanted -= 1;
      }
      for (; wanted > 0; wanted -= 1) {
        const given = argument(end);
        if (!given) throw new Unreadable(`The macro \\${macro.name} needs ${macro.parameters} arguments; add the missing one.`, place(at, from));
        args.push(given);
        end = after(given, end);
      }
      lexSource({ text: macro.body, from: 0, to: macro.body.length, fixed: place(at, end), args, depth: source.depth + 1 });
      return end;
    }
  }
}

/** Text copied out of a string literal has every backslash twice: `\\frac{1}{2}`. Row ends (`\\` before anything but a letter) do not count. */
function hasDoubledBackslashes(text: string): boolean {
  return /\\\\[A-Za-z]/.test(text) && !/(?:^|[^\\])\\[A-Za-z]/.test(text);
}

/** A formula out of a Markdown quotation: every line of it starts with `>`, which no formula does by itself. */
function isQuoted(text: string, from: number, to: number): boolean {
  let start = from;
  while (start < to && /\s/.test(text.charAt(start))) start += 1;
  if (text.charAt(start) !== '>') return false;
  return text.slice(start, to).split('\n').every((line) => /^\s*(?:>|$)/.test(line));
}

/** Only blanks and quotation marks stand before it on its line. */
function startsLine(text: string, at: number): boolean {
  let k = at - 1;
  while (k >= 0 && (text.charAt(k) === ' ' || text.charAt(k) === '\t' || text.charAt(k) === '>')) k -= 1;
  return k < 0 || text.charAt(k) === '\n';
}
