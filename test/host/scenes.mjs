// Driven scenes: a person at the keyboard of the real web workbench. Each scene gets a page with the demo open and leaves it clean.
import { readFileSync } from 'node:fs';
import path from 'node:path';
import { ROOT } from '../../src/start/workbench.mjs';
import { chooseFix, closeHover, editorText, expansionFrame, focusEditor, goTo, hoverAtCursor, openFixes, openFromExplorer, PATIENCE, pageSays, pause, placeOf, runCommand, select, shownHovers, waitForText } from './driver.mjs';

export const DEMO = path.join(ROOT, 'media/demo');
const source = (name) => readFileSync(path.join(DEMO, name), 'utf8');

function holds(condition, message) {
  if (!condition) throw new Error(message);
}

/** One undo, and the line is again as the file has it. A key that was pressed while the focus was on its way is lost, so it is pressed again if nothing happened. */
async function undoTo(page, gone, line) {
  const before = await editorText(page);
  for (let i = 0; i < 3; i += 1) {
    await focusEditor(page);
    await page.keyboard.press('Control+z');
    const changed = await waitForText(page, gone, { absent: true, timeout: 10_000 * (i + 1) }).catch(() => null);
    if (changed !== null) {
      if (line) await waitForText(page, line);
      return;
    }
    holds((await editorText(page)) === before, 'one undo took back only a part');
  }
  throw new Error(`undo did not take back ${gone}`);
}

const SAG = '\\frac{\\cosh u - 1}{u}';

