import { median, type Row } from './figures.ts';
import { end, message, startPart, startServer } from './processes.ts';
import { publishAll } from './publishers.ts';
import type { BenchSite } from './site.ts';

const SAMPLES = 100;
const INPUTS = 32;
const GOAL = 0.3;

const TASK = { inputs: INPUTS, samples: SAMPLES, dt: 5e-4, pace: 0 };

/**
 * Frames of 32 × 100 float32 from one node as fast as they are acknowledged: through the server
 * to durable, against a broker that decodes and drops. In turns, so that both meet the machine
 * in the same moods.
 */
export const benchWholePath = async (
  site: BenchSite,
  data: string,
  frames: number,
  rounds: number,
): Promise<Row[]> => {
  const nodes = site.nodes.slice(0, 1);
  const floor = startPart('floor.ts');
  const { broker } = await message<{ broker: string }>(floor);
  const server = await startServer(site.file, data);
  const rates: { floor: number; whole: number }[] = [];
  try {
    for (const target of [broker, server.mqtt]) {
      await publishAll(target, nodes, { ...TASK, frames: Math.ceil(frames / 4) });
    }
    for (let round = 0; round < rounds; round++) {
      rates.push({
        floor: await publishAll(broker, nodes, { ...TASK, frames }),
        whole: await publishAll(server.mqtt, nodes, { ...TASK, frames }),
      });
    }
  } finally {
    await end(floor);
    await end(server.process);
  }
  const ratio = median(rates.map(({ floor: f, whole }) => whole / f));
  return [
    {
      what: 'receive and decode only',
      figure: median(rates.map((r) => r.floor)),
      unit: 'frames/s',
    },
    { what: 'whole path to durable', figure: median(rates.map((r) => r.whole)), unit: 'frames/s' },
    {
      what: 'whole path over receive and decode',
      figure: ratio,
      unit: '',
      goal: { text: `at least ${GOAL}`, met: ratio >= GOAL },
    },
  ];
};
