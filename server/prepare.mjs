/**
 * What `npm start` and `npm test` do first: install the packages and build what
 * has changed. Plain Node without packages, since there may be none yet.
 */
import { spawn } from 'node:child_process';
import { createHash } from 'node:crypto';
import { existsSync, mkdirSync, readdirSync, readFileSync, statSync, writeFileSync } from 'node:fs';
import { dirname, join, relative, sep } from 'node:path';
import { fileURLToPath } from 'node:url';

export const ROOT = dirname(dirname(fileURLToPath(import.meta.url)));
export const OLDEST_NODE = 20;

/** A step that failed, in words that let the reader mend it. */
export class StepFailed extends Error {}

/** @param {string} text */
const say = (text) => process.stdout.write(`${text}\n`);

/** @param {number} milliseconds */
export const inWords = (milliseconds) => `${(milliseconds / 1e3).toFixed(1)} s`;

const APT = 'apt-get install -y --no-install-recommends python3 make g++';

/**
 * What to do about a failed installation, read from what npm printed.
 * @param {string} output
 */
export const installAdvice = (output) => {
  if (/EACCES|EPERM/.test(output)) {
    return 'The folder cannot be written: run as its owner, or change its owner.';
  }
  if (/ENOSPC/.test(output)) return 'The disk is full: make room and run it again.';
  if (/better-sqlite3|node-gyp|gyp ERR/.test(output)) {
    return (
      'No ready-made better-sqlite3 fits this machine and it could not be compiled. ' +
      `On Debian or Ubuntu run\n  sudo ${APT}\nand then the same command again.`
    );
  }
  if (/ENOTFOUND|ECONNREFUSED|ETIMEDOUT|EAI_AGAIN|ECONNRESET/.test(output)) {
    return 'The package registry is out of reach: check the network (or the proxy) and run it again.';
  }
  return 'What npm printed above says why.';
};

/**
 * @param {string} version as in process.versions.node
 * @returns {string | null} what is wrong with it
 */
export const nodeFault = (version) =>
  Number(version.split('.')[0]) >= OLDEST_NODE
    ? null
    : `Node.js ${OLDEST_NODE} or newer is needed, this is ${version}: install one from https://nodejs.org and run it again.`;

/**
 * Runs a command to its end.
 * @param {string} command @param {readonly string[]} args
 */
export const run = async (command, args) => {
  const child = spawn(command, args, { cwd: ROOT, stdio: ['ignore', 'pipe', 'pipe'] });
  let output = '';
  for (const stream of [child.stdout, child.stderr]) {
    stream.on('data', (chunk) => (output += String(chunk)));
  }
  /** @type {number | null} */
  const code = await new Promise((resolve) => {
    child.once('error', (error) => {
      output += error.message;
      resolve(null);
    });
    child.once('close', resolve);
  });
  return { ok: code === 0, output };
};

/**
 * @param {string} script relative to node_modules
 * @param {readonly string[]} args
 */
export const runInstalled = (script, args) =>
  run(process.execPath, [join(ROOT, 'node_modules', script), ...args]);

/** @param {readonly string[]} args */
const runNpm = (args) => {
  const npm = process.env.npm_execpath;
  return npm?.endsWith('.js') ? run(process.execPath, [npm, ...args]) : run('npm', args);
};

const PASSED_OVER = new Set(['node_modules', 'dist', '.git', 'tsconfig.tsbuildinfo']);

/** @param {string} path @returns {string[]} */
const filesBelow = (path) =>
  readdirSync(path, { withFileTypes: true })
    .filter(({ name }) => !PASSED_OVER.has(name))
    .flatMap((entry) =>
      entry.isDirectory() ? filesBelow(join(path, entry.name)) : [join(path, entry.name)],
    );

/**
 * One hash over names and contents of files, folders with all that is below
 * them; a path that is not there counts as absent.
 * @param {string} root @param {readonly string[]} paths @param {string} [extra]
 */
