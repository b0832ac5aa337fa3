import { once } from 'node:events';
import { beforeAll, describe, expect, onTestFinished, test } from 'vitest';
import { startFleet } from '../../server/demo/fleet.ts';
import { demoTopic } from '../../server/demo/fault-request.ts';
import { createDecode } from '../../server/ingest/decode.ts';
import { embeddedBroker } from '../../server/ingest/embedded-broker.ts';
import type { Message } from '../../server/ports.ts';
import type { Frame } from '../../shared/model/frame.ts';
import type { Site } from '../../shared/model/site.ts';
import { channelBlocks, planSite } from '../../shared/pipeline/index.ts';
import { nodeClient } from '../contracts/frame-source.ts';
import { fakeClock } from '../helpers/fakes.ts';
import { printed, startProcess } from '../helpers/process.ts';
import { demoSite, SITE_FILE } from './site.ts';
import { compileExpression } from '../../server/site/expression.ts';

let site: Site;
beforeAll(async () => {
  site = await demoSite();
});

/** The server's broker and decoder, with all that came, and waiting for more without sleeping. */
const listen = async () => {
  const decode = createDecode(site);
  const broker = embeddedBroker({ host: '127.0.0.1', port: 0, clock: fakeClock() });
  const came: Message[] = [];
  let wake = () => undefined as void;
  await broker.start((delivery) => {
    came.push(decode(delivery));
    delivery.acknowledge();
    wake();
  });
  onTestFinished(() => broker.stop());
  const until = async (enough: () => boolean) => {
    while (!enough()) await new Promise<void>((resolve) => (wake = resolve));
  };
  const frames = (node: string): Frame[] =>
    came.flatMap((message) =>
      message.kind === 'samples' && message.node === node ? message.frames : [],
    );
  /** What the node said of itself, in order. */
  const statuses = (node: string): boolean[] =>
    came.flatMap((message) =>
      message.kind === 'status' && message.node === node ? [message.online] : [],
    );
  return { url: `mqtt://127.0.0.1:${broker.port()}`, came, until, frames, statuses };
};

const isRunning = (pid: number): boolean => {
  try {
    return process.kill(pid, 0);
  } catch (error) {
    expect(error).toMatchObject({ code: 'ESRCH' });
    return false;
  }
};

describe('the fleet of simulated nodes, on the server’s own broker', () => {
  test('every node is online, every channel good, no frame refused or missing; a drop-out heals', async () => {
    const { url, came, until, frames, statuses } = await listen();
    const log: string[] = [];
    const fleet = await startFleet({
      ...{ site, siteFile: SITE_FILE, broker: url },
      log: (line) => log.push(line),
    });
    onTestFinished(() => fleet.stop());
    const nodes = site.nodes.map(({ id }) => id);
    await until(() => nodes.every((id) => frames(id).length > 0 && statuses(id).length > 0));
    for (const id of nodes) expect(statuses(id)).toEqual([true]);

    const plan = planSite(site, compileExpression);
    // The yard node sends each of its two readings as a frame of its own.
    const first = nodes.flatMap((id) => frames(id).slice(0, 2));
    const blocks = first.flatMap((frame) => channelBlocks(frame, plan, () => null));
    expect(new Set(blocks.map(({ channel }) => channel)).size).toBe(plan.measured.length);
    expect(new Set(blocks.map(({ quality }) => quality))).toEqual(new Set(['good']));

    const client = await nodeClient(url);
    await client.publishAsync(demoTopic('n2'), '{"fault":"drop-out","seconds":0.5}', { qos: 1 });
    await until(() => statuses('n2').length === 3);
    expect(statuses('n2')).toEqual([true, false, true]);
    const before = frames('n2').length;
    await until(() => frames('n2').length > before + 10);
    const numbers = frames('n2').map(({ seq }) => seq);
    expect([...new Set(numbers)].sort((a, b) => a - b)).toEqual(
      Array.from({ length: Math.max(...numbers) + 1 }, (_, i) => i),
    );
    expect(new Set(frames('n2').map(({ boot }) => boot)).size).toBe(1);
    expect(came.filter(({ kind }) => kind === 'refused')).toEqual([]);
    expect(statuses('n1')).toEqual([true]);

    await client.publishAsync(demoTopic('n1'), '{"fault":"rain"}', { qos: 1 });
    await until(() => log.some((line) => line.includes('n1') && line.includes('fault: expected')));

    await fleet.stop();
    for (const id of nodes) expect(statuses(id).at(-1)).toBe(false);
    for (const pid of fleet.processes.values()) expect(isRunning(pid)).toBe(false);
  });

  test('nodes end when the process that started them is killed', async () => {
    const { url, until, statuses } = await listen();
    const script = new URL('./fleet-parent.ts', import.meta.url).pathname;
    const parent = startProcess(process.execPath, ['--import', 'tsx', script, url, SITE_FILE]);
    await printed(parent, /started/);
    const gone = once(parent, 'exit');
    parent.kill('SIGKILL');
    await gone;
    await until(() => site.nodes.every(({ id }) => statuses(id).at(-1) === false));
  });

  test('a node that cannot start ends the start, with the reason in the log', async () => {
    const log: string[] = [];
    const starting = startFleet({
      ...{ site, siteFile: `${SITE_FILE}.not`, broker: 'mqtt://127.0.0.1:1' },
      log: (line) => log.push(line),
    });
    await expect(starting).rejects.toThrow(/did not start/);
    expect(log.join('\n')).toContain('not a valid site file');
  });
});
