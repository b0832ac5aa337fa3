import { QUALITIES } from '../../shared/model/block.ts';
import { collectDefaultMetrics, Counter, Gauge, Registry } from 'prom-client';
import type { NodeTally } from '../../shared/protocol/http.ts';
import type { Clock, Core } from '../ports.ts';

export interface Metrics {
  readonly contentType: string;
  /** Prometheus text exposition format 0.0.4. */
  text(): Promise<string>;
}

type Count = 'received' | 'stored' | 'duplicate' | 'refused';

const COUNTS: Readonly<Record<Count, string>> = {
  received: 'Frames that came, since start',
  stored: 'Frames in store, since the store began',
  duplicate: 'Frames that came again, since start',
  refused: 'Frames and readings refused, since start',
};

/** Counts that the core keeps already: taken over whole each time somebody asks. */
const addCounter = (register: Registry, core: Core, name: Count) => {
  new Counter({
    name: `yieldward_frames_${name}_total`,
    help: COUNTS[name],
    labelNames: ['node'],
    registers: [register],
    collect() {
      this.reset();
      for (const tally of core.tally()) this.inc({ node: tally.node }, tally[name]);
    },
  });
};

const addNodeGauge = (
  register: Registry,
  core: Core,
  name: string,
  help: string,
  of: (tally: NodeTally) => number,
) => {
  new Gauge({
    name,
    help,
    labelNames: ['node'],
    registers: [register],
    collect() {
      this.reset();
      for (const tally of core.tally()) this.set({ node: tally.node }, of(tally));
    },
  });
};

const addGauge = (register: Registry, name: string, help: string, value: () => number) => {
  new Gauge({
    name,
    help,
    registers: [register],
    collect() {
      this.set(value());
    },
  });
};

const countBy = <T extends string>(words: readonly T[]): Map<T, number> => {
  const counts = new Map<T, number>();
  for (const word of words) counts.set(word, (counts.get(word) ?? 0) + 1);
  return counts;
};

const addCountGauge = <T extends string>(
  register: Registry,
  { name, help, label, always }: Record<'name' | 'help' | 'label', string> & { always: T[] },
  words: () => readonly T[],
) => {
  new Gauge({
    name,
    help,
    labelNames: [label],
    registers: [register],
    collect() {
      const counts = countBy(words());
      for (const word of always) this.set({ [label]: word }, counts.get(word) ?? 0);
    },
  });
};

/** What monitoring may scrape, in a registry of its own, with prom-client's figures of the process. */
export const createMetrics = ({ core, clock }: { core: Core; clock: Clock }): Metrics => {
  const register = new Registry();
  collectDefaultMetrics({ register });
  for (const name of Object.keys(COUNTS) as Count[]) addCounter(register, core, name);
  const node = addNodeGauge.bind(null, register, core);
  node('yieldward_frames_missing', 'Gaps in the sequence numbers of frames', (t) => t.missing);
  node('yieldward_node_online', '1: the node says it is up', (t) => Number(t.status === 'online'));
  node('yieldward_node_stale', '1: no frame within the time the site file allows', (t) =>
    Number(t.stale),
  );
  addCountGauge(
    register,
    {
      name: 'yieldward_channels',
      help: 'Channels by the quality of what they read now',
      label: 'quality',
      always: [...QUALITIES, 'stale', 'none'],
    },
    () => core.values().map(({ quality }) => quality),
  );
  addCountGauge(
    register,
    {
      name: 'yieldward_alarms_active',
      help: 'Alarms raised and not returned, by level',
      label: 'level',
      always: ['caution', 'stop'],
    },
    () => core.alarms().active.map(({ level }) => level),
  );
  const flag = (name: string, help: string, value: () => boolean) =>
    addGauge(register, name, help, () => Number(value()));
  flag('yieldward_broker_connected', '1: the MQTT broker is in reach', () => {
    return core.health().broker.connected;
  });
  flag('yieldward_store_ok', '1: what comes can be stored', () => core.health().store.ok);
  flag('yieldward_simulated', '1: all data is simulated', () => core.health().simulated);
  addGauge(register, 'yieldward_uptime_seconds', 'Time since start', () => {
    return Math.max(0, clock.now() - core.health().upSince);
  });
  return { contentType: register.contentType, text: () => register.metrics() };
};
