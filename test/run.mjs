/** `npm test`: provides what the tests need, then runs every check and says what came of it. */
import { spawn } from 'node:child_process';
import { existsSync, mkdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { inWords, prepare, ROOT, runInstalled, StepFailed } from '../server/prepare.mjs';
import { provideSystemPackages } from './system-packages.mjs';
import { countTests, exitCode, summaryLine, total } from './tally.mjs';

const OUTPUT = join(ROOT, 'test', 'output');
const REPORT = join(OUTPUT, 'vitest.json');
/** Read by .ci/run. */
const SUMMARY = join(OUTPUT, 'summary.txt');

/** @param {string} text */
const say = (text) => process.stdout.write(`${text}\n`);

/** Each counts as one test. @type {readonly (readonly [string, string, readonly string[]])[]} */
const CHECKS = [
  ['formatting', 'prettier/bin/prettier.cjs', ['--check', '--log-level', 'warn', '.']],
  ['lint', 'eslint/bin/eslint.js', ['--config', '.eslint.config.js', '.']],
  ['types', 'typescript/bin/tsc', ['-p', 'test', '--noEmit']],
  [
    'types of the web page',
    'svelte-check/bin/svelte-check',
    ['--tsconfig', './client/tsconfig.json'],
  ],
  [
    'directions of imports',
    'dependency-cruiser/bin/dependency-cruise.mjs',
    ['--config', '.dependency-cruiser.cjs', 'shared', 'server', 'client'],
  ],
];

const runChecks = async () => {
  const tallies = [];
  for (const [name, script, args] of CHECKS) {
    const began = performance.now();
    const { ok, output } = await runInstalled(script, args);
    if (!ok) say(output.trim());
    say(`${ok ? 'passed' : 'FAILED'}  ${name}  (${inWords(performance.now() - began)})`);
    tallies.push({ passed: ok ? 1 : 0, failed: ok ? 0 : 1 });
  }
  return tallies;
};

/** Vitest writes to the terminal as it goes, and its report to a file. */
const runTests = async () => {
  const child = spawn(
    process.execPath,
    [
      join(ROOT, 'node_modules', 'vitest', 'vitest.mjs'),
      ...['run', '--config', 'test/vitest.config.ts'],
      ...['--reporter=default', '--reporter=json', `--outputFile.json=${REPORT}`],
    ],
    { cwd: ROOT, stdio: ['ignore', 'inherit', 'inherit'] },
  );
  /** @type {number | null} */
  const code = await new Promise((resolve) => child.once('close', resolve));
  const tally = countTests(existsSync(REPORT) ? JSON.parse(readFileSync(REPORT, 'utf8')) : null);
  // An error outside any test leaves the counts clean and the code not.
  return code !== 0 && tally.failed === 0 ? { ...tally, failed: 1 } : tally;
};

const main = async () => {
  rmSync(OUTPUT, { recursive: true, force: true });
  mkdirSync(OUTPUT, { recursive: true });
  const lacking = provideSystemPackages();
  if (lacking !== null) throw new StepFailed(lacking);
  await prepare();
  return total([...(await runChecks()), await runTests()]);
};

let tally = { passed: 0, failed: 1 };
try {
  tally = await main();
} catch (error) {
  say(error instanceof StepFailed ? error.message : String(error));
}
writeFileSync(SUMMARY, `${summaryLine(tally)}\n`);
say(`Tests and checks together: ${summaryLine(tally)}`);
process.exitCode = exitCode(tally);
