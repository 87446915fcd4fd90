/** Compiling and running emitted code with what the machine has. */
import { execFileSync } from 'node:child_process';
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';

/** True where the command answers to its version flag. */
export function has(command: string, flag = '--version'): boolean {
  try {
    execFileSync(command, [flag], { stdio: 'ignore' });
    return true;
  } catch {
    return false;
  }
}

export function inFolder<T>(body: (folder: string) => T): T {
  const folder = mkdtempSync(join(tmpdir(), 'emitted-'));
  try {
    return body(folder);
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}

/** Standard output of a C (gcc) or C++ (g++) program. */
export function compileAndRun(compiler: 'gcc' | 'g++', source: string, flags: readonly string[]): string {
  return inFolder((folder) => {
    const [file, program] = [join(folder, compiler === 'gcc' ? 'program.c' : 'program.cpp'), join(folder, 'program')];
    writeFileSync(file, source);
    execFileSync(compiler, [file, '-o', program, '-Wall', ...flags, '-lm'], { stdio: ['ignore', 'ignore', 'inherit'] });
    return execFileSync(program, { encoding: 'utf8' }).trim();
  });
}
