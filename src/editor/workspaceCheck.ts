/** Check Workspace: every file that the extension serves, one after the other, cancellable, into one Markdown report. */
import * as vscode from 'vscode';
import type { CheckAnswer, Finding } from '../protocol.ts';
import { engineLanguage } from './languages.ts';
import type { Services } from './services.ts';
import { countsText } from './status.ts';
import { countsOf } from './problems.ts';
import { said } from './words.ts';

const FILES = '**/*.{tex,ltx,md,qmd,rmd,c,h,cc,cpp,hpp,cu,py,js,jsx,ts,tsx,rs,java,go,cs,jl,f,f90,f95,f03,f08,m,r,R,glsl,hlsl,kt,swift}';
const MOST_FILES = 2000;
const LONGEST_FILE = 2_000_000;

export async function checkWorkspace(services: Services): Promise<string | null> {
  const found = await vscode.workspace.findFiles(FILES, '**/{node_modules,dist,out,build,target,.git}/**', MOST_FILES);
  const sections: string[] = [];
  const total = { claims: 0, hold: 0, fail: 0, undecided: 0, unread: 0 };
  const finished = await vscode.window.withProgress({ location: vscode.ProgressLocation.Window, title: vscode.l10n.t('Checking printed expansions'), cancellable: true }, async (progress, token) => {
    const abort = new AbortController();
    token.onCancellationRequested(() => abort.abort());
    for (const [index, uri] of found.entries()) {
      if (token.isCancellationRequested) return false;
      progress.report({ message: `${index + 1}/${found.length}` });
      const bytes = await vscode.workspace.fs.readFile(uri);
      if (bytes.length > LONGEST_FILE) continue;
      const open = vscode.workspace.textDocuments.find((candidate) => candidate.uri.toString() === uri.toString());
      const text = open?.getText() ?? new TextDecoder().decode(bytes);
      const language = open ? engineLanguage(open) : engineLanguage({ languageId: '', uri });
      const known = language === 'plain' ? byExtension(uri) : language;
      const files = await services.companions.of({ uri, text, language: known });
      const answer = await services.client.ask<CheckAnswer>({ ask: 'check', text, language: known, files, budget_ms: 20_000 }, abort.signal);
      if (!answer.ok) continue;
      const counts = countsOf(answer);
      for (const key of ['claims', 'hold', 'fail', 'undecided', 'unread'] as const) total[key] += counts[key];
      if (answer.findings.length > 0) sections.push(section(vscode.workspace.asRelativePath(uri), text, answer.findings));
    }
    return true;
  });
  if (!finished) return null;
  const content = [`# ${vscode.l10n.t('Printed expansions')}`, countsText(total), ...sections].join('\n\n');
  const document = await vscode.workspace.openTextDocument({ language: 'markdown', content: `${content}\n` });
  await vscode.window.showTextDocument(document);
  return content;
}

const EXTENSIONS: Readonly<Record<string, string>> = { c: 'c', h: 'c', cc: 'cpp', cpp: 'cpp', hpp: 'cpp', py: 'python', js: 'javascript', jsx: 'javascript', ts: 'typescript', tsx: 'typescript', rs: 'rust', java: 'java', go: 'go', cs: 'csharp', r: 'r' };
const byExtension = (uri: vscode.Uri): string => EXTENSIONS[uri.path.split('.').at(-1)?.toLowerCase() ?? ''] ?? 'plain';

function section(name: string, text: string, findings: readonly Finding[]): string {
  const lineOf = (offset: number): number => text.slice(0, offset).split('\n').length;
  const cell = (words: string): string => words.replace(/\s+/g, ' ').replaceAll('|', '\\|').trim();
  const rows = findings.map((finding) => `| ${lineOf(finding.start)} | ${finding.verdict} | \`${cell(text.slice(finding.claim.start, finding.claim.end)).slice(0, 120).replaceAll('`', "'")}\` | ${cell(said(finding.reason))} |`);
  return [`## ${name}`, ['| line | verdict | claim | reason |', '| --- | --- | --- | --- |', ...rows].join('\n')].join('\n\n');
}
