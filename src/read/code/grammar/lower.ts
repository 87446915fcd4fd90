/** Concrete syntax trees of all grammars -> neutral code. A node type that no rule names becomes opaque, with what is inside still lowered. */
import type { CommentCode, Program } from '../syntax.ts';
import { EXPRESSIONS } from './expressions.ts';
import type { Raw } from './raw.ts';
import { isComment, type Lowering, namedChildren, opaque, place } from './rules.ts';
import { STATEMENTS } from './statements.ts';

export function lowerTree(root: Raw, text: string): Program {
  const at: Lowering = {
    text,
    textOf: (raw) => text.slice(Math.max(0, raw.start), Math.max(0, raw.end)),
    lower: (raw) => {
      const rule = EXPRESSIONS[raw.type] ?? STATEMENTS[raw.type];
      return rule ? rule(raw, at) : opaque(raw, at);
    },
  };
  return { root: at.lower(root), comments: commentsIn(root, at) };
}

const DOC = /^(?:\/\*[*!](?!\/)|\/\/[/!](?!\/)|##)/;

/** All comments, and the strings that stand first in a Python module, class or function. */
function commentsIn(root: Raw, at: Lowering): readonly CommentCode[] {
  const found: CommentCode[] = [];
  const stack: Raw[] = [root];
  for (let raw = stack.pop(); raw; raw = stack.pop()) {
    if (isComment(raw.type)) {
      const text = at.textOf(raw);
      const end = text.endsWith('\n') ? raw.end - 1 : raw.end;
      found.push({ start: raw.start, end, doc: DOC.test(text) });
      continue;
    }
    if (raw.type === 'module' || raw.type === 'block') {
      const first = namedChildren(raw)[0];
      const inner = first?.type === 'expression_statement' ? namedChildren(first) : [];
      const [only] = inner;
      if (only && inner.length === 1 && only.type === 'string') found.push({ ...place(only), doc: true });
    }
    for (let i = raw.children.length - 1; i >= 0; i -= 1) {
      const part = raw.children[i];
      if (part) stack.push(part);
    }
  }
  return found.sort((a, b) => a.start - b.start);
}
