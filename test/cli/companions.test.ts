import { mkdir, mkdtemp, rm, symlink, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { dirname, join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { check } from '../../src/check/index.ts';
import { companionsOf, missingFiles, referencedFiles } from '../../src/companions.ts';
import { CompanionReader } from '../../src/cli/companions.ts';
import { budget } from '../../src/outcome.ts';
import type { CompanionFile } from '../../src/protocol.ts';

describe('references', () => {
  it.each([
    ['\\input{defs}', ['defs.tex']],
    ['\\input defs ', ['defs.tex']],
    ['\\include{parts/one} \\subfile{./two.tex}', ['parts/one.tex', 'two.tex']],
    ['\\usepackage[a,b]{amsmath, local}', ['amsmath.sty', 'local.sty']],
    ['\\import{chapters}{one} \\subimport{../x/}{y}', ['chapters/one.tex', '../x/y.tex']],
    ['% !TEX root = ../main.tex', ['../main.tex']],
    ['%!TeX root=main', ['main.tex']],
    ['%%% TeX-master: "thesis"', ['thesis.tex']],
    ['\\documentclass[../main.tex]{subfiles}', ['../main.tex']],
    ['\\documentclass[12pt]{notes}', ['notes.cls']],
    ['% \\input{old}', []],
    ['100\\% \\input{new}', ['new.tex']],
    ['\\input{/etc/passwd} \\input{~/x} \\input{|ls} \\input{\\jobname}', []],
  ])('%s', (text, names) => {
    expect(referencedFiles(text, 'latex')).toEqual(names);
    expect(referencedFiles(text, 'python')).toEqual([]);
  });
  it('names half typed and very long texts take no time', () => {
    expect(referencedFiles('\\input{'.repeat(20_000), 'latex')).toEqual([]);
    expect(referencedFiles('%'.repeat(200_000), 'latex')).toEqual([]);
    expect(referencedFiles(`\\usepackage[${'['.repeat(100_000)}`, 'latex')).toEqual([]);
  });
});

const MAIN = '\\usepackage{local}\n\\input{defs}\n\\include{parts/one}\n';
const PROJECT: Readonly<Record<string, string>> = {
  '/p/main.tex': MAIN,
  '/p/local.sty': '\\newcommand{\\half}{\\tfrac12}\n\\newcommand{\\bigO}[1]{\\mathcal{O}\\left(#1\\right)}\n\\def\\third#1{\\frac{#1}{3}}\n',
  '/p/defs.tex': '\\DeclareMathOperator{\\sincard}{sinc}\n\\newcommand{\\eps}[1][2]{\\epsilon^{#1}}\nLet $g(x) = \\sin x/x$ and $$ k(t) = \\frac{e^t - 1}{t}. $$ \\input{main}',
  '/p/parts/one.tex': '% !TEX root = ../main.tex\n',
};
const gather = (path: string): Promise<readonly CompanionFile[]> => companionsOf({ path, text: PROJECT[path] ?? '', language: 'latex' }, (name) => Promise.resolve(PROJECT[name] ?? null));

describe('gathering', () => {
  it('follows the root and what it loads, circles too', async () => {
    expect((await gather('/p/parts/one.tex')).map((f) => f.name)).toEqual(['/p/parts/one.tex', '/p/main.tex', '/p/local.sty', '/p/defs.tex']);
    expect((await gather('/p/main.tex')).map((f) => f.name)).toEqual(['/p/main.tex', '/p/local.sty', '/p/defs.tex', '/p/parts/one.tex']);
  });
  it('says which files were not given', () => {
    expect(missingFiles('\\input{a}\\input{b/c}\\usepackage{amsmath}', 'latex', [{ name: 'x/b/c.tex', text: '\\input{d}' }])).toEqual(['a.tex', 'd.tex']);
  });
});

describe('claims of a part', () => {
  const verdicts = (text: string, files: readonly CompanionFile[]): readonly (readonly [string, string])[] => {
    const outcome = check({ text, language: 'latex', files }, budget(20_000));
    if (!outcome.ok) throw new Error(outcome.error.message);
    return outcome.value.findings.map((f) => [f.verdict, f.reason] as const);
  };
  it.each([
    ['\\[ \\cos\\epsilon = 1 - \\half\\eps + \\bigO{\\epsilon^4} \\]', 'holds'],
    ['\\[ \\cos\\epsilon = 1 - \\half\\eps[3] + \\bigO{\\epsilon^4} \\]', 'fails'],
    ['\\[ \\tan x = x + \\third{x^3} + \\bigO{x^5} \\]', 'holds'],
    ['\\[ \\tan x = x - \\third{x^3} + \\bigO{x^5} \\]', 'fails'],
    ['\\[ g(x) = 1 - \\frac{x^2}{6} + \\bigO{x^4} \\]', 'holds'],
    ['\\[ g(x) = 1 - \\frac{x^2}{3} + \\bigO{x^4} \\]', 'fails'],
    ['\\[ k(t) = 1 + \\frac{t}{2} + \\frac{t^2}{6} + \\dots \\]', 'holds'],
    ['\\[ k(t) = 1 + \\frac{t}{2} + \\frac{t^2}{3} + \\dots \\]', 'fails'],
  ])('%s: %s', async (claim, verdict) => {
    expect(verdicts(claim, await gather('/p/parts/one.tex')).map(([v]) => v)).toEqual([verdict]);
  });
  it('a definition of its own comes first', async () => {
    const files = await gather('/p/parts/one.tex');
    expect(verdicts('Now $g(x) = \\cos x$, so $g(x) = 1 - \\frac{x^2}{2} + O(x^4)$.', files)).toMatchObject([['holds', expect.anything()]]);
  });
  it('what cannot be reached is named', () => {
    const [[verdict, reason] = ['', '']] = verdicts('\\input{notation}\n\\[ h(x) = 1 - \\frac{x^2}{3} + O(x^4) \\]', []);
    expect(verdict).toBe('undecided');
    expect(reason).toContain('notation.tex');
    const outcome = check({ text: '\\input{notation}\n\\[ \\wiggle(x) = 1 - \\frac{x^2}{3} + O(x^4) \\]', language: 'latex' }, budget(5000));
    expect(outcome.ok && outcome.value.unread[0]?.reason).toContain('notation.tex');
  });
});

describe('reading from disk', () => {
  let folder = '';
  beforeAll(async () => {
    folder = await mkdtemp(join(tmpdir(), 'companions-'));
    for (const [name, text] of [['tree/main.tex', '\\input{defs}\\input{../secret}\\input{link}'], ['tree/defs.tex', '\\def\\a{1}'], ['secret.tex', 'secret'], ['tree/parts/one.tex', '% !TEX root = ../main.tex']] as const) {
      await mkdir(dirname(join(folder, name)), { recursive: true });
      await writeFile(join(folder, name), text);
    }
    await symlink(join(folder, 'secret.tex'), join(folder, 'tree/link.tex'));
  });
  afterAll(() => rm(folder, { recursive: true }));
  it('stays inside the tree, links followed to where they lead', async () => {
    const files = await new CompanionReader(join(folder, 'tree')).of('parts/one.tex', '% !TEX root = ../main.tex', 'latex');
    expect(files.map((f) => f.name)).toEqual(['../main.tex', '../defs.tex']);
  });
});
