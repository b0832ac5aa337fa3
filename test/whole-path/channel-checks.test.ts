/** Channel checks as a technician makes them: the built server, simulated nodes, faults on request. */
import { fileURLToPath } from 'node:url';
import { expect, onTestFinished, test } from 'vitest';
import { demoTopic } from '../../server/demo/fault-request.ts';
import { NODE_SHUNT } from '../../server/demo/shunt.ts';
import type { CheckKind } from '../../shared/channel-check/verdict.ts';
import { topicOf } from '../../shared/pipeline/1-decode/topics.ts';
import type {
  ChannelChecks,
  ChecksAnswer,
  CheckLine,
  ZerosAnswer,
} from '../../shared/protocol/checks.ts';
import type { SetUpAnswer } from '../../shared/protocol/http.ts';
import { nodeClient } from '../contracts/frame-source.ts';
import { endProcess, printed, startProcess, temporaryFolder } from '../helpers/process.ts';

const here = (path: string) => fileURLToPath(new URL(path, import.meta.url));
const MAIN = here('../../dist/server/main.js');
const NODE = here('../../dist/server/demo/node.js');
const SITE = here('../../server/demo/site.json');
const [BROKEN, SOUND, SUNNY, SHADY] = [
  ...['B1-mid-bottom-left', 'B1-mid-bottom-right', 'L1-mid-bending', 'L2-mid-bending'],
] as const;
const SIGNED = { author: 'Technician', note: '' };

/** The demo's site on the built server, with node n1 before its load programme begins. */
const scene = async () => {
  const server = startProcess(process.execPath, [
    ...[MAIN, '--site', SITE, '--data', temporaryFolder(), '--port', '0', '--mqtt-port', '0'],
  ]);
  const [, broker = '', url = ''] = await printed(
    server,
    /Broker: (mqtt:\/\/[\w.]+:\d+)[\s\S]*Ready: (http:\S+)/,
  );
  const later = String(Math.round(Date.now() / 1e3) + 3600);
  const node = startProcess(process.execPath, [
    ...[NODE, '--node', 'n1', '--broker', broker, '--site', SITE, '--begin', later],
  ]);
  const client = await nodeClient(broker);
  let frames = 0;
  let wake = () => undefined as void;
  client.on('message', () => {
    frames++;
    wake();
  });
  await client.subscribeAsync(topicOf('n1', 'frame'));
  /** Until so many more frames of ten samples, a tenth of a second each, have come. */
  const more = async (count: number) => {
    const enough = frames + count;
    while (frames < enough) await new Promise<void>((resolve) => (wake = resolve));
  };
  const play = (request: object) =>
    client.publishAsync(demoTopic('n1'), JSON.stringify(request), { qos: 1 });
  const get = async <T>(path: string) => (await (await fetch(`${url}/api/${path}`)).json()) as T;
  const post = async (path: string, body: object) =>
    fetch(`${url}/api/${path}`, {
      method: 'POST',
      headers: { 'Content-Type': 'application/json' },
      body: JSON.stringify(body),
    });
  const lines = async (path: string, body: object) =>
    (await (await post(path, body)).text())
      .trim()
      .split('\n')
      .map((line) => JSON.parse(line) as CheckLine);
  return { node, more, play, get, post, lines };
};

const checkOf = (channel: ChannelChecks | undefined, kind: CheckKind) =>
  channel?.checks.find(({ check }) => check.kind === kind)?.check;

const resultOf = (lines: readonly CheckLine[]) => {
  const last = lines.at(-1);
  if (last?.kind !== 'result') throw new Error(JSON.stringify(last));
  return last.channels;
};

test('a broken wire fails; a drifting channel is refused its zero; a shunt on command shows what is due', async () => {
  const { node, more, play, get, post, lines } = await scene();
  await more(45);
  const sound = await lines('checks', { channels: [BROKEN, SOUND], seconds: 4, ...SIGNED });
  expect(resultOf(sound).map(({ verdict }) => verdict)).not.toContain('fail');
  // What a good input shows: 0.8 µε in the demo, of 400 samples.
  const noise = checkOf(resultOf(sound)[1], 'noise')?.figure ?? NaN;
  expect(noise * 1e6).toBeGreaterThan(0.6);
  expect(noise * 1e6).toBeLessThan(1);

  await play({ fault: 'broken-wire', input: 's7' });
  await play({ fault: 'sun' });
  await more(45);
  const [broken, other] = resultOf(
    await lines('checks', { channels: [BROKEN, SOUND], seconds: 4, ...SIGNED }),
  );
  expect(broken?.verdict).toBe('fail');
  expect(checkOf(broken, 'alive')).toMatchObject({ verdict: 'fail', figure: 0 });
  expect(checkOf(broken, 'alive')?.why).toContain('over range');
  expect(other?.verdict).not.toBe('fail');

  const { revision } = await get<SetUpAnswer>('set-up');
  const request = {
    ...{ channels: [SUNNY, SHADY, BROKEN], seconds: 4, state: { kind: 'unloaded' } },
    ...{ author: 'Engineer', reason: 'Before the first load step', basedOn: revision },
  };
  const answer = await post('zeros', request);
  expect(answer.status).toBe(200);
  const zeros = (await answer.json()) as ZerosAnswer;
  expect(zeros).toMatchObject({ simulated: true, revision: revision + 1, cautions: [] });
  expect(zeros.zeroed.map(({ channel }) => channel)).toEqual([SHADY]);
  expect(zeros.refused.map(({ channel, refusal }) => [channel, refusal.code])).toEqual([
    [SUNNY, 'drifting'],
    [BROKEN, 'not-arriving'],
  ]);
  const { document } = await get<SetUpAnswer>('set-up');
  expect(JSON.stringify(document)).toContain(zeros.zeroed[0]?.zero);

  const shunt = {
    ...{ channel: SOUND, how: 'commanded', place: 'gauge', resistance: NODE_SHUNT, seconds: 2 },
    ...SIGNED,
  };
  const shunted = checkOf(resultOf(await lines('checks/shunt', shunt))[0], 'shunt');
  expect(shunted).toMatchObject({ verdict: 'pass', why: expect.stringContaining('due') });
  // −Rg/(GF·(Rg + Rs)) of 350 Ω, GF 2.11, 350 kΩ: parallel resistors, computed; leads are inverted.
  expect((shunted?.also[0]?.value ?? NaN) * 1e6).toBeCloseTo(-473.46, 0);

  await endProcess(node, 'SIGTERM');
  const silent = await lines('checks/shunt', shunt);
  expect(silent).toMatchObject([{ kind: 'stopped', byHand: true }]);
  const stands = await get<ChecksAnswer>('checks');
  expect(stands.revision).toBe(revision + 1);
  const kept = stands.channels.find(({ channel }) => channel === SOUND);
  expect(checkOf(kept, 'shunt')).toEqual(shunted);
  onTestFinished(() => endProcess(node, 'SIGKILL'));
}, 60_000);
