/** What a reviewer sends to an author: place, what is printed, what is right, and how it was checked. */
import type * as vscode from 'vscode';
import type { Finding } from '../protocol.ts';

export function authorQuery(document: vscode.TextDocument, findings: readonly Finding[]): string {
  const name = document.uri.path.split('/').at(-1) ?? '';
  const text = document.getText();
  return findings
    .map((finding) => {
      const place = `${name}, line ${document.positionAt(finding.start).line + 1}${finding.label ? ` (${finding.label})` : ''}`;
      const printed = text.slice(finding.claim.start, finding.claim.end).replace(/\s+/g, ' ').trim();
      return [`${place}`, `Printed: ${printed}`, finding.found === '' ? null : `Correct: ${finding.found}`, `Reason: ${finding.reason}`, 'Checked: coefficient by coefficient, with exact arithmetic.'].filter((line) => line !== null).join('\n');
    })
    .join('\n\n');
}
