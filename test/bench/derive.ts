import { siteFormat } from '../../server/site/format.ts';
import { compileExpression } from '../../server/site/expression.ts';
import { openSqliteStores } from '../../server/store/sqlite/open.ts';
import type { RawRun, SampleStore } from '../../server/ports.ts';
import { celsius, epochSeconds, seconds } from '../../shared/model/units.ts';
import { channelBlocks, planSite, type SitePlan } from '../../shared/pipeline/index.ts';
import { readFileSync } from 'node:fs';
import { median, type Row } from './figures.ts';
import type { BenchSite } from './site.ts';

const RATE = 1000;
const LENGTH = 1000;
const FRAMES = 1200;
const BATCH = 100;
const PIECE = 60;
const ROUNDS = 5;
const GOAL = 0.5;
/** 2026-06-01T00:00:00Z. */
const BEGIN = 1_780_272_000;

const fill = async (store: SampleStore, node: string, inputs: readonly string[]) => {
  for (let seq = 0; seq < FRAMES; seq += BATCH) {
    await store.commit(
      Array.from({ length: BATCH }, (_, k) => ({
        frame: {
          ...{ node, boot: 'bench', seq: seq + k, sequenced: true },
          ...{ t0: epochSeconds(BEGIN + seq + k), dt: seconds(1 / RATE) },
          inputs: inputs.map((input, i) => ({
            input,
            samples: Float32Array.from(
              { length: LENGTH },
              (__, j) => 3e-4 * Math.sin(j / 50 + i) + 1e-6 * k,
            ),
          })),
        },
        arrived: epochSeconds(BEGIN + seq + k + 1),
      })),
    );
  }
};

/** Every sample of the inputs once, in pieces of a minute, each given to `use`. */
const readAll = async (
  store: SampleStore,
  node: string,
  inputs: readonly string[],
  use: (runs: readonly RawRun[]) => void,
) => {
  for (let from = BEGIN; from < BEGIN + FRAMES; from += PIECE) {
    for (const input of inputs) {
      const window = { from: epochSeconds(from), to: epochSeconds(from + PIECE) };
      use(await store.samples({ ...window, node, input, atMost: Infinity }));
    }
  }
};

/** To stress, put right for zero, leads and temperature. */
const derive = (plan: SitePlan, node: string, runs: readonly RawRun[]): number => {
  let highest = 0;
  runs.forEach((run, seq) => {
    const { boot, t0, dt } = run;
    const frame = { node, boot, seq, sequenced: true, t0, dt: seconds(dt), inputs: [run] };
    for (const block of channelBlocks(frame, plan, () => celsius(31))) {
      const perStrain = plan.channels[block.channel]?.context.stressPerStrain ?? NaN;
      const { values } = block;
      for (let i = 0; i < values.length; i++) {
        const stress = (values[i] ?? NaN) * perStrain;
        if (stress > highest) highest = stress;
      }
    }
  });
  return highest;
};

/** 4.8 million samples from store to stress with all corrections, against their reading alone. */
export const benchDerive = async (site: BenchSite, data: string): Promise<Row[]> => {
  const read = siteFormat.read(readFileSync(site.file, 'utf8'));
  const [node] = site.nodes;
  if (!read.ok || !node) throw new Error(JSON.stringify(read));
  const plan = planSite(read.site, compileExpression);
  const inputs = node.inputs.slice(0, 4);
  const { samples, records } = await openSqliteStores(data);
  try {
    await fill(samples, node.id, inputs);
    const count = FRAMES * LENGTH * inputs.length;
    const timed = async (use: (runs: readonly RawRun[]) => void) => {
      const start = performance.now();
      await readAll(samples, node.id, inputs, use);
      return count / ((performance.now() - start) / 1e3);
    };
    let seen = 0;
    const rates: { floor: number; whole: number }[] = [];
    await timed(() => undefined);
    for (let round = 0; round < ROUNDS; round++) {
      rates.push({
        floor: await timed((runs) => (seen += runs.length)),
        whole: await timed((runs) => (seen += derive(plan, node.id, runs) > 0 ? 1 : 0)),
      });
    }
    if (seen === 0) throw new Error('nothing was derived');
    const ratio = median(rates.map(({ floor, whole }) => whole / floor));
    return [
      {
        what: 'reading raw samples only',
        figure: median(rates.map((r) => r.floor)) / 1e6,
        unit: 'M samples/s',
      },
      {
        what: 'from stored raw to stress, all corrections',
        figure: median(rates.map((r) => r.whole)) / 1e6,
        unit: 'M samples/s',
      },
      {
        what: 'deriving over reading',
        figure: ratio,
        unit: '',
        goal: { text: `at least ${GOAL}`, met: ratio >= GOAL },
      },
    ];
  } finally {
    await samples.close();
    await records.close();
  }
};
