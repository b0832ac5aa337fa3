/** The composition root: the only file that knows every adapter. */
import type { Limit } from '../shared/model/limit.ts';
import { channelsOf, type Site } from '../shared/model/site.ts';
import { VirtualStream } from '../shared/pipeline/index.ts';
import type { Health } from '../shared/protocol/http.ts';
import { systemClock } from './clock.ts';
import type { Config } from './config.ts';
import { AlarmKeeper } from './core/alarms.ts';
import { createBroadcast } from './core/broadcast.ts';
import { ChannelChecks } from './core/channel-checks.ts';
import { Committer } from './core/committer.ts';
import { createCore } from './core/core.ts';
import { CurrentSite } from './core/current-site.ts';
import { excitationPairs } from './core/excitation-pairs.ts';
import { firstRevision } from './core/first-revision.ts';
import { PresentValues } from './core/present.ts';
import { SetUp } from './core/set-up.ts';
import { runSteps, type Step } from './core/steps.ts';
import { Tally } from './core/tally.ts';
import { TemperatureLog } from './core/temperature-log.ts';
import { startFleet, type Fleet } from './demo/fleet.ts';
import { createFlow } from './flow.ts';
import { createHttp } from './http/http.ts';
import { createMetrics } from './http/metrics.ts';
import { createWebServer } from './http/web-server.ts';
import { createDecode } from './ingest/decode.ts';
import { embeddedBroker } from './ingest/embedded-broker.ts';
import { externalBroker } from './ingest/external-broker.ts';
import { packageFile } from './package-root.ts';
import type { FrameSource, NodeCommands, RecordStore, SampleStore, SiteRevision } from './ports.ts';
import { createPush } from './push/push.ts';
import { compileExpression } from './site/expression.ts';
import { siteFormat } from './site/format.ts';
import { loadSiteText } from './site/load.ts';
import { openInfluxStore } from './store/influx/open.ts';
import { openSqliteStores } from './store/sqlite/open.ts';

export interface App {
  readonly stop: () => Promise<void>;
}

const VERSION = '0.1.0';
const DEMO_SITE = packageFile('server', 'demo', 'site.json');
const NODE_CHECK_EVERY = 1;
const RECENT_ALARMS = 200;

const readSiteFile = async (file: string): Promise<string> => {
  const read = await loadSiteText(file);
  if (read.ok) return read.text;
  throw new Error(`site file ${file}: ${read.faults.map(({ came }) => came).join(', ')}`);
};

interface Stores {
  readonly samples: SampleStore;
  readonly records: RecordStore;
  readonly close: () => Promise<void>;
}

/** Records are always in the data folder; samples too, unless another store is asked for. */
const openStores = async (config: Config): Promise<Stores> => {
  const { samples, records } = await openSqliteStores(config.dataFolder);
  const closeEmbedded = async () => {
    await samples.close();
    await records.close();
  };
  if (config.store === null) return { samples, records, close: closeEmbedded };
  try {
    const other = await openInfluxStore(config.store);
    const close = async () => {
      await other.close();
      await closeEmbedded();
    };
    return { samples: other, records, close };
  } catch (error) {
    await closeEmbedded();
    throw error;
  }
};

/** The limits of the set-up, and over them what was changed since. */
const limitsInForce = async (site: Site, records: RecordStore) => {
  const limits = new Map<string, readonly Limit[]>(
    channelsOf(site).map(({ channel }) => [channel.id, channel.limits]),
  );
  for (const change of await records.limitsInForce()) {
    if (limits.has(change.channel)) limits.set(change.channel, change.limits);
  }
  return limits;
};

/** Starts everything in order, saying each step; rejects with the step that failed, and why. */
export const startApp = async (config: Config, say: (line: string) => void): Promise<App> => {
  const file = config.siteFile ?? DEMO_SITE;
  const text = await readSiteFile(file);
  const stores = await openStores(config);
  try {
    const { records } = stores;
    const parts = { records, format: siteFormat, clock: systemClock, say };
    const { site, revision } = await firstRevision(text, file, parts);
    return await startOn(stores, site, revision, config, say);
  } catch (error) {
    await stores.close();
    throw error;
  }
};

