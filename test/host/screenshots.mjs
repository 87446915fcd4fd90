// Pictures of the four main scenes in four themes, from the real workbench, for README and walkthrough: media/scenes/<scene>-<theme>.png and media/walkthrough/<scene>.png; high contrast into .cache/scenes.
// `node test/host/screenshots.mjs [scene or theme ...]`; the scenes `polynomial` and `claims` are only looked at, too.
import { spawnSync } from 'node:child_process';
import { mkdirSync, readFileSync } from 'node:fs';
import path from 'node:path';
import { requireNode } from '../../src/start/requireNode.mjs';

requireNode();
const { launchBrowser } = await import('../../src/start/browser.mjs');
const { ROOT, serveWorkbench } = await import('../../src/start/workbench.mjs');
const { closeHover, expansionFrame, focusEditor, goTo, hoverAtCursor, openFixes, openFromExplorer, openWorkbench, PATIENCE, pageSays, pause, placeOf, runCommand, select } = await import('./driver.mjs');

const DEMO = path.join(ROOT, 'media/demo');
const NOTE = readFileSync(path.join(DEMO, 'sag-note.tex'), 'utf8');
const SAG = '\\frac{\\cosh u - 1}{u}';
const THEMES = { dark: 'Default Dark Modern', light: 'Default Light Modern', 'high-contrast-dark': 'Default High Contrast', 'high-contrast-light': 'Default High Contrast Light' };
const KEPT = { dark: true, light: true };
const WALKTHROUGH = { hover: 'hover', page: 'page', fixes: 'insert', problems: 'check' };

const SCENES = {
  page: async (page) => {
    await page.setViewportSize({ width: 1120, height: 1120 });
    await select(page, NOTE, SAG);
    await runCommand(page, 'Leading Order: Open Beside');
    const frame = await expansionFrame(page, '#formula');
    await pageSays(frame, 'sag-note.tex:16');
    await frame.locator('#terms').fill('2');
    await frame.locator('#terms').press('Enter');
    await frame.waitForFunction(() => document.querySelector('.plots') !== null && document.getElementById('terms')?.value === '2', null, { timeout: PATIENCE });
    await focusEditor(page);
    await pause(500);
    return { x: 0, y: 0, width: 1120, height: 1120 };
  },
};

SCENES.hover = async (page) => {
  await select(page, NOTE, SAG);
  await hoverWithPicture(page, 'u³/24');
  return around(page, '.monaco-hover:visible', { left: 60, top: 24, right: 60, bottom: 60, width: 620 });
};
SCENES.fixes = async (page) => {
  await closeHover(page);
  await focusEditor(page);
  await select(page, NOTE, SAG);
  await openFixes(page, 'as next aligned row');
  await pause(400);
  const clip = await around(page, '.action-widget', { left: 60, top: 60, right: 30, bottom: 20, width: 620 });
  return clip;
};
SCENES.problems = async (page) => {
  await page.keyboard.press('Escape');
  await focusEditor(page);
  await page.locator('.squiggly-warning').first().waitFor({ timeout: PATIENCE });
  const at = placeOf(NOTE, '620');
  await goTo(page, at.line, at.column + 1);
  // A hover takes a quarter of the editor's height at most.
  await page.setViewportSize({ width: 1120, height: 1500 });
  await hoverWithPicture(page, '720');
  return around(page, '.monaco-hover:visible', { left: 60, top: 40, right: 60, bottom: 60, width: 620 });
};

/** On a cold start the text comes first, without table and picture. */
async function hoverWithPicture(page, wanted) {
  const whole = page.locator('.monaco-hover:visible').filter({ has: page.locator('img[src^="data:image/svg"]') }).filter({ has: page.locator('table') }).first();
  for (let i = 0; i < 8 && !(await whole.isVisible()); i += 1) {
    await closeHover(page);
    await hoverAtCursor(page, wanted);
    await whole.waitFor({ timeout: 1500 * (i + 1) }).catch(() => {});
  }
  await pause(400);
}

SCENES.claims = async (page) => {
  await page.setViewportSize({ width: 1120, height: 900 });
  await focusEditor(page);
  await runCommand(page, 'Leading Order: Check This Document');
  await expansionFrame(page, '.claims');
  await pause(500);
  return { x: 0, y: 0, width: 1120, height: 900 };
};
SCENES.polynomial = async (page) => {
  await page.setViewportSize({ width: 1120, height: 1120 });
  await openFromExplorer(page, 'controller.c');
  await select(page, readFileSync(path.join(DEMO, 'controller.c'), 'utf8'), 'sinf(angle)');
  await runCommand(page, 'Leading Order: Replace Call by Polynomial');
  const frame = await expansionFrame(page, '#compute');
  await frame.locator('#from').fill('-0.5');
  await frame.locator('#to').fill('0.5');
  await frame.locator('#measure').selectOption('ulp');
  await frame.locator('#tolerance').fill('4');
  await frame.locator('#compute').click();
  await frame.locator('#fit-plot').waitFor({ timeout: PATIENCE });
  await pause(500);
  return { x: 0, y: 0, width: 1120, height: 1120 };
};