export const hashOf = (root, paths, extra = '') => {
  const hash = createHash('sha256').update(extra);
  for (const path of paths) {
    const full = join(root, path);
    if (!existsSync(full)) {
      hash.update(`${path}\0absent\0`);
      continue;
    }
    const files = statSync(full).isDirectory() ? filesBelow(full) : [full];
    for (const file of files.sort()) {
      hash.update(`${relative(root, file).split(sep).join('/')}\0`).update(readFileSync(file));
    }
  }
  return hash.digest('hex');
};

/**
 * A result is there and was made of what is there now.
 * @param {string} stampFile @param {string} hash @param {readonly string[]} results
 */
export const isCurrent = (stampFile, hash, results) =>
  results.every((path) => existsSync(path)) &&
  existsSync(stampFile) &&
  readFileSync(stampFile, 'utf8').trim() === hash;

/** @param {string} stampFile @param {string} hash */
export const setStamp = (stampFile, hash) => {
  mkdirSync(dirname(stampFile), { recursive: true });
  writeFileSync(stampFile, `${hash}\n`);
};

/**
 * @typedef {object} Step
 * @property {string} name what is said while it is done
 * @property {string} stamp
 * @property {readonly string[]} sources
 * @property {readonly string[]} results
 * @property {() => Promise<{ ok: boolean, output: string }>} make
 * @property {(output: string) => string} advice
 */

const compilerAdvice = () => 'The sources do not compile: what is printed above says where.';

/** @type {readonly Step[]} */
const STEPS = [
  {
    name: 'Installing packages (a minute or two, this once)',
    stamp: 'node_modules/.yieldward-stamp',
    sources: ['package.json', 'package-lock.json'],
    results: ['node_modules/typescript/package.json'],
    make: () =>
      runNpm([
        existsSync(join(ROOT, 'package-lock.json')) ? 'ci' : 'install',
        ...['--include=dev', '--no-audit', '--no-fund'],
      ]),
    advice: installAdvice,
  },
  {
    name: 'Building the server',
    stamp: 'dist/server-stamp',
    sources: ['shared', 'server', 'tsconfig.json', 'package-lock.json'],
    results: ['dist/server/main.js'],
    make: () => runInstalled('typescript/bin/tsc', ['-b']),
    advice: compilerAdvice,
  },
  {
    name: 'Building the web page',
    stamp: 'dist/client-stamp',
    sources: ['shared', 'client', 'docs/site.schema.json', 'tsconfig.json', 'package-lock.json'],
    results: ['dist/client/index.html'],
    make: () =>
      runInstalled('vite/bin/vite.js', ['build', '--config', join('client', 'vite.config.ts')]),
    advice: compilerAdvice,
  },
];

/** A package's scripts are no part of what is installed. */
const hashSources = (/** @type {Step} */ step) => {
  if (!step.sources.includes('package.json')) return hashOf(ROOT, step.sources);
  const { dependencies, devDependencies, overrides } = JSON.parse(
    readFileSync(join(ROOT, 'package.json'), 'utf8'),
  );
  const wanted = JSON.stringify([dependencies, devDependencies, overrides]);
  return hashOf(ROOT, ['package-lock.json'], `${process.versions.modules} ${wanted}`);
};

/** Installs and builds what is missing or has changed. Throws StepFailed. */
export const prepare = async () => {
  const fault = nodeFault(process.versions.node);
  if (fault) throw new StepFailed(fault);
  for (const step of STEPS) {
    const stamp = join(ROOT, step.stamp);
    const hash = hashSources(step);
    if (
      isCurrent(
        stamp,
        hash,
        step.results.map((path) => join(ROOT, path)),
      )
    )
      continue;
    say(`${step.name} …`);
    const began = performance.now();
    const { ok, output } = await step.make();
    if (!ok)
      throw new StepFailed(`${output.trim()}\n\n${step.name}: failed. ${step.advice(output)}`);
    setStamp(stamp, hash);
    say(`  done in ${inWords(performance.now() - began)}`);
  }
};
