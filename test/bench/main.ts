/** `npm run bench`: each speed as a ratio against a floor of the same run. `-- --minutes N` for a shorter stay at full rate. */
import { execFileSync } from 'node:child_process';
import { existsSync, mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { parseArgs } from 'node:util';
import { benchDerive } from './derive.ts';
import { jsonLine, table, type Row } from './figures.ts';
import { benchFullRate } from './full-rate.ts';
import { benchLatency } from './latency.ts';
import { benchLookBack } from './look-back.ts';
import { writeSite } from './site.ts';
import { benchWholePath } from './whole-path.ts';

const { values } = parseArgs({
  options: { minutes: { type: 'string', default: '10' }, only: { type: 'string' } },
});
const minutes = Number(values.minutes);
if (!(minutes > 0)) throw new Error(`--minutes: expected a number above 0, came ${values.minutes}`);

const say = (line: string) => process.stderr.write(`${line}\n`);
const root = fileURLToPath(new URL('../..', import.meta.url));
say('Building …');
execFileSync('npm', ['run', '--silent', 'build'], { cwd: root, stdio: ['ignore', 2, 2] });
if (!existsSync(join(root, 'dist/server/main.js'))) throw new Error('the build made no server');

const folder = mkdtempSync(join(tmpdir(), 'yieldward-bench-'));
const site = writeSite(folder, 2, 32);
const data = (name: string) => join(folder, name);

const parts: readonly (readonly [name: string, run: () => Promise<Row[]>])[] = [
  ['whole path', () => benchWholePath(site, data('path'), 8000, 3)],
  ['latency', () => benchLatency(site, data('latency'))],
  ['derive', () => benchDerive(site, data('derive'))],
  ['look back', () => benchLookBack(site, data('back'))],
  [`full rate, ${minutes} min`, () => benchFullRate(site, data('rate'), minutes)],
];

const rows: Row[] = [];
try {
  for (const [name, run] of parts) {
    if (values.only !== undefined && !name.startsWith(values.only)) continue;
    say(`Measuring: ${name} …`);
    rows.push(...(await run()));
  }
} finally {
  rmSync(folder, { recursive: true, force: true });
}
process.stdout.write(`${table(rows)}\n${jsonLine(rows)}\n`);
