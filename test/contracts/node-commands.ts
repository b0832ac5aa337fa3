import { describe, expect, onTestFinished, test } from 'vitest';
import type { FrameSource, NodeCommand, NodeCommands } from '../../server/ports.ts';
import { answerTopic, commandTopic } from '../../shared/pipeline/1-decode/command.ts';
import type { FakeClock } from '../helpers/fakes.ts';
import { inbox, nodeClient, publish } from './frame-source.ts';

export interface CommandsUnderTest {
  readonly url: () => string;
  readonly source: FrameSource & NodeCommands;
  readonly clock: FakeClock;
}

const COMMAND: NodeCommand = { kind: 'shunt', input: 's7', on: true, seconds: 10 };

export const describeNodeCommands = (name: string, open: () => Promise<CommandsUnderTest>) =>
  describe(`NodeCommands: ${name}`, () => {
    const scene = async () => {
      const { url, source, clock } = await open();
      const box = inbox();
      await source.start(box.receive);
      onTestFinished(() => source.stop());
      const node = await nodeClient(url());
      const came: { topic: string; text: string; retain: boolean; qos: number }[] = [];
      let wake = () => undefined as void;
      node.on('message', (topic, payload, { retain, qos }) => {
        came.push({ topic, text: payload.toString(), retain, qos });
        wake();
      });
      await node.subscribeAsync(commandTopic('n1'), { qos: 1 });
      const heard = async () => {
        while (came.length === 0) await new Promise<void>((resolve) => (wake = resolve));
        return came;
      };
      const idOf = async () => (JSON.parse((await heard())[0]?.text ?? '{}') as { id: string }).id;
      const answer = (text: string, from = 'n1') =>
        node.publishAsync(answerTopic(from), text, { qos: 1 });
      return { ...box, source, clock, node, heard, idOf, answer };
    };

    test('a command comes once, QoS 1, not retained, and its acknowledgement settles it', async () => {
      const { source, heard, answer, deliveries, node, until } = await scene();
      const outcome = source.command('n1', COMMAND);
      const [first] = await heard();
      expect(first).toMatchObject({ topic: 'yieldward/1/n1/command', retain: false, qos: 1 });
      const { id, ...command } = JSON.parse(first?.text ?? '{}') as { id: string };
      expect(command).toEqual(COMMAND);
      await answer(JSON.stringify({ id, ok: true }));
      expect(await outcome).toEqual({ ok: true });
      // Answers are no samples: nothing of them is handed on.
      const fence = publish(node, 'n1', 'fence');
      const isFrame = () => deliveries.find(({ topic }) => topic.endsWith('/frame'));
      for (let count = 1; !isFrame(); count++) (await until(count)).at(-1)?.acknowledge();
      isFrame()?.acknowledge();
      await fence;
      expect(deliveries.filter(({ topic }) => topic.endsWith('/answer'))).toEqual([]);
      expect(await heard()).toHaveLength(1);
    });

    test('a node says no, and why', async () => {
      const { source, idOf, answer } = await scene();
      const outcome = source.command('n1', COMMAND);
      await answer(JSON.stringify({ id: await idOf(), ok: false, why: 's7 has no bridge' }));
      expect(await outcome).toEqual({
        ...{ ok: false, answered: true, why: 'n1 refuses: s7 has no bridge.' },
      });
    });

    test('silence, another id and another node are no answer: after five seconds that is said', async () => {
      const { source, clock, idOf, answer } = await scene();
      const outcome = source.command('n1', COMMAND);
      const id = await idOf();
      await answer(JSON.stringify({ id: `${id}x`, ok: true }));
      await answer(JSON.stringify({ id, ok: true }), 'n2');
      clock.advance(5);
      expect(await outcome).toEqual({
        ...{ ok: false, answered: false },
        why: 'n1 did not acknowledge the command within 5 s.',
      });
      await answer(JSON.stringify({ id, ok: true }));
    });

    test.each([
      ['no JSON', () => 'yes', 'JSON'],
      ['no truth', (id: string) => JSON.stringify({ id, ok: 'yes' }), 'ok: expected true or false'],
      ['no id', () => JSON.stringify({ ok: true }), 'id: expected'],
    ])(
      'an answer with %s settles what waits for the node, with what is wrong',
      async (_, text, why) => {
        const { source, idOf, answer } = await scene();
        const outcome = source.command('n1', COMMAND);
        await answer(text(await idOf()));
        const came = await outcome;
        expect(came).toMatchObject({ ok: false, answered: true });
        expect(came.ok ? '' : came.why).toContain(why);
      },
    );

    test('a broker that is gone is said at once', async () => {
      const { source } = await scene();
      await source.stop();
      expect(await source.command('n1', COMMAND)).toMatchObject({ ok: false, answered: false });
    });
  });
