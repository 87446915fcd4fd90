import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';

const lock = readFileSync(new URL('../../package-lock.json', import.meta.url), 'utf8');
const packages = (JSON.parse(lock) as { packages: Record<string, { hasInstallScript?: boolean }> }).packages;

describe('the lock file', () => {
  it('holds no address of a package source', () => {
    expect(lock).not.toMatch(/"resolved"/);
  });
  it.each(['darwin-arm64', 'darwin-x64', 'win32-x64', 'linux-x64', 'linux-arm64'])('carries the native builds for %s', (platform) => {
    const names = Object.keys(packages);
    expect(names.some((n) => n.endsWith(`@esbuild/${platform}`))).toBe(true);
    expect(names.some((n) => n.includes('@rolldown/binding-') && n.includes(platform))).toBe(true);
    expect(names.some((n) => n.includes('lightningcss-') && n.includes(platform))).toBe(true);
  });
});

describe('npm settings', () => {
  it('runs no install script', () => {
    expect(readFileSync(new URL('../../.npmrc', import.meta.url), 'utf8')).toMatch(/^ignore-scripts=true$/m);
  });
});
