import { embeddedBroker } from '../../server/ingest/embedded-broker.ts';
import { externalBroker } from '../../server/ingest/external-broker.ts';
import { fakeClock } from '../helpers/fakes.ts';
import { startMosquitto } from '../helpers/mosquitto.ts';
import { startAedes } from '../helpers/aedes.ts';
import { describeFrameSource } from './frame-source.ts';

const clock = fakeClock();

describeFrameSource('embedded broker', async () => {
  const source = embeddedBroker({ host: '127.0.0.1', port: 0, clock });
  return { source, url: () => `mqtt://127.0.0.1:${source.port()}` };
});

describeFrameSource('client of mosquitto, MQTT 5', async () => {
  const { url } = await startMosquitto();
  return { url: () => url, source: externalBroker({ url, clientId: 'yieldward', clock }) };
});

describeFrameSource('client of aedes, MQTT 3.1.1', async () => {
  const { url } = await startAedes();
  const source = externalBroker({ url, clientId: 'yieldward', clock, protocolVersion: 4 });
  return { url: () => url, source };
});
