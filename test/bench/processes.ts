import { fork, spawn, type ChildProcess } from 'node:child_process';
import { readFileSync } from 'node:fs';
import { once } from 'node:events';
import { fileURLToPath } from 'node:url';

const here = (file: string) => fileURLToPath(new URL(file, import.meta.url));

/** Starts another of the bench's own programs; it reports by `process.send`. */
export const startPart = (file: string, ...args: string[]): ChildProcess =>
  fork(here(file), args, {
    execArgv: ['--import', 'tsx'],
    stdio: ['ignore', 'inherit', 'inherit', 'ipc'],
  });

/** The next message of a part. */
export const message = async <T>(part: ChildProcess): Promise<T> => {
  const [value] = (await Promise.race([
    once(part, 'message'),
    once(part, 'exit').then(([code]) => Promise.reject(new Error(`a part ended early: ${code}`))),
  ])) as [T];
  return value;
};

export const end = async (part: ChildProcess): Promise<void> => {
  if (part.exitCode !== null || part.signalCode !== null) return;
  const gone = once(part, 'exit');
  part.kill('SIGTERM');
  await gone;
};

export interface Server {
  readonly process: ChildProcess;
  readonly pid: number;
  readonly http: string;
  readonly mqtt: string;
}

/** The built server as a person would start it, on free ports; resolves when it is ready. */
export const startServer = async (site: string, data: string): Promise<Server> => {
  const child = spawn(
    process.execPath,
    [
      here('../../dist/server/main.js'),
      ...['--site', site, '--data', data, '--port', '0', '--mqtt-port', '0'],
    ],
    { stdio: ['ignore', 'pipe', 'inherit'] },
  );
  let said = '';
  child.stdout.setEncoding('utf8');
  return new Promise((resolve, reject) => {
    child.once('exit', (code) => reject(new Error(`the server ended early (${code}): ${said}`)));
    child.stdout.on('data', (text: string) => {
      said += text;
      const http = /http:\/\/[\w.[\]:]+/.exec(said)?.[0];
      const mqtt = /mqtt:\/\/[\w.[\]:]+/.exec(said)?.[0];
      const pid = child.pid;
      if (http && mqtt && pid && /Ready/.test(said)) resolve({ process: child, pid, http, mqtt });
    });
  });
};

const TICKS_PER_SECOND = 100;

/** User and system time of a process with all its threads, s. */
export const cpuSeconds = (pid: number): number => {
  const stat = readFileSync(`/proc/${pid}/stat`, 'utf8');
  const fields = stat.slice(stat.lastIndexOf(')') + 2).split(' ');
  return (Number(fields[11]) + Number(fields[12])) / TICKS_PER_SECOND;
};

/** Resident memory of a process, MB (10^6 bytes). */
export const residentMegabytes = (pid: number): number => {
  const line = /VmRSS:\s+(\d+) kB/.exec(readFileSync(`/proc/${pid}/status`, 'utf8'));
  return (Number(line?.[1]) * 1024) / 1e6;
};
