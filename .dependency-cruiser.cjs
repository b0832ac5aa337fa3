/** The directions of imports, and one technology a folder. */
const ADAPTERS = 'ingest|store|push|http|site|demo';

/** Named so that what is reported says what is meant. */
const forbid = (name, from, to) => ({ name, severity: 'error', from, to });

const only = (name, technology, folders) =>
  forbid(
    name,
    { path: '^(server|client)/', pathNot: folders },
    { path: `(^|/)node_modules/(${technology})/` },
  );

module.exports = {
  forbidden: [
    forbid('shared-imports-shared-only', { path: '^shared/' }, { pathNot: '^shared/' }),
    forbid('model-imports-model-only', { path: '^shared/model/' }, { pathNot: '^shared/model/' }),
    forbid(
      'stage-imports-model-and-itself',
      { path: '^shared/pipeline/(\\d-[a-z]+)/' },
      { pathNot: '^shared/(model|pipeline/$1)/' },
    ),
    forbid(
      'only-pipeline-index-composes',
      {
        path: '^shared/pipeline/[^/]+\\.ts$',
        pathNot: '^shared/pipeline/(index|plan|evaluation)\\.ts$',
      },
      { path: '^shared/pipeline/\\d-' },
    ),
    forbid(
      'adapter-imports-itself-ports-shared',
      { path: `^server/(${ADAPTERS})/`, pathNot: '^server/demo/' },
      { path: '^(server|client)/', pathNot: '^server/($1/|ports\\.ts$|package-root\\.ts$)' },
    ),
    // A simulated node is a process of its own: it writes what ingest/ reads, and reads a site file.
    forbid(
      'demo-imports-itself-writer-and-site-reader',
      { path: '^server/demo/' },
      {
        path: '^(server|client)/',
        pathNot: '^server/(demo/|site/|ingest/cbor\\.ts$|ports\\.ts$|package-root\\.ts$)',
      },
    ),
    forbid(
      'only-app-imports-adapters',
      { path: '^server/([^/]+\\.ts$|core/)', pathNot: '^server/app\\.ts$' },
      { path: `^server/(${ADAPTERS})/` },
    ),
    forbid(
      'flow-imports-ports-core-shared',
      { path: '^server/flow\\.ts$' },
      { pathNot: '^(shared/|server/(core/|ports\\.ts$))' },
    ),
    forbid(
      'core-imports-core-ports-shared',
      { path: '^server/core/' },
      { pathNot: '^(shared/|server/(core/|ports\\.ts$|flow\\.ts$))' },
    ),
    forbid('client-never-server', { path: '^client/' }, { path: '^(server|test)/' }),
    forbid('server-never-client', { path: '^server/' }, { path: '^(client|test)/' }),
    forbid(
      'view-to-plot-and-state',
      { path: '^client/view/' },
      { path: '^client/', pathNot: '^client/(view|plot|state)/' },
    ),
    forbid(
      'state-to-feed',
      { path: '^client/state/' },
      { path: '^client/', pathNot: '^client/(state|feed)/' },
    ),
    forbid(
      'feed-and-plot-are-leaves',
      { path: '^client/(feed|plot)/' },
      { path: '^client/', pathNot: '^client/$1/' },
    ),
    only('mqtt-in-ingest-and-demo', 'mqtt|aedes', '^server/(ingest|demo)/'),
    only('databases-in-store', 'better-sqlite3|influx', '^server/store/'),
    only('socket-io-in-push', 'socket\\.io', '^server/push/'),
    only('express-in-http', 'express|prom-client', '^server/http/'),
    only('socket-io-client-in-feed', 'socket\\.io-client', '^client/feed/'),
    only('uplot-in-plot', 'uplot', '^client/plot/'),
    forbid('no-circles', {}, { circular: true, viaOnly: { dependencyTypesNot: ['type-only'] } }),
    forbid('all-resolve', {}, { couldNotResolve: true }),
  ],
  options: {
    doNotFollow: { path: 'node_modules' },
    exclude: { path: '^dist/' },
    tsPreCompilationDeps: true,
    tsConfig: { fileName: 'tsconfig.json' },
    enhancedResolveOptions: {
      exportsFields: ['exports'],
      conditionNames: ['import', 'node', 'default', 'types'],
    },
  },
};
