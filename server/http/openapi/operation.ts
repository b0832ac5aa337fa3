/** Parts of which the operations of the document are made. */
import { ref, type Schema } from './schema.ts';

export const SIMULATED_HEADER = { $ref: '#/components/headers/Simulated' };

export const content = (schema: Schema, example?: unknown) => ({
  'application/json': { schema, ...(example === undefined ? {} : { example }) },
});

export const json = (description: string, name: string, example?: unknown) => ({
  description,
  headers: { 'X-Simulated': SIMULATED_HEADER },
  content: content(ref(name), example),
});

export const problem = (description: string, example?: unknown) =>
  json(description, 'Problem', example);
export const FAILED = { $ref: '#/components/responses/Failed' };
export const NO_CHANNEL = { $ref: '#/components/responses/NoChannel' };
export const OTHER_HOST = { $ref: '#/components/responses/OtherHost' };

export const read = (operationId: string, summary: string, ok: object, more: object = {}) => ({
  get: {
    operationId,
    summary,
    ...more,
    responses: {
      200: ok,
      ...('responses' in more && typeof more.responses === 'object' ? more.responses : {}),
      421: OTHER_HOST,
      500: FAILED,
    },
  },
});
