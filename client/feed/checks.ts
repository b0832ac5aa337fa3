import type {
  ChannelChecks,
  ChecksAnswer,
  CheckLine,
  CheckRequest,
  EnteredRequest,
  PushRequest,
  ShuntRequest,
  ZerosAnswer,
  ZerosRequest,
} from '../../shared/protocol/checks.ts';
import { ask, type Answer } from './api.ts';
import { postLines } from './lines.ts';

/** What takes its time; each by the end of its path. */
export type LongCheck =
  | { readonly path: 'checks'; readonly request: CheckRequest }
  | { readonly path: 'checks/push'; readonly request: PushRequest }
  | {
      readonly path: 'checks/shunt';
      readonly request: Omit<ShuntRequest, 'read'> & { readonly read?: ShuntRequest['read'] };
    };

const sending = (request: object): RequestInit => ({
  method: 'POST',
  headers: { 'Content-Type': 'application/json' },
  body: JSON.stringify(request),
});

export const fetchChecks = (): Promise<Answer<ChecksAnswer>> => ask('checks');

export const makeCheck = (
  { path, request }: LongCheck,
  hear: (line: CheckLine) => void,
  signal: AbortSignal,
): Promise<Answer<true>> => postLines(path, request, hear, signal);

export const enterCheck = (request: EnteredRequest): Promise<Answer<ChannelChecks>> =>
  ask('checks/entered', sending(request));

export const takeZeros = (request: ZerosRequest): Promise<Answer<ZerosAnswer>> =>
  ask('zeros', sending(request));
