/** `leading-order check`: every printed expansion in files and folders; exit code 1 when a claim fails. */
import { readFile } from 'node:fs/promises';
import { availableParallelism } from 'node:os';
import type { EngineClient } from '../worker/client.ts';
import type { CheckAnswer, ErrorAnswer } from '../protocol.ts';
import type { Values } from './arguments.ts';
import { CompanionReader } from './companions.ts';
import { startEngine } from './engineProcess.ts';
import { sourceFiles, type SourceFile } from './files.ts';
import { markdownCells } from './notebook.ts';
import { type FileReport, jsonReport, textReport } from './checkReport.ts';
import { sarifReport } from './sarif.ts';

declare const LEADING_ORDER_VERSION: string;

const FORMATS = ['text', 'json', 'sarif'];
/** A document's own time budget; a hundred pages take well under it. */
const BUDGET_MS = 120_000;

export async function checkFiles(operands: readonly string[], values: Values, folder: string): Promise<number> {
  const format = values.format ?? (values.json ? 'json' : 'text');
  if (!FORMATS.includes(format)) {
    process.stderr.write(`--format must be one of ${FORMATS.join(', ')}.\n`);
    return 2;
  }
  if (operands.length === 0) {
    process.stderr.write('check takes files or folders; name at least one.\n');
    return 2;
  }
  const { files, missing, unreadable } = await sourceFiles(operands);
  for (const path of missing) process.stderr.write(`${path}: no such file or folder\n`);
  if (missing.length > 0) return 2;
  for (const path of unreadable) process.stderr.write(`${path}: this folder cannot be opened\n`);
  const workers = Math.max(1, Math.min(files.length, availableParallelism(), 8));
  const engines = Array.from({ length: workers }, () => startEngine(folder));
  const reports = new Array<FileReport | undefined>(files.length);
  const companions = new CompanionReader(process.cwd());
  let next = 0;
  let done = 0;
  const progress = (): void => {
    if (process.stderr.isTTY) process.stderr.write(`\r${done} of ${files.length} files checked`);
  };
  await Promise.all(
    engines.map(async (engine) => {
      for (let index = next++; index < files.length; index = next++) {
        const file = files[index] as SourceFile;
        reports[index] = await reportOf(file, engine, companions, Number(values.budget ?? BUDGET_MS));
        done += 1;
        progress();
      }
    }),
  );
  for (const engine of engines) engine.dispose();
  if (process.stderr.isTTY) process.stderr.write('\n');
  const all = reports.filter((r): r is FileReport => r !== undefined);
  const output = format === 'json' ? jsonReport(all) : format === 'sarif' ? sarifReport(all, LEADING_ORDER_VERSION) : textReport(all);
  process.stdout.write(`${output}\n`);
  return all.some((r) => r.answers.some(({ answer }) => !answer.ok || answer.findings.some((f) => f.verdict === 'fails'))) ? 1 : 0;
}

async function reportOf(file: SourceFile, engine: EngineClient, companions: CompanionReader, budget: number): Promise<FileReport> {
  let text: string;
  try {
    text = await readFile(file.path, 'utf8');
  } catch (error) {
    return { path: file.path, text: '', answers: [{ offset: 0, answer: { ok: false, error: { code: 'unreadable', message: `This file cannot be opened (${error instanceof Error ? error.message : String(error)}).` } } }] };
  }
  const files = await companions.of(file.path, text, file.language);
  const ask = (part: string, language: string): Promise<CheckAnswer | ErrorAnswer> => engine.ask<CheckAnswer>({ ask: 'check', text: part, language, budget_ms: budget, ...(files.length > 0 ? { files } : {}) });
  return { path: file.path, text, ...(file.language === 'notebook' ? await notebook(text, ask) : { answers: [{ offset: 0, answer: await ask(text, file.language) }] }) };
}

async function notebook(text: string, ask: (part: string, language: string) => Promise<CheckAnswer | ErrorAnswer>): Promise<Pick<FileReport, 'answers'>> {
  const answers: FileReport['answers'][number][] = [];
  for (const cell of markdownCells(text)) answers.push({ offset: 0, answer: await ask(cell.text, 'markdown'), cell: cell.index, cellText: cell.text });
  return { answers };
}
