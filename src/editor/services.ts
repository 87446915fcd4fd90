/** What the parts of the editor side share. */
import type * as vscode from 'vscode';
import type { EngineClient } from '../worker/client.ts';
import type { Companions } from './companions.ts';
import type { Consultant } from './consultant.ts';
import type { Log } from './log.ts';
import type { Memory } from './memory.ts';
import type { Status } from './status.ts';

export interface Services {
  readonly context: vscode.ExtensionContext;
  readonly client: EngineClient;
  readonly consultant: Consultant;
  readonly companions: Companions;
  readonly memory: Memory;
  readonly status: Status;
  readonly log: Log;
}

/** A place in a document as it travels through command links: plain JSON. */
export interface PlaceLink {
  readonly uri: string;
  readonly version: number;
  readonly start: number;
  readonly end: number;
}
