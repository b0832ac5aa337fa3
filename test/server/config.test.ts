import { describe, expect, test } from 'vitest';
import { readConfig } from '../../server/config.ts';

const read = (...args: string[]) => readConfig(args, '/somewhere');

describe('the command line', () => {
  test('nothing given: the demo, on this machine only', () => {
    expect(read()).toEqual({
      ok: true,
      config: {
        siteFile: null,
        dataFolder: '/somewhere/data/demo',
        host: '127.0.0.1',
        port: 8080,
        mqttPort: 1883,
        broker: null,
        store: null,
      },
    });
  });

  test('a real site with its own broker and store', () => {
    const result = read(
      ...['--site', 'lift.json', '--data', '/var/lib/lift', '--port', '0', '--mqtt-port', '0'],
      ...['--broker', 'mqtts://broker.example:8883', '--store', 'influx+http://db:8086/lift'],
    );
    expect(result).toMatchObject({
      ok: true,
      config: { siteFile: '/somewhere/lift.json', dataFolder: '/var/lib/lift', port: 0 },
    });
  });

  test('every fault at once, each naming the option, what was expected and what came', () => {
    const result = read(
      '--port',
      '99999',
      '--mqtt-port',
      '-1',
      '--store',
      'postgres://x',
      '--sit',
      'a',
    );
    expect(result.ok ? [] : result.faults).toEqual([
      { path: '--sit', expected: expect.stringContaining('--site'), came: 'unknown' },
      { path: 'a', expected: 'an option', came: 'a bare word' },
      { path: '--port', expected: 'a port, 0 to 65535', came: '99999' },
      { path: '--mqtt-port', expected: 'a port, 0 to 65535', came: expect.any(String) },
      { path: '--store', expected: 'influx+http://host:port/database', came: 'postgres://x' },
    ]);
  });

  test("simulated nodes are never let near somebody else's broker", () => {
    const result = read('--broker', 'mqtt://broker.example');
    expect(result.ok ? [] : result.faults.map(({ path }) => path)).toEqual(['--site']);
  });
});
