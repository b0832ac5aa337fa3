import { EXAMPLES } from './examples.ts';
import { content, FAILED, json, OTHER_HOST, problem, read, SIMULATED_HEADER } from './operation.ts';
import { ref } from './schema.ts';

/** Of every request that carries a body and changes something. */
export const REFUSALS = {
  400: problem('The body is not JSON'),
  403: problem("Sent by another site's page"),
  413: problem('The body is too large'),
  415: problem('The body is not application/json'),
  421: OTHER_HOST,
  422: problem('Every fault of what came; nothing was changed'),
  500: FAILED,
};

const body = (name: string, example: object) => ({
  required: true,
  description: 'At most 8 MB',
  content: content(ref(name), example),
});

export const SET_UP_PATHS = {
  '/api/set-up': {
    ...read('setUp', 'The site file with the limits in force', json('The set-up', 'SetUpAnswer')),
    put: {
      operationId: 'changeSetUp',
      summary: 'Puts another set-up in force; calibration and zero records are added, never edited',
      requestBody: body('SetUpRequest', EXAMPLES.setUpRequest),
      responses: {
        200: json('Durable and in force', 'SetUpAnswer'),
        ...REFUSALS,
        409: json('Somebody else changed it first', 'SetUpConflict'),
      },
    },
  },
  '/api/set-up/revisions': read(
    'revisions',
    'Who changed the set-up, when and why',
    json('Newest first', 'RevisionsAnswer'),
  ),
  '/api/set-up/preview': {
    post: {
      operationId: 'previewSetUp',
      summary: 'What a set-up would make of the past; nothing is changed',
      requestBody: body('SetUpPreviewRequest', EXAMPLES.setUpPreview),
      responses: {
        200: {
          description: 'JSON, a line each: progress as it goes, at last the result',
          headers: { 'X-Simulated': SIMULATED_HEADER },
          content: { 'application/x-ndjson': { schema: ref('PreviewLine') } },
        },
        ...REFUSALS,
      },
    },
  },
};
