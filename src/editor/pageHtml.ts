/** The document of the Expansion page: nothing inline, nothing from elsewhere. */
import * as vscode from 'vscode';
import { WORDS } from '../webview/words.ts';

export const pageRoots = (extension: vscode.Uri): vscode.Uri[] => [vscode.Uri.joinPath(extension, 'dist')];

/** `home` tells the page which ground it stands on. */
export function pageHtml(webview: vscode.Webview, extension: vscode.Uri, home: 'view' | 'tab'): string {
  const nonce = randomNonce();
  const file = (name: string): string => webview.asWebviewUri(vscode.Uri.joinPath(extension, 'dist', name)).toString();
  const words = Object.fromEntries(Object.entries(WORDS).map(([key, text]) => [key, vscode.l10n.t(text)]));
  const policy = `default-src 'none'; style-src ${webview.cspSource}; font-src ${webview.cspSource}; script-src 'nonce-${nonce}'`;
  return `<!doctype html>
<html lang="${escapeAttribute(vscode.env.language)}">
<head>
<meta charset="utf-8">
<meta http-equiv="Content-Security-Policy" content="${escapeAttribute(policy)}">
<meta name="viewport" content="width=device-width, initial-scale=1">
<title>${escapeAttribute(vscode.l10n.t('Expansion'))}</title>
<link rel="stylesheet" href="${escapeAttribute(file('webview.css'))}">
</head>
<body data-home="${home}">
<main id="page" data-words="${escapeAttribute(JSON.stringify(words))}"></main>
<script nonce="${nonce}" src="${escapeAttribute(file('webview.js'))}"></script>
</body>
</html>`;
}

/** 128 bits from the platform's cryptographic source, which both hosts have. */
function randomNonce(): string {
  const bytes = globalThis.crypto.getRandomValues(new Uint8Array(16));
  return [...bytes].map((byte) => byte.toString(16).padStart(2, '0')).join('');
}

const escapeAttribute = (text: string): string => text.replaceAll('&', '&amp;').replaceAll('"', '&quot;').replaceAll('<', '&lt;');
