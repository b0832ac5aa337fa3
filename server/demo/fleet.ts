import { fork, type ChildProcess } from 'node:child_process';
import { once } from 'node:events';
import { fileURLToPath } from 'node:url';
import type { Site } from '../../shared/model/site.ts';
import { epochSeconds, type EpochSeconds } from '../../shared/model/units.ts';

/** The simulated nodes of the demo's site, each a process of its own. */
export interface Fleet {
  /** Process id by node. */
  readonly processes: ReadonlyMap<string, number>;
  /** Ends them all, and resolves when they are gone. */
  stop(): Promise<void>;
}

/** A node that has not ended in an orderly way by then is ended, ms. */
const LAST_WAIT = 2000;

/** Beside this file, as source under a loader of TypeScript or as built. */
const ENTRY = fileURLToPath(
  new URL(import.meta.url.endsWith('.ts') ? './node.ts' : './node.js', import.meta.url),
);
const LOADER = ENTRY.endsWith('.ts') ? ['--import', 'tsx'] : [];

const end = async (child: ChildProcess): Promise<void> => {
  if (child.exitCode !== null || child.signalCode !== null) return;
  const gone = once(child, 'exit');
  child.kill('SIGTERM');
  const timer = setTimeout(() => child.kill('SIGKILL'), LAST_WAIT);
  await gone;
  clearTimeout(timer);
};

/**
 * Starts a node process for each of the site's nodes and resolves when all are
 * connected; rejects, and ends them, if one ends before. None is started again.
 * They end when this process does, however it does.
 */
export const startFleet = async (options: {
  readonly site: Site;
  /** The file that `site` was read from. */
  readonly siteFile: string;
  /** mqtt://host:port */
  readonly broker: string;
  /** When the load programme begins; now, if not said. */
  readonly begin?: EpochSeconds;
  readonly log: (line: string) => void;
}): Promise<Fleet> => {
  const { site, siteFile, broker, log } = options;
  const begin = options.begin ?? epochSeconds(Date.now() / 1e3);
  let stopping = false;
  const start = (node: string, seed: number): ChildProcess => {
    const child = fork(
      ENTRY,
      [
        ...['--node', node, '--broker', broker, '--site', siteFile],
        ...['--seed', String(seed), '--begin', String(begin)],
      ],
      { execArgv: LOADER, stdio: ['ignore', 'pipe', 'pipe', 'ipc'] },
    );
    for (const stream of [child.stdout, child.stderr]) {
      stream?.on('data', (chunk: Buffer) => log(`simulated node ${node}: ${String(chunk).trim()}`));
    }
    child.once('exit', (code, signal) => {
      if (!stopping && code !== 0) log(`simulated node ${node} ended (${code ?? signal})`);
    });
    return child;
  };
  const children = new Map(site.nodes.map(({ id }, i) => [id, start(id, i + 1)]));
  const stop = async () => {
    stopping = true;
    await Promise.all([...children.values()].map(end));
  };
  const connected = ([node, child]: [string, ChildProcess]): Promise<void> =>
    new Promise((resolve, reject) => {
      child.once('message', () => resolve());
      child.once('error', reject);
      child.once('exit', () => reject(new Error(`simulated node ${node} did not start`)));
    });
  try {
    await Promise.all([...children].map(connected));
  } catch (error) {
    await stop();
    throw error;
  }
  return { processes: new Map([...children].map(([id, { pid }]) => [id, pid ?? 0])), stop };
};
