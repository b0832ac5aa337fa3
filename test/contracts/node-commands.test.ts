import { embeddedBroker } from '../../server/ingest/embedded-broker.ts';
import { externalBroker } from '../../server/ingest/external-broker.ts';
import { fakeClock } from '../helpers/fakes.ts';
import { startMosquitto } from '../helpers/mosquitto.ts';
import { describeNodeCommands } from './node-commands.ts';

describeNodeCommands('embedded broker', async () => {
  const clock = fakeClock();
  const source = embeddedBroker({ host: '127.0.0.1', port: 0, clock });
  return { source, clock, url: () => `mqtt://127.0.0.1:${source.port()}` };
});

describeNodeCommands('client of mosquitto, MQTT 5', async () => {
  const clock = fakeClock();
  const { url } = await startMosquitto();
  const source = externalBroker({ url, clientId: 'yieldward', clock });
  return { source, clock, url: () => url };
});
