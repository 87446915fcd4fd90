/** Text into Markdown that shows exactly that text. The editor's own `appendText` turns spaces into non-breaking ones, which then get copied. */
const MARKUP = /[\\`*_{}[\]()#+\-.!|<>~&$:@]/g;

export const escapeMarkdown = (text: string): string => text.replace(MARKUP, (c) => (c === '<' ? '&lt;' : c === '>' ? '&gt;' : c === '&' ? '&amp;' : `\\${c}`)).replace(/\s*\r?\n\s*/g, ' ');

/** A command link. Arguments are JSON in the query. */
export function commandLink(label: string, command: string, args: readonly unknown[] = [], title = ''): string {
  const query = args.length === 0 ? '' : `?${encodeURIComponent(JSON.stringify(args)).replace(/[()]/g, (c) => `%${c.charCodeAt(0).toString(16)}`)}`;
  return `[${escapeMarkdown(label)}](command:${command}${query}${title ? ` "${title.replaceAll('"', "'")}"` : ''})`;
}

const tableRow = (cells: readonly string[]): string => `| ${cells.join(' | ')} |`;
export const table = (head: readonly string[], rows: readonly (readonly string[])[]): string =>
  [tableRow(head), tableRow(head.map(() => ':--')), ...rows.map(tableRow)].join('\n');
