/** leading-order: the command line. Exit codes: 0 answered, 1 declined or a claim fails, 2 wrong use. */
import { availableParallelism } from 'node:os';
import { text as readAll } from 'node:stream/consumers';
import type { Answer, Request } from '../protocol.ts';
import { HELP, readArguments, requestOf } from './arguments.ts';
import { batch } from './batch.ts';
import { checkFiles } from './check.ts';
import { startEngine } from './engineProcess.ts';
import { humanText } from './human.ts';

declare const LEADING_ORDER_VERSION: string;

/** dist/, where the worker and the grammars lie beside the bundled program (a CommonJS module). */
const FOLDER = __dirname;

async function main(argv: readonly string[]): Promise<number> {
  const line = readArguments(argv);
  if (!line.ok) {
    process.stderr.write(`${line.error.message}\n`);
    return 2;
  }
  const { command, operands, values } = line.value;
  if (command === 'help') {
    process.stdout.write(`${HELP}\n`);
    return 0;
  }
  if (command === 'version') {
    process.stdout.write(`${LEADING_ORDER_VERSION}\n`);
    return 0;
  }
  if (command === 'batch') {
    const engines = Array.from({ length: Math.max(1, Math.min(4, availableParallelism())) }, () => startEngine(FOLDER));
    await batch(engines, { input: process.stdin, output: process.stdout });
    for (const engine of engines) engine.dispose();
    return 0;
  }
  if (command === 'check') {
    return checkFiles(operands, values, FOLDER);
  }
  const [operand] = operands;
  if (operand === undefined || operands.length > 1) {
    process.stderr.write(`${command} takes one text; put it between quotes.\n`);
    return 2;
  }
  const text = operand === '-' ? await readAll(process.stdin) : operand;
  const request = requestOf(command, text, values);
  const engine = startEngine(FOLDER);
  const answer: Answer = await engine.ask(request as unknown as Request);
  engine.dispose();
  process.stdout.write(`${values.json ? JSON.stringify(answer, null, 2) : humanText(answer, request)}\n`);
  return answer.ok ? 0 : 1;
}

main(process.argv.slice(2)).then(
  (code) => {
    process.exitCode = code;
  },
  (error: unknown) => {
    process.stderr.write(`${error instanceof Error ? (error.stack ?? error.message) : String(error)}\n`);
    process.exitCode = 2;
  },
);