const startOn = async (
  stores: Stores,
  site: Site,
  revision: SiteRevision,
  config: Config,
  say: (line: string) => void,
): Promise<App> => {
  const clock = systemClock;
  const current = new CurrentSite(site, compileExpression);
  const count = `${current.channels.length} channels${site.simulated ? ', SIMULATED' : ''}`;
  say(`Site: ${site.name}, ${count}`);
  say(`Store: ${config.store ?? `SQLite in ${config.dataFolder}`}`);
  const { samples, records } = stores;
  await samples.follow(excitationPairs(current.measured));
  const limits = await limitsInForce(site, records);
  const tally = new Tally(site, await samples.tally());
  const alarms = new AlarmKeeper(
    current.channels,
    Object.fromEntries(limits),
    await records.lastAlarmEvents(),
    await records.alarmEvents(RECENT_ALARMS),
  );
  const present = new PresentValues(current.channels);
  const temperatures = new TemperatureLog(current.measured);
  const virtual = { stream: new VirtualStream(current.virtual) };
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

  const { host, port, mqttPort, broker } = config;
  const source: FrameSource & NodeCommands =
    broker === null
      ? embeddedBroker({ host, port: mqttPort, clock, say })
      : externalBroker({ url: broker, clientId: `yieldward-${site.id}`, clock, say });
  const upSince = clock.now();
  const health = (): Health => ({
    ok: trouble === null && source.connected(),
    ...{ simulated: site.simulated, version: VERSION, upSince },
    broker: { connected: source.connected(), description: source.description() },
    store: { ok: trouble === null, description: trouble ?? (config.store ? 'InfluxDB' : 'SQLite') },
  });
  let decode = createDecode(site);
  const setUp = new SetUp(
    {
      ...{ records, samples, clock, current, limits, format: siteFormat },
      adopt: async (next, changes) => {
        current.replace(next);
        for (const { channel, limits: changed } of changes) limits.set(channel, changed);
        decode = createDecode(next);
        tally.replan(next);
        present.replan(current.channels);
        temperatures.replan(current.measured);
        virtual.stream = new VirtualStream(current.virtual);
        const ended = alarms.replan(current.channels, Object.fromEntries(limits), clock.now());
        broadcast.feed.revision(setUp.revision);
        broadcast.feed.alarms(alarms.list());
        if (ended.length > 0) await records.addAlarmEvents(ended);
        await samples.follow(excitationPairs(current.measured));
      },
    },
    revision,
  );
  const core = createCore({
    ...{ plan: current, samples, records, tally, alarms, present, clock, health, limits },
    ...{ site: () => current.site, revision: () => setUp.revision, feed: broadcast.feed },
  });
  const checks = new ChannelChecks({
    ...{ current, samples, records, commands: source, clock, setUp, format: siteFormat },
  });
  const app = createHttp({
    ...{ core, setUp, checks, metrics: createMetrics({ core, clock }), host, complain: say },
    staticFolder: packageFile('dist', 'client'),
  });
  const web = createWebServer(app);
  const push = createPush({ server: web.server, core, clock, host });
  broadcast.add(push.feed);
  const receive = createFlow({
    ...{ plan: current, tally, alarms, present, temperatures, virtual, committer },
    feed: broadcast.feed,
    knows: (node) => current.site.nodes.some(({ id }) => id === node),
    decode: (delivery) => decode(delivery),
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
      stop: () => committer.stop(),
    },
    {
      name: 'broker',
      start: async () => {
        await source.start(receive);
        say(`Broker: ${source.description()}`);
      },
      stop: () => source.stop(),
    },
    {
      name: 'web page and API',
      start: () => web.listen(port, host),
      stop: async () => {
        await push.close();
        await web.close();
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
  if (config.siteFile === null) {
    steps.push({
      name: 'simulated nodes',
      start: async () => {
        fleet = await startFleet({ site, siteFile: DEMO_SITE, broker: source.address(), log: say });
        say(`Simulated nodes: ${[...fleet.processes.keys()].join(', ')}`);
      },
      stop: async () => {
        await fleet?.stop();
      },
    });
  }
  const stop = await runSteps(steps, say);
  say(`Ready: http://${host}:${web.port()}`);
  return {
    stop: async () => {
      await stop();
      await stores.close();
    },
  };
};
