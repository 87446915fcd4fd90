/** The sentences that the engine can say to a user, collected from its source: what is filled in stands as {0}, {1}. */
import { readdirSync, readFileSync } from 'node:fs';
import ts from 'typescript';

const SOURCE = new URL('../../src/', import.meta.url);
/** What does not belong to the engine: hosts, and what prepares packages. */
const HOSTS = /^(editor|webview|cli|start|package)\//;

/** Comments that are written into a user's program stay English, as its other comments are. */
const IN_CODE = new Set([
  '{0} for {1}, {2}.',
  '{0} for {1} in [{2}], {3}.',
  'Proven for every {0} in the interval, evaluation included: {1} at most {2}{3}{4}.',
  'Proven for every {0} argument in the interval, evaluation included: relative error at most {1}{2}.',
  'Valid only on this interval and in this format. In safety-related code follow your own standards and have it reviewed by qualified people.',
]);

/** Words of the engine that are filled in where a sentence has a place. */
export const FILLED_IN = ['The relative error', 'The remainder'];

let collected: ReadonlySet<string> | null = null;

export const engineSentences = (): ReadonlySet<string> => (collected ??= collect());

function collect(): ReadonlySet<string> {
  const found = new Set<string>();
  const take = (text: string): void => {
    if (/^[A-Z{\u201c]/.test(text) && text.endsWith('.') && / [a-z]/.test(text) && !IN_CODE.has(text)) found.add(text);
  };
  const visit = (node: ts.Node): void => {
    if (ts.isStringLiteralLike(node)) take(node.text);
    else if (ts.isTemplateExpression(node)) take(node.templateSpans.reduce((text, span, i) => `${text}{${i}}${span.literal.text}`, node.head.text));
    ts.forEachChild(node, visit);
  };
  for (const name of readdirSync(SOURCE, { recursive: true, encoding: 'utf8' }))
    if (name.endsWith('.ts') && !HOSTS.test(name)) visit(ts.createSourceFile(name, readFileSync(new URL(name, SOURCE), 'utf8'), ts.ScriptTarget.Latest));
  return found;
}
