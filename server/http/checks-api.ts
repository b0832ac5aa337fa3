import express, { Router } from 'express';
import type { Parsed } from '../../shared/protocol/parse.ts';
import {
  parseCheckRequest,
  parseEnteredRequest,
  parsePushRequest,
  parseShuntRequest,
  parseZerosRequest,
} from '../../shared/protocol/parse-checks.ts';
import type { CheckDesk, CheckLines } from '../ports.ts';
import { jsonOnly } from './guard.ts';
import { sendLines } from './lines.ts';
import { methodNotAllowed, sendConflict, sendProblem } from './problem.ts';

const REFUSED = 'This check is refused.';
const body = [jsonOnly, express.json({ limit: '64kb', inflate: false, strict: false })];

/** Channel checks: what stands, and each way to make one. */
export const createChecksApi = (desk: CheckDesk): Router => {
  const router = Router();

  const answerLines =
    <T>(parse: (value: unknown) => Parsed<T>, begin: (request: T) => CheckLines) =>
    async (request: express.Request, response: express.Response) => {
      const parsed = parse(request.body);
      const lines = parsed.ok ? begin(parsed.value) : parsed;
      if (!lines.ok) return sendProblem(response, 422, REFUSED, lines.faults);
      await sendLines(response, lines.lines);
    };

  router
    .route('/')
    .get(async (_request, response) => void response.json(await desk.answer()))
    .post(
      ...body,
      answerLines(parseCheckRequest, (request) => desk.run(request)),
    )
    .all(methodNotAllowed('GET', 'HEAD', 'POST'));

  router
    .route('/push')
    .post(
      ...body,
      answerLines(parsePushRequest, (request) => desk.push(request)),
    )
    .all(methodNotAllowed('POST'));

  router
    .route('/shunt')
    .post(
      ...body,
      answerLines(parseShuntRequest, (request) => desk.shunt(request)),
    )
    .all(methodNotAllowed('POST'));

  router
    .route('/entered')
    .post(...body, async (request, response) => {
      const parsed = parseEnteredRequest(request.body);
      const entered = parsed.ok ? await desk.enter(parsed.value) : parsed;
      if (!entered.ok) return sendProblem(response, 422, REFUSED, entered.faults);
      response.json(entered.value);
    })
    .all(methodNotAllowed('POST'));

  return router;
};

/** Zeros, some or all at once. */
export const createZerosApi = (desk: CheckDesk): Router => {
  const router = Router();
  router
    .route('/')
    .post(...body, async (request, response) => {
      const parsed = parseZerosRequest(request.body);
      const outcome = parsed.ok
        ? await desk.zero(parsed.value)
        : { kind: 'refused' as const, faults: parsed.faults };
      switch (outcome.kind) {
        case 'answered':
          return void response.json(outcome.answer);
        case 'refused':
          return sendProblem(response, 422, 'No zero was taken.', outcome.faults);
        case 'conflict':
          return sendConflict(response, outcome, parsed.ok ? parsed.value.basedOn : null);
      }
    })
    .all(methodNotAllowed('POST'));
  return router;
};
