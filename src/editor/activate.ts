/** Wires the parts together. Activation itself computes nothing; the worker starts when something is asked or after the first idle second. */
import * as vscode from 'vscode';
import { type ClientOptions, createEngineClient, type EngineClient } from '../worker/client.ts';
import { registerActions } from './actions.ts';
import { registerCommands } from './commands.ts';
import { Companions } from './companions.ts';
import { Consultant } from './consultant.ts';
import { registerEquationLinks } from './equationLinks.ts';
import { registerHints } from './hints.ts';
import { registerHover } from './hover.ts';
import { engineLanguage, isCode } from './languages.ts';
import { Log } from './log.ts';
import { Memory } from './memory.ts';
import { registerNoteCompletion } from './noteCompletion.ts';
import { Pages } from './pages.ts';
import { Problems } from './problems.ts';
import type { Services } from './services.ts';
import { Status } from './status.ts';

const IDLE_MS = 1000;

/** What other extensions and the in-host tests see. */
export interface Api {
  /** Milliseconds that activation took. */
  readonly activation: number;
  /** Ends the engine in the middle of whatever it is doing, as a crash would. */
  readonly endEngine: () => void;
  /** Whether the engine is computing something. */
  readonly engineBusy: () => boolean;
}

export function activateWith(context: vscode.ExtensionContext, start: ClientOptions['start']): Api {
  const began = performance.now();
  const log = new Log();
  const status = new Status();
  let kill: () => void = () => undefined;
  const client = createEngineClient({
    start: async (events) => {
      const handle = await start(events);
      kill = () => {
        handle.end();
        events.died('ended on request');
      };
      return handle;
    },
    readFile: (name) => readBundled(context.extensionUri, name),
    log: (line) => log.info(line),
    checksAside: true,
  });
  const memory = new Memory(context.workspaceState);
  const companions = new Companions();
  const services: Services = { context, client, consultant: new Consultant(client, memory, companions), companions, memory, status, log };
  const problems = new Problems(services);
  const pages = new Pages(services, problems);
  context.subscriptions.push(
    log,
    status,
    problems,
    pages,
    companions,
    { dispose: () => client.dispose() },
    registerHover(services),
    registerActions(services, problems),
    registerHints(services),
    registerNoteCompletion(),
    registerEquationLinks(),
    registerCommands({ services, pages, problems }),
    vscode.window.onDidChangeActiveTextEditor(() => status.refresh()),
  );
  context.subscriptions.push(warmWhenIdle(client));
  return { activation: performance.now() - began, endEngine: () => kill(), engineBusy: () => client.busy };
}

/**
 * The first hover should not have to wait for the worker's start: in the first idle second after activation the worker gets one small question of each kind that a
 * hover asks, and one in the language of the code that is open, whose grammar is then there.
 */
function warmWhenIdle(client: EngineClient): vscode.Disposable {
  const warm = (): void => {
    listening.dispose();
    if (client.busy) return;
    void client.consult({ desk: 'consult', text: '$\\frac{\\sin x}{x}$', language: 'latex', selection: { start: 8, end: 8 }, details: ['reading', 'reach'] });
    void client.consult({ desk: 'picture', latex: '\\frac{\\sin x}{x} = 1 - \\frac{x^2}{6} + O\\left(x^4\\right)', ink: '#808080', width: 480, size: 15 });
    const open = vscode.window.activeTextEditor?.document;
    const language = open ? engineLanguage(open) : 'plain';
    if (isCode(language)) void client.consult({ desk: 'consult', text: 'sin(x)', language, selection: { start: 0, end: 6 }, details: ['reading'] });
  };
  let timer = setTimeout(warm, IDLE_MS);
  const listening = vscode.workspace.onDidChangeTextDocument(() => {
    clearTimeout(timer);
    timer = setTimeout(warm, IDLE_MS);
  });
  return {
    dispose: () => {
      clearTimeout(timer);
      listening.dispose();
    },
  };
}

/** Grammars and font faces beside the bundles, by plain name only. */
async function readBundled(extension: vscode.Uri, name: string): Promise<Uint8Array | null> {
  if (!/^[\w.-]+$/.test(name)) return null;
  const folder = name.endsWith('.ttf') ? 'fonts' : 'grammars';
  return vscode.workspace.fs.readFile(vscode.Uri.joinPath(extension, 'dist', folder, name));
}
