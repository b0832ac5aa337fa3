import type { Site } from '../../shared/model/site.ts';
import type { History, LimitsRequest, Problem } from '../../shared/protocol/http.ts';

export type Answer<T> =
  { readonly ok: true; readonly value: T } | { readonly ok: false; readonly problem: Problem };

const failed = (error: string): { readonly ok: false; readonly problem: Problem } => ({
  ok: false,
  problem: { error, faults: [] },
});

const isProblem = (body: unknown): body is Problem =>
  typeof body === 'object' && body !== null && 'error' in body && 'faults' in body;

/** `T` is what the server's own contract promises for `path`. */
export const ask = async <T>(path: string, init: RequestInit = {}): Promise<Answer<T>> => {
  try {
    const response = await fetch(new URL(`api/${path}`, document.baseURI), init);
    const body: unknown = await response.json();
    if (response.ok) return { ok: true, value: body as T };
    return isProblem(body) ? { ok: false, problem: body } : failed(`HTTP ${response.status}`);
  } catch (error) {
    if (error instanceof SyntaxError) return failed('The answer is not what was asked for.');
    return failed('The server does not answer.');
  }
};

export const fetchSite = (): Promise<Answer<Site>> => ask('site');

/** `from`, `to`: UTC s; `points`: 1 to 20,000. */
export const fetchHistory = (
  channel: string,
  from: number,
  to: number,
  points: number,
): Promise<Answer<History>> =>
  ask(
    `history?${new URLSearchParams({
      channel,
      from: String(from),
      to: String(to),
      points: String(points),
    }).toString()}`,
  );

export const putLimits = (channel: string, request: LimitsRequest): Promise<Answer<unknown>> =>
  ask(`channels/${encodeURIComponent(channel)}/limits`, {
    method: 'PUT',
    headers: { 'Content-Type': 'application/json' },
    body: JSON.stringify(request),
  });