SCENES.guard = async (page) => {
  await page.setViewportSize({ width: 1120, height: 1120 });
  await focusEditor(page);
  await openFromExplorer(page, 'controller.c');
  await select(page, readFileSync(path.join(DEMO, 'controller.c'), 'utf8'), '(cosh(u) - 1.0) / (u * u)');
  await runCommand(page, 'Leading Order: Guard This Expression');
  const frame = await expansionFrame(page, '#compute');
  await frame.waitForFunction(() => document.getElementById('variable')?.value === 'u', null, { timeout: PATIENCE });
  await frame.locator('#compute').click();
  await frame.locator('table.figures').first().waitFor({ timeout: PATIENCE });
  await frame.locator('#apply-0').waitFor({ timeout: PATIENCE });
  await pause(500);
  return { x: 0, y: 0, width: 1120, height: 1120 };
};

async function around(page, selector, room) {
  const box = await page.locator(selector).first().boundingBox();
  if (!box) throw new Error(`${selector} is not shown`);
  const { width, height } = page.viewportSize();
  const x = Math.max(0, box.x - room.left);
  const y = Math.max(0, box.y - room.top);
  return { x, y, width: Math.min(width - x, Math.max(room.width, box.width + room.left + room.right)), height: Math.min(height - y, box.height + room.top + room.bottom) };
}

const built = spawnSync(process.execPath, [path.join(ROOT, 'esbuild.config.mjs')], { cwd: ROOT, stdio: ['ignore', 'ignore', 'inherit'] });
if (built.status !== 0) process.exit(1);
const browser = await launchBrowser();
if (!browser) {
  process.stdout.write('not run: no browser\n');
  process.exit(1);
}
const wanted = process.argv.slice(2);
const wantedScenes = wanted.filter((word) => word in SCENES);
const wantedThemes = wanted.filter((word) => word in THEMES);
for (const folder of ['media/scenes', 'media/walkthrough', '.cache/scenes']) mkdirSync(path.join(ROOT, folder), { recursive: true });
let failed = 0;
for (const [theme, name] of Object.entries(THEMES)) {
  if (wantedThemes.length > 0 && !wantedThemes.includes(theme)) continue;
  const settings = { 'workbench.colorTheme': name, 'editor.hover.delay': 50, 'editor.fontSize': 14, 'breadcrumbs.enabled': false, 'workbench.layoutControl.enabled': false, 'editor.lightbulb.enabled': 'off', 'workbench.reduceMotion': 'on' };
  const server = await serveWorkbench({ folder: DEMO, settings });
  const { page, close } = await openWorkbench(browser, server.url, { width: 1120, height: 760, scale: 1.5 });
  await openFromExplorer(page, 'sag-note.tex');
  await page.keyboard.press('Control+b');
  for (const [scene, stage] of [['hover', SCENES.hover], ['fixes', SCENES.fixes], ['problems', SCENES.problems], ['page', SCENES.page], ['claims', SCENES.claims], ['polynomial', SCENES.polynomial], ['guard', SCENES.guard]]) {
    if (wantedScenes.length > 0 && !wantedScenes.includes(scene)) continue;
    try {
      const clip = await stage(page);
      // High contrast is only looked at; the pictures that are kept stay below 1.5 MB.
      const file = path.join(ROOT, theme in KEPT && scene in WALKTHROUGH ? 'media/scenes' : '.cache/scenes', `${scene}-${theme}.png`);
      await page.screenshot({ path: file, clip });
      // The walkthrough is inside the package: one pixel a pixel is enough there.
      if (theme === 'dark' && scene in WALKTHROUGH) await page.screenshot({ path: path.join(ROOT, 'media/walkthrough', `${WALKTHROUGH[scene]}.png`), clip, scale: 'css' });
      process.stdout.write(`${scene}-${theme}.png\n`);
    } catch (error) {
      failed += 1;
      process.stdout.write(`FAILED ${scene} in ${theme}: ${error.message}\n`);
    }
    await closeHover(page);
    await page.keyboard.press('Escape');
  }
  await close();
  await server.stop();
}
await browser.close();
process.exit(failed === 0 ? 0 : 1);
