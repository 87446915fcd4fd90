/** All claims of a document on the page: the rows, the correction of all that fail, and a report of them. */
import type * as vscode from 'vscode';
import type { CheckAnswer } from '../protocol.ts';
import type { Shown } from '../webview/messages.ts';
import type { Place, Proposal } from '../worker/desk/types.ts';
import { withoutOverlap } from './actions.ts';
import { countsOf } from './problems.ts';
import { countsText } from './status.ts';
import { said } from './words.ts';

type Claims = Extract<Shown, { readonly kind: 'claims' }>;

export interface ClaimsPage {
  readonly places: readonly Place[];
  readonly proposals: readonly Proposal[];
  readonly shown: Claims;
}

export function claimsPage(document: vscode.TextDocument, answer: CheckAnswer): ClaimsPage {
  const text = document.getText();
  const fixes = withoutOverlap(answer.findings.flatMap((finding) => (finding.verdict === 'fails' && finding.fix ? [finding.fix] : [])));
  return {
    places: answer.findings.map(({ start, end }) => ({ start, end })),
    proposals: fixes.length === 0 ? [] : [{ kind: 'corrections', preview: String(fixes.length), edits: fixes }],
    shown: {
      kind: 'claims',
      summary: countsText(countsOf(answer)),
      rows: answer.findings.map((finding) => ({
        line: document.positionAt(finding.start).line + 1,
        label: finding.label ?? '',
        claim: text.slice(finding.claim.start, finding.claim.end).replace(/\s+/g, ' ').trim(),
        verdict: finding.verdict,
        reason: said(finding.reason),
        found: finding.found,
      })),
    },
  };
}

/** Markdown for a review. */
export function claimsReport(name: string, { summary, rows }: Claims): string {
  const cell = (text: string): string => text.replaceAll('|', '\\|').replaceAll('`', "'");
  return [`## ${name}`, summary, ['| line | verdict | claim | reason |', '| --- | --- | --- | --- |', ...rows.map((row) => `| ${row.line} | ${row.verdict} | \`${cell(row.claim)}\` | ${cell(row.reason)} |`)].join('\n')].join('\n\n');
}
