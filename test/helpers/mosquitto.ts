import { writeFileSync } from 'node:fs';
import { connect } from 'node:net';
import { join } from 'node:path';
import { endProcess, freePort, startProcess, temporaryFolder } from './process.ts';

export interface Mosquitto {
  readonly url: string;
  /** Ends it, orderly, so that it keeps its sessions; `start` begins it again on the same port. */
  readonly stop: () => Promise<void>;
  readonly start: () => Promise<void>;
}

const SETTINGS = (port: number, folder: string) => `
listener ${port} 127.0.0.1
allow_anonymous true
persistence true
persistence_location ${folder}/
max_inflight_messages 0
max_queued_messages 0
user root
`;

const answers = (port: number): Promise<boolean> =>
  new Promise((resolve) => {
    const socket = connect(port, '127.0.0.1');
    socket.once('connect', () => {
      socket.destroy();
      resolve(true);
    });
    socket.once('error', () => resolve(false));
  });

/** Debian's mosquitto, with settings that drop nothing, on a free port. */
export const startMosquitto = async (): Promise<Mosquitto> => {
  const folder = temporaryFolder();
  const port = await freePort();
  const settings = join(folder, 'mosquitto.conf');
  writeFileSync(settings, SETTINGS(port, folder));
  let child = startProcess('/usr/sbin/mosquitto', ['-c', settings]);
  const ready = async () => {
    while (!(await answers(port))) {
      if (child.exitCode !== null) throw new Error(`mosquitto ended (${child.exitCode})`);
      await new Promise((resolve) => setTimeout(resolve, 10));
    }
  };
  await ready();
  return {
    url: `mqtt://127.0.0.1:${port}`,
    stop: () => endProcess(child, 'SIGTERM'),
    start: async () => {
      child = startProcess('/usr/sbin/mosquitto', ['-c', settings]);
      await ready();
    },
  };
};
