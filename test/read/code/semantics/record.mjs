/**
 * Development only: runs the random expressions through the languages' own compilers and interpreters and records their values.
 * Needs gcc, g++, rustc, javac, java and python3; run as `node test/read/code/semantics/record.mjs`, then commit values.json.
 */
import { execFileSync } from 'node:child_process';
import { mkdtempSync, readFileSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { expressions, POINTS } from './generate.mjs';

const folder = mkdtempSync(join(tmpdir(), 'semantics-'));
const SEEDS = { c: 11, cpp: 12, rust: 13, java: 14, python: 15, javascript: 16 };
const COUNT = 150;
const run = (command, args) => execFileSync(command, args, { cwd: folder, encoding: 'utf8', stdio: ['ignore', 'pipe', 'ignore'], maxBuffer: 1 << 26 });
const file = (name, text) => {
  writeFileSync(join(folder, name), text);
  return name;
};
const functions = (rows, make) => rows.map(make).join('\n');

const runners = {
  c(rows) {
    file('a.c', `#include <math.h>\n#include <stdio.h>\n${functions(rows, (e, i) => `static double f${i}(double x, double y) { return ${e}; }`)}\nint main(void) {\n${POINTS.map((p) => functions(rows, (_, i) => `printf("%.17g\\n", f${i}(${p.x}, ${p.y}));`)).join('\n')}\n}`);
    run('gcc', ['-std=c17', '-O0', '-ffp-contract=off', '-w', 'a.c', '-o', 'a', '-lm']);
    return run('./a', []);
  },
  cpp(rows) {
    file('b.cpp', `#include <cmath>\n#include <cstdio>\n${functions(rows, (e, i) => `static double f${i}(double x, double y) { return ${e}; }`)}\nint main() {\n${POINTS.map((p) => functions(rows, (_, i) => `std::printf("%.17g\\n", f${i}(${p.x}, ${p.y}));`)).join('\n')}\n}`);
    run('g++', ['-std=c++20', '-O0', '-ffp-contract=off', '-w', 'b.cpp', '-o', 'b']);
    return run('./b', []);
  },
  rust(rows) {
    file('c.rs', `#![allow(warnings)]\n${functions(rows, (e, i) => `fn f${i}(x: f64, y: f64) -> f64 { ${e} }`)}\nfn main() {\n${POINTS.map((p) => functions(rows, (_, i) => `println!("{:.17e}", f${i}(${p.x}, ${p.y}));`)).join('\n')}\n}`);
    run('rustc', ['c.rs', '-o', 'c']);
    return run('./c', []);
  },
  java(rows) {
    file('D.java', `public class D {\n${functions(rows, (e, i) => `static double f${i}(double x, double y) { return ${e}; }`)}\npublic static void main(String[] a) {\n${POINTS.map((p) => functions(rows, (_, i) => `System.out.println(f${i}(${p.x}, ${p.y}));`)).join('\n')}\n} }`);
    run('javac', ['D.java']);
    return run('java', ['D']);
  },
  python(rows) {
    file('e.py', `import math\nrows = [\n${functions(rows, (e) => `lambda x, y: ${e},`)}\n]\nfor x, y in [${POINTS.map((p) => `(${p.x}, ${p.y})`).join(', ')}]:\n  for f in rows:\n    try:\n      v = f(x, y)\n      print(repr(float(v)) if not isinstance(v, complex) else 'nan')\n    except Exception:\n      print('nan')\n`);
    return run('python3', ['e.py']);
  },
  javascript(rows) {
    return POINTS.flatMap(({ x, y }) => rows.map((e) => String(new Function('x', 'y', `return ${e};`)(x, y)))).join('\n');
  },
};

const recorded = {};
for (const [language, seed] of Object.entries(SEEDS)) {
  let rows = expressions(language, COUNT, seed).filter((e) => !/--/.test(e));
  if (language === 'javascript') rows = rows.filter((e) => accepted(() => new Function('x', 'y', `return ${e};`)));
  const values = runners[language](rows).trim().split('\n').map(Number);
  recorded[language] = rows.map((text, i) => ({ text, values: POINTS.map((_, k) => values[k * rows.length + i]).map((v) => (Number.isFinite(v) ? v : null)) }));
  console.log(language, rows.length, recorded[language].filter((r) => r.values.every((v) => v !== null)).length);
}
writeFileSync(new URL('values.json', import.meta.url), `${JSON.stringify(recorded, null, 1)}\n`);
console.log(readFileSync(new URL('values.json', import.meta.url)).length, 'bytes');

function accepted(f) {
  try {
    f();
    return true;
  } catch {
    return false;
  }
}
