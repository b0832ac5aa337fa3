import express, { Router, type Response } from 'express';
import type {
  AlarmsAnswer,
  ChannelAnswer,
  ChannelReport,
  ChannelsAnswer,
  TallyAnswer,
} from '../../shared/protocol/http.ts';
import { parseHistoryQuery, parseLimitsRequest } from '../../shared/protocol/parse.ts';
import type { CheckDesk, Core, SetUpDesk } from '../ports.ts';
import { channelReports } from './channel-report.ts';
import { createChecksApi, createZerosApi } from './checks-api.ts';
import { jsonOnly } from './guard.ts';
import { historyCsv, historyFileName } from './history-csv.ts';
import { openApi } from './openapi/document.ts';
import { methodNotAllowed, notFound, sendProblem } from './problem.ts';
import { createSetUpApi } from './set-up-api.ts';

const LARGEST_BODY = '64kb';

/** The REST API, all that is below /api. */
export const createApi = (core: Core, setUp: SetUpDesk, checks: CheckDesk): Router => {
  const router = Router();
  const { simulated } = core.site();
  const readOnly = methodNotAllowed('GET', 'HEAD');

  /** The channel, or null with the answer given. */
  const channelOr404 = (path: string, id: string, response: Response): ChannelReport | null => {
    const found = channelReports(core).find((channel) => channel.id === id) ?? null;
    if (!found) {
      sendProblem(response, 404, 'The site has no such channel.', [
        { path, expected: 'the id of a channel that /api/channels lists', came: id },
      ]);
    }
    return found;
  };

  router.use((_request, response, next) => {
    response.set('Cache-Control', 'no-store');
    next();
  });

  const answer = (path: string, body: () => object) =>
    router
      .route(path)
      .get((_request, response) => void response.json(body()))
      .all(readOnly);

  const document = openApi(core.health().version);
  answer('/openapi.json', () => document);
  answer('/health', () => core.health());
  answer('/site', () => core.site());
  answer('/channels', (): ChannelsAnswer => ({ simulated, channels: channelReports(core) }));
  answer('/alarms', (): AlarmsAnswer => ({ simulated, ...core.alarms() }));
  answer('/tally', (): TallyAnswer => ({ simulated, nodes: core.tally() }));

  const answerChannel = (channel: ChannelReport, response: Response) => {
    const body: ChannelAnswer = { simulated, channel };
    response.json(body);
  };

  router
    .route('/channels/:id')
    .get(({ params }, response) => {
      const channel = channelOr404('id', params.id, response);
      if (channel) answerChannel(channel, response);
    })
    .all(readOnly);

  router
    .route('/channels/:id/limits')
    .put(
      jsonOnly,
      express.json({ limit: LARGEST_BODY, inflate: false, strict: false }),
      async ({ params, body }, response) => {
        if (!channelOr404('id', params.id, response)) return;
        const request = parseLimitsRequest(body);
        const faults = request.ok ? await core.setLimits(params.id, request.value) : request.faults;
        if (faults.length > 0) {
          return sendProblem(response, 422, 'These limits are refused.', faults);
        }
        const changed = channelOr404('id', params.id, response);
        if (changed) answerChannel(changed, response);
      },
    )
    .all(methodNotAllowed('PUT'));

  router
    .route('/history')
    .get(async ({ query }, response) => {
      const request = parseHistoryQuery(query);
      if (!request.ok) {
        return sendProblem(response, 400, 'The query cannot be answered.', request.faults);
      }
      const { channel: id, from, to, points, format } = request.value;
      const channel = channelOr404('channel', id, response);
      if (!channel) return;
      const history = await core.history(id, from, to, points);
      if (!history.ok) {
        const { field: path, expected, came } = history.refusal;
        return sendProblem(response, 422, 'The query is refused.', [{ path, expected, came }]);
      }
      if (format === 'json') return response.json(history.value);
      response
        .attachment(historyFileName(history.value, core.site().id))
        .set('Content-Type', 'text/csv; charset=utf-8; header=present')
        .send(historyCsv(history.value, channel.measurand));
    })
    .all(readOnly);

  router.use('/set-up', createSetUpApi(setUp));
  router.use('/checks', createChecksApi(checks));
  router.use('/zeros', createZerosApi(checks));
  router.use(notFound);
  return router;
};
