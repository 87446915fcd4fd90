/** What the user settled for a file, kept in the workspace's state and never in the file. */
import type * as vscode from 'vscode';
import type { Question } from '../worker/desk/types.ts';

const KEY = 'answers';
const LONGEST = 500;
type Stored = readonly (readonly [string, Question])[];

export class Memory {
  readonly #state: vscode.Memento;
  #generation = 0;

  constructor(state: vscode.Memento) {
    this.#state = state;
  }

  /** Rises with every change, so that cached answers can tell that they are old. */
  get generation(): number {
    return this.#generation;
  }

  recall(uri: vscode.Uri): Question {
    return this.#all().find(([key]) => key === uri.toString())?.[1] ?? {};
  }

  async remember(uri: vscode.Uri, settled: Question): Promise<void> {
    const key = uri.toString();
    const others = this.#all().filter(([other]) => other !== key);
    this.#generation += 1;
    await this.#state.update(KEY, [...others, [key, { ...this.recall(uri), ...settled }]].slice(-LONGEST));
  }

  /** True where there was something to forget. */
  async forget(uri: vscode.Uri): Promise<boolean> {
    const key = uri.toString();
    const all = this.#all();
    const others = all.filter(([other]) => other !== key);
    this.#generation += 1;
    await this.#state.update(KEY, others);
    return others.length < all.length;
  }

  #all(): Stored {
    return this.#state.get<Stored>(KEY, []);
  }
}
