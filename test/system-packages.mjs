/** Programs from outside npm that the tests run: a browser, a broker, a database. */
import { spawnSync } from 'node:child_process';
import { existsSync } from 'node:fs';
import { delimiter, join } from 'node:path';

/** Daemons lie in sbin, which is not on everybody's path. */
const FOLDERS = [...(process.env.PATH ?? '').split(delimiter), '/usr/bin', '/usr/sbin'];

/** @param {string} program */
const isThere = (program) => FOLDERS.some((folder) => existsSync(join(folder, program)));

/** Debian's package, and how to tell that it is there. */
const NEEDED = /** @type {const} */ ([
  ['chromium', () => isThere('chromium')],
  ['mosquitto', () => isThere('mosquitto')],
  ['mosquitto-clients', () => isThere('mosquitto_pub')],
  ['influxdb', () => isThere('influxd')],
  ['fonts-dejavu-core', () => existsSync('/usr/share/fonts/truetype/dejavu/DejaVuSans.ttf')],
]);

/** To compile better-sqlite3 where no ready-made one is to be had. */
const COMPILER = /** @type {const} */ ([
  ['python3', () => isThere('python3')],
  ['make', () => isThere('make')],
  ['g++', () => isThere('g++')],
]);

/** @param {readonly (readonly [string, () => boolean])[]} list */
const missingOf = (list) => list.filter(([, found]) => !found()).map(([name]) => name);

/** @param {readonly string[]} packages */
const commandFor = (packages) =>
  `apt-get update && apt-get install -y --no-install-recommends ${packages.join(' ')}`;

/**
 * Installs what is missing when root on Debian or Ubuntu.
 * @returns {string | null} what to run by hand where it cannot, or null when all is there
 */
export const provideSystemPackages = () => {
  const mayInstall = process.getuid?.() === 0 && existsSync('/etc/debian_version');
  const missing = missingOf(mayInstall ? [...NEEDED, ...COMPILER] : NEEDED);
  if (missing.length === 0) return null;
  const command = commandFor(missing);
  if (mayInstall) {
    process.stdout.write(`Installing ${missing.join(', ')} with apt-get …\n`);
    spawnSync('sh', ['-c', command], {
      env: { ...process.env, DEBIAN_FRONTEND: 'noninteractive' },
      stdio: ['ignore', 'ignore', 'inherit'],
    });
    if (missingOf(NEEDED).length === 0) return null;
  }
  return `The tests need ${missingOf(NEEDED).join(', ')}. Run (as root)\n  ${command}\nand npm test again.`;
};
