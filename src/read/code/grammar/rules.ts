/** What rules of lowering share: their shape, and ways to look at a concrete node. */
import type { Code } from '../syntax.ts';
import type { Raw } from './raw.ts';

/** What a rule gets: the source text and the way back into lowering. */
export interface Lowering {
  readonly text: string;
  readonly lower: (raw: Raw) => Code;
  readonly textOf: (raw: Raw) => string;
}
export type Rule = (raw: Raw, at: Lowering) => Code;

export const isComment = (type: string): boolean => type.endsWith('comment') || type === 'html_comment';

export const child = (raw: Raw, field: string): Raw | undefined => raw.children.find((c) => c.field === field);
export const childrenOf = (raw: Raw, field: string): readonly Raw[] => raw.children.filter((c) => c.field === field);
export const namedChildren = (raw: Raw): readonly Raw[] => raw.children.filter((c) => c.named && !isComment(c.type));
export const place = (raw: Raw): { readonly start: number; readonly end: number } => ({ start: raw.start, end: raw.end });

export const opaque = (raw: Raw, at: Lowering, what: string = raw.type.replaceAll('_', ' ')): Code => ({
  kind: 'opaque',
  what,
  parts: namedChildren(raw).map(at.lower),
  ...place(raw),
});
