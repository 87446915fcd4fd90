/** Lines that inserted code needs at the head of its file (`#include <math.h>`, `import numpy as np`): what is missing, and where it goes. */
import type { TextEdit } from '../types.ts';

const IMPORT_LINE = /^(?:#\s*include\b|import\b|from\s+\S+\s+import\b|using\b|use\b)/;
/** What must stay above every import. */
const HEAD_LINE = /^(?:#!|#.*coding|package\b|module\b|'use strict'|"use strict"|#\s*pragma\b|\/\/|\/\*|\s*\*|#(?!\s*(?:include|define|if))|$)/;

export function importEdits(text: string, imports: readonly string[]): readonly TextEdit[] {
  const lines = text.split('\n');
  const have = new Set(lines.map((line) => line.trim()));
  const missing = imports.filter((line) => !have.has(line.trim()));
  if (missing.length === 0) return [];
  const newline = text.includes('\r\n') ? '\r\n' : '\n';
  const at = offsetOfLine(lines, placeFor(lines));
  return [{ start: at, end: at, text: missing.map((line) => `${line}${newline}`).join('') }];
}

/** Below the last import at the head of the file, else below what every file has first. */
function placeFor(lines: readonly string[]): number {
  let last = -1;
  for (const [index, line] of lines.entries()) {
    if (IMPORT_LINE.test(line)) last = index;
    // Past the first definition an import belongs to something else.
    else if (last >= 0 && /^\S.*[({:]\s*$/.test(line)) break;
  }
  if (last >= 0) return last + 1;
  let index = 0;
  // A Python file's own description is a string, not a comment.
  if (/^("""|''')/.test(lines[0] ?? '')) {
    const quote = (lines[0] ?? '').slice(0, 3);
    index = (lines[0] ?? '').indexOf(quote, 3) > 0 ? 1 : lines.findIndex((line, i) => i > 0 && line.includes(quote)) + 1;
  }
  while (index < lines.length && HEAD_LINE.test(lines[index] ?? '')) index += 1;
  return index;
}

const offsetOfLine = (lines: readonly string[], index: number): number => lines.slice(0, index).reduce((total, line) => total + line.length + 1, 0);
