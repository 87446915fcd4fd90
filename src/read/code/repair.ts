/**
 * Grammars without a symbol table take `(x) - y` for a cast of -y to the type x. Where x is no type, the expression around it is read again
 * by operator precedence. Java (JLS 15.16) and C# (ECMA-334, 12.9.8) rule such casts out for all but keyword types; in C and C++ the file decides.
 */
import type { CodeLanguage } from './languages/index.ts';
import { parseByPrecedence } from './precedence/index.ts';
import { type CastCode, type Code, partsOf, pathTo, type Program, walkCode } from './syntax.ts';
import { declaredType } from './types.ts';

const EXPRESSION_KINDS: ReadonlySet<Code['kind']> = new Set(['literal', 'name', 'member', 'call', 'unary', 'binary', 'conditional', 'cast', 'index', 'group', 'named']);
const KEYWORD_TYPE = /^(?:unsigned|signed|struct|enum|const|void|auto|bool|char|object|string|dynamic)\b|_t$|[*&>\]]$/;

function isMistaken(cast: CastCode, text: string, language: CodeLanguage): boolean {
  if (text[cast.start] !== '(' || !/^[-+*&]/.test(text.slice(cast.operand.start, cast.operand.start + 1))) return false;
  const type = cast.type.trim();
  if (declaredType(type, language).kind !== 'unknown' || KEYWORD_TYPE.test(type)) return false;
  if (language.family === 'java' || language.family === 'csharp') return true;
  const name = /^[A-Za-z_]\w*$/.exec(type);
  return !name || !new RegExp(`\\b(?:typedef|using|typename|class|struct|enum|union)\\b[^;{}()]*\\b${type}\\b`).test(text);
}

/** A chain of operators longer than the depth to which concrete trees are copied. */
const isCutOff = (code: Code): boolean => code.kind === 'opaque' && code.parts.length === 0 && /^binary (?:expression|operator)$/.test(code.what);

/** The program with mistaken casts and cut-off chains read again; the program itself where there are none. */
export function repairCasts(program: Program, text: string, language: CodeLanguage): Program {
  const casts = ['c', 'cpp', 'java', 'csharp'].includes(language.family);
  const mistaken: Code[] = [];
  for (const code of walkCode(program.root)) {
    if (code.kind === 'cast' ? casts && isMistaken(code, text, language) : isCutOff(code)) mistaken.push(code);
  }
  let { root } = program;
  let done = -1;
  for (const cast of mistaken.slice(0, 200)) {
    if (cast.start < done) continue;
    const path = pathTo(root, cast.start, cast.end);
    let top = path.length - 1;
    while (top > 0 && EXPRESSION_KINDS.has(path[top - 1]?.kind ?? 'opaque')) top -= 1;
    const whole = path[top];
    if (!whole || !EXPRESSION_KINDS.has(whole.kind)) continue;
    const again = parseByPrecedence(text, language, whole.start, whole.end).root;
    done = whole.end;
    let next: Code = EXPRESSION_KINDS.has(again.kind) && again.start === whole.start && again.end === whole.end ? again : { kind: 'opaque', what: 'ambiguous cast', parts: partsOf(whole), start: whole.start, end: whole.end };
    for (let i = top; i > 0; i -= 1) {
      const [parent, child] = [path[i - 1], path[i]];
      if (parent && child) next = withChild(parent, child, next);
    }
    root = next;
  }
  return root === program.root ? program : { ...program, root };
}

function withChild(parent: Code, child: Code, next: Code): Code {
  const entries = Object.entries(parent).map(([key, value]: [string, unknown]) => [key, value === child ? next : Array.isArray(value) ? value.map((item: unknown) => (item === child ? next : item)) : value]);
  return Object.fromEntries(entries) as Code;
}
