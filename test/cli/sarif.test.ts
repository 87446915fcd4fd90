import { Ajv } from 'ajv';
import { describe, expect, it } from 'vitest';
import type { FileReport } from '../../src/cli/checkReport.ts';
import { sarifReport } from '../../src/cli/sarif.ts';

const closed = (required: readonly string[], properties: Readonly<Record<string, unknown>>): object => ({ type: 'object', required, properties, additionalProperties: false });
const list = (items: unknown): object => ({ type: 'array', items });
const text = { type: 'string' };
const positive = { type: 'integer', minimum: 1 };
const level = { enum: ['none', 'note', 'warning', 'error'] };
const message = closed(['text'], { text });
const location = closed([], { physicalLocation: closed(['artifactLocation'], { artifactLocation: closed([], { uri: { type: 'string', pattern: '^(?:file:///)?[^ \\\\]+$' } }), region: closed(['startLine'], { startLine: positive, startColumn: positive, endLine: positive, endColumn: positive }) }) });
/** The objects of SARIF 2.1.0 (OASIS standard, sections 3.13 to 3.30, from memory) that the report may hold: required properties, types, closed lists of values. */
const region = closed(['startLine'], { startLine: positive, startColumn: positive, endLine: positive, endColumn: positive });
const artifactLocation = closed([], { uri: { type: 'string' } });
const fix = closed(['artifactChanges'], { description: message, artifactChanges: { type: 'array', minItems: 1, items: closed(['artifactLocation', 'replacements'], { artifactLocation, replacements: { type: 'array', minItems: 1, items: closed(['deletedRegion'], { deletedRegion: region, insertedContent: closed([], { text }) }) } }) } });
const invocation = closed(['executionSuccessful'], { executionSuccessful: { type: 'boolean' }, toolExecutionNotifications: list(closed(['message'], { level, message, locations: list(location) })) });
const SCHEMA = closed(['version', 'runs'], {
  $schema: text,
  version: { const: '2.1.0' },
  runs: list(
    closed(['tool'], {
      tool: closed(['driver'], {
        driver: closed(['name'], { name: text, semanticVersion: text, rules: list(closed(['id'], { id: text, name: text, shortDescription: message, defaultConfiguration: closed([], { level }) })) }),
      }),
      columnKind: { enum: ['utf16CodeUnits', 'unicodeCodePoints'] },
      results: list(closed(['message'], { ruleId: text, ruleIndex: { type: 'integer', minimum: -1 }, level, message, locations: list(location), fixes: list(fix) })),
      invocations: list(invocation),
    }),
  ),
});

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