export const scenes = {
  'LaTeX: select, read the hover': async (page) => {
    await openFromExplorer(page, 'sag-note.tex');
    await select(page, source('sag-note.tex'), SAG);
    const text = await hoverAtCursor(page, 'u³/24');
    holds(/u → 0/.test(text), `the limit is missing in ${text}`);
    holds(/from the note above/.test(text), `the source is missing in ${text}`);
    holds(/O\(u⁹\)/.test(text), `the order is missing in ${text}`);
    const picture = page.locator('.monaco-hover img[src^="data:image/svg"]:visible').first();
    // On a cold start the text comes first, without waiting for the typesetter.
    for (let i = 0; i < 5 && !(await picture.isVisible()); i += 1) {
      await closeHover(page);
      await hoverAtCursor(page, 'u³/24');
      await picture.waitFor({ timeout: 1500 * (i + 1) }).catch(() => {});
    }
    const shown = await picture.evaluate((img) => img.complete && img.naturalWidth > 50 && img.naturalHeight > 15);
    holds(shown, 'the picture of the formula is not drawn');
    await closeHover(page);
  },

  'LaTeX: the Expansion page says the same': async (page) => {
    await select(page, source('sag-note.tex'), SAG);
    await runCommand(page, 'Leading Order: Expand Here');
    const frame = await expansionFrame(page, '#formula');
    await pageSays(frame, 'sag-note.tex:16');
    const label = await frame.evaluate(() => document.getElementById('formula')?.getAttribute('aria-label') ?? '');
    holds(label.includes('u/2 + u³/24'), `the page reads ${label}`);
    const values = await frame.evaluate(() => ['variable', 'point', 'from', 'to', 'tolerance'].map((id) => document.getElementById(id)?.value));
    holds(JSON.stringify(values) === JSON.stringify(['u', '0', '-0.3', '0.3', '1e-6']), `the controls hold ${JSON.stringify(values)}`);
    holds(await frame.evaluate(() => document.querySelector('#formula .katex') !== null), 'the formula is not typeset');
  },

  'the page: terms by keyboard, then back': async (page) => {
    const frame = await expansionFrame(page, '#formula');
    await frame.locator('#formula').focus();
    await page.keyboard.press('-');
    await frame.waitForFunction(() => document.getElementById('terms')?.value === '3', null, { timeout: PATIENCE });
    await page.keyboard.press('+');
    await frame.waitForFunction(() => document.getElementById('terms')?.value === '4', null, { timeout: PATIENCE });
    holds((await frame.evaluate(() => document.activeElement?.id)) === 'formula', 'the focus was lost');
  },

  'the page: a tolerance typed, a row of the ladder chosen': async (page) => {
    const frame = await expansionFrame(page, '#formula');
    await frame.locator('#tolerance').fill('1e-9');
    await frame.locator('#tolerance').press('Enter');
    await pageSays(frame, /terms? keeps? 1e-9/);
    await frame.locator('button.row').first().click();
    const first = await frame.locator('button.row').first().innerText();
    await frame.waitForFunction((wanted) => document.getElementById('terms')?.value === wanted, first.trim(), { timeout: PATIENCE });
  },

  'the page: insert from it, one undo takes it back': async (page) => {
    const frame = await expansionFrame(page, '#apply-0');
    await frame.locator('#apply-0').click();
    await waitForText(page, `${SAG} = `);
    await undoTo(page, `${SAG} = `, `s(u) &= ${SAG} \\label{eq:sag}`);
  },

  'LaTeX: quick fix inserts, one undo takes it back': async (page) => {
    await focusEditor(page);
    await select(page, source('sag-note.tex'), SAG);
    const titles = await openFixes(page, 'Insert "= u/2');
    holds(titles.some((title) => title.includes('as next aligned row')), `offered: ${titles.join(' | ')}`);
    await page.keyboard.press('Escape');
    await chooseFix(page, 'as next aligned row');
    await waitForText(page, '&= \\frac{u}{2}');
    await undoTo(page, '&= \\frac{u}{2}', `s(u) &= ${SAG} \\label{eq:sag}`);
  },

  'LaTeX: a wrong coefficient is underlined and corrected': async (page) => {
    await focusEditor(page);
    await page.locator('.squiggly-warning').first().waitFor({ timeout: PATIENCE });
    const at = placeOf(source('sag-note.tex'), '620');
    await goTo(page, at.line, at.column + 1);
    await chooseFix(page, 'Correct to');
    await waitForText(page, '720}');
    await undoTo(page, '720}', '\\frac{u^6}{620}');
  },

  'LaTeX: every claim is listed with its verdict': async (page) => {
    await focusEditor(page);
    await runCommand(page, 'Leading Order: Check This Document');
    const frame = await expansionFrame(page, '.claims');
    const text = await pageSays(frame, /1 claim: it fails/);
    holds(/22\s+fails/.test(text), `the list reads ${text}`);
    await frame.locator('#claim-0').click();
    await page.locator('.statusbar-item', { hasText: 'Ln 22' }).first().waitFor({ timeout: PATIENCE });
    await frame.locator('#mode-expand').click();
  },

  'C: hover, replace by polynomial, undo': async (page) => {
    await openFromExplorer(page, 'controller.c');
    await select(page, source('controller.c'), 'sqrt(1.0 + slope * slope)');
    const text = await hoverAtCursor(page, 'slope²');
    holds(/slope → 0/.test(text), `the limit is missing in ${text}`);
    await closeHover(page);
    await chooseFix(page, 'Replace by polynomial');
    await waitForText(page, 'return sqrt(1.0 + slope * slope)', { absent: true });
    await focusEditor(page);
    await page.keyboard.press('Control+z');
    await waitForText(page, 'return sqrt(1.0 + slope * slope)');
  },

  'C: a constant of the file stays a symbol, and is filled in through the hover': async (page) => {
    await focusEditor(page);
    await select(page, source('controller.c'), 'log(cosh(gravity * t))');
    const text = await hoverAtCursor(page, 'gravity²');
    holds(/fill in gravity = 9\.81/.test(text), `the link is missing in ${text}`);
    await page.locator('.monaco-hover:visible a', { hasText: 'fill in gravity' }).first().click();
    const frame = await expansionFrame(page, '#constants');
    const label = () => frame.evaluate(() => document.getElementById('formula')?.getAttribute('aria-label') ?? '');
    await frame.waitForFunction(() => document.getElementById('constants')?.checked === true, null, { timeout: PATIENCE });
    holds(/962361\/20000|962361t²\/20000/.test(await label()) && !(await label()).includes('gravity'), `the page reads ${await label()}`);
    await pageSays(frame, 'gravity = 9.81');
    await frame.locator('#constants').click();
    await frame.waitForFunction(() => document.getElementById('formula')?.getAttribute('aria-label')?.includes('gravity') === true, null, { timeout: PATIENCE });
    await focusEditor(page);
  },

  'C: a call is replaced by a fitted polynomial through the page': async (page) => {
    await select(page, source('controller.c'), 'sinf(angle)');
    await runCommand(page, 'Leading Order: Replace Call by Polynomial');
    const frame = await expansionFrame(page, '#compute');
    await frame.locator('#from').fill('-0.5');
    await frame.locator('#to').fill('0.5');
    await frame.locator('#tolerance').fill('1e-6');
    await frame.locator('#compute').click();
    await frame.locator('#apply-0').waitFor({ timeout: PATIENCE });
    await pageSays(frame, 'binary32');
    await frame.locator('#apply-0').click();
    const text = await waitForText(page, '1.8f * sin_approximation(angle)');
    holds(/sin_approximation\(float \w+\)[^]*float swing_correction/.test(text), `the helper does not stand before its caller: ${text}`);
    await undoTo(page, 'sin_approximation', 'return 1.8f * sinf(angle);');
    await frame.locator('#mode-expand').click();
  },

  'C: an expression that cancels is guarded through the page': async (page) => {
    await openFromExplorer(page, 'controller.c');
    await select(page, source('controller.c'), '(cosh(u) - 1.0) / (u * u)');
    await runCommand(page, 'Leading Order: Guard This Expression');
    const frame = await expansionFrame(page, '#compute');
    await frame.locator('#compute').click();
    await frame.locator('#apply-0').waitFor({ timeout: PATIENCE });
    const told = await pageSays(frame, /largest|worst|at most|bound/i);
    holds(/guarded\(double u\)/.test(told) && /sinh/.test(told), `the page shows neither code nor form: ${told}`);
    holds((await frame.evaluate(() => document.querySelectorAll('table.figures tbody tr').length)) >= 3, 'the ranges are missing');
    await frame.locator('#apply-0').click();
    // Only the lines in view are in the page: the guard stands where its caller began.
    const text = await waitForText(page, 'static inline double guarded(double u)');
    holds(/swing_correction[^]*double guarded\(double u\)/.test(text), `the guard does not stand before its caller: ${text}`);
    await undoTo(page, 'static inline double guarded(double u)', 'return (cosh(u) - 1.0) / (u * u);');
    await frame.locator('#mode-expand').click();
  },

  'C: plain arithmetic has no hover': async (page) => {
    const at = placeOf(source('controller.c'), 'u * u / 6.0');
    await goTo(page, at.line, at.column + 2);
    await page.keyboard.press('Control+k');
    await page.keyboard.press('Control+i');
    await pause(1500);
    const shown = await shownHovers(page);
    holds(!shown.join(' ').includes('Expansion page'), `there is a hover: ${shown.join(' ')}`);
    await closeHover(page);
  },

  'Python: hover, replace by polynomial, undo': async (page) => {
    await openFromExplorer(page, 'survey.py');
    await select(page, source('survey.py'), 'np.exp(-t) * np.cos(t)');
    const text = await hoverAtCursor(page, 't³/3');
    holds(/1 − t/.test(text), `the expansion is missing in ${text}`);
    await closeHover(page);
    await chooseFix(page, 'Replace by polynomial');
    await waitForText(page, 'np.exp(-t) * np.cos(t)', { absent: true });
    await focusEditor(page);
    await page.keyboard.press('Control+z');
    await waitForText(page, 'np.exp(-t) * np.cos(t)');
  },

  'the small quantity is asked once and remembered': async (page) => {
    await openFromExplorer(page, 'field-notes.md');
    await goTo(page, 1, 1);
    await runCommand(page, 'Leading Order: Forget Answers for This File');
    await select(page, source('field-notes.md'), '\\sqrt{1 + q}');
    await runCommand(page, 'Leading Order: Set Small Quantity');
    await page.locator('.quick-input-list .monaco-list-row', { hasText: 'q' }).first().waitFor({ timeout: PATIENCE });
    await page.keyboard.press('Enter');
    await page.locator('.quick-input-title', { hasText: 'tend' }).first().waitFor({ timeout: PATIENCE });
    await page.keyboard.press('Enter');
    const frame = await expansionFrame(page, '#formula');
    await pageSays(frame, 'field-notes.md');
    await focusEditor(page);
    await select(page, source('field-notes.md'), '\\sqrt{1 + q}');
    const text = await hoverAtCursor(page, 'q²/8');
    holds(/remembered for this file/.test(text), `the source is missing in ${text}`);
    await closeHover(page);
  },

  'an edit between computing and applying is refused, nothing is lost': async (page) => {
    await openFromExplorer(page, 'sag-note.tex');
    await select(page, source('sag-note.tex'), SAG);
    await runCommand(page, 'Leading Order: Expand Here');
    const frame = await expansionFrame(page, '#apply-0');
    await pageSays(frame, 'sag-note.tex:16');
    await focusEditor(page);
    const at = placeOf(source('sag-note.tex'), SAG);
    await goTo(page, at.line, at.column + SAG.length - 1);
    // The edit and the click come in the same breath, before the page has heard of the edit.
    await Promise.all([page.keyboard.type('v'), frame.evaluate(() => document.getElementById('apply-0')?.click())]);
    await waitForText(page, '{uv}');
    await pause(1200);
    const text = await editorText(page);
    holds(text.includes('\\frac{\\cosh u - 1}{uv}'), `the text is damaged: ${text.split('\n').find((line) => line.includes('cosh u - 1'))}`);
    await undoTo(page, '{uv}');
  },

  'theme: page and picture follow when it changes': async (page) => {
    for (const [kind, ink] of [
      ['vscode-light', '1f1f1f'],
      ['vscode-dark', 'cccccc'],
    ]) {
      await focusEditor(page);
      await runCommand(page, 'Preferences: Toggle between Light/Dark Themes');
      const frame = await expansionFrame(page);
      await frame.waitForFunction((wanted) => document.body.classList.contains(wanted), kind, { timeout: PATIENCE });
      await focusEditor(page);
      await select(page, source('sag-note.tex'), SAG);
      const picture = page.locator(`.monaco-hover:visible img[src^="data:image/svg"][src*="${ink}"]`).first();
      for (let i = 0; i < 6 && !(await picture.isVisible()); i += 1) {
        await closeHover(page);
        await hoverAtCursor(page, 'u³/24');
        await picture.waitFor({ timeout: 2000 * (i + 1) }).catch(() => {});
      }
      holds(await picture.isVisible(), `the ink is not ${ink} in ${kind}`);
      await closeHover(page);
    }
  },
};
