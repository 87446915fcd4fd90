import { cruise } from 'dependency-cruiser';
import { createRequire } from 'node:module';
import { describe, expect, it } from 'vitest';

const configuration = createRequire(import.meta.url)('../../.dependency-cruiser.cjs') as {
  forbidden: never[];
  options: Record<string, unknown>;
};

describe('rooms and arrows', () => {
  it('keeps imports to the allowed direction, without circles, vscode only in editor/', async () => {
    const { output } = await cruise(['src'], { ...configuration.options, ruleSet: { forbidden: configuration.forbidden }, validate: true });
    if (typeof output === 'string') throw new Error(output);
    expect(output.summary.totalCruised).toBeGreaterThan(20);
    expect(output.summary.violations.map((v) => `${v.rule.name}: ${v.from} -> ${v.to}`)).toEqual([]);
  });
});
