import { connectAsync } from 'mqtt';
import { io, type Socket } from 'socket.io-client';
import { readCbor, writeCbor } from '../../server/ingest/cbor.ts';
import { encodeFrame, FRAME_TAGS } from '../../shared/pipeline/1-decode/frame.ts';
import { topicOf } from '../../shared/pipeline/1-decode/topics.ts';
import { epochSeconds, seconds } from '../../shared/model/units.ts';
import { unpackLive } from '../../shared/protocol/socket.ts';
import { median, quantile, type Row } from './figures.ts';
import { end, message, startPart, startServer } from './processes.ts';
import type { BenchSite } from './site.ts';

export interface Target {
  readonly broker: string;
  readonly http: string;
  /** What a socket event carries: packed live values, or the frame itself. */
  readonly carries: 'live' | 'frame';
}

const SAMPLES = 10;
const DT = 0.01;
const FRAMES_PER_SECOND = 1 / (SAMPLES * DT);
const SETTLE = 2;

const pause = (s: number) => new Promise((resolve) => setTimeout(resolve, s * 1e3));
/** A frame is known by the time of its last sample, in µs. */
const keyOf = (at: number): number => Math.round(at * 1e6);

const watch = (socket: Socket, target: Target, sent: Map<number, number>, delays: number[]) => {
  socket.on('live', (payload: ArrayBuffer | Uint8Array) => {
    const now = performance.now();
    const arrived = (key: number) => {
      const at = sent.get(key);
      if (at === undefined) return;
      sent.delete(key);
      delays.push(now - at);
    };
    const bytes = payload instanceof Uint8Array ? payload : new Uint8Array(payload);
    if (target.carries === 'live') {
      const whole = new Uint8Array(bytes).buffer;
      for (const { at } of unpackLive(whole)) arrived(keyOf(at));
    } else {
      const read = readCbor(bytes, FRAME_TAGS);
      const t0 = read.ok ? (read.value as { t0: number }).t0 : NaN;
      arrived(keyOf(t0 + (SAMPLES - 1) * DT));
    }
  });
};

interface Delays {
  readonly p50: number;
  readonly p99: number;
  readonly frames: number;
  readonly seen: number;
}

/** Delays from a frame's publication to its values in a browser's socket, ms. */
const measureLatency = async (
  target: Target,
  site: BenchSite,
  duration: number,
): Promise<Delays> => {
  const socket = io(target.http, { transports: ['websocket'] });
  await new Promise((resolve) => socket.once('connect', () => resolve(undefined)));
  const client = await connectAsync(target.broker, { protocolVersion: 4 });
  const sent = new Map<number, number>();
  const delays: number[] = [];
  watch(socket, target, sent, delays);
  const boot = `latency-${Date.now()}-${target.carries}`;
  const run = async (
    node: string,
    inputs: readonly string[],
    phase: number,
    lasting: number,
    first: number,
  ) => {
    const arrays = inputs.map((input) => ({
      input,
      samples: new Float32Array(SAMPLES).fill(2e-4),
    }));
    const start = performance.now() + phase * 1e3;
    const epoch = Date.now() / 1e3 + phase;
    for (let i = 0; i < lasting * FRAMES_PER_SECOND; i++) {
      const wait = start + i * SAMPLES * DT * 1e3 - performance.now();
      if (wait > 0) await new Promise((resolve) => setTimeout(resolve, wait));
      const t0 = epochSeconds(epoch + i * SAMPLES * DT);
      const frame = {
        node,
        boot,
        seq: first + i,
        sequenced: true,
        t0,
        dt: seconds(DT),
        inputs: arrays,
      };
      const payload = Buffer.from(writeCbor(encodeFrame(frame)));
      sent.set(keyOf(t0 + (SAMPLES - 1) * DT), performance.now());
      client.publish(topicOf(node, 'frame'), payload, { qos: 1 });
    }
  };
  const all = async (lasting: number, first: number) =>
    Promise.all(
      site.nodes.map(({ id, inputs }, i) =>
        run(id, inputs, (i / site.nodes.length) * SAMPLES * DT, lasting, first),
      ),
    );
  await all(SETTLE, 0);
  await pause(0.5);
  sent.clear();
  delays.length = 0;
  await all(duration, 1000);
  await pause(0.5);
  socket.close();
  await client.endAsync();
  const frames = site.nodes.length * Math.round(duration * FRAMES_PER_SECOND);
  return {
    p50: quantile(delays, 0.5),
    p99: quantile(delays, 0.99),
    frames,
    seen: delays.length,
  };
};

const ROUNDS = 3;
const LASTING = 8;
const GOAL = 2;

/** 64 channels × 100 samples/s: published to in a browser's socket, against a bare relay, in turns. */
export const benchLatency = async (site: BenchSite, data: string): Promise<Row[]> => {
  const relay = startPart('relay.ts');
  const bare = await message<{ broker: string; http: string }>(relay);
  const server = await startServer(site.file, data);
  const figures: { bare: Delays; whole: Delays }[] = [];
  try {
    for (let round = 0; round < ROUNDS; round++) {
      figures.push({
        bare: await measureLatency({ ...bare, carries: 'frame' }, site, LASTING),
        whole: await measureLatency(
          { broker: server.mqtt, http: server.http, carries: 'live' },
          site,
          LASTING,
        ),
      });
    }
  } finally {
    await end(relay);
    await end(server.process);
  }
  const of = (way: 'bare' | 'whole', at: 'p50' | 'p99') => median(figures.map((f) => f[way][at]));
  const lost = figures.reduce((sum, { whole }) => sum + whole.frames - whole.seen, 0);
  const ratio = median(figures.map(({ bare: b, whole }) => whole.p99 / b.p99));
  return [
    { what: 'bare relay p50', figure: of('bare', 'p50'), unit: 'ms' },
    { what: 'bare relay p99', figure: of('bare', 'p99'), unit: 'ms' },
    { what: 'published to socket p50', figure: of('whole', 'p50'), unit: 'ms' },
    { what: 'published to socket p99', figure: of('whole', 'p99'), unit: 'ms' },
    { what: 'frames not seen in the socket', figure: lost, unit: '' },
    {
      what: 'p99 over the bare relay',
      figure: ratio,
      unit: '',
      goal: { text: `at most ${GOAL}`, met: ratio <= GOAL },
    },
  ];
};
