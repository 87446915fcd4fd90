import * as vscode from 'vscode';

/** The output channel, made on the first line written. */
export class Log implements vscode.Disposable {
  #channel: vscode.LogOutputChannel | undefined;
  #open(): vscode.LogOutputChannel {
    this.#channel ??= vscode.window.createOutputChannel('Leading Order', { log: true });
    return this.#channel;
  }
  info(line: string): void {
    this.#open().info(line);
  }
  error(where: string, error: unknown): void {
    this.#open().error(`${where}: ${error instanceof Error ? (error.stack ?? error.message) : String(error)}`);
  }
  show(): void {
    this.#open().show(true);
  }
  dispose(): void {
    this.#channel?.dispose();
  }
}
