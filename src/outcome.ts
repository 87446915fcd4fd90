/** Results as values: an answer, or a failure of the protocol. Exceptions are for defects, except `Interrupted`, which only the engine's door catches. */
import type { ErrorCode, Failure } from './protocol.ts';

export type Outcome<T> = { readonly ok: true; readonly value: T } | { readonly ok: false; readonly error: Failure };

export const success = <T>(value: T): Outcome<T> => ({ ok: true, value });
export const failure = (code: ErrorCode, message: string, place?: { readonly start: number; readonly end: number }): { readonly ok: false; readonly error: Failure } => ({
  ok: false,
  error: place ? { code, message, start: place.start, end: place.end } : { code, message },
});

/** Thrown deep inside a computation when a failure is the only way on; the door of each room turns it into an Outcome. */
export class Declined extends Error {
  readonly failure: Failure;
  /** The names of symbols that the question left open is about: whoever brought one of them in knows that no assumption of a reader answers it. */
  readonly about: readonly string[];
  /** `place` is where in the text that was read, where that is known. */
  constructor(code: ErrorCode, message: string, place?: { readonly start: number; readonly end: number }, about: readonly string[] = []) {
    super(message);
    this.about = about;
    this.failure = place ? { code, message, start: place.start, end: place.end } : { code, message };
  }
}

/** Thrown when the request was withdrawn by whoever asked; nothing on the way takes it for an answer. */
export class Interrupted extends Error {
  constructor() {
    super('This request was cancelled.');
  }
}

/** Time budget of one request. Long loops call `check()`; it throws `Declined('over-budget')` once the time is up. */
export interface Budget {
  check(): void;
  readonly deadline: number;
  remaining(): number;
}

/** `interrupted` says whether the request has been withdrawn; `check()` then throws `Interrupted`. */
export function budget(milliseconds: number, now: () => number = () => performance.now(), interrupted: () => boolean = () => false): Budget {
  const deadline = now() + milliseconds;
  return {
    deadline,
    remaining: () => deadline - now(),
    check() {
      if (interrupted()) throw new Interrupted();
      if (now() > deadline) throw new Declined('over-budget', `This took longer than ${milliseconds} ms; ask for fewer terms or allow more time.`);
    },
  };
}

/** Runs `body`; a Declined becomes a failure, anything else is a defect and passes through. */
export function attempt<T>(body: () => T): Outcome<T> {
  try {
    return success(body());
  } catch (error) {
    if (error instanceof Declined) return { ok: false, error: error.failure };
    throw error;
  }
}
