/** A part: an aedes broker that decodes each frame and does nothing else: receive and decode only. */
import { createServer } from 'node:net';
import { Aedes } from 'aedes';
import { readCbor } from '../../server/ingest/cbor.ts';
import { decodeFrame, FRAME_TAGS } from '../../shared/pipeline/1-decode/frame.ts';

const broker = await Aedes.createBroker();
let samples = 0;
broker.authorizePublish = (_client, packet, done) => {
  const read = readCbor(packet.payload as Buffer, FRAME_TAGS);
  const node = packet.topic.split('/')[2] ?? '';
  const frame = read.ok ? decodeFrame(read.value, node) : read;
  if (frame.ok) samples += frame.value.inputs.length;
  done(null);
};
const server = createServer((socket) => void broker.handle(socket));
server.listen(0, '127.0.0.1', () => {
  const address = server.address();
  const port = typeof address === 'object' ? address?.port : undefined;
  process.send?.({ broker: `mqtt://127.0.0.1:${port}` });
});
process.on('SIGTERM', () => process.exit(samples > 0 ? 0 : 1));
