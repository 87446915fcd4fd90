// What a person does in the workbench, as functions over a page. Everything waits for what is seen, never for time to pass.

/** Long enough for a machine ten times slower than usual; whoever sees what is wanted waits no longer. */
export const PATIENCE = 150_000;

/** Opens the workbench and waits for the first editor or, without one, for the explorer. */
export async function openWorkbench(browser, url, { width = 1400, height = 900, scale = 1 } = {}) {
  const context = await browser.newContext({ viewport: { width, height }, deviceScaleFactor: scale, reducedMotion: 'reduce' });
  const page = await context.newPage();
  const errors = [];
  page.on('pageerror', (error) => errors.push(String(error).slice(0, 300)));
  // Content-policy violations and failed scripts of the page itself show up on the console only.
  page.on('console', (message) => message.type() === 'error' && /Content Security Policy|leading-order|Refused/i.test(message.text()) && errors.push(message.text().slice(0, 300)));
  await page.goto(url);
  await page.waitForSelector('.explorer-folders-view .monaco-list-row', { timeout: PATIENCE });
  return { page, errors, close: () => context.close() };
}

export const editorLines = (page) => page.locator('.part.editor .editor-instance .view-line');

/** The text of the active editor as the workbench shows it, lines in order; blanks are plain spaces. */
export async function editorText(page) {
  return page.evaluate(() => {
    const active = document.querySelector('.part.editor .editor-group-container.active .editor-instance .view-lines') ?? document.querySelector('.part.editor .editor-instance .view-lines');
    if (!active) return '';
    const rows = [...active.querySelectorAll('.view-line')].map((line) => [Number.parseFloat(line.style.top), line.textContent ?? '']);
    return rows
      .sort((a, b) => a[0] - b[0])
      .map(([, text]) => text.replaceAll('\u00a0', ' '))
      .join('\n');
  });
}

export async function waitForText(page, wanted, { absent = false, timeout = PATIENCE } = {}) {
  const until = Date.now() + timeout;
  for (;;) {
    const text = await editorText(page);
    if (text.includes(wanted) !== absent) return text;
    if (Date.now() > until) throw new Error(`the editor ${absent ? 'still shows' : 'does not show'} ${JSON.stringify(wanted)}; it shows\n${text.slice(0, 1200)}`);
    await pause(100);
  }
}

export const pause = (ms) => new Promise((resolve) => setTimeout(resolve, ms));

/** A key pressed before the keybindings are ready, or with the focus in a webview, is lost: press again. */
async function quickInput(page, key) {
  const box = page.locator('.quick-input-widget .quick-input-box input[type=text]').first();
  for (let i = 0; i < 10; i += 1) {
    await page.keyboard.press(key);
    try {
      await box.waitFor({ state: 'visible', timeout: 1500 * (i + 1) });
      return box;
    } catch {
      // again
    }
  }
  throw new Error(`the quick input did not open on ${key}`);
}

const quickInputGone = (page) => page.waitForSelector('.quick-input-widget', { state: 'hidden', timeout: PATIENCE });

export async function runCommand(page, title) {
  const box = await quickInput(page, 'F1');
  await box.fill(`>${title}`);
  await page.locator('.quick-input-list .monaco-list-row').filter({ hasText: title }).first().waitFor({ timeout: PATIENCE });
  await page.keyboard.press('Enter');
}

export async function openFile(page, name) {
  const box = await quickInput(page, 'Control+p');
  await box.fill(name);
  await page.locator('.quick-input-list .monaco-list-row').filter({ hasText: name }).first().waitFor({ timeout: PATIENCE });
  await page.keyboard.press('Enter');
  await page.locator('.tab.active', { hasText: name }).first().waitFor({ timeout: PATIENCE });
  await focusEditor(page);
}

/** Opens a file by double click in the explorer: works where the file search has no provider. */
export async function openFromExplorer(page, name) {
  const row = page.locator('.explorer-folders-view .monaco-list-row', { hasText: name }).first();
  for (let i = 0; i < 5 && !(await row.isVisible()); i += 1) {
    await focusEditor(page);
    await page.keyboard.press('Control+Shift+e');
    await row.waitFor({ timeout: 3000 * (i + 1) }).catch(() => {});
  }
  await row.dblclick();
  await page.locator('.tab.active', { hasText: name }).first().waitFor({ timeout: PATIENCE });
  await page.locator('.part.editor .editor-instance .view-line').first().waitFor({ timeout: PATIENCE });
  await focusEditor(page);
}

export async function focusEditor(page) {
  await awayFromText(page);
  await page.keyboard.press('Escape');
  await page.keyboard.press('Control+1');
}

/** Hovers swallow clicks and keys: the pointer rests on the status bar. */
export const awayFromText = (page) => page.mouse.move(600, (page.viewportSize()?.height ?? 900) - 6);

