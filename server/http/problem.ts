import type { ErrorRequestHandler, RequestHandler, Response } from 'express';
import type { Fault } from '../../shared/model/fault.ts';
import type { Problem } from '../../shared/protocol/http.ts';
import type { SetUpOutcome } from '../ports.ts';

export const sendProblem = (
  response: Response,
  status: number,
  error: string,
  faults: readonly Fault[] = [],
): void => {
  const problem: Problem = { error, faults };
  response.status(status).set('Cache-Control', 'no-store').json(problem);
};

/** Somebody else was first: who, and with what. */
export const sendConflict = (
  response: Response,
  outcome: Extract<SetUpOutcome, { kind: 'conflict' }>,
  basedOn: number | null,
): void => {
  const { kind: _, ...stands } = outcome;
  const expected = `revision ${stands.revision}, which ${stands.author} made meanwhile`;
  const faults = [{ path: '/basedOn', expected, came: basedOn === null ? '' : String(basedOn) }];
  const error = 'Somebody else has changed the set-up; yours was not taken.';
  response.status(409).json({ error, faults, ...stands });
};

export const notFound: RequestHandler = ({ originalUrl }, response) => {
  const expected = 'a path that /api/openapi.json lists';
  sendProblem(response, 404, 'There is nothing here.', [
    { path: 'path', expected, came: originalUrl.split('?')[0] ?? '' },
  ]);
};

export const methodNotAllowed =
  (...methods: readonly string[]): RequestHandler =>
  ({ method }, response) => {
    response.set('Allow', methods.join(', '));
    sendProblem(response, 405, 'This path does not take that method.', [
      { path: 'method', expected: methods.join(' or '), came: method },
    ]);
  };

/** What the body reader and the router say of a request that they cannot read. */
interface ClientError extends Error {
  readonly status: number;
  readonly type?: string;
}

const isClientError = (error: unknown): error is ClientError =>
  error instanceof Error &&
  'status' in error &&
  typeof error.status === 'number' &&
  error.status >= 400 &&
  error.status < 500;

const EXPECTED: Readonly<Record<string, string>> = {
  'entity.parse.failed': 'JSON (RFC 8259)',
  'entity.too.large': 'at most 64 kB',
  'encoding.unsupported': 'no content encoding',
  'charset.unsupported': 'UTF-8',
};

/** Last of all handlers. `complain` hears what went wrong on our side; the asker only that it did. */
export const failure =
  (complain: (line: string) => void): ErrorRequestHandler =>
  (error: unknown, { method, originalUrl }, response, next) => {
    if (response.headersSent) return next(error);
    if (isClientError(error)) {
      const expected = EXPECTED[error.type ?? ''] ?? 'a request that can be read';
      return sendProblem(response, error.status, 'The request could not be read.', [
        { path: 'request', expected, came: error.message },
      ]);
    }
    const what = error instanceof Error ? (error.stack ?? error.message) : String(error);
    complain(`${method} ${originalUrl}: ${what}`);
    sendProblem(response, 500, 'The server could not do this; its log says why.');
  };
