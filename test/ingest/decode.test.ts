import { expect, test } from 'vitest';
import { writeCbor } from '../../server/ingest/cbor.ts';
import { createDecode, LONGEST_MESSAGE } from '../../server/ingest/decode.ts';
import type { Site } from '../../shared/model/site.ts';
import { epochSeconds, seconds, share } from '../../shared/model/units.ts';
import { encodeFrame } from '../../shared/pipeline/1-decode/frame.ts';
import { topicOf } from '../../shared/pipeline/1-decode/topics.ts';

const SITE: Site = {
  ...{ id: 's', name: 'S', simulated: true, highestLimit: share(0.9), structures: [] },
  nodes: [
    {
      ...{ id: 'n1', name: 'N1', staleAfter: seconds(5) },
      inputs: [{ name: 'steel', unit: 'Cel', range: null }],
    },
  ],
};
const ARRIVED = epochSeconds(1_800_000_000);
const decode = createDecode(SITE);
const deliver = (topic: string, payload: Uint8Array | string) =>
  decode({
    ...{ topic, payload: typeof payload === 'string' ? Buffer.from(payload) : payload },
    ...{ retained: false, arrived: ARRIVED, acknowledge: () => undefined },
  });

test('a frame, readings in both forms and a status, each by its topic', () => {
  const frame = {
    ...{ node: 'n1', boot: 'b', seq: 0, sequenced: true, t0: ARRIVED, dt: seconds(1) },
    inputs: [{ input: 'steel', samples: Float32Array.of(18.5, 18.25) }],
  };
  expect(deliver(topicOf('n1', 'frame'), writeCbor(encodeFrame(frame)))).toEqual({
    ...{ kind: 'samples', node: 'n1', frames: [frame], refusals: [] },
  });
  const reading = { frames: [{ boot: 'senml/steel', t0: ARRIVED, inputs: [{ input: 'steel' }] }] };
  expect(deliver(topicOf('n1', 'senml/json'), '[{"n":"steel","v":18.5}]')).toMatchObject(reading);
  // [{0: "steel", 2: 4([-1, 185])}], bytes worked out by hand: RFC 8428 §6, RFC 8949 §3.4.4.
  const cbor = Buffer.from('81a20065737465656c02c4822018b9', 'hex');
  expect(deliver(topicOf('n1', 'senml/cbor'), cbor)).toMatchObject({
    frames: [{ inputs: [{ input: 'steel', samples: Float64Array.of(18.5) }] }],
  });
  expect(deliver(topicOf('n1', 'status'), '{"v":1,"online":false}')).toEqual({
    ...{ kind: 'status', node: 'n1', online: false },
  });
});

test('the unit is held against the site file of the node that the topic names', () => {
  expect(deliver(topicOf('n1', 'senml/json'), '[{"n":"steel","u":"K","v":291}]')).toMatchObject({
    frames: [],
    refusals: [{ field: '[0].u', expected: 'Cel, as declared for steel', came: '"K"' }],
  });
});

test.each(['frame', 'senml/json', 'senml/cbor', 'status'] as const)(
  'a message beyond the mebibyte is refused unread on %s',
  (leaf) => {
    const message = new Uint8Array(LONGEST_MESSAGE + 1);
    expect(deliver(topicOf('n1', leaf), message)).toMatchObject({
      ...{ kind: 'refused', node: 'n1' },
      refusal: { code: 'size', field: '(message)', came: '1048577 bytes' },
    });
    expect(deliver(topicOf('n1', leaf), message.subarray(1))).not.toMatchObject({
      refusal: { code: 'size' },
    });
  },
);

test('a node without a proper name is refused, another topic is not ours', () => {
  expect(deliver('yieldward/1/<x>/frame', '')).toMatchObject({ kind: 'refused' });
  expect(deliver('yieldward/1/n1/elsewhere', '')).toEqual({ kind: 'other' });
});

test('an empty status clears what was retained [MQTT-3.3.1-10] and is no refusal', () => {
  expect(deliver(topicOf('n1', 'status'), '')).toEqual({ kind: 'other' });
  expect(deliver(topicOf('n1', 'frame'), '').kind).toBe('refused');
});
