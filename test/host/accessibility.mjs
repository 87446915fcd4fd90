// The Expansion page under axe-core in four kinds of theme, and by keyboard alone.
import { mkdirSync, readFileSync } from 'node:fs';
import path from 'node:path';
import { ROOT, serveWorkbench } from '../../src/start/workbench.mjs';
import { expansionFrame, focusEditor, openFromExplorer, openWorkbench, PATIENCE, pageSays, runCommand, select } from './driver.mjs';
import { limited, SETTINGS } from './runner.mjs';

const DEMO = path.join(ROOT, 'media/demo');
const THEMES = ['Default Dark Modern', 'Default Light Modern', 'Default High Contrast', 'Default High Contrast Light'];
const RULES = ['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'best-practice'];
/** What depends on the host's frame, not on the page. */
const NOT_OURS = ['page-has-heading-one', 'region', 'landmark-one-main'];

/** `wanted` may name themes. */
export async function accessibility(browser, tally, wanted = []) {
  process.stdout.write('-- accessibility\n');
  const axe = readFileSync(path.join(ROOT, 'node_modules/axe-core/axe.min.js'), 'utf8');
  const named = THEMES.filter((theme) => wanted.includes(theme));
  for (const theme of named.length > 0 ? named : THEMES) {
    const name = `axe-core finds nothing on any mode of the page in ${theme}`;
    const server = await serveWorkbench({ folder: DEMO, settings: { ...SETTINGS, 'workbench.colorTheme': theme } });
    const { page, close } = await openWorkbench(browser, server.url);
    try {
      await limited(inspect(page, axe, theme === THEMES[0] ? tally : null), 4 * PATIENCE, name);
      tally.pass(name);
    } catch (error) {
      tally.fail(`${name}: ${error.message}`);
      const pictures = path.join(ROOT, '.cache/failed-scenes');
      mkdirSync(pictures, { recursive: true });
      await page.screenshot({ path: path.join(pictures, `accessibility-${theme.replace(/\W+/g, '-')}.png`) }).catch(() => {});
    }
    await close();
    await server.stop();
  }
}

/** Every mode of the page, with a result in it and all of its details open. */
const MODES = {
  expansion: async (page) => {
    await openFromExplorer(page, 'sag-note.tex');
    await select(page, readFileSync(path.join(DEMO, 'sag-note.tex'), 'utf8'), '\\frac{\\cosh u - 1}{u}');
    await runCommand(page, 'Leading Order: Open Beside');
    const frame = await expansionFrame(page, '.plots');
    await pageSays(frame, 'sag-note.tex:16');
    return frame;
  },
  claims: async (page) => {
    await focusEditor(page);
    await runCommand(page, 'Leading Order: Check This Document');
    return expansionFrame(page, '.claims');
  },
  polynomial: async (page) => {
    await focusEditor(page);
    await openFromExplorer(page, 'controller.c');
    await select(page, readFileSync(path.join(DEMO, 'controller.c'), 'utf8'), 'sinf(angle)');
    await runCommand(page, 'Leading Order: Replace Call by Polynomial');
    const frame = await expansionFrame(page, '#mode-fit[aria-pressed=true]');
    await frame.waitForFunction(() => document.getElementById('variable')?.value === 'angle', null, { timeout: PATIENCE });
    await frame.locator('#from').fill('-0.5');
    await frame.locator('#to').fill('0.5');
    await frame.locator('#compute').click();
    await frame.locator('#fit-plot').waitFor({ timeout: PATIENCE });
    return frame;
  },
  guard: async (page) => {
    await focusEditor(page);
    await select(page, readFileSync(path.join(DEMO, 'controller.c'), 'utf8'), '(cosh(u) - 1.0) / (u * u)');
    await runCommand(page, 'Leading Order: Guard This Expression');
    const frame = await expansionFrame(page, '#mode-guard[aria-pressed=true]');
    await frame.locator('table.figures').first().waitFor({ timeout: PATIENCE });
    return frame;
  },
};

async function inspect(page, axe, tally) {
  const wrong = [];
  for (const [mode, open] of Object.entries(MODES)) {
    const frame = await open(page);
    await frame.evaluate(() => document.querySelectorAll('details').forEach((details) => (details.open = true)));
    await frame.evaluate(axe);
    const found = await frame.evaluate(
      async ([rules, skipped]) => {
        const result = await globalThis.axe.run(document, { runOnly: rules, rules: Object.fromEntries(skipped.map((id) => [id, { enabled: false }])) });
        return result.violations.map((violation) => `${violation.id} (${violation.nodes.map((node) => `${node.target.join(' ')}: ${node.failureSummary?.split('\n')[1]?.trim() ?? ''}`).slice(0, 3).join('; ')})`);
      },
      [RULES, NOT_OURS],
    );
    wrong.push(...found.map((violation) => `${mode}: ${violation}`));
    if (tally) await byKeyboard(page, frame, mode, tally);
  }
  if (wrong.length > 0) throw new Error(wrong.join(' | '));
}

/** Tab reaches every control in the order in which they stand. */
async function byKeyboard(page, frame, mode, tally) {
  const wanted = await frame.evaluate(() => [...document.querySelectorAll('#page button:not(:disabled), #page input, #page select, #page summary, #page [tabindex="0"]')].filter((e) => e.checkVisibility()).length);
  await frame.evaluate(() => document.querySelector('#page button')?.focus());
  const seen = new Set();
  for (let i = 0; i < wanted + 5; i += 1) {
    const id = await frame.evaluate(() => {
      const active = document.activeElement;
      if (!active || active === document.body) return null;
      active.dataset.seen ??= String(document.querySelectorAll('[data-seen]').length + 1);
      return active.dataset.seen;
    });
    if (id === null) break;
    seen.add(id);
    await page.keyboard.press('Tab');
  }
  if (seen.size >= wanted) tally.pass(`${mode}: all ${wanted} controls are reached by keyboard`);
  else tally.fail(`${mode}: of ${wanted} controls only ${seen.size} are reached by keyboard`);
}
