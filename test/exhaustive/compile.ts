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

/** Standard output of a C program of several sources, each compiled with its own flags. */
export function runUnits(units: readonly { readonly source: string; readonly flags: readonly string[] }[]): string {
  return inFolder((folder) => {
    const objects = units.map(({ source, flags }, k) => {
      const [file, object] = [join(folder, `unit${k}.c`), join(folder, `unit${k}.o`)];
      writeFileSync(file, source);
      execFileSync('gcc', ['-c', file, '-o', object, ...flags], { stdio: ['ignore', 'ignore', 'inherit'] });
      return object;
    });
    const program = join(folder, 'program');
    execFileSync('gcc', [...objects, '-o', program, '-lm'], { stdio: ['ignore', 'ignore', 'inherit'] });
    return execFileSync(program, { encoding: 'utf8' }).trim();
  });
}

/** Whether the machine multiplies and adds with one rounding in hardware. */
export function hasFma(): boolean {
  try {
    return / __FMA__ /.test(execFileSync('gcc', ['-march=native', '-dM', '-E', '-x', 'c', '/dev/null'], { encoding: 'utf8' }));
  } catch {
    return false;
  }
}
