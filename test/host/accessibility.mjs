// The Expansion page under axe-core in four kinds of theme, and by keyboard alone.
import { readFileSync } from 'node:fs';
import path from 'node:path';
import { ROOT, serveWorkbench } from '../../src/start/workbench.mjs';
import { expansionFrame, openFromExplorer, openWorkbench, pageSays, runCommand, select } from './driver.mjs';
import { limited, SETTINGS } from './runner.mjs';

const DEMO = path.join(ROOT, 'media/demo');
const THEMES = ['Default Dark Modern', 'Default Light Modern', 'Default High Contrast', 'Default High Contrast Light'];
const RULES = ['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'best-practice'];
/** What depends on the host's frame, not on the page. */
const NOT_OURS = ['page-has-heading-one', 'region', 'landmark-one-main'];

export async function accessibility(browser, tally) {
  process.stdout.write('-- accessibility\n');
  const axe = readFileSync(path.join(ROOT, 'node_modules/axe-core/axe.min.js'), 'utf8');
  for (const theme of THEMES) {
    const name = `axe-core finds nothing on the page in ${theme}`;
    const server = await serveWorkbench({ folder: DEMO, settings: { ...SETTINGS, 'workbench.colorTheme': theme } });
    const { page, close } = await openWorkbench(browser, server.url);
    try {
      await limited(inspect(page, axe, theme === THEMES[0] ? tally : null), 90_000, name);
      tally.pass(name);
    } catch (error) {
      tally.fail(`${name}: ${error.message}`);
    }
    await close();
    await server.stop();
  }
}

async function inspect(page, axe, tally) {
  await openFromExplorer(page, 'sag-note.tex');
  await select(page, readFileSync(path.join(DEMO, 'sag-note.tex'), 'utf8'), '\\frac{\\cosh u - 1}{u}');
  await runCommand(page, 'Leading Order: Open Beside');
  const frame = await expansionFrame(page, '.plots');
  await pageSays(frame, 'sag-note.tex:16');
  await frame.evaluate(axe);
  const found = await frame.evaluate(
    async ([rules, skipped]) => {
      const result = await globalThis.axe.run(document, { runOnly: rules, rules: Object.fromEntries(skipped.map((id) => [id, { enabled: false }])) });
      return result.violations.map((violation) => `${violation.id} (${violation.nodes.map((node) => `${node.target.join(' ')}: ${node.failureSummary?.split('\n')[1]?.trim() ?? ''}`).slice(0, 3).join('; ')})`);
    },
    [RULES, NOT_OURS],
  );
  if (tally) await byKeyboard(page, frame, tally);
  if (found.length > 0) throw new Error(found.join(' | '));
}

/** Tab reaches every control in the order in which they stand. */
async function byKeyboard(page, frame, tally) {
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
  if (seen.size >= wanted) tally.pass(`${wanted} controls of the page are reached by keyboard`);
  else tally.fail(`of ${wanted} controls of the page only ${seen.size} are reached by keyboard`);
}
