/** Families of languages that share a part of their grammar. */
import type { CodeLanguage } from '../languages/index.ts';

const C_KIND: ReadonlySet<string> = new Set(['glsl', 'hlsl', 'c', 'cpp', 'csharp', 'java']);
const VALUED_CHOICES: ReadonlySet<string> = new Set(['kotlin', 'r', 'julia', 'swift', 'rust']);

/** Declarations begin with a type, `(float)x` is a cast, loops have three parts. */
export const isCKind = (language: CodeLanguage): boolean => C_KIND.has(language.family);

/** `if` opens an expression. */
export const hasValuedChoices = (language: CodeLanguage): boolean => VALUED_CHOICES.has(language.family);
