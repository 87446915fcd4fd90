/** The display environment around a place in LaTeX or Markdown, and where its rows end. */

export interface Display {
  /** Rows are lined up at `&`. */
  readonly aligned: boolean;
  readonly indent: string;
  readonly newline: string;
  /** Where the row that holds the offset ends: before its row break, or before the end of the environment. */
  rowEnd(offset: number): number;
}

const ALIGNED = /^(align|aligned|alignat|alignedat|split|eqnarray|flalign|array)\*?$/;
const LONGEST = 20_000;

/** Null outside any environment. Environments are matched by name, innermost first; comments are not looked into. */
export function displayAround(text: string, offset: number): Display | null {
  const from = Math.max(0, offset - LONGEST);
  const before = text.slice(from, offset);
  const stack: { readonly name: string; readonly at: number }[] = [];
  for (const match of before.matchAll(/\\(begin|end)\{([A-Za-z]+\*?)\}/g)) {
    if (match[1] === 'begin') stack.push({ name: match[2] ?? '', at: from + match.index + match[0].length });
    else if (stack.at(-1)?.name === match[2]) stack.pop();
  }
  const inner = stack.at(-1);
  if (!inner || inner.name === 'document') return null;
  const close = text.indexOf(`\\end{${inner.name}}`, offset);
  if (close < 0 || close - offset > LONGEST) return null;
  const lineStart = text.lastIndexOf('\n', offset - 1) + 1;
  const indent = lineStart > inner.at ? (/^[ \t]*/.exec(text.slice(lineStart, offset))?.[0] ?? '') : '  ';
  return {
    aligned: ALIGNED.test(inner.name),
    indent,
    newline: text.includes('\r\n') ? '\r\n' : '\n',
    rowEnd: (at) => {
      const end = rowBreak(text, at, close);
      return end - (/(?:\s|\\(?:label|nonumber|notag|tag)(?:\{[^{}]*\})?)*$/.exec(text.slice(at, end))?.[0].length ?? 0);
    },
  };
}

/** The next `\\` outside braces and inner environments, else the end of the environment. */
function rowBreak(text: string, from: number, close: number): number {
  let depth = 0;
  for (let i = from; i < close; i += 1) {
    const character = text[i];
    if (character === '{') depth += 1;
    else if (character === '}') depth -= 1;
    else if (character === '\\') {
      if (text.startsWith('\\begin{', i)) depth += 1;
      else if (text.startsWith('\\end{', i)) depth -= 1;
      else if (text[i + 1] === '\\' && depth <= 0) return i;
      i += 1;
    }
  }
  return close;
}
