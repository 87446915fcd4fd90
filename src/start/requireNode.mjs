// Checked before anything else by `npm start` and `npm test`: one sentence instead of a stack trace on an unsupported Node.
import { readFileSync } from 'node:fs';

const { engines } = JSON.parse(readFileSync(new URL('../../package.json', import.meta.url), 'utf8'));

/** Does `version` (a.b.c) satisfy one of the ranges `^a.b.c` or `>=a` of package.json's engines.node? */
export function nodeIsSupported(version, ranges = engines.node) {
  const actual = version.split('.').map(Number);
  const atLeast = (least) => {
    for (let i = 0; i < 3; i += 1) {
      const [have, want] = [actual[i] ?? 0, least[i] ?? 0];
      if (have !== want) return have > want;
    }
    return true;
  };
  return ranges.split('||').some((range) => {
    const [, operator, numbers] = /^\s*(\^|>=)\s*([\d.]+)\s*$/.exec(range) ?? [];
    if (!operator) throw new Error(`engines.node holds a range this check does not know: ${range}`);
    const least = numbers.split('.').map(Number);
    return atLeast(least) && (operator === '>=' || actual[0] === least[0]);
  });
}

export function requireNode() {
  if (nodeIsSupported(process.versions.node)) return;
  process.stderr.write(`Leading Order needs Node ${engines.node}; this is ${process.versions.node}. Install a supported Node and run the command again.\n`);
  process.exit(1);
}
