/** What passes between a host (editor, command line) and the engine's worker. Plain structured-clone data both ways. */
import type { Answer, Request } from '../protocol.ts';
import type { DeskAnswer, DeskRequest } from './desk/types.ts';

export type ToWorker =
  | { readonly kind: 'ask'; readonly ticket: number; readonly request: Request | DeskRequest }
  | { readonly kind: 'file'; readonly name: string; readonly bytes: Uint8Array | null }
  /** Nobody waits for this request any more; it is still answered, soon. */
  | { readonly kind: 'withdraw'; readonly ticket: number };

export type FromWorker =
  | { readonly kind: 'answer'; readonly ticket: number; readonly answer: Answer | DeskAnswer }
  /** The worker has no file system: it asks its host for a bundled file (a grammar) by name. */
  | { readonly kind: 'wantFile'; readonly name: string };

/** The worker's end of a channel, whatever carries it. */
export interface Port<Sent, Received> {
  post(message: Sent): void;
  listen(handler: (message: Received) => void): void;
  /** Ticket of the request that was withdrawn last, where host and worker share memory: a busy worker hears no message. */
  withdrawn?(): number;
  /** Lets messages that have arrived be heard before it resolves. */
  turn(): Promise<void>;
}
