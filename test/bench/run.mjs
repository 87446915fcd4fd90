// `npm run bench`: engine time per request, warm, as the median of 20, against its aim. Ratios within one run are what counts.
import { spawnSync } from 'node:child_process';
import { fileURLToPath } from 'node:url';
import { requireNode } from '../../src/start/requireNode.mjs';

requireNode();
const root = fileURLToPath(new URL('../..', import.meta.url));
const built = spawnSync(
  process.execPath,
  ['node_modules/esbuild/bin/esbuild', 'test/bench/main.ts', '--bundle', '--platform=node', '--format=cjs', '--alias:web-tree-sitter=./node_modules/web-tree-sitter/web-tree-sitter.cjs', '--outfile=.cache/bench.cjs', '--log-level=error'],
  { cwd: root, stdio: 'inherit' },
);
if (built.status !== 0) process.exit(1);
process.exitCode = spawnSync(process.execPath, ['.cache/bench.cjs'], { cwd: root, stdio: 'inherit' }).status ?? 1;
