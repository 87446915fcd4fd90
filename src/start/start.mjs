// `npm start`: builds, prints five expansions of the demo with their bounds, then serves the real web workbench with the extension and the demo open.
// `--once` stops after the five lines; `--desktop` opens an installed editor instead of serving.
import { spawn, spawnSync } from 'node:child_process';
import path from 'node:path';
import { requireNode } from './requireNode.mjs';

requireNode();
const { ROOT, serveWorkbench } = await import('./workbench.mjs');
const flags = new Set(process.argv.slice(2));
const PORT = 4174;
const DEMO = path.join(ROOT, 'media/demo');

/** From the demo's files. */
const SHOWN = [
  ['sag-note.tex', 'latex', String.raw`\frac{\cosh u - 1}{u}`, ['--variable=u', '--interval=-0.3,0.3', '--tolerance=1e-6']],
  ['field-notes.md', 'latex', String.raw`\arctan q - \frac{q}{1 + q^2}`, ['--variable=q', '--interval=-0.25,0.25', '--tolerance=1e-5']],
  ['controller.c', 'c', 'sqrt(1.0 + slope * slope)', ['--variable=slope', '--interval=-0.2,0.2', '--tolerance=1e-7']],
  ['survey.py', 'python', 'np.exp(-t) * np.cos(t)', ['--variable=t', '--interval=0,0.5', '--tolerance=1e-4']],
  ['sag-note.tex', 'latex', String.raw`h \ln\left(1 + \frac{1}{h}\right)`, ['--variable=h', '--point=inf', '--interval=10,inf', '--tolerance=1e-6']],
];

function build() {
  const done = spawnSync(process.execPath, [path.join(ROOT, 'esbuild.config.mjs')], { cwd: ROOT, stdio: ['ignore', 'ignore', 'inherit'] });
  if (done.status !== 0) {
    process.stderr.write('The build failed; its message stands above.\n');
    process.exit(1);
  }
}

function printExpansions() {
  for (const [file, language, text, options] of SHOWN) {
    process.stdout.write(`\n${file}: ${text}\n`);
    const asked = spawnSync(process.execPath, [path.join(ROOT, 'dist/cli.js'), 'expand', text, `--language=${language}`, ...options], { encoding: 'utf8' });
    process.stdout.write(`${(asked.stdout || asked.stderr).trimEnd().replace(/^/gm, '  ')}\n`);
  }
}

function openDesktop() {
  const found = spawnSync('code', ['--version'], { shell: process.platform === 'win32', stdio: 'ignore' });
  if (found.status !== 0) {
    process.stderr.write('No installed editor answers to the command "code"; install its shell command, or run npm start without --desktop.\n');
    process.exit(1);
  }
  spawnSync('code', ['--new-window', '--extensionDevelopmentPath', ROOT, DEMO, path.join(DEMO, 'START.md'), path.join(DEMO, 'sag-note.tex')], { shell: process.platform === 'win32', stdio: 'inherit' });
}

/** Where there is a desktop, the page opens by itself; where there is none, the address is printed anyway. */
function openPage(url) {
  const [command, args] = process.platform === 'darwin' ? ['open', [url]] : process.platform === 'win32' ? ['cmd', ['/c', 'start', '', url]] : ['xdg-open', [url]];
  if (process.platform === 'linux' && !process.env.DISPLAY && !process.env.WAYLAND_DISPLAY) return;
  spawn(command, args, { stdio: 'ignore', detached: true }).on('error', () => {}).unref();
}

build();
printExpansions();
if (!flags.has('--once')) {
  if (flags.has('--desktop')) openDesktop();
  else {
    const { url, stop } = await serveWorkbench({
      folder: DEMO,
      port: PORT,
      editors: [
        { file: 'sag-note.tex', column: 1, selection: { startLineNumber: 16, startColumn: 11, endLineNumber: 16, endColumn: 32 } },
        { file: 'START.md', column: 2 },
      ],
    });
    process.stdout.write(`
The editor with the extension and the demo is at

  ${url}

Three things to do there:
  1. Rest the pointer on the marked formula in sag-note.tex, or press Ctrl+K Ctrl+I (Cmd+K Cmd+I).
  2. Press F1, type "Expand Here" and press Enter: the Expansion page opens; + and - change the number of terms.
  3. Press Ctrl+. (Cmd+.) on the marked formula and insert the result; Ctrl+Z (Cmd+Z) takes it back.

Edits live in memory and vanish on reload. Ctrl+C here ends the server.
`);
    openPage(url);
    const end = () => void stop().then(() => process.exit(0));
    process.on('SIGINT', end);
    process.on('SIGTERM', end);
  }
}
