// The driven run in the real web workbench: first the suite inside its extension host, then scenes at the keyboard, then the page's accessibility. Closes with `N passed, N failed`.
// `node test/host/run.mjs [in-host | accessibility [themes ...] | words of scene names ...]`
import { spawnSync } from 'node:child_process';
import path from 'node:path';
import { requireNode } from '../../src/start/requireNode.mjs';

requireNode();
const { launchBrowser } = await import('../../src/start/browser.mjs');
const { ROOT, serveWorkbench } = await import('../../src/start/workbench.mjs');
const { accessibility } = await import('./accessibility.mjs');
const { openWorkbench } = await import('./driver.mjs');
const { followSuite, playScenes, SETTINGS, Tally } = await import('./runner.mjs');
const { DEMO, scenes } = await import('./scenes.mjs');

const wanted = process.argv.slice(2);
const tally = new Tally();
const built = spawnSync(process.execPath, [path.join(ROOT, 'esbuild.config.mjs'), '--tests'], { cwd: ROOT, stdio: ['ignore', 'ignore', 'inherit'] });
if (built.status !== 0) {
  tally.fail('the build');
  tally.close();
}
const browser = await launchBrowser();
if (!browser) {
  process.stdout.write('not run: no browser\n');
  tally.failed += 1;
  tally.close();
}
process.stdout.write(`browser ${browser.version()}\n`);
try {
  if (wanted.length === 0 || wanted.includes('in-host')) await inHost();
  if (!wanted.includes('in-host') && !wanted.includes('accessibility')) await driven();
  if (wanted.length === 0 || wanted.includes('accessibility')) await accessibility(browser, tally, wanted);
} finally {
  await browser.close().catch(() => {});
}
tally.close();

async function inHost() {
  process.stdout.write('-- inside the extension host\n');
  const server = await serveWorkbench({ folder: DEMO, settings: SETTINGS, suite: 'dist/test/suite.web.js' });
  const page = await (await browser.newContext({ viewport: { width: 1300, height: 900 }, permissions: ['clipboard-read', 'clipboard-write'] })).newPage();
  await followSuite(page, server.url, tally);
  await page.context().close();
  await server.stop();
}

async function driven() {
  process.stdout.write('-- at the keyboard\n');
  const server = await serveWorkbench({ folder: DEMO, settings: SETTINGS });
  const { page, errors, close } = await openWorkbench(browser, server.url);
  await playScenes(page, scenes, wanted, tally, 'web');
  if (errors.length === 0) tally.pass('the pages report no error');
  else tally.fail(`the pages report errors: ${[...new Set(errors)].slice(0, 5).join(' | ')}`);
  await close();
  await server.stop();
}
