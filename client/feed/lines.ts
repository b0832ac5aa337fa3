import type { Problem } from '../../shared/protocol/http.ts';
import type { Answer } from './api.ts';

const failed = (error: string): { readonly ok: false; readonly problem: Problem } => ({
  ok: false,
  problem: { error, faults: [] },
});

/** Each line of a body as it comes. */
async function* linesOf(body: ReadableStream<Uint8Array>): AsyncGenerator<string> {
  const reader = body.getReader();
  const decoder = new TextDecoder();
  let rest = '';
  for (;;) {
    const { done, value } = await reader.read();
    rest += done ? decoder.decode() : decoder.decode(value, { stream: true });
    const lines = rest.split('\n');
    rest = lines.pop() ?? '';
    yield* lines;
    if (done) return;
  }
}

const problemOf = async (response: Response): Promise<Problem> => {
  const body: unknown = await response.json();
  return typeof body === 'object' && body !== null && 'faults' in body
    ? (body as Problem)
    : failed(`HTTP ${response.status}`).problem;
};

/**
 * Sends `request` and tells each line of the answer (application/x-ndjson) to `hear`. Resolves when
 * the body has ended; `signal` ends it before, and the server's work with it.
 */
export const postLines = async <T>(
  path: string,
  request: unknown,
  hear: (line: T) => void,
  signal: AbortSignal,
): Promise<Answer<true>> => {
  try {
    const response = await fetch(new URL(`api/${path}`, document.baseURI), {
      ...{ method: 'POST', signal, body: JSON.stringify(request) },
      headers: { 'Content-Type': 'application/json' },
    });
    if (!response.ok) return { ok: false, problem: await problemOf(response) };
    if (!response.body) return failed('The answer is not what was asked for.');
    for await (const line of linesOf(response.body)) hear(JSON.parse(line) as T);
    return { ok: true, value: true };
  } catch (error) {
    if (signal.aborted) return failed('Stopped.');
    if (error instanceof SyntaxError) return failed('The answer is not what was asked for.');
    return failed('The server does not answer.');
  }
};
