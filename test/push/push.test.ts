import { connect } from 'node:net';
import { text } from 'node:stream/consumers';
import { setImmediate as turn } from 'node:timers/promises';
import { io } from 'socket.io-client';
import { expect, onTestFinished, test } from 'vitest';
import type { LiveValue, Snapshot } from '../../shared/protocol/socket.ts';
import { plainCore } from '../helpers/core.ts';
import { fakeClock } from '../helpers/fakes.ts';
import { browserFor, next, nextValues, startPush, startRelay, valuesOf } from './browser.ts';

const value = (channel: number, figure: number, at = 0): LiveValue => ({
  ...{ channel, at, last: figure, min: figure, max: figure, quality: 'good' },
});

/** A browser that has its snapshot. */
const settled = async (port: number) => {
  const browser = browserFor(port);
  const snapshot = next(browser, 'snapshot');
  browser.connect();
  return { browser, snapshot: (await snapshot)[0] };
};

test('a browser that connects is told where the server stands', async () => {
  const { port } = await startPush(fakeClock());
  const { snapshot } = await settled(port);
  expect(snapshot).toEqual(JSON.parse(JSON.stringify(plainCore().snapshot())));
});

test('a value goes out at once: no timer has to run for it', async () => {
  const { port, push } = await startPush(fakeClock());
  const { browser } = await settled(port);
  const values = nextValues(browser);
  push.feed.live([value(3, 1.5e-4, 1_800_000_000.25), { ...value(4, NaN), quality: 'missing' }]);
  expect(await values).toEqual([
    value(3, 1.5e-4, 1_800_000_000.25),
    { ...value(4, NaN), quality: 'missing' },
  ]);
});

test('alarms, nodes, limits and health reach every browser', async () => {
  const { port, push } = await startPush(fakeClock());
  const core = plainCore();
  const browsers = [(await settled(port)).browser, (await settled(port)).browser];
  expect(push.browsers()).toBe(2);
  const heard = browsers.flatMap((browser) => [
    next(browser, 'alarms'),
    next(browser, 'nodes'),
    next(browser, 'limits'),
    next(browser, 'health'),
  ]);
  push.feed.alarms(core.alarms());
  push.feed.nodes(core.tally());
  push.feed.limits('ratio', core.limits().ratio ?? []);
  push.feed.health(core.health());
  const each = [[core.alarms()], [core.tally()], ['ratio', core.limits().ratio], [core.health()]];
  expect(await Promise.all(heard)).toEqual([...each, ...each]);
});

test('200 values in a second come as twenty, and no peak is missing', async () => {
  const clock = fakeClock();
  const { port, push } = await startPush(clock);
  const { browser } = await settled(port);
  const got: LiveValue[] = [];
  let messages = 0;
  const last = new Promise<void>((resolve) => {
    browser.on('live', (packed) => {
      messages++;
      got.push(...valuesOf(packed));
      if (got.at(-1)?.last === 200) resolve();
    });
  });
  for (let i = 1; i <= 200; i++) {
    push.feed.live([value(0, i === 77 ? 1e6 : i)]);
    await turn();
    clock.advance(0.005);
  }
  clock.advance(0.05);
  await last;
  expect(messages).toBeGreaterThanOrEqual(10);
  expect(messages).toBeLessThanOrEqual(21);
  expect(Math.max(...got.map(({ max }) => max))).toBe(1e6);
  expect(Math.min(...got.map(({ min }) => min))).toBe(1);
});

test('a browser that stops reading costs the server nothing and gets all peaks when it reads on', async () => {
  const CHANNELS = 200;
  const CALLS = 10_000;
  const MESSAGE = CHANNELS * 6 * 8;
  const clock = fakeClock();
  const { port, push, held } = await startPush(clock);
  const relay = await startRelay(port);
  const slow = (await settled(relay.port)).browser;
  const quick = (await settled(port)).browser;
  let [quickMessages, slowMessages] = [0, 0];
  const got: LiveValue[] = [];
  quick.on('live', () => quickMessages++);
  const caughtUp = new Promise<void>((resolve) => {
    slow.on('live', (packed) => {
      slowMessages++;
      const values = valuesOf(packed);
      got.push(...values);
      if (values.some(({ last }) => last === CALLS)) resolve();
    });
  });
  relay.stopReading();
  let most = 0;
  for (let i = 1; i <= CALLS; i++) {
    const peak = i === CALLS - 10 ? 1e9 : i;
    push.feed.live(Array.from({ length: CHANNELS }, (_, c) => value(c, c === 7 ? peak : i)));
    push.feed.nodes([]);
    clock.advance(0.05);
    await turn();
    most = Math.max(most, held());
  }
  // Two browsers, a message on its way to each at most, with what frames it.
  expect(most).toBeLessThan(2 * MESSAGE + 2000);
  const beforeReadingOn = slowMessages;
  relay.readOn();
  await caughtUp;
  expect(Math.max(...got.map(({ max }) => max))).toBe(1e9);
  expect(got.filter(({ last }) => last === CALLS)).toHaveLength(CHANNELS);
  expect(beforeReadingOn).toBeLessThan(CALLS / 4);
  expect(slowMessages).toBeLessThan(CALLS / 2);
  expect(quickMessages).toBeGreaterThan(slowMessages);
});

