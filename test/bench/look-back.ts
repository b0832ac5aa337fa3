import { openSqliteStores } from '../../server/store/sqlite/open.ts';
import type { StoredFrame } from '../../server/ports.ts';
import { epochSeconds, seconds } from '../../shared/model/units.ts';
import { median, type Row } from './figures.ts';
import { end, startServer } from './processes.ts';
import type { BenchSite } from './site.ts';

const RATE = 1000;
const HOUR = 3600;
const DAY = 24 * HOUR;
const POINTS = 2000;
const BATCH = 60;
const ROUNDS = 15;
const HOUR_GOAL = 50;
const DAY_GOAL = 2;
/** 2026-06-01T00:00:00Z. */
const BEGIN = 1_780_272_000;

/** A day of one gauge at 1,000 samples/s, a frame a second, put in store beforehand. */
const fill = async (data: string, node: string, input: string) => {
  const { samples, records } = await openSqliteStores(data, {});
  const frameAt = (second: number): StoredFrame => ({
    frame: {
      ...{ node, boot: 'bench', seq: second, sequenced: true },
      ...{ t0: epochSeconds(BEGIN + second), dt: seconds(1 / RATE) },
      inputs: [
        {
          input,
          samples: Float32Array.from(
            { length: RATE },
            (_, i) => 3e-4 * Math.sin(second / 900 + i / 160) + 1e-5 * Math.cos(7.3 * i),
          ),
        },
      ],
    },
    arrived: epochSeconds(BEGIN + second + 1),
  });
  for (let second = 0; second < DAY; second += BATCH) {
    await samples.commit(Array.from({ length: BATCH }, (_, i) => frameAt(second + i)));
  }
  await samples.close();
  await records.close();
};

/** 2,000 points out of an hour and out of a day, asked over HTTP of a server that just started. */
export const benchLookBack = async (site: BenchSite, data: string): Promise<Row[]> => {
  const [node] = site.nodes;
  const input = node?.inputs[0];
  if (!node || input === undefined) throw new Error('the bench site has no input');
  await fill(data, node.id, input);
  const server = await startServer(site.file, data);
  const ask = async (from: number, span: number) => {
    const query = `channel=${node.id}-${input}&from=${from}&to=${from + span}&points=${POINTS}`;
    const start = performance.now();
    const answer = await fetch(`${server.http}/api/history?${query}`);
    const { t } = (await answer.json()) as { t?: readonly number[] };
    const took = performance.now() - start;
    if (!t || t.length < POINTS / 4) {
      throw new Error(`look back: expected up to ${POINTS} points, came ${t?.length}`);
    }
    return took;
  };
  try {
    await ask(BEGIN, HOUR);
    const hours: number[] = [];
    const days: number[] = [];
    for (let round = 0; round < ROUNDS; round++) {
      hours.push(await ask(BEGIN + 37 + round * 4_931, HOUR));
      days.push(await ask(BEGIN + round, DAY - ROUNDS));
    }
    const [hour, day] = [median(hours), median(days)];
    return [
      {
        what: `${POINTS} points out of an hour at 1,000/s`,
        figure: hour,
        unit: 'ms',
        goal: { text: `under ${HOUR_GOAL}`, met: hour < HOUR_GOAL },
      },
      {
        what: 'a day over an hour',
        figure: day / hour,
        unit: '',
        goal: { text: `at most ${DAY_GOAL}`, met: day <= DAY_GOAL * hour },
      },
    ];
  } finally {
    await end(server.process);
  }
};
