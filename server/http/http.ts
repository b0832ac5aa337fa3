import express, { type Express } from 'express';
import type { CheckDesk, Core, SetUpDesk } from '../ports.ts';
import { createApi } from './api.ts';
import { clientFiles } from './client-files.ts';
import { headers, ownHost, ownPage } from './guard.ts';
import type { Metrics } from './metrics.ts';
import { failure, methodNotAllowed, notFound } from './problem.ts';

export interface HttpParts {
  readonly core: Core;
  readonly setUp: SetUpDesk;
  readonly checks: CheckDesk;
  readonly metrics: Metrics;
  /** The built page; need not be there. */
  readonly staticFolder: string;
  /** The address that the server will listen on: on loopback other names are not answered. */
  readonly host: string;
  /** Hears of faults on our side, with their stack. */
  readonly complain: (line: string) => void;
}

/** REST under /api, figures for monitoring at /metrics, the page everywhere else. */
export const createHttp = (parts: HttpParts): Express => {
  const { core, setUp, checks, metrics, staticFolder, host, complain } = parts;
  const app = express();
  app.disable('x-powered-by');
  app.disable('etag');
  app.use(headers(core.site().simulated), ownHost(host), ownPage);
  app.use('/api', createApi(core, setUp, checks));
  app
    .route('/metrics')
    .get(async (_request, response) => {
      const text = await metrics.text();
      response.set('Content-Type', metrics.contentType).set('Cache-Control', 'no-store').send(text);
    })
    .all(methodNotAllowed('GET', 'HEAD'));
  app.use(clientFiles(staticFolder));
  app.use(notFound, failure(complain));
  return app;
};
