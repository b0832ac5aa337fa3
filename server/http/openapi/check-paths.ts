import type {
  EnteredRequest,
  PushRequest,
  ShuntRequest,
  ZerosRequest,
} from '../../../shared/protocol/checks.ts';
import { content, json, read, SIMULATED_HEADER } from './operation.ts';
import { ref } from './schema.ts';
import { REFUSALS } from './set-up-paths.ts';

const SIGNED = { author: 'Instrumentation technician', note: 'Before loading' };
const CHANNEL = 'B1-mid-bottom-left';

const push: PushRequest = { channel: CHANNEL, seconds: 10, expected: 'up', ...SIGNED };
const shunt: Omit<ShuntRequest, 'read'> = {
  ...{ channel: CHANNEL, how: 'commanded', place: 'gauge', arm: 1 },
  ...{ resistance: 349_650, seconds: 5, ...SIGNED },
};
const entered: EnteredRequest = {
  channel: CHANNEL,
  entered: { kind: 'insulation', resistance: 2e9 },
  ...SIGNED,
};
const zeros: ZerosRequest = {
  ...{ channels: [CHANNEL], seconds: 20, state: { kind: 'unloaded' } },
  ...{ author: 'Test engineer in charge', reason: 'Before the first load step', basedOn: 3 },
};

export const CHECK_EXAMPLES = {
  CheckRequest: { channels: [CHANNEL], seconds: 20, limits: {}, ...SIGNED },
  PushRequest: push,
  ShuntRequest: shunt,
  EnteredRequest: entered,
  ZerosRequest: zeros,
} as const;

const body = (name: keyof typeof CHECK_EXAMPLES) => ({
  required: true,
  description: 'At most 64 kB',
  content: content(ref(name), CHECK_EXAMPLES[name]),
});

const lines = (
  operationId: string,
  summary: string,
  name: 'CheckRequest' | 'PushRequest' | 'ShuntRequest',
) => ({
  operationId,
  summary,
  requestBody: body(name),
  responses: {
    200: {
      description: 'JSON, a line each; the last one is the result, or why there is none',
      headers: { 'X-Simulated': SIMULATED_HEADER },
      content: { 'application/x-ndjson': { schema: ref('CheckLine') } },
    },
    ...REFUSALS,
  },
});

export const CHECK_PATHS = {
  '/api/checks': {
    ...read('checks', 'The latest of each check of each channel', json('All', 'ChecksAnswer')),
    post: lines('check', 'Checks channels by the samples that have come', 'CheckRequest'),
  },
  '/api/checks/push': {
    post: lines('checkPush', 'Watches a channel while somebody pushes', 'PushRequest'),
  },
  '/api/checks/shunt': {
    post: lines('checkShunt', 'Compares a shunt with what must be shown', 'ShuntRequest'),
  },
  '/api/checks/entered': {
    post: {
      operationId: 'checkEntered',
      summary: 'Judges what a person has measured',
      requestBody: body('EnteredRequest'),
      responses: { 200: json('On record', 'ChannelChecks'), ...REFUSALS },
    },
  },
  '/api/zeros': {
    post: {
      operationId: 'takeZeros',
      summary: 'Reads zeros and puts them in force; what drifts or is noisy is refused',
      requestBody: body('ZerosRequest'),
      responses: {
        200: json('Which were zeroed and which not', 'ZerosAnswer'),
        ...REFUSALS,
        409: json('Somebody else changed the set-up first', 'SetUpConflict'),
      },
    },
  },
};
