/** Findings of files as text and as JSON. */
import type { CheckAnswer, ErrorAnswer, Finding } from '../protocol.ts';

export interface FileReport {
  readonly path: string;
  readonly text: string;
  readonly answers: readonly {
    readonly offset: number;
    readonly answer: CheckAnswer | ErrorAnswer;
    readonly cell?: number;
    readonly cellText?: string;
  }[];
}

/** One-based line and column (UTF-16) of an offset. */
export function positionOf(text: string, offset: number): { readonly line: number; readonly column: number } {
  let line = 1;
  let start = 0;
  for (let at = text.indexOf('\n'); at >= 0 && at < offset; at = text.indexOf('\n', at + 1)) {
    line += 1;
    start = at + 1;
  }
  return { line, column: offset - start + 1 };
}

/** A finding with the place a person can go to. */
export interface PlacedFinding {
  readonly finding: Finding;
  readonly line: number;
  readonly column: number;
  readonly endLine: number;
  readonly endColumn: number;
  readonly claim: string;
  readonly cell?: number;
}

export function placedFindings(report: FileReport): readonly PlacedFinding[] {
  return report.answers.flatMap(({ answer, cell, cellText }) => {
    if (!answer.ok) return [];
    const text = cellText ?? report.text;
    return answer.findings.map((finding) => {
      const from = positionOf(text, finding.start);
      const to = positionOf(text, finding.end);
      return {
        finding,
        line: from.line,
        column: from.column,
        endLine: to.line,
        endColumn: to.column,
        claim: text.slice(finding.claim.start, finding.claim.end),
        ...(cell === undefined ? {} : { cell }),
      };
    });
  });
}

const count = (n: number, one: string, many = `${one}s`): string => `${n} ${n === 1 ? one : many}`;

export function textReport(reports: readonly FileReport[]): string {
  const lines: string[] = [];
  const totals = { holds: 0, fails: 0, undecided: 0, unread: 0 };
  for (const report of reports) {
    for (const { answer } of report.answers) {
      if (!answer.ok) lines.push(`${report.path}: not checked: ${answer.error.message}`);
      else totals.unread += answer.unread.length;
    }
    for (const { finding, line, column, cell } of placedFindings(report)) {
      totals[finding.verdict] += 1;
      if (finding.verdict === 'holds' && finding.severity === 'none') continue;
      const place = `${report.path}${cell === undefined ? '' : ` cell ${cell + 1}`}:${line}:${column}`;
      lines.push(`${place}: ${finding.verdict === 'holds' ? 'hint' : finding.verdict}: ${finding.reason}`);
      if (finding.fix) lines.push(`    right: ${finding.found}`);
    }
  }
  const claims = totals.holds + totals.fails + totals.undecided;
  lines.push(`${count(claims, 'claim')} in ${count(reports.length, 'file')}: ${totals.holds} hold, ${totals.fails} fail, ${totals.undecided} undecided; ${count(totals.unread, 'formula')} not read`);
  return lines.join('\n');
}

export function jsonReport(reports: readonly FileReport[]): string {
  return JSON.stringify(
    reports.map((report) => ({
      path: report.path,
      findings: placedFindings(report).map(({ finding, line, column, cell, claim }) => ({ line, column, ...(cell === undefined ? {} : { cell }), text: claim, ...finding })),
      unread: report.answers.flatMap(({ answer }) => (answer.ok ? answer.unread : [])),
      errors: report.answers.flatMap(({ answer }) => (answer.ok ? [] : [answer.error])),
    })),
    null,
    2,
  );
}
