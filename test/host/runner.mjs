// What every driven run shares: counting, time limits, the channel of in-host suites, scenes one after the other.
import { mkdirSync } from 'node:fs';
import path from 'node:path';
import { ROOT } from '../../src/start/workbench.mjs';

// Limits for a machine ten times slower than usual, where the suite takes some seconds a case.
const SUITE_LIMIT_MS = 900_000;
const SCENE_LIMIT_MS = 400_000;
export const SETTINGS = { 'editor.hover.delay': 50, 'workbench.colorTheme': 'Default Dark Modern', 'editor.wordWrap': 'on', 'workbench.reduceMotion': 'on', 'files.autoSave': 'off', 'leadingOrder.budget': 60_000 };

export function limited(work, ms, what) {
  let timer;
  return Promise.race([work, new Promise((_resolve, reject) => (timer = setTimeout(() => reject(new Error(`${what}: no end after ${ms / 1000} s`)), ms)))]).finally(() => clearTimeout(timer));
}

export class Tally {
  passed = 0;
  failed = 0;
  pass(line) {
    this.passed += 1;
    process.stdout.write(`ok ${line}\n`);
  }
  fail(line) {
    this.failed += 1;
    process.stdout.write(`FAILED ${line}\n`);
  }
  close() {
    process.stdout.write(`${this.passed} passed, ${this.failed} failed\n`);
    process.exit(this.failed === 0 ? 0 : 1);
  }
}

/** Loads the page and follows the suite inside its extension host, whose lines come through the workbench's channel for test runs. */
export async function followSuite(page, url, tally) {
  let counted = false;
  const ended = new Promise((resolve) => void page.exposeFunction('codeAutomationExit', resolve));
  await page.exposeFunction('codeAutomationLog', (_type, args) => {
    const line = args.filter((arg) => typeof arg === 'string' && !arg.startsWith('color:')).join(' ').replace(/^%c\S* ?/, '');
    if (!/^(host:|ok |FAILED |in-host:|activation|typing|hover:)/.test(line)) return;
    process.stdout.write(`${line}\n`);
    const count = /^in-host: (\d+) passed, (\d+) failed/.exec(line);
    if (!count) return;
    counted = true;
    tally.passed += Number(count[1]);
    tally.failed += Number(count[2]);
  });
  try {
    await page.goto(url);
    await limited(ended, SUITE_LIMIT_MS, 'the suite');
  } catch (error) {
    process.stdout.write(`${error.message}\n`);
  }
  if (!counted) tally.fail('the suite inside the extension host did not report its count');
}

/** Scenes share one page; what is wrong is photographed into .cache/failed-scenes. */
export async function playScenes(page, scenes, wanted, tally, host) {
  const pictures = path.join(ROOT, '.cache/failed-scenes');
  mkdirSync(pictures, { recursive: true });
  for (const [name, scene] of Object.entries(scenes)) {
    if (wanted.length > 0 && !wanted.some((word) => name.includes(word))) continue;
    const began = Date.now();
    try {
      await limited(scene(page), SCENE_LIMIT_MS, name);
      tally.pass(`${name} (${((Date.now() - began) / 1000).toFixed(1)} s)`);
    } catch (error) {
      tally.fail(`${name}: ${error.message}`);
      await page.screenshot({ path: path.join(pictures, `${host}-${name.replace(/\W+/g, '-')}.png`) }).catch(() => {});
      await page.keyboard.press('Escape').catch(() => {});
    }
  }
}
