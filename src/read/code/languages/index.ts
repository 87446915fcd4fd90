/** The tables by VS Code language identifier. */
import { languageOf } from '../../languages.ts';
import { c } from './c.ts';
import { cpp } from './cpp.ts';
import { csharp } from './csharp.ts';
import { fortran } from './fortran.ts';
import { go } from './go.ts';
import { java } from './java.ts';
import { javascript } from './javascript.ts';
import { julia } from './julia.ts';
import { kotlin } from './kotlin.ts';
import type { CodeLanguage } from './language.ts';
import { matlab } from './matlab.ts';
import { python } from './python.ts';
import { r } from './r.ts';
import { rust } from './rust.ts';
import { glsl, hlsl } from './shaders.ts';
import { swift } from './swift.ts';

export * from './language.ts';

const typescript: CodeLanguage = { ...javascript, grammar: 'tree-sitter-typescript' };
const tsx: CodeLanguage = { ...javascript, grammar: 'tree-sitter-tsx' };

const BY_ID: Readonly<Record<string, CodeLanguage>> = { c, cpp, csharp, fortran, go, java, javascript, julia, kotlin, matlab, python, r, rust, glsl, hlsl, swift, typescript, typescriptreact: tsx, javascriptreact: javascript };

/** The table of a language identifier, alias or family; null where there is none. */
export function codeLanguage(id: string): CodeLanguage | null {
  if (Object.hasOwn(BY_ID, id)) return BY_ID[id] ?? null;
  const known = languageOf(id).id;
  return Object.hasOwn(BY_ID, known) ? (BY_ID[known] ?? null) : null;
}
export const CODE_LANGUAGES: readonly string[] = Object.keys(BY_ID);
