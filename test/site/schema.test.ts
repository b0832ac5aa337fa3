import { readFileSync } from 'node:fs';
import { Ajv2020 } from 'ajv/dist/2020.js';
import formats from 'ajv-formats';
import { describe, expect, test } from 'vitest';
import { NAME } from '../../shared/pipeline/1-decode/topics.ts';
import { demo } from './edit.ts';

type Schema = { readonly [key: string]: unknown };

const text = readFileSync(new URL('../../docs/site.schema.json', import.meta.url), 'utf8');
const schema = JSON.parse(text) as Schema & { $defs: Record<string, Schema> };

const compile = () => {
  const ajv = new Ajv2020({ strictTypes: false });
  formats.default(ajv, ['date-time']);
  return ajv.compile(schema);
};

const isSchema = (value: unknown): value is Schema => typeof value === 'object' && value !== null;

/** Every field that the schema knows, with the schema of it; conditions left out. */
const fields = (at: Schema): [name: string, schema: Schema][] =>
  Object.entries(at).flatMap(([keyword, value]) => {
    if (keyword === 'if' || !isSchema(value)) return [];
    const own =
      keyword === 'properties'
        ? Object.entries(value).flatMap(([name, s]): [string, Schema][] =>
            isSchema(s) ? [[name, s]] : [],
          )
        : [];
    return [...own, ...fields(value)];
  });

/** Figures without a unit, and those whose unit a field beside them names. */
const UNITLESS = [
  'gauge_factor',
  'quoted_gauge_factor',
  'poisson',
  'zero_count',
  'highest_limit_share_of_yield',
];
const UNIT_BESIDE = [
  'raw',
  'noise',
  'value',
  'deadband',
  'rated_signal',
  'rated_value',
  'zero_signal',
];
const UNIT =
  /_(m|mm|cm2|cm3|cm4|s|kN|V|Cel|percent|percent_per_100_K|MPa|GPa|ohm|microstrain_per_K|per_count|mV_per_V)$/;

describe('docs/site.schema.json', () => {
  test('is a JSON Schema of the draft 2020-12', () => {
    expect(schema.$schema).toBe('https://json-schema.org/draft/2020-12/schema');
    const ajv = new Ajv2020();
    expect(ajv.validateSchema(schema), ajv.errorsText()).toBe(true);
  });

  test('names no host', () => expect(schema.$id).toMatch(/^urn:/));

  test('takes the demo site, and not a file without nodes', () => {
    const validate = compile();
    expect(validate(demo)).toBe(true);
    expect(validate({ ...(demo as object), nodes: undefined })).toBe(false);
  });

  test('describes every field', () => {
    const bare = fields(schema).filter(([, s]) => typeof s.description !== 'string');
    expect(bare.map(([name]) => name)).toEqual([]);
    expect(fields(schema).length).toBeGreaterThan(90);
  });

  test('has the unit of every figure in its name or in a field beside it', () => {
    const figures = fields(schema).filter(([, s]) => s.type === 'number');
    const open = figures
      .map(([name]) => name)
      .filter((name) => !UNIT.test(name) && ![...UNITLESS, ...UNIT_BESIDE].includes(name));
    expect(open).toEqual([]);
    expect(figures.length).toBeGreaterThan(25);
  });

  test('allows the names that the wire allows', () => {
    const id = schema.$defs.id?.pattern;
    expect(id).toBe(NAME.source);
  });

  test('lets no unknown field in anywhere', () => {
    const open = Object.entries(schema.$defs).filter(
      ([, s]) => isSchema(s.properties) && s.additionalProperties !== false && !s.allOf,
    );
    expect(open.map(([name]) => name)).toEqual([]);
  });
});
