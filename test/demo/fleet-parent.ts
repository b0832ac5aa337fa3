/** A process that starts the fleet and waits to be killed: its broker and site file are arguments. */
import { startFleet } from '../../server/demo/fleet.ts';
import { loadSite } from '../../server/site/load.ts';

const [broker = '', siteFile = ''] = process.argv.slice(2);
const read = await loadSite(siteFile);
if (!read.ok) throw new Error('site');
await startFleet({
  ...{ site: read.site, siteFile, broker },
  log: (line) => process.stdout.write(`${line}\n`),
});
process.stdout.write('started\n');
