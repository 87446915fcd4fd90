/** Facts of the manifest that a marketplace or an editor would refuse or users would miss. */
import { readdirSync, readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { COMPOSED } from '../../src/editor/sentences.ts';
import { WORDS } from '../../src/webview/words.ts';
import { engineSentences, FILLED_IN } from './engineSentences.ts';

const root = new URL('../../', import.meta.url);
const read = (name: string): string => readFileSync(new URL(name, root), 'utf8');
interface Setting {
  readonly default?: unknown;
  readonly markdownDescription?: string;
  readonly scope?: string;
  readonly order?: number;
}
interface Manifest {
  readonly name: string;
  readonly keywords: readonly string[];
  readonly icon: string;
  readonly activationEvents: readonly string[];
  readonly capabilities: { readonly untrustedWorkspaces: { readonly supported: boolean }; readonly virtualWorkspaces: boolean };
  readonly contributes: {
    readonly commands: readonly { readonly command: string; readonly category: string }[];
    readonly keybindings?: unknown;
    readonly configuration: { readonly properties: Readonly<Record<string, Setting>> };
    readonly walkthroughs: readonly { readonly steps: readonly unknown[] }[];
  };
}
const manifest = JSON.parse(read('package.json')) as Manifest;
const { contributes } = manifest;
const [english, german, bundle] = ['package.nls.json', 'package.nls.de.json', 'l10n/bundle.l10n.de.json'].map((name) => JSON.parse(read(name)) as Record<string, string>);

describe('manifest', () => {
  it('has a lower-case name and at most five keywords', () => {
    expect(manifest.name).toBe(manifest.name.toLowerCase());
    expect(manifest.keywords.length).toBeLessThanOrEqual(5);
  });
  it('has fewer than 15 settings, each with default, description, scope and order', () => {
    const settings = Object.entries(contributes.configuration.properties);
    expect(settings.length).toBeLessThan(15);
    for (const [name, setting] of settings) {
      expect(setting.default, name).toBeDefined();
      expect(setting.markdownDescription, name).toBeTruthy();
      expect(setting.scope, name).toBeTruthy();
      expect(setting.order, name).toBeTypeOf('number');
    }
  });
  it('has one category of commands and takes no key', () => {
    expect(new Set(contributes.commands.map((command) => command.category))).toEqual(new Set(['Leading Order']));
    expect(contributes.commands).toHaveLength(13);
    expect(contributes.keybindings).toBeUndefined();
  });
  it('works in untrusted and virtual workspaces and never activates for everything', () => {
    expect(manifest.capabilities.untrustedWorkspaces.supported).toBe(true);
    expect(manifest.capabilities.virtualWorkspaces).toBe(true);
    expect(manifest.activationEvents).not.toContain('*');
    expect(manifest.activationEvents).not.toContain('onStartupFinished');
  });
  it('has a square icon of at least 128 pixels', () => {
    const png = readFileSync(new URL(manifest.icon, root));
    expect(png.readUInt32BE(16)).toBeGreaterThanOrEqual(128);
    expect(png.readUInt32BE(16)).toBe(png.readUInt32BE(20));
  });
  it('has a walkthrough of four steps', () => expect(contributes.walkthroughs.map((w) => w.steps.length)).toEqual([4]));
});

describe('languages', () => {
  it('translates every string of the manifest', () => {
    const used = [...JSON.stringify(manifest).matchAll(/%([\w.]+)%/g)].map((match) => match[1] ?? '');
    expect(used.filter((key) => !english?.[key] || !german?.[key])).toEqual([]);
    expect(Object.keys(german ?? {}).sort()).toEqual(Object.keys(english ?? {}).sort());
  });
  it('translates every sentence of the program, and nothing that is gone', () => {
    const said = new Set<string>([...Object.values(WORDS), ...engineSentences(), ...COMPOSED, ...FILLED_IN]);
    for (const file of readdirSync(new URL('src/editor/', root)))
      for (const match of read(`src/editor/${file}`).matchAll(/l10n\.t\(\s*'((?:[^'\\]|\\.)*)'/g)) said.add((match[1] ?? '').replaceAll("\\'", "'"));
    expect([...said].filter((sentence) => !bundle?.[sentence])).toEqual([]);
    expect(Object.keys(bundle ?? {}).filter((sentence) => !said.has(sentence))).toEqual([]);
  });
  it('keeps the places for values in every translation', () => {
    const places = (text: string): string => [...text.matchAll(/\{\d\}/g)].map(String).sort().join();
    expect(Object.entries(bundle ?? {}).filter(([from, to]) => places(from) !== places(to))).toEqual([]);
  });
});
