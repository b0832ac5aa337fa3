import type { Response } from 'express';

/** A line each as it comes (application/x-ndjson); the reader's going away ends the work. */
export const sendLines = async <T>(response: Response, lines: AsyncGenerator<T>): Promise<void> => {
  response.set('Content-Type', 'application/x-ndjson');
  for await (const line of lines) {
    if (response.closed) return;
    response.write(`${JSON.stringify(line)}\n`);
  }
  response.end();
};
