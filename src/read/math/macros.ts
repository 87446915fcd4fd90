/** Macro definitions of a document: \newcommand, \renewcommand, \providecommand, \def, \DeclareMathOperator, \let. Definitions are read, never run. */

export interface Macro {
  /** Without backslash. */
  readonly name: string;
  /** Number of arguments, 0 to 9. */
  readonly parameters: number;
  /** Default of the first argument, which is then optional. */
  readonly optional?: string;
  readonly body: string;
}
export type MacroTable = ReadonlyMap<string, Macro>;
export const NO_MACROS: MacroTable = new Map();

const DEFINITION = /\\(?:(?:re|provide)?newcommand|providecommand|renewcommand|DeclareRobustCommand|DeclareMathOperator|def|gdef|let|DeclarePairedDelimiter)(?![A-Za-z])\*?/g;

/** End of the braced group that opens at `open`, exclusive of the brace; -1 where it is not closed. Escaped braces do not count. */
export function groupEnd(text: string, open: number): number {
  let depth = 0;
  for (let i = open; i < text.length; i += 1) {
    const c = text.charCodeAt(i);
    if (c === 92) i += 1;
    else if (c === 37) {
      const line = text.indexOf('\n', i);
      if (line < 0) return -1;
      i = line;
    } else if (c === 123) depth += 1;
    else if (c === 125) {
      depth -= 1;
      if (depth === 0) return i;
      if (depth < 0) return -1;
    }
  }
  return -1;
}

function skipSpace(text: string, from: number): number {
  let i = from;
  while (i < text.length && /\s/.test(text.charAt(i))) i += 1;
  return i;
}

function commandName(text: string, from: number): { name: string; end: number } | null {
  const match = /^\s*(?:\{\s*\\([A-Za-z@]+|[^A-Za-z\s])\s*\}|\\([A-Za-z@]+|[^A-Za-z\s]))/.exec(text.slice(from, from + 200));
  const name = match?.[1] ?? match?.[2];
  return match && name !== undefined ? { name, end: from + match[0].length } : null;
}

/** One argument at `from`: a braced group or a single token. */
function argumentAt(text: string, from: number): { body: string; end: number } | null {
  const at = skipSpace(text, from);
  if (text.charAt(at) === '{') {
    const end = groupEnd(text, at);
    return end < 0 ? null : { body: text.slice(at + 1, end), end: end + 1 };
  }
  const match = /^(?:\\[A-Za-z@]+|\\.|.)/s.exec(text.slice(at, at + 100));
  return match ? { body: match[0], end: at + match[0].length } : null;
}

/** Macros of several files, later ones winning. */
export const macrosOf = (texts: readonly string[]): MacroTable => texts.reduce<MacroTable>((known, text) => collectMacros(text, known), NO_MACROS);

/** Every macro the text defines; later definitions replace earlier ones. `inherited` are known already (and are what \let may copy). Linear in the text. */
export function collectMacros(text: string, inherited: MacroTable = NO_MACROS): MacroTable {
  if (!/\\(?:def|gdef|let|Declare|(?:re|provide)?newcommand|providecommand|renewcommand)/.test(text)) return inherited;
  const table = new Map(inherited);
  DEFINITION.lastIndex = 0;
  /** Bodies that never end; a half-typed document may hold some, and each costs a look to its end. */
  let unfinished = 0;
  for (let found = DEFINITION.exec(text); found && unfinished < 50; found = DEFINITION.exec(text)) {
    const kind = found[0].replace(/[\\*]/g, '');
    const named = commandName(text, DEFINITION.lastIndex);
    if (!named) continue;
    let at = named.end;
    if (kind === 'let') {
      const target = /^\s*=?\s*(\\[A-Za-z@]+|\\.|\S)/.exec(text.slice(at, at + 100));
      const meaning = target?.[1];
      if (target && meaning !== undefined) {
        const copied = table.get(meaning.replace(/^\\/, ''));
        table.set(named.name, copied && meaning.startsWith('\\') ? { ...copied, name: named.name } : { name: named.name, parameters: 0, body: meaning });
        DEFINITION.lastIndex = at + target[0].length;
      }
      continue;
    }
    if (kind === 'DeclarePairedDelimiter') {
      const left = argumentAt(text, at);
      const right = left && argumentAt(text, left.end);
      if (left && right) table.set(named.name, { name: named.name, parameters: 1, body: `\\left${left.body} #1\\right${right.body}` });
      continue;
    }
    let parameters = 0;
    let optional: string | undefined;
    if (kind === 'def' || kind === 'gdef') {
      const pattern = /^\s*((?:#[1-9]\s*)*)/.exec(text.slice(at, at + 100));
      parameters = (pattern?.[1]?.match(/#/g) ?? []).length;
      at += pattern?.[0].length ?? 0;
      if (text.charAt(skipSpace(text, at)) !== '{') continue;
    } else if (kind !== 'DeclareMathOperator') {
      const count = /^\s*\[\s*([0-9])\s*\]/.exec(text.slice(at, at + 50));
      if (count) {
        parameters = Number(count[1]);
        at += count[0].length;
        const fallback = /^\s*\[([^\]]*)\]/.exec(text.slice(at, at + 200));
        if (fallback) {
          optional = fallback[1] ?? '';
          at += fallback[0].length;
        }
      }
    }
    const body = argumentAt(text, at);
    if (!body) {
      unfinished += 1;
      continue;
    }
    DEFINITION.lastIndex = body.end;
    table.set(named.name, {
      name: named.name,
      parameters,
      ...(optional === undefined ? {} : { optional }),
      body: kind === 'DeclareMathOperator' ? `\\operatorname{${body.body}}` : body.body,
    });
  }
  return table;
}
