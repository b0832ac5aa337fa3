import express, { Router } from 'express';
import { parseSetUpPreview, parseSetUpRequest } from '../../shared/protocol/parse-set-up.ts';
import type { SetUpDesk } from '../ports.ts';
import { jsonOnly } from './guard.ts';
import { sendLines } from './lines.ts';
import { methodNotAllowed, sendConflict, sendProblem } from './problem.ts';

const LARGEST_BODY = '8mb';

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
        case 'conflict':
          return sendConflict(response, outcome, parsed.ok ? parsed.value.basedOn : null);
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
