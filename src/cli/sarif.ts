/** Findings as SARIF 2.1.0 (OASIS standard), for code-scanning services. */
import { pathToFileURL } from 'node:url';
import type { Log, ReportingDescriptor, Result } from 'sarif';
import { type FileReport, placedFindings } from './checkReport.ts';

const RULES: readonly ReportingDescriptor[] = [
  { id: 'expansion-fails', name: 'ExpansionFails', shortDescription: { text: 'A printed expansion is wrong.' }, defaultConfiguration: { level: 'error' } },
  { id: 'expansion-undecided', name: 'ExpansionUndecided', shortDescription: { text: 'A printed expansion could not be decided.' }, defaultConfiguration: { level: 'note' } },
  { id: 'expansion-hint', name: 'ExpansionHint', shortDescription: { text: 'A printed expansion is right but could say more.' }, defaultConfiguration: { level: 'note' } },
];
const ruleOf = (verdict: string): number => (verdict === 'fails' ? 0 : verdict === 'undecided' ? 1 : 2);

const uriOf = (path: string): string => (/^([a-zA-Z]:)?[\\/]/.test(path) ? pathToFileURL(path).href : path.split('\\').join('/').split('/').map(encodeURIComponent).join('/'));

function resultsOf(report: FileReport): Result[] {
  return placedFindings(report)
    .filter(({ finding }) => finding.verdict !== 'holds' || finding.severity !== 'none')
    .map(({ finding, line, column, endLine, endColumn, cell }) => {
      const index = ruleOf(finding.verdict);
      const rule = RULES[index];
      return {
        ruleId: rule?.id ?? '',
        ruleIndex: index,
        level: finding.verdict === 'fails' ? 'error' : 'note',
        message: { text: `${cell === undefined ? '' : `Cell ${cell + 1}: `}${finding.reason}` },
        locations: [
          {
            physicalLocation: {
              artifactLocation: { uri: uriOf(report.path) },
              // Lines of a notebook cell are not lines of its file: only the file is named.
              ...(cell === undefined ? { region: { startLine: line, startColumn: column, endLine, endColumn: Math.max(endColumn, endLine === line ? column + 1 : 1) } } : {}),
            },
          },
        ],
      } satisfies Result;
    });
}

export function sarifReport(reports: readonly FileReport[], version: string): string {
  const log: Log = {
    $schema: 'https://json.schemastore.org/sarif-2.1.0.json',
    version: '2.1.0',
    runs: [
      {
        tool: { driver: { name: 'Leading Order', semanticVersion: version, rules: [...RULES] } },
        columnKind: 'utf16CodeUnits',
        results: reports.flatMap(resultsOf),
      },
    ],
  };
  return JSON.stringify(log, null, 2);
}
