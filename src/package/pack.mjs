// `npm run package`: the .vsix of the extension and a tarball that installs the command line through `bin`. Neither is kept in git.
import { spawnSync } from 'node:child_process';
import { fileURLToPath } from 'node:url';
import { requireNode } from '../start/requireNode.mjs';

requireNode();
const root = fileURLToPath(new URL('../..', import.meta.url));
const run = (args) => {
  const { status } = spawnSync(process.execPath, args, { cwd: root, stdio: 'inherit' });
  if (status !== 0) process.exit(status ?? 1);
};
run(['esbuild.config.mjs']);
run(['node_modules/@vscode/vsce/vsce', 'package', '--no-dependencies', '--allow-missing-repository', '--no-rewrite-relative-links', '--out', 'leading-order.vsix']);
const packed = spawnSync('npm', ['pack'], { cwd: root, stdio: 'inherit', shell: process.platform === 'win32' });
process.exitCode = packed.status ?? 1;
