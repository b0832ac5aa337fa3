import { once } from 'node:events';
import { mkdirSync } from 'node:fs';
import { createServer, request, type IncomingHttpHeaders } from 'node:http';
import type { AddressInfo } from 'node:net';
import { join } from 'node:path';
import { text } from 'node:stream/consumers';
import { onTestFinished } from 'vitest';
import { createHttp } from '../../server/http/http.ts';
import { createMetrics } from '../../server/http/metrics.ts';
import type { CheckDesk, Core, SetUpDesk } from '../../server/ports.ts';
import { fakeClock } from '../helpers/fakes.ts';
import { plainChecks, plainCore, plainDesk, START } from '../helpers/core.ts';
import { temporaryFolder } from '../helpers/process.ts';

export interface Answer {
  readonly status: number;
  readonly headers: IncomingHttpHeaders;
  readonly body: string;
  readonly json: () => unknown;
}

export interface Ask {
  readonly method?: string;
  readonly headers?: Readonly<Record<string, string>>;
  readonly body?: string;
}

export interface Served {
  readonly port: number;
  /** A request as it is written here: every header may be set, paths are not tidied. */
  readonly ask: (path: string, ask?: Ask) => Promise<Answer>;
  readonly put: (path: string, body: unknown, headers?: Ask['headers']) => Promise<Answer>;
  readonly complaints: string[];
  readonly folder: string;
}

/** The real HTTP side on a free port, over a plain core and an empty page folder. */
export const serve = async (
  over: Partial<Core> = {},
  host = '127.0.0.1',
  desk: Partial<SetUpDesk> = {},
  checks: Partial<CheckDesk> = {},
): Promise<Served> => {
  const core = plainCore(over);
  const folder = join(temporaryFolder(), 'page');
  mkdirSync(folder);
  const complaints: string[] = [];
  const app = createHttp({
    core,
    setUp: plainDesk(desk),
    checks: plainChecks(checks),
    metrics: createMetrics({ core, clock: fakeClock(START + 61) }),
    staticFolder: folder,
    host,
    complain: (line) => complaints.push(line),
  });
  const server = createServer(app).listen(0, '127.0.0.1');
  await once(server, 'listening');
  const { port } = server.address() as AddressInfo;
  onTestFinished(() => {
    server.closeAllConnections();
    server.close();
  });
  const ask = async (path: string, { method = 'GET', headers = {}, body }: Ask = {}) => {
    const sent = request({ host: '127.0.0.1', port, path, method, headers, agent: false });
    sent.end(body);
    const [response] = await once(sent, 'response');
    const received = await text(response);
    return {
      status: response.statusCode,
      headers: response.headers,
      body: received,
      json: () => JSON.parse(received) as unknown,
    };
  };
  const put = (path: string, body: unknown, headers: Ask['headers'] = {}) =>
    ask(path, {
      method: 'PUT',
      headers: { 'Content-Type': 'application/json', ...headers },
      body: JSON.stringify(body),
    });
  return { port, ask, put, complaints, folder };
};
