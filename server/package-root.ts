import { existsSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';

/** The folder of package.json: the same seen from the source and from what was built of it. */
export const packageRoot = (): string => {
  let folder = dirname(fileURLToPath(import.meta.url));
  while (!existsSync(join(folder, 'package.json'))) {
    const above = dirname(folder);
    if (above === folder) throw new Error('package.json: expected above the program, came none');
    folder = above;
  }
  return folder;
};

/** A file that comes with the program, by its path from the package's folder. */
export const packageFile = (...path: string[]): string => join(packageRoot(), ...path);