test('a browser that comes back gets the state as it is then', async () => {
  let now = 1;
  const base = plainCore();
  const snapshot = (): Snapshot => ({ ...base.snapshot(), now });
  const { port, push } = await startPush(fakeClock(), { snapshot });
  const relay = await startRelay(port);
  const { browser, snapshot: first } = await settled(relay.port);
  expect(first.now).toBe(1);
  now = 2;
  const again = next(browser, 'snapshot');
  relay.cut();
  expect((await again)[0].now).toBe(2);
  const values = nextValues(browser);
  push.feed.live([value(0, 5)]);
  expect(await values).toEqual([value(0, 5)]);
});

const refusal = async (port: number, headers: Record<string, string>): Promise<string> => {
  const browser = browserFor(port, { extraHeaders: headers, reconnection: false });
  const outcome = Promise.race([
    new Promise<string>((resolve) => browser.once('connect', () => resolve('connected'))),
    new Promise<string>((resolve) =>
      browser.once('connect_error', ({ message }) => resolve(message)),
    ),
  ]);
  browser.connect();
  return outcome;
};

test("another site's page, and another name for this machine, are turned away", async () => {
  const { port, push } = await startPush(fakeClock());
  expect(await refusal(port, { Origin: 'https://evil.example' })).toBe('websocket error');
  expect(await refusal(port, { Origin: 'null' })).toBe('websocket error');
  const rebound = { Host: `evil.example:${port}`, Origin: `http://evil.example:${port}` };
  expect(await refusal(port, rebound)).toBe('websocket error');
  expect(push.browsers()).toBe(0);
  expect(await refusal(port, { Origin: `http://127.0.0.1:${port}` })).toBe('connected');
  expect(await refusal(port, { Host: `localhost:${port}` })).toBe('connected');
});

test('only WebSocket is spoken, and other paths go to the page', async () => {
  const { port } = await startPush(fakeClock());
  const polling = await fetch(`http://127.0.0.1:${port}/socket.io/?EIO=4&transport=polling`);
  expect(polling.status).toBe(400);
  expect(await (await fetch(`http://127.0.0.1:${port}/`)).text()).toBe('page');
  const script = await fetch(`http://127.0.0.1:${port}/socket.io/socket.io.js`);
  expect(script.status).not.toBe(200);
});

test.each([
  ['an event', 'x'],
  ['more than a kilobyte', 'x'.repeat(2000)],
])('a browser that sends %s is cut off; others stay', async (_, payload) => {
  const { port, push } = await startPush(fakeClock());
  const { browser } = await settled(port);
  const loud = io(`http://127.0.0.1:${port}`, {
    ...{ transports: ['websocket'], forceNew: true, reconnection: false },
  });
  onTestFinished(() => void loud.disconnect());
  const gone = new Promise((resolve) => loud.once('disconnect', resolve));
  loud.once('connect', () => loud.emit('set', payload));
  await gone;
  const values = nextValues(browser);
  push.feed.live([value(0, 1)]);
  expect(await values).toHaveLength(1);
  expect(push.browsers()).toBe(1);
});

test('the end: every connection closes, one that does not answer is cut, HTTP goes on', async () => {
  const clock = fakeClock();
  const { port, push } = await startPush(clock);
  const relay = await startRelay(port);
  const { browser } = await settled(port);
  await settled(relay.port);
  relay.stopReading();
  const gone = new Promise((resolve) => browser.once('disconnect', resolve));
  const closing = push.close();
  await gone;
  clock.advance(1);
  await closing;
  expect(push.browsers()).toBe(0);
  push.feed.live([value(0, 1)]);
  expect(await (await fetch(`http://127.0.0.1:${port}/`)).text()).toBe('page');
  // RFC 6455 §4.2.2: a server that does not take the connection answers with an HTTP error.
  const late = connect(port, '127.0.0.1');
  late.write(
    [
      'GET /socket.io/?EIO=4&transport=websocket HTTP/1.1',
      `Host: 127.0.0.1:${port}`,
      ...['Connection: Upgrade', 'Upgrade: websocket', 'Sec-WebSocket-Version: 13'],
      ...['Sec-WebSocket-Key: dGhlIHNhbXBsZSBub25jZQ==', '', ''],
    ].join('\r\n'),
  );
  expect(await text(late)).toMatch(/^HTTP\/1\.1 503 /);
});
