/** The composition root: the only file that knows every adapter. */
import { createServer } from 'node:http';
import type { AddressInfo } from 'node:net';
import type { Limit } from '../shared/model/limit.ts';
import { planSite, type ChannelPlan } from '../shared/pipeline/index.ts';
import { channelsOf, type Site } from '../shared/model/site.ts';
import type { Health } from '../shared/protocol/http.ts';
import { systemClock } from './clock.ts';
import type { Config } from './config.ts';
import { AlarmKeeper } from './core/alarms.ts';
import { createBroadcast } from './core/broadcast.ts';
import { Committer } from './core/committer.ts';
import { createCore } from './core/core.ts';
import { PresentValues } from './core/present.ts';
import { runSteps, type Step } from './core/steps.ts';
import { Tally } from './core/tally.ts';
import { startFleet, type Fleet } from './demo/fleet.ts';
import { createFlow } from './flow.ts';
import { createHttp } from './http/http.ts';
import { createMetrics } from './http/metrics.ts';
import { createDecode } from './ingest/decode.ts';
import { embeddedBroker } from './ingest/embedded-broker.ts';
import { externalBroker } from './ingest/external-broker.ts';
import { packageFile } from './package-root.ts';
import type { FrameSource } from './ports.ts';
import { createPush } from './push/push.ts';
import { loadSite } from './site/load.ts';
import { openInfluxStore } from './store/influx/open.ts';
import { openSqliteStores } from './store/sqlite/open.ts';
import type { Pairs } from './store/sqlite/writer.ts';

export interface App {
  readonly stop: () => Promise<void>;
}

const VERSION = '0.1.0';
const NODE_CHECK_EVERY = 1;
const RECENT_ALARMS = 200;

/** Inputs that are read over the one which measures their excitation, by node. */
const pairsOf = (channels: readonly ChannelPlan[]): Pairs => {
  const pairs: Record<string, { input: string; over: string }[]> = {};
  for (const { channel, conversions } of channels) {
    for (const { excitation } of conversions) {
      const known = (pairs[channel.node] ??= []);
      const { input } = channel;
      if (excitation === null || known.some((p) => p.input === input && p.over === excitation)) {
        continue;
      }
      known.push({ input, over: excitation });
    }
  }
  return pairs;
};

const readSiteFile = async (file: string): Promise<Site> => {
  const read = await loadSite(file);
  if (read.ok) return read.site;
  const lines = read.faults.map((f) => `  ${f.path}: expected ${f.expected}, came ${f.came}`);
  throw new Error(`${read.faults.length} faults\n${lines.join('\n')}`);
};

/** Starts everything in order, saying each step; rejects with the step that failed, and why. */
export const startApp = async (config: Config, say: (line: string) => void): Promise<App> => {
  const clock = systemClock;
  const demo = config.siteFile === null;
  const siteFile = config.siteFile ?? packageFile('server', 'demo', 'site.json');
  const site = await readSiteFile(siteFile).catch((error: unknown) => {
    throw new Error(`site file ${siteFile}: ${error instanceof Error ? error.message : ''}`);
  });
  const plan = planSite(site);
  const pairs = pairsOf(plan.channels);
  say(`Site: ${site.name}, ${plan.channels.length} channels${site.simulated ? ', SIMULATED' : ''}`);

  const embedded = await openSqliteStores(config.dataFolder, pairs);
  const { records } = embedded;
  const samples =
    config.store === null ? embedded.samples : await openInfluxStore({ url: config.store, pairs });
  say(`Store: ${config.store ?? `SQLite in ${config.dataFolder}`}`);

  const limits = new Map<string, readonly Limit[]>(
    channelsOf(site).map(({ channel }) => [channel.id, channel.limits]),
  );
  for (const change of await records.limitsInForce()) {
    if (limits.has(change.channel)) limits.set(change.channel, change.limits);
  }
  const tally = new Tally(site, await samples.tally());
  const alarms = new AlarmKeeper(
    plan.channels,
    Object.fromEntries(limits),
    await records.lastAlarmEvents(),
    await records.alarmEvents(RECENT_ALARMS),
  );
  const present = new PresentValues(plan.channels);
  const broadcast = createBroadcast();
  let trouble: string | null = null;
  const committer = new Committer({
    ...{ samples, records, clock },
    health: (problem) => {
      if (problem !== trouble) say(problem === null ? 'Store: writing again' : `Store: ${problem}`);
      trouble = problem;
      broadcast.feed.health(health());
    },
  });

  const own = await embeddedBroker({ host: config.host, port: config.mqttPort, clock, say });
  const source: FrameSource & { description(): string } =
    config.broker === null
      ? own
      : externalBroker({ url: config.broker, clientId: `yieldward-${site.id}`, clock, say });
  const upSince = clock.now();
  const health = (): Health => ({
    ok: trouble === null && source.connected(),
    ...{ simulated: site.simulated, version: VERSION, upSince },
    broker: { connected: source.connected(), description: source.description() },
    store: { ok: trouble === null, description: trouble ?? (config.store ? 'InfluxDB' : 'SQLite') },
  });
  const core = createCore({
    ...{ site, plan, samples, records, tally, alarms, present, clock, health, limits },
    feed: broadcast.feed,
  });
  const app = createHttp({
    ...{ core, metrics: createMetrics({ core, clock }), host: config.host, complain: say },
    staticFolder: packageFile('dist', 'client'),
  });
  const server = createServer(app);
  const push = createPush({ server, core, clock, host: config.host });
  broadcast.add(push.feed);
  const known = new Set(site.nodes.map(({ id }) => id));
  const receive = createFlow({
    ...{ plan, tally, alarms, present, committer, feed: broadcast.feed },
    knows: (node) => known.has(node),
    decode: createDecode(site),
  });
  let fleet: Fleet | null = null;
  let stopWatching = () => undefined as void;
  const watchNodes = () => {
    broadcast.feed.nodes(core.tally());
    broadcast.feed.health(health());
    stopWatching = clock.after(NODE_CHECK_EVERY, watchNodes);
  };

  const steps: Step[] = [
    {
      name: 'store',
      start: () => undefined,
      stop: async () => {
        await committer.stop();
        if (samples !== embedded.samples) await samples.close();
        await embedded.samples.close();
        await records.close();
      },
    },
    {
      name: 'broker',
      start: async () => {
        await source.start(receive);
        say(
          config.broker === null ? `Broker: mqtt://${config.host}:${own.port()}` : 'Broker: there',
        );
      },
      stop: () => source.stop(),
    },
    {
      name: 'web page and API',
      start: () =>
        new Promise<void>((resolve, reject) => {
          server.once('error', reject);
          server.listen(config.port, config.host, () => {
            resolve();
          });
        }),
      stop: async () => {
        await push.close();
        server.closeAllConnections();
        await new Promise<void>((resolve) => {
          server.close(() => {
            resolve();
          });
        });
      },
    },
    {
      name: 'watch over the nodes',
      start: watchNodes,
      stop: () => {
        stopWatching();
      },
    },
  ];
  if (demo) {
    steps.push({
      name: 'simulated nodes',
      start: async () => {
        const broker = `mqtt://127.0.0.1:${own.port()}`;
        fleet = await startFleet({ site, siteFile, broker, log: say });
        say(`Simulated nodes: ${[...fleet.processes.keys()].join(', ')}`);
      },
      stop: async () => {
        await fleet?.stop();
      },
    });
  }
  const stop = await runSteps(steps, say);
  const { port } = server.address() as AddressInfo;
  say(`Ready: http://${config.host}:${port}`);
  return { stop };
};
