import express, { Router, type Response } from 'express';
import { parseSetUpPreview, parseSetUpRequest } from '../../shared/protocol/parse-set-up.ts';
import type { PreviewLine } from '../../shared/protocol/http.ts';
import type { SetUpDesk } from '../ports.ts';
import { jsonOnly } from './guard.ts';
import { methodNotAllowed, sendProblem } from './problem.ts';

const LARGEST_BODY = '8mb';

/** A line each as it comes; the reader's going away ends the work. */
const sendLines = async (response: Response, lines: AsyncGenerator<PreviewLine>): Promise<void> => {
  response.set('Content-Type', 'application/x-ndjson');
  for await (const line of lines) {
    if (response.closed) return;
    response.write(`${JSON.stringify(line)}\n`);
  }
  response.end();
};

/** The set-up of the site: read, tried on the past, changed. */
export const createSetUpApi = (desk: SetUpDesk): Router => {
  const router = Router();
  const body = [jsonOnly, express.json({ limit: LARGEST_BODY, inflate: false, strict: false })];

  router
    .route('/')
    .get((_request, response) => void response.json(desk.answer()))
    .put(...body, async (request, response) => {
      const parsed = parseSetUpRequest(request.body);
      const outcome = parsed.ok
        ? await desk.change(parsed.value)
        : { kind: 'refused' as const, faults: parsed.faults };
      switch (outcome.kind) {
        case 'changed':
          return void response.json(desk.answer());
        case 'refused':
          return sendProblem(response, 422, 'This set-up is refused.', outcome.faults);
        case 'conflict': {
          const { kind: _, ...stands } = outcome;
          const expected = `revision ${stands.revision}, which ${stands.author} made meanwhile`;
          const came = parsed.ok ? String(parsed.value.basedOn) : '';
          const faults = [{ path: '/basedOn', expected, came }];
          const error = 'Somebody else has changed the set-up; yours was not taken.';
          response.status(409).json({ error, faults, ...stands });
        }
      }
    })
    .all(methodNotAllowed('GET', 'HEAD', 'PUT'));

  router
    .route('/revisions')
    .get(async (_request, response) => void response.json(await desk.revisions()))
    .all(methodNotAllowed('GET', 'HEAD'));

  router
    .route('/preview')
    .post(...body, async (request, response) => {
      const parsed = parseSetUpPreview(request.body);
      const preview = parsed.ok ? desk.preview(parsed.value.document) : parsed;
      if (!preview.ok) {
        return sendProblem(response, 422, 'This set-up is refused.', preview.faults);
      }
      await sendLines(response, preview.lines);
    })
    .all(methodNotAllowed('POST'));

  return router;
};
