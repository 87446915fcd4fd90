/** Builds everything under dist/. `--watch` keeps building; `--tests` adds the suites that run inside an editor. */
import { chmod, copyFile, mkdir, readdir, readFile, rm, stat, writeFile } from 'node:fs/promises';
import { createRequire } from 'node:module';
import path from 'node:path';
import { fileURLToPath } from 'node:url';
import esbuild from 'esbuild';

const root = path.dirname(fileURLToPath(import.meta.url));
const require = createRequire(import.meta.url);
const inRoot = (...parts) => path.join(root, ...parts);
const watch = process.argv.includes('--watch');
const tests = process.argv.includes('--tests');

/** The parser's ES build asks for import.meta.url, which a cjs bundle has not; its .cjs build does not. */
const treeSitterAlias = { 'web-tree-sitter': require.resolve('web-tree-sitter').replace(/\.js$/, '.cjs') };

/** Host and worker bundles must not ship a module that only exists in the other world. */
const shared = {
  absWorkingDir: root,
  bundle: true,
  charset: 'utf8',
  legalComments: 'linked',
  logLevel: 'warning',
  minify: !watch,
  sourcemap: watch ? 'linked' : false,
  target: 'es2022',
  alias: treeSitterAlias,
};
const forNode = { ...shared, platform: 'node', format: 'cjs', external: ['vscode'] };
const forBrowser = { ...shared, platform: 'browser', format: 'cjs', external: ['vscode'], define: { global: 'globalThis' } };
/** The parser probes for Node and would pull in its modules; in a browser those branches are dead. */
const noNodeModules = {
  name: 'no-node-modules',
  setup(build) {
    build.onResolve({ filter: /^(node:)?(fs|fs\/promises|path|module|url|worker_threads|crypto|vm)$/ }, (args) => ({ path: args.path, namespace: 'absent' }));
    build.onLoad({ filter: /.*/, namespace: 'absent' }, () => ({ contents: 'module.exports = {};', loader: 'js' }));
  },
};

const bundles = [
  { ...forNode, entryPoints: ['src/editor/main.node.ts'], outfile: 'dist/extension.js' },
  { ...forBrowser, entryPoints: ['src/editor/main.web.ts'], outfile: 'dist/extension.web.js' },
  { ...forNode, entryPoints: ['src/worker/node.ts'], outfile: 'dist/worker.js' },
  { ...forNode, entryPoints: ['src/worker/boot.ts'], outfile: 'dist/worker.boot.js' },
  // A worker has no DOM: packages that tell the two apart must give their worker variant.
  { ...forBrowser, format: 'iife', conditions: ['worker'], plugins: [noNodeModules], entryPoints: ['src/worker/web.ts'], outfile: 'dist/worker.web.js' },
  { ...forNode, entryPoints: ['src/cli/main.ts'], outfile: 'dist/cli.js', define: { LEADING_ORDER_VERSION: JSON.stringify(require('./package.json').version) }, banner: { js: '#!/usr/bin/env node' } },
  {
    ...shared,
    platform: 'browser',
    format: 'iife',
    entryPoints: { webview: 'src/webview/main.ts' },
    outdir: 'dist',
    loader: { '.woff2': 'file', '.woff': 'empty', '.ttf': 'empty' },
    assetNames: 'webview-fonts/[name]',
  },
  ...(tests
    ? [
        { ...forNode, minify: false, entryPoints: ['test/host/suite/index.ts'], outfile: 'dist/test/suite.js' },
        { ...forBrowser, minify: false, entryPoints: ['test/host/suite/index.ts'], outfile: 'dist/test/suite.web.js' },
      ]
    : []),
];

/** Which font faces of the typesetter the hover picture can need. */
const PICTURE_FACES = /^KaTeX_(Main-(Regular|Italic|Bold)|Math-(Italic|BoldItalic)|Size[1-4]-Regular|(AMS|Caligraphic|Fraktur|SansSerif|Script|Typewriter)-Regular)\.ttf$/;

async function copyMatching(from, to, filter) {
  await mkdir(to, { recursive: true });
  for (const name of await readdir(from)) if (filter.test(name)) await copyFile(path.join(from, name), path.join(to, name));
}

async function copyAssets() {
  const modules = (...parts) => inRoot('node_modules', ...parts);
  const grammars = inRoot('dist', 'grammars');
  await copyMatching(modules('@vscode', 'tree-sitter-wasm', 'wasm'), grammars, /^tree-sitter-(cpp|c-sharp|typescript|tsx|javascript|python|rust|java|go)\.wasm$/);
  await copyMatching(modules('tree-sitter-c'), grammars, /^tree-sitter-c\.wasm$/);
  await copyMatching(modules('web-tree-sitter'), grammars, /^(web-)?tree-sitter\.wasm$/);
  await copyMatching(modules('katex', 'dist', 'fonts'), inRoot('dist', 'fonts'), PICTURE_FACES);
}

/** Licences of what is inside the bundles and beside them. */
async function writeNotices(inputs) {
  const names = new Set(['@vscode/tree-sitter-wasm', 'tree-sitter-c']);
  for (const input of inputs) {
    const name = /^(?:.*\/)?node_modules\/((?:@[^/]+\/)?[^/]+)\//.exec(input)?.[1];
    if (name) names.add(name);
  }
  const notices = [];
  for (const name of [...names].sort()) {
    const folder = inRoot('node_modules', ...name.split('/'));
    const { version, license } = JSON.parse(await readFile(path.join(folder, 'package.json'), 'utf8'));
    const file = (await readdir(folder)).find((entry) => /^licen[cs]e/i.test(entry));
    notices.push(`${name} ${version} (${license})\n\n${file ? (await readFile(path.join(folder, file), 'utf8')).trim() : ''}`);
  }
  await writeFile(inRoot('dist', 'third-party-notices.txt'), `${notices.join(`\n\n${'-'.repeat(72)}\n\n`)}\n`);
}

await rm(inRoot('dist'), { recursive: true, force: true });
await copyAssets();
if (watch) {
  await Promise.all(bundles.map(async (options) => (await esbuild.context(options)).watch()));
} else {
  const results = await Promise.all(bundles.map((options) => esbuild.build({ ...options, metafile: true })));
  await writeNotices(results.flatMap((result) => Object.keys(result.metafile.inputs)));
  await chmod(inRoot('dist', 'cli.js'), 0o755);
  const size = async (name) => `${name} ${Math.round((await stat(inRoot('dist', name))).size / 1024)} KB`;
  console.log((await Promise.all(['extension.js', 'extension.web.js', 'worker.js', 'worker.web.js', 'webview.js', 'cli.js'].map(size))).join(' · '));
}
