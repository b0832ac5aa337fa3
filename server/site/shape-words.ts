import type { ErrorObject } from 'ajv/dist/2020.js';
import type { Fault } from '../../shared/model/fault.ts';
import { show } from '../../shared/pipeline/1-decode/topics.ts';
import { fieldOf, pointerTo } from './reading.ts';

const list = (values: readonly unknown[]): string =>
  values.map((v) => JSON.stringify(v)).join(', ');

const elements = (count: unknown): string => `${String(count)} element${count === 1 ? '' : 's'}`;

const descriptionOf = (schema: unknown): string => {
  const text = fieldOf(schema, 'description');
  return typeof text === 'string' ? text.replace(/\.$/, '') : '';
};

const fieldsOf = (schema: unknown): string =>
  Object.keys(fieldOf(schema, 'properties') ?? {}).join(', ');

const TYPES: Readonly<Record<string, string>> = {
  array: 'a list [ … ]',
  object: 'an object { … }',
  string: 'a text in quotes',
  number: 'a number',
  boolean: 'true or false',
};

const typeInWords = (type: unknown): string =>
  [type]
    .flat()
    .map((name) => TYPES[String(name)] ?? String(name))
    .join(' or ');

/** What the schema wants at the place itself. */
/** What ajv tells beside a fault, as its documentation lists it by keyword. */
interface Params {
  readonly type: string | readonly string[];
  readonly allowedValues: readonly unknown[];
  readonly limit: number;
  readonly missingProperty: string;
  readonly additionalProperty: string;
}

const expectedAt = (error: ErrorObject): string => {
  const { keyword, schema, parentSchema } = error;
  const params = error.params as Params;
  switch (keyword) {
    case 'type':
      return typeInWords(params.type);
    case 'const':
      return JSON.stringify(schema);
    case 'enum':
      return `one of ${list(params.allowedValues)}`;
    case 'format':
      return 'a date and time with Z or an offset, as 2026-05-06T07:30:00Z';
    case 'minimum':
      return `at least ${params.limit}`;
    case 'exclusiveMinimum':
      return `above ${params.limit}`;
    case 'maximum':
      return `at most ${params.limit}`;
    case 'exclusiveMaximum':
      return `below ${params.limit}`;
    case 'not':
      return 'a figure other than 0';
    case 'minItems':
      return `at least ${elements(params.limit)}`;
    case 'maxItems':
      return `at most ${elements(params.limit)}`;
    case 'minProperties':
    case 'maxProperties':
      return `exactly one of ${fieldsOf(parentSchema)}`;
    default:
      return descriptionOf(parentSchema);
  }
};

/** One of ajv's errors as a fault: where, what the schema wants there, what came. */
export const shapeFault = (error: ErrorObject): Fault => {
  const { instancePath, keyword, parentSchema, data } = error;
  const params = error.params as Params;
  if (keyword === 'required') {
    const missing = fieldOf(fieldOf(parentSchema, 'properties'), params.missingProperty);
    return {
      path: pointerTo(instancePath, params.missingProperty),
      expected: descriptionOf(missing) || 'a value',
      came: 'nothing',
    };
  }
  if (keyword === 'additionalProperties') {
    return {
      path: pointerTo(instancePath, params.additionalProperty),
      expected: `one of the fields ${fieldsOf(parentSchema)}`,
      came: 'a field of another name',
    };
  }
  return { path: instancePath, expected: expectedAt(error), came: show(data) };
};
