import { expect, test } from 'vitest';
import { serve } from './serve.ts';

interface Sample {
  readonly name: string;
  readonly labels: Readonly<Record<string, string>>;
  readonly value: number;
}

/** Prometheus exposition formats, "Text format details", version 0.0.4; each line has to be one of it. */
const parse = (text: string) => {
  expect(text.endsWith('\n')).toBe(true);
  const types = new Map<string, string>();
  const helps = new Set<string>();
  const samples: Sample[] = [];
  for (const line of text.split('\n').filter((line) => line !== '')) {
    const help = /^# HELP ([a-zA-Z_:][a-zA-Z0-9_:]*) .+$/.exec(line);
    const type = /^# TYPE ([a-zA-Z_:][a-zA-Z0-9_:]*) (counter|gauge|histogram|summary)$/.exec(line);
    const sample = /^([a-zA-Z_:][a-zA-Z0-9_:]*)(?:\{(.*)\})? (\S+)$/.exec(line);
    if (help) helps.add(help[1] ?? '');
    else if (type) {
      expect(types.has(type[1] ?? ''), `${line} once`).toBe(false);
      types.set(type[1] ?? '', type[2] ?? '');
    } else {
      expect(sample, line).not.toBeNull();
      const labels: Record<string, string> = {};
      let left = sample?.[2] ?? '';
      while (left !== '') {
        const label = /^([a-zA-Z_][a-zA-Z0-9_]*)="((?:[^"\\\n]|\\[\\"n])*)",?/.exec(left);
        if (!label) throw new Error(`no label: ${left}`);
        labels[label[1] ?? ''] = (label[2] ?? '').replace(/\\(.)/g, (_, c) =>
          c === 'n' ? '\n' : c,
        );
        left = left.slice(label[0].length);
      }
      const value = sample?.[3] === 'Nan' ? NaN : Number(sample?.[3]);
      samples.push({ name: sample?.[1] ?? '', labels, value });
    }
  }
  return { types, helps, samples };
};

test('every line is Prometheus text; each family has help and type', async () => {
  const { ask } = await serve();
  const answer = await ask('/metrics');
  expect(answer.status).toBe(200);
  expect(answer.headers['content-type']).toMatch(/^text\/plain; version=0\.0\.4/);
  expect(answer.headers['x-simulated']).toBe('yes');
  const { types, helps, samples } = parse(answer.body);
  for (const { name } of samples) {
    const family = types.has(name) ? name : name.replace(/_(bucket|sum|count)$/, '');
    expect(types.has(family), name).toBe(true);
    expect(helps.has(family), name).toBe(true);
  }
  for (const [name, type] of types) {
    // Prometheus, "Metric and label naming": accumulating counts end in _total.
    if (name.startsWith('yieldward_')) expect(name.endsWith('_total')).toBe(type === 'counter');
  }
});

test('what the core knows is there, the same at every scrape', async () => {
  const { ask } = await serve();
  await ask('/metrics');
  const { samples } = parse((await ask('/metrics')).body);
  const value = (name: string, labels: Record<string, string> = {}) =>
    samples.filter(
      (sample) =>
        sample.name === `yieldward_${name}` &&
        JSON.stringify(sample.labels) === JSON.stringify(labels),
    )[0]?.value;
  const stranger = { node: 'stranger "x"\\' };
  for (const labels of [{ node: 'n1' }, stranger]) {
    expect(value('frames_received_total', labels)).toBe(12);
    expect(value('frames_stored_total', labels)).toBe(9);
    expect(value('frames_duplicate_total', labels)).toBe(2);
    expect(value('frames_refused_total', labels)).toBe(1);
    expect(value('frames_missing', labels)).toBe(3);
    expect(value('node_online', labels)).toBe(1);
    expect(value('node_stale', labels)).toBe(0);
  }
  expect(value('channels', { quality: 'good' })).toBe(5);
  expect(value('channels', { quality: 'over-range' })).toBe(1);
  expect(value('channels', { quality: 'none' })).toBe(1);
  expect(value('channels', { quality: 'stale' })).toBe(0);
  expect(value('alarms_active', { level: 'caution' })).toBe(1);
  expect(value('alarms_active', { level: 'stop' })).toBe(0);
  expect(value('broker_connected')).toBe(1);
  expect(value('store_ok')).toBe(0);
  expect(value('simulated')).toBe(1);
  expect(value('uptime_seconds')).toBe(61);
  expect(samples.some(({ name }) => name === 'process_resident_memory_bytes')).toBe(true);
});
