/** The suite that runs inside an extension host: the web workbench's, a remote one, the desktop's. It sees only the editor's interface. */
import * as vscode from 'vscode';
import { cases } from './cases.ts';
import { PATIENCE_MS } from './tools.ts';

/** Longer than any one state is waited for. */
const LIMIT_MS = PATIENCE_MS + 20_000;

export async function run(): Promise<void> {
  console.log(`host: ${vscode.env.appName} ${vscode.version} (${vscode.env.appHost})`);
  let passed = 0;
  const failed: string[] = [];
  for (const [name, body] of Object.entries(cases)) {
    try {
      await withinLimit(body());
      passed += 1;
      console.log(`ok ${name}`);
    } catch (error) {
      failed.push(name);
      console.log(`FAILED ${name}: ${error instanceof Error ? error.message : String(error)}`);
    }
  }
  console.log(`in-host: ${passed} passed, ${failed.length} failed`);
  if (failed.length > 0) throw new Error(`failed: ${failed.join('; ')}`);
}

function withinLimit(work: Promise<void>): Promise<void> {
  return Promise.race([work, new Promise<never>((_resolve, reject) => setTimeout(() => reject(new Error(`no end after ${LIMIT_MS} ms`)), LIMIT_MS))]);
}
