// The driven run in the second host: a newer editor with a Node extension host, with the packaged extension installed. Closes with `N passed, N failed`.
import { spawnSync } from 'node:child_process';
import { cpSync, mkdirSync, readFileSync } from 'node:fs';
import path from 'node:path';
import { requireNode } from '../../../src/start/requireNode.mjs';

requireNode();
const { launchBrowser } = await import('../../../src/start/browser.mjs');
const { CACHE, ROOT } = await import('../../../src/start/workbench.mjs');
const { focusEditor, openFromExplorer, openWorkbench, PATIENCE, pause } = await import('../driver.mjs');
const { followSuite, limited, playScenes, SETTINGS, Tally } = await import('../runner.mjs');
const { DEMO, scenes } = await import('../scenes.mjs');
const { HERE, installSecondHost } = await import('./install.mjs');
const { freshFolder, startServer, withSuite } = await import('./server.mjs');

const wanted = process.argv.slice(2);
const tally = new Tally();
const problem = installSecondHost();
if (problem) {
  process.stdout.write(`second host: not run: ${problem}\n`);
  process.exit(2);
}
const run = (...args) => spawnSync(process.execPath, args, { cwd: ROOT, stdio: ['ignore', 'ignore', 'inherit'] }).status === 0;
mkdirSync(CACHE, { recursive: true });
const vsix = path.join(CACHE, 'leading-order.vsix');
if (!run('esbuild.config.mjs', '--tests') || !run('node_modules/@vscode/vsce/vsce', 'package', '--no-dependencies', '--allow-missing-repository', '--no-rewrite-relative-links', '-o', vsix)) {
  tally.fail('building and packaging');
  tally.close();
}
const browser = await launchBrowser();
if (!browser) {
  process.stdout.write('second host: not run: no browser\n');
  process.exit(2);
}
const workspace = () => {
  const folder = freshFolder('workspace');
  cpSync(DEMO, folder, { recursive: true });
  return folder;
};
const only = (stage) => wanted.length === 0 || wanted.includes(stage);
try {
  if (only('in-host')) await inHost();
  if (only('driven')) await driven();
  if (only('restricted')) await restricted();
} finally {
  await browser.close().catch(() => {});
}
tally.close();

async function inHost() {
  process.stdout.write('-- inside the extension host\n');
  const server = await startServer({ workspace: workspace(), vsix, settings: SETTINGS });
  const page = await (await browser.newContext({ viewport: { width: 1300, height: 900 }, permissions: ['clipboard-read', 'clipboard-write'] })).newPage();
  await withSuite(page, server.port, path.join(ROOT, 'dist/test/suite.js'), path.join(HERE, 'window'));
  await followSuite(page, server.url, tally);
  await page.context().close();
  await server.stop();
}

async function driven() {
  process.stdout.write('-- at the keyboard\n');
  const folder = workspace();
  const server = await startServer({ workspace: folder, vsix, settings: SETTINGS });
  const { page, close } = await openWorkbench(browser, server.url);
  await playScenes(page, scenes, [], tally, 'second');
  const name = 'what was inserted is on the disk after saving, and what was undone is not';
  try {
    await openFromExplorer(page, 'sag-note.tex');
    await focusEditor(page);
    await page.keyboard.press('Control+s');
    const onDisk = () => readFileSync(path.join(folder, 'sag-note.tex'), 'utf8');
    const wanted = readFileSync(path.join(DEMO, 'sag-note.tex'), 'utf8');
    await page.locator('.tab.active.dirty').waitFor({ state: 'detached', timeout: PATIENCE });
    for (let i = 0; i < 50 && onDisk() !== wanted; i += 1) await pause(200);
    const same = onDisk() === wanted;
    if (same) tally.pass(name);
    else tally.fail(`${name}: the file differs after everything was undone`);
  } catch (error) {
    tally.fail(`${name}: ${error.message}`);
  }
  await close();
  await server.stop();
}

/** Workspace trust stays switched on and nobody grants it: everything works, since nothing that is read is ever executed. */
async function restricted() {
  process.stdout.write('-- restricted mode\n');
  const server = await startServer({ workspace: workspace(), vsix, settings: SETTINGS, trust: true });
  const { page, close } = await openWorkbench(browser, server.url);
  const name = 'the workspace is not trusted';
  try {
    await limited(openFromExplorer(page, 'sag-note.tex'), 3 * PATIENCE, name);
    await page.locator('.statusbar-item', { hasText: 'Restricted Mode' }).first().waitFor({ timeout: PATIENCE });
    tally.pass(name);
    await playScenes(page, scenes, ['read the hover', 'page says the same', 'insert from it', 'wrong coefficient', 'every claim'], tally, 'restricted');
    const still = await page.locator('.statusbar-item', { hasText: 'Restricted Mode' }).first().isVisible();
    if (still) tally.pass('nobody was asked to trust it');
    else tally.fail('the workspace became trusted on the way');
  } catch (error) {
    tally.fail(`${name}: ${error.message}`);
  }
  await close();
  await server.stop();
}
