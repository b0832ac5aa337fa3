import type {
  PreviewLine,
  Problem,
  RevisionsAnswer,
  SetUpAnswer,
  SetUpRequest,
} from '../../shared/protocol/http.ts';
import { ask, type Answer } from './api.ts';

export const fetchSetUp = (): Promise<Answer<SetUpAnswer>> => ask('set-up');
export const fetchRevisions = (): Promise<Answer<RevisionsAnswer>> => ask('set-up/revisions');

const sending = (method: string, body: unknown): RequestInit => ({
  method,
  headers: { 'Content-Type': 'application/json' },
  body: JSON.stringify(body),
});

export const putSetUp = (request: SetUpRequest): Promise<Answer<SetUpAnswer>> =>
  ask('set-up', sending('PUT', request));

/** Each line of a body as it comes. */
async function* linesOf(body: ReadableStream<Uint8Array>): AsyncGenerator<string> {
  const decoder = new TextDecoder();
  const reader = body.getReader();
  let rest = '';
  for (;;) {
    const { done, value } = await reader.read();
    rest += done ? decoder.decode() : decoder.decode(value, { stream: true });
    const lines = rest.split('\n');
    rest = lines.pop() ?? '';
    yield* lines.filter((line) => line !== '');
    if (done) break;
  }
  if (rest !== '') yield rest;
}

const problemOf = async (response: Response): Promise<Problem> => {
  const body: unknown = await response.json();
  return typeof body === 'object' && body !== null && 'faults' in body
    ? (body as Problem)
    : { error: `HTTP ${response.status}`, faults: [] };
};

/**
 * What a set-up would make of the past, line by line to `hear`. Resolves with true when the last
 * line has come; `signal` ends it, and the server's work with it.
 */
export const previewSetUp = async (
  document: unknown,
  hear: (line: PreviewLine) => void,
  signal: AbortSignal,
): Promise<Answer<true>> => {
  const failed = (error: string): Answer<true> => ({ ok: false, problem: { error, faults: [] } });
  try {
    const url = new URL('api/set-up/preview', globalThis.document.baseURI);
    const response = await fetch(url, { ...sending('POST', { document }), signal });
    if (!response.ok) return { ok: false, problem: await problemOf(response) };
    if (!response.body) return failed('The answer is not what was asked for.');
    for await (const line of linesOf(response.body)) {
      const said = JSON.parse(line) as PreviewLine;
      hear(said);
      if (said.kind === 'result') return { ok: true, value: true };
    }
    return failed('The preview broke off before its end.');
  } catch (error) {
    if (signal.aborted) return failed('Stopped.');
    if (error instanceof SyntaxError) return failed('The answer is not what was asked for.');
    return failed('The server does not answer.');
  }
};