export async function goTo(page, line, column) {
  const box = await quickInput(page, 'Control+g');
  await box.fill(`:${line}:${column}`);
  await page.keyboard.press('Enter');
  await quickInputGone(page);
  await page.locator('.statusbar-item', { hasText: `Ln ${line}, Col ${column}` }).first().waitFor({ timeout: PATIENCE });
}

/** Puts the cursor at the first occurrence of `text` in the file's source and selects it by keyboard. */
export async function select(page, source, text, { occurrence = 0 } = {}) {
  const at = placeOf(source, text, occurrence);
  await goTo(page, at.line, at.column);
  for (let i = 0; i < [...text].length; i += 1) await page.keyboard.press('Shift+ArrowRight');
  await page.locator('.statusbar-item', { hasText: `${text.length} selected` }).first().waitFor({ timeout: PATIENCE });
}

export function placeOf(source, text, occurrence = 0) {
  let offset = source.indexOf(text);
  for (let i = 0; i < occurrence && offset >= 0; i += 1) offset = source.indexOf(text, offset + 1);
  if (offset < 0) throw new Error(`${JSON.stringify(text)} is not in the file`);
  const before = source.slice(0, offset).split('\n');
  return { line: before.length, column: (before.at(-1)?.length ?? 0) + 1 };
}

/** The hover at the cursor, opened by keyboard. Returns its text once it holds `wanted`. */
export async function hoverAtCursor(page, wanted) {
  const hover = page.locator('.monaco-hover .hover-contents:visible', { hasText: wanted }).first();
  const tries = 10;
  for (let i = 0; i < tries; i += 1) {
    await page.keyboard.press('Control+k');
    await page.keyboard.press('Control+i');
    try {
      await hover.waitFor({ timeout: 3000 * (i + 1) });
      break;
    } catch {
      await page.keyboard.press('Escape');
      if (i === tries - 1) throw new Error(`no hover with ${JSON.stringify(wanted)}; shown: ${JSON.stringify(await shownHovers(page))}`);
    }
  }
  return (await shownHovers(page)).join('\n').replaceAll('\u00a0', ' ');
}

/** A hover that was closed stays in the page, out of sight. */
export const shownHovers = (page) => page.locator('.monaco-hover .hover-contents:visible').allInnerTexts();

export async function closeHover(page) {
  await page.keyboard.press('Escape');
  await awayFromText(page);
}

/** Opens the quick-fix menu and returns its titles once one holds `wanted`. */
export async function openFixes(page, wanted) {
  const row = page.locator('.action-widget .monaco-list-row', { hasText: wanted }).first();
  for (let i = 0; i < 8; i += 1) {
    await page.keyboard.press('Control+.');
    try {
      await row.waitFor({ timeout: 4000 * (i + 1) });
      break;
    } catch {
      if (i === 7) throw new Error(`no quick fix ${JSON.stringify(wanted)}; shown: ${JSON.stringify(await page.locator('.action-widget .monaco-list-row').allInnerTexts())}`);
      await page.keyboard.press('Escape');
    }
  }
  return page.locator('.action-widget .monaco-list-row.action').allInnerTexts();
}

/** The list blocks the pointer for a moment: walk by keyboard until the row is focused. */
export async function chooseFix(page, wanted) {
  await openFixes(page, wanted);
  const row = page.locator('.action-widget .monaco-list-row', { hasText: wanted }).first();
  for (let i = 0; i < 25 && !(await row.getAttribute('class'))?.includes('focused'); i += 1) await page.keyboard.press('ArrowDown');
  await page.keyboard.press('Enter');
  await page.waitForSelector('.action-widget', { state: 'hidden', timeout: PATIENCE });
}

/** The innermost frame of the Expansion page: the view's or the editor tab's. */
export async function expansionFrame(page, wanted = '#page', timeout = PATIENCE) {
  const until = Date.now() + timeout;
  for (;;) {
    for (const frame of page.frames()) {
      try {
        if (await frame.evaluate((selector) => document.getElementById('page') !== null && document.querySelector(selector) !== null, wanted)) return frame;
      } catch {
        // A frame on its way out.
      }
    }
    if (Date.now() > until) throw new Error(`no Expansion page shows ${wanted}`);
    await pause(100);
  }
}

/** Waits until the page's text holds `wanted`; returns it. */
export async function pageSays(frame, wanted, timeout = PATIENCE) {
  const until = Date.now() + timeout;
  for (;;) {
    const text = await frame.evaluate(() => document.getElementById('page')?.innerText ?? '');
    if (wanted instanceof RegExp ? wanted.test(text) : text.includes(wanted)) return text;
    if (Date.now() > until) throw new Error(`the page does not say ${wanted}; it says\n${text.slice(0, 1500)}`);
    await pause(100);
  }
}
