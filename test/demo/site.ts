import { fileURLToPath } from 'node:url';
import { loadSite } from '../../server/site/load.ts';
import type { Site } from '../../shared/model/site.ts';

export const SITE_FILE = fileURLToPath(new URL('../../server/demo/site.json', import.meta.url));

/** The demo's site, as the server reads it. */
export const demoSite = async (): Promise<Site> => {
  const read = await loadSite(SITE_FILE);
  if (!read.ok) throw new Error(JSON.stringify(read.faults));
  return read.site;
};
