// The driven run in the real web workbench: first the suite inside its extension host, then scenes at the keyboard. Closes with `N passed, N failed`.
import { spawnSync } from 'node:child_process';
import { mkdirSync } from 'node:fs';
import path from 'node:path';
import { requireNode } from '../../src/start/requireNode.mjs';

requireNode();
const { launchBrowser } = await import('../../src/start/browser.mjs');
const { ROOT, serveWorkbench } = await import('../../src/start/workbench.mjs');
const { openWorkbench } = await import('./driver.mjs');
const { DEMO, scenes } = await import('./scenes.mjs');

const HOST_LIMIT_MS = 240_000;
const SCENE_LIMIT_MS = 120_000;
const SETTINGS = { 'editor.hover.delay': 50, 'workbench.colorTheme': 'Default Dark Modern', 'editor.wordWrap': 'on', 'workbench.reduceMotion': 'on', 'files.autoSave': 'off' };
const wanted = process.argv.slice(2);
const tally = { passed: 0, failed: 0 };

const built = spawnSync(process.execPath, [path.join(ROOT, 'esbuild.config.mjs'), '--tests'], { cwd: ROOT, stdio: ['ignore', 'ignore', 'inherit'] });
if (built.status !== 0) {
  process.stdout.write('the build failed\n0 passed, 1 failed\n');
  process.exit(1);
}
const browser = await launchBrowser();
if (!browser) {
  process.stdout.write('not run: no browser\n0 passed, 1 failed\n');
  process.exit(1);
}
process.stdout.write(`browser ${browser.version()}\n`);
try {
  if (wanted.length === 0 || wanted.includes('in-host')) await inHost();
  await driven();
} finally {
  await browser.close().catch(() => {});
}
process.stdout.write(`${tally.passed} passed, ${tally.failed} failed\n`);
process.exit(tally.failed === 0 ? 0 : 1);

function limited(work, ms, what) {
  let timer;
  return Promise.race([work, new Promise((_resolve, reject) => (timer = setTimeout(() => reject(new Error(`${what}: no end after ${ms / 1000} s`)), ms)))]).finally(() => clearTimeout(timer));
}

/** Lines of the suite come through the workbench's own channel for test runs. */
async function inHost() {
  process.stdout.write('-- inside the extension host\n');
  const server = await serveWorkbench({ folder: DEMO, settings: SETTINGS, suite: 'dist/test/suite.web.js' });
  const page = await (await browser.newContext({ viewport: { width: 1300, height: 900 } })).newPage();
  let counted = false;
  const ended = new Promise((resolve) => page.exposeFunction('codeAutomationExit', (code) => resolve(code)));
  await page.exposeFunction('codeAutomationLog', (_type, args) => {
    const line = args.filter((arg) => typeof arg === 'string' && !arg.startsWith('color:')).join(' ').replace(/^%c\S* ?/, '');
    if (!/^(host:|ok |FAILED |in-host:|activation|typing)/.test(line)) return;
    process.stdout.write(`${line}\n`);
    const count = /^in-host: (\d+) passed, (\d+) failed/.exec(line);
    if (count) {
      counted = true;
      tally.passed += Number(count[1]);
      tally.failed += Number(count[2]);
    }
  });
  try {
    await page.goto(server.url);
    await limited(ended, HOST_LIMIT_MS, 'the suite');
  } catch (error) {
    process.stdout.write(`FAILED ${error.message}\n`);
  }
  if (!counted) tally.failed += 1;
  await page.context().close();
  await server.stop();
}

async function driven() {
  process.stdout.write('-- at the keyboard\n');
  const server = await serveWorkbench({ folder: DEMO, settings: SETTINGS });
  const { page, errors, close } = await openWorkbench(browser, server.url);
  const pictures = path.join(ROOT, '.cache/failed-scenes');
  mkdirSync(pictures, { recursive: true });
  for (const [name, scene] of Object.entries(scenes)) {
    if (wanted.length > 0 && !wanted.some((word) => name.includes(word))) continue;
    const began = Date.now();
    try {
      await limited(scene(page), SCENE_LIMIT_MS, name);
      tally.passed += 1;
      process.stdout.write(`ok ${name} (${((Date.now() - began) / 1000).toFixed(1)} s)\n`);
    } catch (error) {
      tally.failed += 1;
      process.stdout.write(`FAILED ${name}: ${error.message}\n`);
      await page.screenshot({ path: path.join(pictures, `${name.replace(/\W+/g, '-')}.png`) }).catch(() => {});
      await page.keyboard.press('Escape').catch(() => {});
    }
  }
  if (errors.length === 0) tally.passed += 1;
  else {
    tally.failed += 1;
    process.stdout.write(`FAILED the pages report errors: ${[...new Set(errors)].slice(0, 5).join(' | ')}\n`);
  }
  await close();
  await server.stop();
}
