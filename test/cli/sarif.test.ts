import { Ajv } from 'ajv';
import { describe, expect, it } from 'vitest';
import type { FileReport } from '../../src/cli/checkReport.ts';
import { sarifReport } from '../../src/cli/sarif.ts';

const closed = (required: readonly string[], properties: Readonly<Record<string, unknown>>): object => ({ type: 'object', required, properties, additionalProperties: false });
const list = (items: unknown): object => ({ type: 'array', items });
const unique = (items: unknown, minItems = 0): object => ({ type: 'array', minItems, uniqueItems: true, items });
const text = { type: 'string' };
const position = { type: 'integer', minimum: 1 };
const level = { enum: ['none', 'note', 'warning', 'error'] };
/**
 * The objects that the report may hold, after the definitions of the published JSON schema of SARIF 2.1.0 (OASIS, sarif-schema-2.1.0.json): required properties,
 * types, closed lists of values, least lengths, items that must differ. Properties that the report does not use are left out, so this is the stricter of the two.
 * Formats are RFC 3986: an absolute URI in $schema, a URI reference in artifactLocation.
 */
const message = closed(['text'], { text });
const region = closed(['startLine'], { startLine: position, startColumn: position, endLine: position, endColumn: position });
const artifactLocation = closed([], { uri: { type: 'string', pattern: "^(?:[A-Za-z][A-Za-z0-9+.-]*:)?(?:[A-Za-z0-9._~:/?#@!$&'()*+,;=-]|%[0-9A-Fa-f]{2}|\\[|\\])+$" } });
const location = closed([], { physicalLocation: closed([], { artifactLocation, region }) });
const replacement = closed(['deletedRegion'], { deletedRegion: region, insertedContent: closed([], { text }) });
const artifactChange = closed(['artifactLocation', 'replacements'], { artifactLocation, replacements: { ...list(replacement), minItems: 1 } });
const fix = closed(['artifactChanges'], { description: message, artifactChanges: unique(artifactChange, 1) });
const notification = closed(['message'], { level, message, locations: unique(location) });
const invocation = closed(['executionSuccessful'], { executionSuccessful: { type: 'boolean' }, toolExecutionNotifications: list(notification) });
const reportingDescriptor = closed(['id'], { id: text, name: text, shortDescription: message, defaultConfiguration: closed([], { level }) });
const toolComponent = closed(['name'], { name: text, semanticVersion: text, rules: unique(reportingDescriptor) });
const result = closed(['message'], { ruleId: text, ruleIndex: { type: 'integer', minimum: -1 }, level, message, locations: list(location), fixes: unique(fix) });
const run = closed(['tool', 'results'], {
  tool: closed(['driver'], { driver: toolComponent }),
  columnKind: { enum: ['utf16CodeUnits', 'unicodeCodePoints'] },
  results: list(result),
  invocations: list(invocation),
});
const SCHEMA = closed(['version', 'runs'], { $schema: { type: 'string', pattern: '^[a-z]+://[^ ]+$' }, version: { enum: ['2.1.0'] }, runs: list(run) });

const finding = { claim: { start: 0, end: 9 }, found: '', fix: null, reason: 'Why.' } as const;
const REPORTS: readonly FileReport[] = [
  { path: 'a folder/näme.tex', text: 'one\ntwo three', answers: [{ offset: 0, answer: { ok: true, unread: [], findings: [{ ...finding, start: 4, end: 7, verdict: 'fails', severity: 'error', fix: { start: 5, end: 6, text: 'o' } }, { ...finding, start: 3, end: 3, verdict: 'undecided', severity: 'hint' }, { ...finding, start: 0, end: 1, verdict: 'holds', severity: 'none' }] } }] },
  { path: '/tmp/x.ipynb', text: '{}', answers: [{ offset: 0, cell: 2, cellText: 'cell', answer: { ok: true, unread: [], findings: [{ ...finding, start: 0, end: 4, verdict: 'holds', severity: 'hint' }] } }] },
  { path: 'gone.tex', text: '', answers: [{ offset: 0, answer: { ok: false, error: { code: 'unreadable', message: 'Gone.' } } }] },
];

describe('SARIF', () => {
  const log: unknown = JSON.parse(sarifReport(REPORTS, '1.2.3'));
  it('keeps to the standard', () => {
    const validate = new Ajv({ strict: false, allErrors: true }).compile(SCHEMA);
    validate(log);
    expect(validate.errors).toBeNull();
    expect(validate({ version: '2.1.0', runs: [{}] })).toBe(false);
    expect(validate(JSON.parse(sarifReport([], '1.2.3'))), 'a scan of nothing has an empty list of results').toBe(true);
  });
  it('names rules that exist, and regions that begin before they end', () => {
    interface Region { readonly startLine: number; readonly startColumn: number; readonly endLine: number; readonly endColumn: number }
    interface Placed { readonly ruleId: string; readonly ruleIndex: number; readonly locations: readonly { readonly physicalLocation: { readonly region?: Region } }[] }
    const [only] = (log as { readonly runs: readonly { readonly tool: { readonly driver: { readonly rules: readonly { readonly id: string }[] } }; readonly results: readonly Placed[] }[] }).runs;
    for (const placed of only?.results ?? []) {
      expect(only?.tool.driver.rules[placed.ruleIndex]?.id).toBe(placed.ruleId);
      for (const { physicalLocation } of placed.locations) {
        const { region: at } = physicalLocation;
        if (at) expect(at.endLine > at.startLine || (at.endLine === at.startLine && at.endColumn >= at.startColumn)).toBe(true);
      }
    }
  });
  it('names place, rule and level; what holds without a remark is left out', () => {
    const [run] = (log as { readonly runs: readonly { readonly results: readonly { readonly ruleId: string; readonly level: string; readonly locations: readonly unknown[]; readonly fixes?: unknown }[]; readonly invocations: unknown }[] }).runs;
    expect(run?.results.map((r) => [r.ruleId, r.level])).toEqual([['expansion-fails', 'error'], ['expansion-undecided', 'note'], ['expansion-hint', 'note']]);
    expect(run?.results[0]?.fixes).toEqual([{ description: { text: 'Write o.' }, artifactChanges: [{ artifactLocation: { uri: 'a%20folder/n%C3%A4me.tex' }, replacements: [{ deletedRegion: { startLine: 2, startColumn: 2, endLine: 2, endColumn: 3 }, insertedContent: { text: 'o' } }] }] }]);
    expect(run?.results.slice(1).some((r) => 'fixes' in r)).toBe(false);
    expect(run?.invocations).toEqual([{ executionSuccessful: true, toolExecutionNotifications: [{ level: 'error', message: { text: 'Not checked: Gone.' }, locations: [{ physicalLocation: { artifactLocation: { uri: 'gone.tex' } } }] }] }]);
    expect(run?.results[0]?.locations).toEqual([{ physicalLocation: { artifactLocation: { uri: 'a%20folder/n%C3%A4me.tex' }, region: { startLine: 2, startColumn: 1, endLine: 2, endColumn: 4 } } }]);
  });
});
