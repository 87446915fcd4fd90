// The second host as a server on loopback, with its own fresh folders.
import { execFileSync, spawn } from 'node:child_process';
import { mkdirSync, mkdtempSync, openSync, writeFileSync } from 'node:fs';
import http from 'node:http';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { freePort } from '../../../src/start/workbench.mjs';
import { NODE, SERVER } from './install.mjs';

const ENTRY = path.join(SERVER, 'out/node/entry.js');
const START_LIMIT_MS = 300_000;

export const freshFolder = (name) => mkdtempSync(path.join(tmpdir(), `leading-order-${name}-`));

function answers(url) {
  return new Promise((resolve) => {
    http.get(url, (response) => resolve(response.resume().statusCode < 500)).on('error', () => resolve(false));
  });
}

/** `trust: true` leaves workspace trust switched on, so that an unknown folder opens restricted. */
export async function startServer({ workspace, vsix, settings = {}, trust = false }) {
  const data = freshFolder('data');
  const extensions = path.join(data, 'extensions');
  mkdirSync(path.join(data, 'User'), { recursive: true });
  writeFileSync(path.join(data, 'config.yaml'), '');
  writeFileSync(
    path.join(data, 'User/settings.json'),
    JSON.stringify({
      'security.workspace.trust.enabled': trust,
      'security.workspace.trust.startupPrompt': 'never',
      'security.workspace.trust.banner': 'never',
      'workbench.startupEditor': 'none',
      'workbench.welcomePage.walkthroughs.openOnInstall': false,
      'workbench.secondarySideBar.defaultVisibility': 'hidden',
      'workbench.tips.enabled': false,
      'window.commandCenter': false,
      'telemetry.telemetryLevel': 'off',
      'extensions.ignoreRecommendations': true,
      'extensions.autoCheckUpdates': false,
      'update.mode': 'none',
      'git.enabled': false,
      'chat.disableAIFeatures': true,
      'editor.minimap.enabled': false,
      ...settings,
    }),
  );
  const environment = { ...process.env, VSCODE_PROXY_URI: undefined, XDG_DATA_HOME: data, XDG_CONFIG_HOME: data };
  const common = ['--config', path.join(data, 'config.yaml'), '--user-data-dir', data, '--extensions-dir', extensions];
  execFileSync(NODE, [ENTRY, ...common, '--install-extension', vsix], { env: environment, stdio: ['ignore', 'ignore', 'pipe'] });
  const port = await freePort();
  const log = openSync(path.join(data, 'server.log'), 'w');
  const flags = ['--bind-addr', `127.0.0.1:${port}`, '--auth', 'none', '--disable-telemetry', '--disable-update-check', '--disable-getting-started-override', ...(trust ? [] : ['--disable-workspace-trust'])];
  const server = spawn(NODE, [ENTRY, ...flags, ...common, workspace], { stdio: ['ignore', log, log], env: environment });
  const url = `http://127.0.0.1:${port}`;
  const until = Date.now() + START_LIMIT_MS;
  while (!(await answers(`${url}/healthz`))) {
    if (Date.now() > until || server.exitCode !== null) throw new Error('the second host did not start');
    await new Promise((resolve) => setTimeout(resolve, 150));
  }
  return {
    port,
    url: `${url}/?folder=${encodeURIComponent(workspace)}`,
    stop: () =>
      new Promise((resolve) => {
        server.on('exit', resolve);
        server.kill('SIGTERM');
        setTimeout(() => server.kill('SIGKILL'), 3000).unref();
      }),
  };
}

/** Adds a test suite to the configuration that the page carries; the address's own payload is ignored by newer builds. */
export async function withSuite(page, port, suite, windowExtension) {
  const uri = (file) => ({ $mid: 1, scheme: 'vscode-remote', authority: `127.0.0.1:${port}`, path: file });
  await page.route(
    (url) => url.pathname === '/',
    async (route) => {
      const response = await route.fetch();
      const body = (await response.text()).replace(/(id="vscode-workbench-web-configuration" data-settings=")([^"]*)"/, (_whole, before, json) => {
        const configuration = JSON.parse(json.replaceAll('&quot;', '"').replaceAll('&amp;', '&'));
        configuration.developmentOptions = { ...configuration.developmentOptions, extensions: [uri(windowExtension)], extensionTestsPath: uri(suite) };
        return `${before}${JSON.stringify(configuration).replaceAll('&', '&amp;').replaceAll('"', '&quot;')}"`;
      });
      await route.fulfill({ response, body });
    },
  );
}
