import { once } from 'node:events';
import { createServer, type AddressInfo } from 'node:net';
import { fileURLToPath } from 'node:url';
import { writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { expect, onTestFinished, test } from 'vitest';
import { startProcess, temporaryFolder } from '../helpers/process.ts';

const MAIN = fileURLToPath(new URL('../../dist/server/main.js', import.meta.url));

const takenPort = async (): Promise<string> => {
  const server = createServer().listen(0, '127.0.0.1');
  onTestFinished(() => void server.close());
  await once(server, 'listening');
  return String((server.address() as AddressInfo).port);
};

/** What the built server says on its way out, and its exit code. */
const endOf = async (...args: string[]) => {
  const server = startProcess(process.execPath, [MAIN, '--data', temporaryFolder(), ...args]);
  let said = '';
  server.stderr?.on('data', (chunk: Buffer) => (said += chunk.toString()));
  const [code] = (await once(server, 'close')) as [number | null];
  return { code, said };
};

test.each([
  ['web page and API', '--port', '--mqtt-port'],
  ['broker', '--mqtt-port', '--port'],
])('a taken port for the %s is said, and the process ends', async (step, option, other) => {
  const port = await takenPort();
  const { code, said } = await endOf(option, port, other, '0');
  expect(code).toBe(1);
  expect(said).toContain(`Yieldward did not start. ${step}: `);
  expect(said).toContain(port);
});

test('a store that is not there is said, and the process ends', async () => {
  const port = await takenPort();
  const server = createServer((socket) => socket.destroy()).listen(0, '127.0.0.1');
  onTestFinished(() => void server.close());
  await once(server, 'listening');
  const gone = String((server.address() as AddressInfo).port);
  const store = `influx+http://127.0.0.1:${gone}/samples`;
  const { code, said } = await endOf('--store', store, '--port', port, '--mqtt-port', '0');
  expect(code).toBe(1);
  expect(said).toContain('Yieldward did not start.');
});

test('every fault of a site file is listed, and the process ends', async () => {
  const file = join(temporaryFolder(), 'site.json');
  writeFileSync(file, JSON.stringify({ format: 1, id: 'x', name: '' }));
  const { code, said } = await endOf('--site', file);
  expect(code).toBe(1);
  expect(said).toMatch(/\d+ faults/);
  expect(said).toContain('expected');
});
