/** Text -> neutral program, by grammar where one is loaded, else by operator precedence. Bare expressions and statements are wrapped so that grammars accept them. */
import { lowerTree } from './grammar/lower.ts';
import type { GrammarStore } from './grammar/loader.ts';
import { capture, type Raw } from './grammar/raw.ts';
import type { CodeLanguage } from './languages/index.ts';
import { parseByPrecedence } from './precedence/index.ts';
import { repairCasts } from './repair.ts';
import type { Program } from './syntax.ts';

interface Wrap {
  readonly before: string;
  readonly after: string;
}
interface Wraps {
  readonly expression: Wrap;
  readonly statements?: Wrap;
  readonly members?: Wrap;
}

const C: Wraps = { expression: { before: 'double f_(void) { return (', after: '\n); }' }, statements: { before: 'double f_(void) {', after: '\n}' } };
const CLASS: Wraps = { expression: { before: 'class C_ { double f_() { return (', after: '\n); } }' }, statements: { before: 'class C_ { double f_() {', after: '\n} }' }, members: { before: 'class C_ {', after: '\n}' } };
const WRAPS: Readonly<Record<string, Wraps>> = {
  c: C,
  cpp: C,
  rust: { expression: { before: 'fn f_() { let _ = (', after: '\n); }' }, statements: { before: 'fn f_() {', after: '\n}' } },
  java: CLASS,
  csharp: CLASS,
  go: { expression: { before: 'package p\nfunc f_() float64 { return (', after: ') }' }, statements: { before: 'package p\nfunc f_() {', after: '\n}' } },
  python: { expression: { before: '(', after: '\n)' } },
  javascript: { expression: { before: '(', after: '\n)' }, members: { before: 'class C_ {', after: '\n}' } },
};

/** Texts up to this length are tried as an expression and as statements when they are no document. */
const LONGEST_FRAGMENT = 20_000;
/** In longer documents the bodies of functions away from the focus are not lowered. */
const LONGEST_WHOLE = 30_000;
const BODIES: ReadonlySet<string> = new Set(['compound_statement', 'statement_block', 'block', 'arrow_expression_clause']);

export interface Focus {
  readonly start: number;
  readonly end: number;
}

/** The program of a whole document. With a focus, distant function bodies of long documents may be left out. */
export function parseProgram(text: string, language: CodeLanguage, store: GrammarStore | null, focus: Focus | null): Program {
  const { grammar } = language;
  if (!grammar || !store?.ready(grammar)) return parseByPrecedence(text, language, 0, text.length);
  const wraps = WRAPS[language.family];
  const short = text.length <= LONGEST_FRAGMENT;
  if (wraps && short && !/[;{}]/.test(text) && language.family !== 'python' && language.family !== 'javascript') {
    const wrapped = parseWrapped(text, 0, text.length, wraps.expression, language, grammar, store);
    if (wrapped) return wrapped;
  }
  const tree = store.parseDocument(grammar, text);
  if (!tree) return parseByPrecedence(text, language, 0, text.length);
  if (tree.rootNode.hasError && short && wraps) {
    for (const wrap of [wraps.expression, wraps.statements, wraps.members]) {
      const wrapped = wrap ? parseWrapped(text, 0, text.length, wrap, language, grammar, store) : null;
      if (wrapped) return wrapped;
    }
  }
  const skip = focus && text.length > LONGEST_WHOLE ? BODIES : null;
  return repairCasts(lowerTree(capture(tree, 0, skip, focus), text), text, language);
}

/** The program of a piece of a document that is an expression by itself; offsets are those of the document. Null where it is none. */
export function parseFragment(text: string, start: number, end: number, language: CodeLanguage, store: GrammarStore | null): Program | null {
  const { grammar } = language;
  const wraps = WRAPS[language.family];
  if (grammar && wraps && store?.ready(grammar) && end - start <= LONGEST_FRAGMENT) {
    const wrapped = parseWrapped(text, start, end, wraps.expression, language, grammar, store);
    if (wrapped) return wrapped;
  }
  return parseByPrecedence(text, language, start, end);
}

function parseWrapped(text: string, start: number, end: number, wrap: Wrap, language: CodeLanguage, grammar: string, store: GrammarStore): Program | null {
  return store.withTree(grammar, wrap.before + text.slice(start, end) + wrap.after, (tree) => {
    if (tree.rootNode.hasError) return null;
    const inside = nodeAt(capture(tree, wrap.before.length - start), start - 1, end + wrap.after.search(/[)}]/) + 1);
    if (!inside) return null;
    const program = lowerTree(inside, text);
    const { root } = program;
    // The brackets of the wrap are not the document's.
    const own = root.kind === 'group' ? root.inner : { ...root, start: Math.max(root.start, start), end: Math.min(root.end, end) };
    return repairCasts({ comments: program.comments.filter((c) => c.start >= start && c.end <= end), root: own }, text, language);
  });
}

const BRACKETS: ReadonlySet<string> = new Set(['parenthesized_expression', 'tuple', 'tuple_expression', 'block', 'compound_statement', 'statement_block', 'class_body', 'declaration_list']);

/** The bracketed node that the wrap made, and not one that closes the wrap's bracket early. */
function nodeAt(root: Raw, start: number, end: number): Raw | null {
  let here: Raw | undefined = root;
  while (here) {
    if (here.start === start && here.end === end && BRACKETS.has(here.type)) return here;
    here = here.children.find((c) => c.start <= start && c.end > start);
  }
  return null;
}
