// `npm test`: build, unit + reference + architecture tests, then the driven run in the real web workbench. Closes with `N passed, N failed`.
import { spawn } from 'node:child_process';
import { readFileSync, rmSync } from 'node:fs';
import { join, relative } from 'node:path';
import { fileURLToPath } from 'node:url';
import { requireNode } from '../src/start/requireNode.mjs';

requireNode();
const ROOT = fileURLToPath(new URL('..', import.meta.url));
const only = new Set(process.argv.slice(2));
const wanted = (stage) => only.size === 0 || only.has(stage);
let passed = 0;
let failed = 0;
/** Named again at the end, where a reader of a long log looks. */
const failures = [];

function run(command, args, { limitMinutes }) {
  return new Promise((resolve) => {
    const child = spawn(command, args, { cwd: ROOT, stdio: ['ignore', 'pipe', 'inherit'] });
    let output = '';
    const timer = setTimeout(() => {
      process.stdout.write(`time limit of ${limitMinutes} minutes reached\n`);
      child.kill('SIGKILL');
    }, limitMinutes * 60_000);
    child.stdout.on('data', (chunk) => {
      output += chunk;
      process.stdout.write(chunk);
    });
    child.on('close', (code) => {
      clearTimeout(timer);
      resolve({ code: code ?? 1, output });
    });
  });
}

async function stage(name, command, args, options) {
  if (!wanted(name)) return;
  process.stdout.write(`\n== ${name}\n`);
  const { code, output } = await run(command, args, options);
  const count = options.count?.(output);
  failures.push(...(options.failures?.(output) ?? []).map((line) => `${name}: ${line}`));
  if (count) {
    passed += count.passed;
    failed += count.failed;
    // A runner that dies after its tests passed is a failure of its own.
    if (code !== 0 && count.failed === 0) {
      failed += 1;
      failures.push(`${name}: ended with exit code ${code}`);
    }
  } else if (code === 0) passed += 1;
  else {
    failed += 1;
    failures.push(`${name}: ended with exit code ${code}`);
  }
}

const report = join(ROOT, '.cache', 'vitest.json');
const fromVitest = () => {
  try {
    const { numPassedTests, numFailedTests, testResults } = JSON.parse(readFileSync(report, 'utf8'));
    // A file that could not be loaded has no test that failed.
    const broken = testResults.filter((file) => file.status === 'failed' && file.assertionResults.every((test) => test.status !== 'failed')).length;
    return { passed: numPassedTests, failed: numFailedTests + broken };
  } catch {
    return null;
  }
};
const failuresOfVitest = () => {
  try {
    return JSON.parse(readFileSync(report, 'utf8')).testResults.flatMap((file) => {
      const own = file.assertionResults.filter((test) => test.status === 'failed').map((test) => `${test.fullName}: ${(test.failureMessages[0] ?? '').split('\n')[0]}`);
      const whole = own.length === 0 && file.status === 'failed' ? [String(file.message).split('\n')[0]] : [];
      return [...own, ...whole].map((line) => `${relative(ROOT, file.name)}: ${line}`);
    });
  } catch {
    return [];
  }
};
const failuresInLines = (output) => output.split('\n').filter((line) => /^FAILED /.test(line));
const fromLine = (output) => {
  const lines = [...output.matchAll(/^(\d+) passed, (\d+) failed$/gm)];
  return lines.length === 0 ? null : { passed: lines.reduce((n, l) => n + Number(l[1]), 0), failed: lines.reduce((n, l) => n + Number(l[2]), 0) };
};

rmSync(report, { force: true });
await stage('build', process.execPath, ['esbuild.config.mjs'], { limitMinutes: 3 });
await stage('types', process.execPath, ['node_modules/typescript/bin/tsc', '-p', '.'], { limitMinutes: 5 });
await stage('unit', process.execPath, ['node_modules/vitest/vitest.mjs', 'run', '--reporter=default', '--reporter=json', `--outputFile.json=${report}`], { limitMinutes: 15, count: fromVitest, failures: failuresOfVitest });
await stage('workbench', process.execPath, ['test/host/run.mjs'], { limitMinutes: 25, count: fromLine, failures: failuresInLines });

if (failures.length > 0) process.stdout.write(`\nfailed:\n${failures.map((line) => `  ${line}\n`).join('')}`);
process.stdout.write(`\n${passed} passed, ${failed} failed\n`);
process.exitCode = failed === 0 ? 0 : 1;
