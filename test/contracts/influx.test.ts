import { afterAll, beforeAll } from 'vitest';
import { openInfluxStore } from '../../server/store/influx/open.ts';
import { startInfluxd, type Influxd } from '../helpers/influxd.ts';
import { describeSampleStore, PAIRS } from './sample-store.ts';

let influxd: Influxd;
beforeAll(async () => {
  influxd = await startInfluxd();
});
afterAll(() => influxd.close());

let places = 0;
const open = (place: string) =>
  openInfluxStore({ url: `influx+http://${influxd.host}/${place}`, pairs: PAIRS });

describeSampleStore('InfluxDB 1.x', {
  newPlace: async () => `place_${places++}`,
  open,
  runs: 10,
});
