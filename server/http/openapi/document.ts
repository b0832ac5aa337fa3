import { DEFAULT_POINTS, HISTORY_FORMATS, MOST_POINTS } from '../../../shared/protocol/parse.ts';
import { CHECK_PATHS } from './check-paths.ts';
import { CHECK_SCHEMAS } from './check-schemas.ts';
import { EXAMPLES } from './examples.ts';
import { LIVE_SCHEMAS } from './live-schemas.ts';
import {
  content,
  FAILED,
  json,
  NO_CHANNEL,
  OTHER_HOST,
  problem,
  read,
  SIMULATED_HEADER,
} from './operation.ts';
import { ref, type Schema } from './schema.ts';
import { SET_UP_PATHS } from './set-up-paths.ts';
import { SET_UP_SCHEMAS } from './set-up-schemas.ts';
import { SITE_SCHEMAS } from './site-schemas.ts';

const queryParameter = (name: string, required: boolean, schema: Schema, description: string) => ({
  name,
  in: 'query',
  required,
  schema,
  description,
});

const ID_PARAMETER = {
  name: 'id',
  in: 'path',
  required: true,
  schema: { type: 'string' },
  description: 'Id of a channel',
};

/** UTC seconds as they are, or ISO 8601 with offset. */
const TIME: Schema = {
  type: 'string',
  anyOf: [{ format: 'date-time' }, { pattern: '^\\d+(\\.\\d+)?$' }],
};

const historyPath = read(
  'history',
  "A channel's past: minimum, mean and maximum of every point",
  {
    description: 'The window in at most one point more than asked for',
    headers: { 'X-Simulated': SIMULATED_HEADER },
    content: {
      ...content(ref('History'), EXAMPLES.history),
      'text/csv': {
        schema: {
          type: 'string',
          description: 'RFC 4180; the header line names units, the last column says simulated',
        },
        example: EXAMPLES.csv,
      },
    },
  },
  {
    parameters: [
      queryParameter('channel', true, { type: 'string', minLength: 1 }, 'Id of a channel'),
      queryParameter('from', true, TIME, 'Begin: UTC seconds, or ISO 8601 with Z or offset'),
      queryParameter('to', true, TIME, 'End, not included; after from'),
      queryParameter(
        'points',
        false,
        { type: 'integer', minimum: 1, maximum: MOST_POINTS, default: DEFAULT_POINTS },
        'How many points',
      ),
      queryParameter(
        'format',
        false,
        { type: 'string', enum: HISTORY_FORMATS, default: 'json' },
        'json: SI units; csv: µε, kN, mm or °C as its header line names them',
      ),
    ],
    responses: {
      400: problem('Faults of the query, every one', EXAMPLES.refusedQuery),
      404: NO_CHANNEL,
      422: problem('A query that the store refuses'),
    },
  },
);

const limitsPath = {
  put: {
    operationId: 'setLimits',
    summary: 'Puts limits in force in place of those that were',
    description:
      "Taken from the server's own page and from programs, not from another site's page.",
    parameters: [ID_PARAMETER],
    requestBody: {
      required: true,
      description: 'At most 64 kB',
      content: content(ref('LimitsRequest'), EXAMPLES.limitsRequest),
    },
    responses: {
      200: json('Durable and in force', 'ChannelAnswer', EXAMPLES.channel),
      400: problem('The body is not JSON'),
      403: problem("Sent by another site's page"),
      404: NO_CHANNEL,
      413: problem('The body is too large'),
      415: problem('The body is not application/json'),
      421: OTHER_HOST,
      422: problem('Every fault of the limits; nothing was changed', EXAMPLES.refusedLimits),
      500: FAILED,
    },
  },
};

const metricsPath = read('metrics', 'Figures for monitoring', {
  description: 'Prometheus text exposition format 0.0.4',
  headers: { 'X-Simulated': SIMULATED_HEADER },
  content: { 'text/plain': { schema: { type: 'string' } } },
});

const channelPath = read(
  'channel',
  'One channel with its limits and present value',
  json('The channel', 'ChannelAnswer', EXAMPLES.channel),
  { parameters: [ID_PARAMETER], responses: { 404: NO_CHANNEL } },
);

const all = (operationId: string, summary: string, name: string, example?: unknown) =>
  read(operationId, summary, json(summary, name, example));

/** The API in OpenAPI 3.1.0, as /api/openapi.json serves it. */
export const openApi = (version: string) => ({
  openapi: '3.1.0',
  info: {
    title: 'Yieldward',
    version,
    summary: 'A loaded structure: what its strain gauges read now and read before',
    description:
      'Figures are SI (strain in m/m), times UTC seconds. Simulated data says so in every answer.',
    license: { name: 'Apache-2.0', identifier: 'Apache-2.0' },
  },
  servers: [{ url: '/' }],
  paths: {
    '/api/health': all('health', 'State of server, broker and store', 'Health', EXAMPLES.health),
    '/api/site': all('site', 'Structures, nodes and calibration records', 'Site'),
    '/api/channels': all(
      'channels',
      'All channels with limits and present values',
      'ChannelsAnswer',
      EXAMPLES.channels,
    ),
    '/api/channels/{id}': channelPath,
    '/api/channels/{id}/limits': limitsPath,
    '/api/history': historyPath,
    '/api/alarms': all('alarms', 'Alarms now and before', 'AlarmsAnswer', EXAMPLES.alarms),
    '/api/tally': all('tally', 'Frames of every node', 'TallyAnswer', EXAMPLES.tally),
    ...SET_UP_PATHS,
    ...CHECK_PATHS,
    '/api/openapi.json': all('openApi', 'This document', 'OpenApi'),
    '/metrics': metricsPath,
  },
  components: {
    schemas: { ...LIVE_SCHEMAS, ...SET_UP_SCHEMAS, ...CHECK_SCHEMAS, ...SITE_SCHEMAS },
    headers: {
      Simulated: {
        description: 'yes: the nodes are simulated, and so is every figure',
        required: true,
        schema: { type: 'string', enum: ['yes', 'no'] },
      },
    },
    responses: {
      Failed: problem('A fault on our side; the log of the server says which'),
      NoChannel: problem('The site has no such channel'),
      OtherHost: problem('The request names a host that this server does not answer to'),
    },
  },
});
