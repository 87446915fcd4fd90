/** Quick fixes. None carries an edit when it is offered: the edit is filled in when it is chosen, and only if the text still is what it was computed from. */
import * as vscode from 'vscode';
import type { Finding } from '../protocol.ts';
import type { Proposal, ProposalKind, TextEdit } from '../worker/desk/types.ts';
import { selectionOf } from './consultant.ts';
import { type Ground, groundOf, sayMovedOn, standsOn, workspaceEdit } from './edits.ts';
import { isCode, SELECTOR } from './languages.ts';
import type { Problems } from './problems.ts';
import type { PlaceLink, Services } from './services.ts';
import { shorten } from './words.ts';

const LONGEST_PREVIEW = 60;

class LateAction extends vscode.CodeAction {
  readonly ground: Ground;
  readonly edits: readonly TextEdit[];
  constructor(title: string, kind: vscode.CodeActionKind, ground: Ground, edits: readonly TextEdit[]) {
    super(title, kind);
    this.ground = ground;
    this.edits = edits;
  }
}

export function registerActions(services: Services, problems: Problems): vscode.Disposable {
  return vscode.languages.registerCodeActionsProvider(
    SELECTOR,
    {
      provideCodeActions: async (document, range, context, token) => [
        ...corrections(document, range, problems),
        ...(await results(services, document, range, context, token)),
      ],
      resolveCodeAction: (action) => {
        if (!(action instanceof LateAction)) return action;
        const document = standsOn(action.ground);
        if (document) action.edit = workspaceEdit(document, action.edits);
        else sayMovedOn();
        return action;
      },
    },
    { providedCodeActionKinds: [vscode.CodeActionKind.QuickFix, vscode.CodeActionKind.RefactorRewrite] },
  );
}

function corrections(document: vscode.TextDocument, range: vscode.Range, problems: Problems): vscode.CodeAction[] {
  const findings = problems.current(document) ?? [];
  const here = selectionOf(document, range);
  const wrong = findings.filter((finding) => finding.fix !== null);
  const touched = wrong.filter((finding) => finding.start <= here.end && here.start <= finding.end);
  const single = touched.flatMap((finding) => correction(document, finding));
  const failing = wrong.filter((finding) => finding.verdict === 'fails');
  if (!touched.some((finding) => finding.verdict === 'fails') || failing.length < 2) return single;
  const edits = withoutOverlap(failing.flatMap((finding) => (finding.fix ? [finding.fix] : [])));
  const all = new LateAction(vscode.l10n.t('Correct all {0} claims that fail in this file', edits.length), vscode.CodeActionKind.QuickFix, groundOf(document, edits), edits);
  return [...single, all];
}

function correction(document: vscode.TextDocument, finding: Finding): LateAction[] {
  if (!finding.fix) return [];
  const old = document.getText().slice(finding.fix.start, finding.fix.end);
  const title = finding.fix.text === '' ? vscode.l10n.t('Remove {0}', shorten(old, LONGEST_PREVIEW)) : vscode.l10n.t('Correct to {0}', shorten(finding.fix.text, LONGEST_PREVIEW));
  const action = new LateAction(title, vscode.CodeActionKind.QuickFix, groundOf(document, [finding.fix]), [finding.fix]);
  action.isPreferred = finding.verdict === 'fails';
  action.diagnostics = vscode.languages
    .getDiagnostics(document.uri)
    .filter((d) => d.source === 'Leading Order' && document.offsetAt(d.range.start) === finding.start && document.offsetAt(d.range.end) === finding.end);
  return [action];
}

/** Several fixes in one edit must not touch each other. */
export function withoutOverlap(edits: readonly TextEdit[]): readonly TextEdit[] {
  const kept: TextEdit[] = [];
  for (const edit of [...edits].sort((a, b) => a.start - b.start || a.end - b.end)) {
    const last = kept.at(-1);
    if (!last || last.end < edit.start || (last.end === edit.start && edit.start < edit.end)) kept.push(edit);
  }
  return kept;
}

async function results(services: Services, document: vscode.TextDocument, range: vscode.Range | vscode.Selection, context: vscode.CodeActionContext, token: vscode.CancellationToken): Promise<vscode.CodeAction[]> {
  const automatic = context.triggerKind === vscode.CodeActionTriggerKind.Automatic;
  // Asked by the editor itself, the light bulb shows only for a selection whose answer is known already.
  if (automatic && range.isEmpty) return [];
  const place = selectionOf(document, range);
  const known = services.consultant.known(document, place, ['reading']);
  if (automatic && !known) return [];
  const consultation = known ?? (await services.status.during(services.consultant.consult(document, place, ['reading'], {}, token)));
  if (token.isCancellationRequested || document.version !== consultation.version) return [];
  const { answer } = consultation;
  const target = consultation.place ?? place;
  const link: PlaceLink = { uri: document.uri.toString(), version: document.version, start: target.start, end: target.end };
  const commands = (list: readonly (readonly [string, string, readonly unknown[]])[]): vscode.CodeAction[] =>
    list.map(([title, command, args]) => {
      const action = new vscode.CodeAction(title, vscode.CodeActionKind.RefactorRewrite);
      action.command = { command, title, arguments: [...args] };
      return action;
    });
  if (!answer.ok) {
    if (range.isEmpty && !consultation.place) return [];
    return commands(consultation.candidates.length > 1 ? [[vscode.l10n.t('Set the small quantity…'), 'leadingOrder.setSmallQuantity', [link]]] : []);
  }
  if (range.isEmpty && !consultation.worthwhile) return [];
  const proposals = await services.consultant.proposals(document, consultation);
  if (token.isCancellationRequested || document.version !== consultation.version) return [];
  const late = proposals.map((proposal) => new LateAction(proposalTitle(proposal), vscode.CodeActionKind.QuickFix, groundOf(document, [target, ...proposal.edits]), proposal.edits));
  const code = isCode(consultation.language);
  return [
    ...late,
    ...commands([
      [vscode.l10n.t('Open on the Expansion page'), 'leadingOrder.expandHere', [link]],
      ...(code
        ? ([
            [vscode.l10n.t('Replace call by polynomial…'), 'leadingOrder.replaceCall', [link]],
            [vscode.l10n.t('Guard this expression…'), 'leadingOrder.guard', [link]],
          ] as const)
        : []),
    ]),
  ];
}

export function proposalTitle(proposal: Proposal): string {
  const preview = shorten(proposal.preview, LONGEST_PREVIEW);
  const titles: Readonly<Record<ProposalKind, string>> = {
    after: vscode.l10n.t('Insert "{0}" after', preview),
    row: vscode.l10n.t('Insert "{0}" as next aligned row', preview),
    replace: vscode.l10n.t('Replace by {0}', preview),
    polynomial: vscode.l10n.t('Replace by polynomial {0}', preview),
    comment: vscode.l10n.t('Insert comment "{0}" above', preview),
    helper: vscode.l10n.t('Replace by {0}', preview),
    corrections: vscode.l10n.t('Correct all {0} claims that fail in this file', preview),
  };
  return titles[proposal.kind];
}
