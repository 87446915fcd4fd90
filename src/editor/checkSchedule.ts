/** When a document is checked: after a pause in typing, one check at a time. A change costs a timer and withdraws the check under way, nothing more. */

const PAUSE_MS = 700;
/** Every further 100,000 characters lengthen the pause by this much, since reading them again costs more. */
const PAUSE_PER_100K_MS = 400;
const LONGEST_PAUSE_MS = 2500;

export interface CheckScheduleOptions<K> {
  /** Characters of the document at the time of asking. */
  readonly sizeOf: (key: K) => number;
  /** Begins the check; looks at the document only now. */
  readonly begin: (key: K) => void;
  /** Withdraws the check under way, whose text is no longer the document's. */
  readonly withdraw: (key: K) => void;
}

export class CheckSchedule<K> {
  readonly #options: CheckScheduleOptions<K>;
  readonly #timers = new Map<K, ReturnType<typeof setTimeout>>();
  /** From the last check, so that a change need not ask for the document's length. */
  readonly #pauses = new Map<K, number>();

  constructor(options: CheckScheduleOptions<K>) {
    this.#options = options;
  }

  /** The document changed: the check waits for the end of the pause that starts now. */
  changed(key: K): void {
    this.#options.withdraw(key);
    this.#restart(key, this.#pauses.get(key) ?? PAUSE_MS);
  }

  /** Opened or saved: soon, but not in the same turn as whatever else the editor does now. */
  soon(key: K): void {
    this.#restart(key, SOON_MS);
  }

  forget(key: K): void {
    clearTimeout(this.#timers.get(key));
    this.#timers.delete(key);
    this.#pauses.delete(key);
    this.#options.withdraw(key);
  }

  dispose(): void {
    for (const key of [...this.#timers.keys()]) this.forget(key);
  }

  #restart(key: K, pause: number): void {
    clearTimeout(this.#timers.get(key));
    this.#timers.set(
      key,
      setTimeout(() => {
        this.#timers.delete(key);
        this.#pauses.set(key, pauseFor(this.#options.sizeOf(key)));
        this.#options.begin(key);
      }, pause),
    );
  }
}

const SOON_MS = 150;

/** Milliseconds without a change before a document of that many characters is checked. */
export const pauseFor = (characters: number): number => Math.min(LONGEST_PAUSE_MS, PAUSE_MS + Math.floor(characters / 100_000) * PAUSE_PER_100K_MS);
