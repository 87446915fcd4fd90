/** Findings as SARIF 2.1.0 (OASIS standard), for code-scanning services. */
import { pathToFileURL } from 'node:url';
import type { Fix, Log, Notification, ReportingDescriptor, Result } from 'sarif';
import { type FileReport, type PlacedFinding, placedFindings, positionOf } from './checkReport.ts';

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
    .map((placed) => {
      const { finding, line, column, endLine, endColumn, cell } = placed;
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
        ...fixesOf(report, placed),
      } satisfies Result;
    });
}

/** The correction as a replacement in the file; none in notebooks, whose cells are not text of their file. */
function fixesOf(report: FileReport, { finding, cell }: PlacedFinding): { readonly fixes?: Fix[] } {
  const { fix } = finding;
  if (!fix || cell !== undefined) return {};
  const [from, to] = [positionOf(report.text, fix.start), positionOf(report.text, fix.end)];
  const deletedRegion = { startLine: from.line, startColumn: from.column, endLine: to.line, endColumn: to.column };
  return { fixes: [{ description: { text: `Write ${fix.text}.` }, artifactChanges: [{ artifactLocation: { uri: uriOf(report.path) }, replacements: [{ deletedRegion, insertedContent: { text: fix.text } }] }] }] };
}

/** Files that were not checked, and why. */
const notificationsOf = (report: FileReport): Notification[] =>
  report.answers.flatMap(({ answer, cell }) =>
    answer.ok
      ? []
      : [{ level: 'error', message: { text: `${cell === undefined ? 'Not checked' : `Cell ${cell + 1} not checked`}: ${answer.error.message}` }, locations: [{ physicalLocation: { artifactLocation: { uri: uriOf(report.path) } } }] } satisfies Notification],
  );

export function sarifReport(reports: readonly FileReport[], version: string): string {
  const log: Log = {
    $schema: 'https://json.schemastore.org/sarif-2.1.0.json',
    version: '2.1.0',
    runs: [
      {
        tool: { driver: { name: 'Leading Order', semanticVersion: version, rules: [...RULES] } },
        columnKind: 'utf16CodeUnits',
        // The run itself ended well; what could not be checked is said file by file.
        invocations: [{ executionSuccessful: true, toolExecutionNotifications: reports.flatMap(notificationsOf) }],
        results: reports.flatMap(resultsOf),
      },
    ],
  };
  return JSON.stringify(log, null, 2);
}
