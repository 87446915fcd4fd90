import { mkdir, mkdtemp, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { dirname, join, relative } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { sourceFiles } from '../../src/cli/files.ts';

describe('which files are checked', () => {
  let folder = '';
  beforeAll(async () => {
    folder = await mkdtemp(join(tmpdir(), 'files-'));
    const files: readonly (readonly [string, string])[] = [
      ['.git/info/exclude', 'private.tex\n'], ['.gitignore', '*.md\nbuild/\n'], ['a.tex', ''], ['private.tex', ''], ['notes.md', ''], ['build/b.tex', ''],
      ['docs/.gitignore', '!keep.md\nold.tex\n'], ['docs/keep.md', ''], ['docs/other.md', ''], ['docs/old.tex', ''], ['docs/new.tex', ''], ['node_modules/x/y.js', ''], ['picture.png', ''],
    ];
    for (const [name, text] of files) {
      await mkdir(dirname(join(folder, name)), { recursive: true });
      await writeFile(join(folder, name), text);
    }
  });
  afterAll(() => rm(folder, { recursive: true }));
  const found = async (...operands: readonly string[]): Promise<readonly string[]> => (await sourceFiles(operands.map((o) => join(folder, o)))).files.map((f) => relative(folder, f.path).replaceAll('\\', '/'));
  it('leaves out what Git leaves out, the deepest rule deciding', async () => {
    expect(await found('.')).toEqual(['a.tex', 'docs/keep.md', 'docs/new.tex']);
  });
  it('knows the rules of the folders above', async () => {
    expect(await found('docs')).toEqual(['docs/keep.md', 'docs/new.tex']);
  });
  it('takes what is named outright, once', async () => {
    expect(await found('build', 'notes.md', 'a.tex', 'a.tex')).toEqual(['build/b.tex', 'notes.md', 'a.tex']);
    expect((await sourceFiles([join(folder, 'nothing')])).missing).toHaveLength(1);
  });
});
