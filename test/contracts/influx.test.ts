import { afterAll, beforeAll } from 'vitest';
import { openInfluxStore } from '../../server/store/influx/open.ts';
import { startInfluxd, type Influxd } from '../helpers/influxd.ts';
import { describeSampleStore, PAIRS } from './sample-store.ts';
import { testNames } from './store-names.ts';
import type { ExcitationPairs } from '../../server/ports.ts';

let influxd: Influxd;
beforeAll(async () => {
  influxd = await startInfluxd();
});
afterAll(() => influxd.close());

let places = 0;
const newPlace = () => `place_${places++}`;
const open = (place: string, pairs: ExcitationPairs) =>
  openInfluxStore(`influx+http://${influxd.host}/${place}`, pairs);

describeSampleStore('InfluxDB 1.x', {
  newPlace: async () => newPlace(),
  open: (place) => open(place, PAIRS),
  runs: 10,
});

testNames('InfluxDB 1.x', open, newPlace);
