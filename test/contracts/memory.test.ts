import { memorySamples, type Memory } from '../helpers/memory-samples.ts';
import { describeSampleStore } from './sample-store.ts';

const places = new Map<string, Memory>();

/** The sibling that tests of the core run on is held to what the others are held to. */
describeSampleStore('in memory', {
  newPlace: async () => {
    const place = `place ${places.size}`;
    places.set(place, new Map());
    return place;
  },
  open: async (place) => memorySamples(places.get(place)),
  runs: 100,
});
