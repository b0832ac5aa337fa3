import { epochSeconds } from '../../shared/model/units.ts';
import type { Site } from '../../shared/model/site.ts';
import type { Clock, RecordStore, SiteFormat, SiteRevision } from '../ports.ts';
import { successionFaults } from './succession.ts';

export interface FirstRevisionParts {
  readonly records: RecordStore;
  readonly format: SiteFormat;
  readonly clock: Clock;
  readonly say: (line: string) => void;
}

const faultLines = (
  faults: readonly { readonly path: string; readonly expected: string; readonly came: string }[],
): string => faults.map((f) => `  ${f.path}: expected ${f.expected}, came ${f.came}`).join('\n');

const checked = (format: SiteFormat, text: string, where: string): Site => {
  const read = format.read(text);
  if (read.ok) return read.site;
  throw new Error(`${where}: ${read.faults.length} faults\n${faultLines(read.faults)}`);
};

/**
 * The set-up to start with. A site file that is new, or has changed since it was taken in,
 * becomes a revision, unless the set-up was changed on screen since: then that stands, and it is
 * said. Throws with every fault of a file that may not follow what stood before.
 */
export const firstRevision = async (
  text: string,
  file: string,
  { records, format, clock, say }: FirstRevisionParts,
): Promise<{ readonly site: Site; readonly revision: SiteRevision }> => {
  const stored = await records.siteRevision();
  const filed = checked(format, text, `site file ${file}`);
  if (stored && (stored.text === text || stored.origin === 'screen')) {
    if (stored.text !== text) {
      say(
        `Set-up: revision ${stored.revision}, changed on screen by ${stored.author}, stands; ` +
          'the site file is not read over it. Import it on the Set-up page if it should be.',
      );
    }
    return { site: checked(format, stored.text, 'the stored set-up'), revision: stored };
  }
  if (stored) {
    const before = checked(format, stored.text, 'the stored set-up');
    const faults = successionFaults(before, filed);
    if (faults.length > 0) {
      throw new Error(`site file ${file} cannot follow what stood:\n${faultLines(faults)}`);
    }
  }
  const revision: SiteRevision = {
    revision: (stored?.revision ?? 0) + 1,
    at: epochSeconds(clock.now()),
    ...{ author: 'Site file', reason: stored ? 'The file has changed' : 'Taken in' },
    ...{ origin: 'file', text },
  };
  await records.addSiteRevision(revision, []);
  return { site: filed, revision };
};
