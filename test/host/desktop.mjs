// The same suite inside a desktop editor, through the editor's own test runner. Where its build cannot be had, it says so and does not count as passed.
import { spawnSync } from 'node:child_process';
import path from 'node:path';
import { requireNode } from '../../src/start/requireNode.mjs';

requireNode();
const { CACHE, ROOT } = await import('../../src/start/workbench.mjs');
const { downloadAndUnzipVSCode, runTests } = await import('@vscode/test-electron');

if (spawnSync(process.execPath, [path.join(ROOT, 'esbuild.config.mjs'), '--tests'], { cwd: ROOT, stdio: ['ignore', 'ignore', 'inherit'] }).status !== 0) process.exit(1);
let executable = process.env.CODE_PATH;
if (!executable) {
  try {
    executable = await downloadAndUnzipVSCode({ version: 'stable', cachePath: path.join(CACHE, 'desktop'), timeout: 30_000 });
  } catch (error) {
    process.stdout.write(`desktop: not run: its build cannot be downloaded here (${error instanceof Error ? error.message.split('\n')[0] : String(error)}); set CODE_PATH to an installed one\n`);
    process.exit(2);
  }
}
try {
  await runTests({ vscodeExecutablePath: executable, extensionDevelopmentPath: ROOT, extensionTestsPath: path.join(ROOT, 'dist/test/suite.js'), launchArgs: [path.join(ROOT, 'media/demo'), '--disable-extensions'] });
  process.stdout.write('desktop: passed\n');
} catch (error) {
  process.stdout.write(`desktop: failed: ${error instanceof Error ? error.message : String(error)}\n`);
  process.exit(1);
}
