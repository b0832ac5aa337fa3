import { fieldOf } from './reading.ts';

type JsonObject = Record<string, unknown>;

const isObject = (value: unknown): value is JsonObject =>
  typeof value === 'object' && value !== null && !Array.isArray(value);

const objectsIn = (value: unknown, key: string): JsonObject[] => {
  const list = fieldOf(value, key);
  return Array.isArray(list) ? list.filter(isObject) : [];
};

/** The objects of a sound site file that are channels, by id; they are those of `json` itself. */
export const channelObjects = (json: unknown): Map<string, JsonObject> =>
  new Map(
    objectsIn(json, 'structures')
      .flatMap((structure) => objectsIn(structure, 'members'))
      .flatMap((member) => objectsIn(member, 'stations'))
      .flatMap((station) => objectsIn(station, 'channels'))
      .map((channel) => [String(channel.id), channel]),
  );

/** Calibration and zero records of a channel, as objects of the file itself. */
export const recordObjects = (channel: JsonObject): JsonObject[] => [
  ...objectsIn(channel, 'calibration'),
  ...objectsIn(channel, 'zeros'),
];
