import { Validator } from '@seriousme/openapi-schema-validator';
import { expect, test } from 'vitest';
import { openApi } from '../../server/http/openapi/document.ts';
import { EXAMPLES } from '../../server/http/openapi/examples.ts';
import { schemaValidators } from './contract.ts';
import { serve } from './serve.ts';

type Json = { readonly [key: string]: Json | undefined } & object;

const document = JSON.parse(JSON.stringify(openApi('0.1.0'))) as Json;
const entries = (value: Json | undefined): [string, Json][] =>
  Object.entries(value ?? {}) as [string, Json][];
const operations = entries(document.paths).flatMap(([path, item]) =>
  entries(item).map(([method, operation]) => ({ path, method, operation })),
);

/** RFC 6901 in a URI fragment. */
const resolve = (reference: string): unknown =>
  reference
    .slice(2)
    .split('/')
    .map((step) => step.replaceAll('~1', '/').replaceAll('~0', '~'))
    .reduce<unknown>((at, step) => (at as Record<string, unknown> | undefined)?.[step], document);

const everyReference = (value: unknown): string[] => {
  if (typeof value !== 'object' || value === null) return [];
  return Object.entries(value).flatMap(([key, inner]) =>
    key === '$ref' ? [String(inner)] : everyReference(inner),
  );
};

// The OpenAPI Initiative's own schema of 3.1 documents, as the validator carries it.
test('the served document is one by the OpenAPI 3.1 schema, and a spoilt one is not', async () => {
  const { ask } = await serve();
  const served = (await ask('/api/openapi.json')).json() as Record<string, unknown>;
  const validator = new Validator();
  expect(await validator.validate(served)).toEqual({ valid: true });
  expect(validator.version).toBe('3.1');
  const { info, paths } = served as { info: object; paths: Record<string, object> };
  const spoilt = [
    { ...served, info: { ...info, title: undefined } },
    { ...served, servers: [{ address: '/' }] },
    { ...served, paths: { ...paths, 'api/health': {} } },
    { ...served, paths: { ...paths, '/api/health': { get: { responses: { 200: {} } } } } },
  ].map((one) => JSON.parse(JSON.stringify(one)) as Record<string, unknown>);
  for (const one of spoilt) expect((await new Validator().validate(one)).valid).toBe(false);
});

// OpenAPI Specification 3.1.0, the sections named at each line.
test('the document has what OpenAPI 3.1.0 requires', () => {
  // §4.8.1 OpenAPI Object, §4.8.2 Info Object, §4.8.4 License Object
  expect(document.openapi).toMatch(/^3\.1\.\d+$/);
  expect(document.info).toMatchObject({
    title: expect.any(String),
    version: '0.1.0',
    license: { name: expect.any(String) },
  });
  const ids = operations.map(({ operation }) => operation.operationId);
  // §4.8.10 Operation Object: operationId is unique
  expect(new Set(ids).size).toBe(operations.length);
  for (const { path, method, operation } of operations) {
    // §4.8.8 Paths Object, §4.8.9 Path Item Object
    expect(path).toMatch(/^\//);
    expect(['get', 'put', 'post']).toContain(method);
    const parameters = Object.values(operation.parameters ?? {}) as Json[];
    const inPath = parameters.filter((parameter) => String(parameter.in) === 'path');
    // §4.8.12 Parameter Object: one for each template expression, required
    expect(inPath.map(({ name }) => `{${String(name)}}`)).toEqual(path.match(/\{\w+\}/g) ?? []);
    for (const parameter of inPath) expect(parameter.required).toBe(true);
    for (const parameter of parameters) expect(parameter.schema).toBeTypeOf('object');
    // §4.8.16 Responses Object, §4.8.17 Response Object: at least one; each has a description
    const responses = entries(operation.responses);
    expect(responses.filter(([status]) => /^2\d\d$/.test(status))).toHaveLength(1);
    for (const [status, response] of responses) {
      expect(status).toMatch(/^[1-5]\d\d$/);
      const whole = '$ref' in response ? (resolve(String(response.$ref)) as Json) : response;
      expect(whole.description).toBeTypeOf('string');
      for (const [, media] of entries(whole.content)) expect(media.schema).toBeTypeOf('object');
    }
  }
  // §4.8.7 Components Object: names
  for (const [, group] of entries(document.components)) {
    for (const [name] of entries(group)) expect(name).toMatch(/^[a-zA-Z0-9._-]+$/);
  }
});

test('every reference leads somewhere, and no schema is there for nothing', () => {
  const references = everyReference(document);
  for (const reference of references) expect(resolve(reference), reference).toBeTypeOf('object');
  const used = new Set(references);
  for (const [name] of entries(document.components?.schemas)) {
    expect(used, name).toContain(`#/components/schemas/${name}`);
  }
});

test('examples fit their schemas', () => {
  const faultsOf = schemaValidators();
  const fits: [keyof typeof EXAMPLES, string][] = [
    ['health', 'Health'],
    ['channel', 'ChannelAnswer'],
    ['channels', 'ChannelsAnswer'],
    ['history', 'History'],
    ['alarms', 'AlarmsAnswer'],
    ['tally', 'TallyAnswer'],
    ['limitsRequest', 'LimitsRequest'],
    ['setUpRequest', 'SetUpRequest'],
    ['setUpPreview', 'SetUpPreviewRequest'],
    ['refusedLimits', 'Problem'],
    ['refusedQuery', 'Problem'],
  ];
  for (const [example, schema] of fits) expect(faultsOf(schema, EXAMPLES[example])).toBe('');
  expect(fits.length + 1).toBe(Object.keys(EXAMPLES).length);
});

test('schemas are strict: a field too many, too few or of another type is seen', () => {
  const faultsOf = schemaValidators();
  const { health } = EXAMPLES;
  expect(faultsOf('Health', { ...health, extra: 1 })).toContain('additional');
  expect(faultsOf('Health', { ...health, ok: 'yes' })).toContain('boolean');
  expect(faultsOf('Health', { ok: true })).toContain('required');
  expect(faultsOf('Signal', { kind: 'counts', as: 'volts', perCount: 1, zeroCount: 0 })).not.toBe(
    '',
  );
});

test('each path of the document is answered with what the document says', async () => {
  const { ask } = await serve();
  const faultsOf = schemaValidators();
  const queries: Readonly<Record<string, string>> = {
    '/api/history': '?channel=ratio&from=1800000000&to=1800000002',
  };
  for (const { path, method, operation } of operations) {
    const address = path.replace('{id}', 'ratio') + (queries[path] ?? '');
    const example = operation.requestBody?.content?.['application/json']?.example;
    const answer = await ask(address, {
      method: method.toUpperCase(),
      ...(example && {
        headers: { 'Content-Type': 'application/json' },
        body: JSON.stringify(example),
      }),
    });
    expect(answer.status, path).toBe(200);
    expect(answer.headers['x-simulated'], path).toBe('yes');
    const ok = entries(operation.responses).find(([status]) => status === '200')?.[1];
    const type = String(answer.headers['content-type']).split(';')[0] ?? '';
    const media = ok?.content?.[type];
    expect(media, `${path} as ${type}`).toBeTypeOf('object');
    const name =
      String(media?.schema?.$ref ?? '')
        .split('/')
        .at(-1) ?? '';
    const bodies = type === 'application/x-ndjson' ? answer.body.trim().split('\n') : [answer.body];
    for (const body of name === '' ? [] : bodies) {
      expect(faultsOf(name, JSON.parse(body)), path).toBe('');
    }
  }
  expect((await ask('/api/openapi.json')).json()).toEqual(document);
});
