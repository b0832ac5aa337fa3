/** A part: one node that publishes frames, as fast as they are acknowledged or at a given pace. */
import { connectAsync } from 'mqtt';
import { writeCbor } from '../../server/ingest/cbor.ts';
import { encodeFrame } from '../../shared/pipeline/1-decode/frame.ts';
import { topicOf } from '../../shared/pipeline/1-decode/topics.ts';
import { epochSeconds, seconds } from '../../shared/model/units.ts';

export interface PublisherTask {
  readonly broker: string;
  readonly node: string;
  readonly inputs: number;
  readonly samples: number;
  readonly dt: number;
  readonly frames: number;
  /** Frames a second; 0: as fast as they are acknowledged. */
  readonly pace: number;
}

export interface PublisherDone {
  readonly frames: number;
  readonly elapsed: number;
}

/** Frames under way at once. */
const WINDOW = 90;

const task = JSON.parse(process.argv[2] ?? '{}') as PublisherTask;
const boot = `bench-${process.pid}`;

/** A slowly swinging bridge ratio of some tenths of a mV/V, another one for each input. */
const arrays = Array.from({ length: task.inputs }, (_, k) => ({
  input: `s${k + 1}`,
  samples: Float32Array.from(
    { length: task.samples },
    (_, i) => 3e-4 * Math.sin((2 * Math.PI * i) / task.samples + k),
  ),
}));

const client = await connectAsync(task.broker, { protocolVersion: 4, clientId: boot });
const begin = Date.now() / 1e3;

const payload = (seq: number) =>
  Buffer.from(
    writeCbor(
      encodeFrame({
        ...{ node: task.node, boot, seq, sequenced: true, inputs: arrays },
        t0: epochSeconds(begin + seq * task.samples * task.dt),
        dt: seconds(task.dt),
      }),
    ),
  );

const publish = (seq: number) =>
  client.publishAsync(topicOf(task.node, 'frame'), payload(seq), { qos: 1 });

const flood = async () => {
  let next = 0;
  const lane = async () => {
    while (next < task.frames) await publish(next++);
  };
  await Promise.all(Array.from({ length: WINDOW }, lane));
};

const paced = async () => {
  const under: Promise<unknown>[] = [];
  const start = performance.now();
  for (let seq = 0; seq < task.frames; seq++) {
    const wait = start + (seq * 1e3) / task.pace - performance.now();
    if (wait > 0) await new Promise((resolve) => setTimeout(resolve, wait));
    under.push(publish(seq));
    if (under.length > WINDOW) await under.shift();
  }
  await Promise.all(under);
};

process.send?.('ready');
process.once('message', () => {
  const start = performance.now();
  void (task.pace > 0 ? paced() : flood()).then(async () => {
    const elapsed = (performance.now() - start) / 1e3;
    process.send?.({ frames: task.frames, elapsed } satisfies PublisherDone);
    await client.endAsync();
    process.disconnect();
  });
});
