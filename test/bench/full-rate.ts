import type { Row } from './figures.ts';
import { cpuSeconds, end, residentMegabytes, startServer } from './processes.ts';
import { publishAll } from './publishers.ts';
import type { BenchSite } from './site.ts';

const RATE = 2000;
const SAMPLES = 100;
const MOST_CPU = 0.25;
const MOST_MEMORY = 250;
const LOOK_EVERY = 1000;

/** 64 channels at 2,000 samples/s for `minutes`: processor time and memory of the server. */
export const benchFullRate = async (
  site: BenchSite,
  data: string,
  minutes: number,
): Promise<Row[]> => {
  const server = await startServer(site.file, data);
  const begin = cpuSeconds(server.pid);
  let peak = 0;
  const looking = setInterval(() => {
    peak = Math.max(peak, residentMegabytes(server.pid));
  }, LOOK_EVERY);
  try {
    const pace = RATE / SAMPLES;
    const start = performance.now();
    const rate = await publishAll(server.mqtt, site.nodes, {
      ...{ inputs: site.nodes[0]?.inputs.length ?? 0, samples: SAMPLES, dt: 1 / RATE, pace },
      frames: Math.round(pace * minutes * 60),
    });
    const elapsed = (performance.now() - start) / 1e3;
    const share = (cpuSeconds(server.pid) - begin) / elapsed;
    peak = Math.max(peak, residentMegabytes(server.pid));
    return [
      { what: 'full rate, frames durable', figure: rate, unit: 'frames/s' },
      {
        what: 'processor at 64 × 2,000 samples/s',
        figure: share,
        unit: 'core',
        goal: { text: `less than ${MOST_CPU}`, met: share < MOST_CPU },
      },
      {
        what: `most memory in ${minutes} min at full rate`,
        figure: peak,
        unit: 'MB',
        goal: { text: `under ${MOST_MEMORY}`, met: peak < MOST_MEMORY },
      },
    ];
  } finally {
    clearInterval(looking);
    await end(server.process);
  }
};
