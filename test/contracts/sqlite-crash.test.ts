import { fork } from 'node:child_process';
import { once } from 'node:events';
import { fileURLToPath } from 'node:url';
import { expect, test } from 'vitest';
import { openSqliteStores } from '../../server/store/sqlite/open.ts';
import { epochSeconds } from '../../shared/model/units.ts';
import { temporaryFolder } from '../helpers/process.ts';
import { STORM_T0, stormFrame } from './storm.ts';

const PROGRAM = fileURLToPath(new URL('./sqlite-writer-process.ts', import.meta.url));
const PAIRS = { n1: [{ input: 'a', over: 'ex' }] };

/** Starts a writer and kills it (SIGKILL) as soon as it has said so many batches are durable. */
const killAfter = async (folder: string, first: number, batches: number): Promise<number[]> => {
  const child = fork(PROGRAM, [folder, String(first)], { execArgv: ['--import', 'tsx'] });
  const durable: number[] = [];
  let said = 0;
  child.on('message', (message: string | number[]) => {
    if (typeof message === 'string') return;
    durable.push(...message);
    if (++said === batches) child.kill('SIGKILL');
  });
  const [code, signal] = (await once(child, 'exit')) as [number | null, string | null];
  expect([code, signal]).toEqual([null, 'SIGKILL']);
  return durable;
};

test('killed without notice, again and again: what was durable is there, and counts once', async () => {
  const folder = temporaryFolder();
  const durable: number[] = [];
  for (const [i, batches] of [1, 3, 23, 60, 211].entries()) {
    durable.push(...(await killAfter(folder, i * 1000, batches)));
  }
  const { samples, records } = await openSqliteStores(folder, PAIRS);
  const [tally] = await samples.tally();
  const there = (tally?.ranges ?? []).flatMap(([first, last]) =>
    Array.from({ length: last - first + 1 }, (_, k) => first + k),
  );
  expect(there).toHaveLength(tally?.frames ?? -1);
  const kept = new Set(there);
  expect(durable.filter((seq) => !kept.has(seq))).toEqual([]);
  for (const over of [null, 'ex']) {
    const all = there.flatMap((seq) => {
      const { t0, dt, inputs } = stormFrame(seq).frame;
      const by = over === null ? null : inputs[1]?.samples;
      return Array.from(inputs[0]?.samples ?? [], (x, i) => ({
        t: t0 + i * dt,
        x: x / (by ? (by[i] ?? NaN) : 1),
      }));
    });
    for (const points of [1, 40, 900]) {
      const [from, to] = [STORM_T0 - 100, STORM_T0 + 25_000];
      const envelope = await samples.envelope({
        series: { node: 'n1', input: 'a', over },
        ...{ from: epochSeconds(from), to: epochSeconds(to), points },
      });
      expect(envelope.count.reduce((sum, n) => sum + n, 0)).toBe(all.length);
      const by = new Map<number, number[]>();
      for (const { t, x } of all) {
        const point = Math.floor(t / envelope.step);
        const list = by.get(point);
        if (list) list.push(x);
        else by.set(point, [x]);
      }
      envelope.t.forEach((t, i) => {
        const own = by.get(Math.floor(t / envelope.step)) ?? [];
        expect(envelope.count[i]).toBe(own.length);
        expect([envelope.min[i], envelope.max[i]]).toEqual([Math.min(...own), Math.max(...own)]);
      });
    }
  }
  await samples.close();
  await records.close();
}, 60_000);
