import { spawn, type ChildProcess } from 'node:child_process';
import { once } from 'node:events';
import { mkdtempSync, rmSync } from 'node:fs';
import { createServer, type AddressInfo } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { onTestFinished } from 'vitest';

/** A folder that goes when the test does. */
export const temporaryFolder = (): string => {
  const folder = mkdtempSync(join(tmpdir(), 'yieldward-test-'));
  onTestFinished(() => rmSync(folder, { recursive: true, force: true, maxRetries: 3 }));
  return folder;
};

/** A port that nobody listens on just now. */
export const freePort = async (): Promise<number> => {
  const server = createServer().listen(0, '127.0.0.1');
  await once(server, 'listening');
  const { port } = server.address() as AddressInfo;
  server.close();
  await once(server, 'close');
  return port;
};

export const endProcess = async (child: ChildProcess, signal: NodeJS.Signals): Promise<void> => {
  if (child.exitCode !== null || child.signalCode !== null) return;
  const gone = once(child, 'exit');
  child.kill(signal);
  await gone;
};

/** A process that ends with the test at the latest. */
export const startProcess = (command: string, args: readonly string[]): ChildProcess => {
  const child = spawn(command, args, { stdio: ['ignore', 'pipe', 'pipe'] });
  onTestFinished(() => endProcess(child, 'SIGKILL'));
  return child;
};

/** Resolves with the first match of `pattern` in what the process prints. */
export const printed = (child: ChildProcess, pattern: RegExp): Promise<RegExpExecArray> =>
  new Promise((resolve, reject) => {
    let text = '';
    const take = (chunk: Buffer) => {
      text += chunk.toString();
      const match = pattern.exec(text);
      if (match) resolve(match);
    };
    child.stdout?.on('data', take);
    child.stderr?.on('data', take);
    child.once('exit', (code) => reject(new Error(`ended (${code}) after printing: ${text}`)));
  });
