/** What may stand where in a site file, read off its published schema. */
import siteSchema from '../../../docs/site.schema.json' with { type: 'json' };
import { isMapOf, type Json, type JsonMap, type Path } from './tree.ts';

/** The part of JSON Schema (draft 2020-12) that the site file's schema uses. */
export interface Schema {
  readonly description?: string;
  readonly type?: string | readonly string[];
  readonly enum?: readonly string[];
  readonly const?: Json;
  readonly $ref?: string;
  readonly $defs?: Readonly<Record<string, Schema>>;
  readonly properties?: Readonly<Record<string, Schema | false>>;
  readonly required?: readonly string[];
  readonly items?: Schema;
  readonly minItems?: number;
  readonly maxItems?: number;
  readonly allOf?: readonly Schema[];
  readonly if?: Schema;
  readonly then?: Schema;
  readonly else?: Schema;
}

export interface Field {
  readonly key: string;
  readonly schema: Schema;
  readonly required: boolean;
}

const ROOT = siteSchema as unknown as Schema;

/** With what it refers to; what it says itself goes before. */
const resolved = (schema: Schema): Schema => {
  if (schema.$ref === undefined) return schema;
  const { $ref, ...own } = schema;
  const target = ROOT.$defs?.[$ref.replace('#/$defs/', '')];
  if (!target) throw new RangeError(`schema: expected a $ref within it, came ${$ref}`);
  return merged(resolved(target), own);
};

/** A branch's name for a kind says less than what stands before. */
const bare = ({ description: _, ...rest }: Schema): Schema => rest;

const merged = (base: Schema, over: Schema): Schema => {
  const properties: Record<string, Schema | false> = { ...base.properties };
  for (const [key, own] of Object.entries(over.properties ?? {})) {
    const before = properties[key];
    properties[key] = own !== false && before ? { ...own, ...before, ...bare(own) } : own;
  }
  const required = [...(base.required ?? []), ...(over.required ?? [])];
  return { ...base, ...over, properties, required };
};

const holds = (condition: Schema, value: Json | undefined): boolean =>
  Object.entries(condition.properties ?? {}).every(([key, wanted]) => {
    const found = isMapOf(value) ? value[key] : undefined;
    if (wanted === false) return found === undefined;
    return wanted.enum ? wanted.enum.some((one) => one === found) : wanted.const === found;
  });

/** A schema with the conditions that `value` meets worked into it. */
const shapeOf = (schema: Schema, value: Json | undefined): Schema => {
  const whole = resolved(schema);
  const conditions = [...(whole.allOf ?? []), ...(whole.if ? [whole] : [])];
  return conditions.reduce((shape, condition) => {
    const branch = condition.if && holds(condition.if, value) ? condition.then : condition.else;
    return branch ? merged(shape, resolved(branch)) : shape;
  }, whole);
};

/** The fields of a map as it stands, in the schema's order. */
export const fieldsOf = (schema: Schema, value: Json | undefined): Field[] => {
  const { properties = {}, required = [] } = shapeOf(schema, value);
  return Object.entries(properties).flatMap(([key, field]) =>
    field === false ? [] : [{ key, schema: resolved(field), required: required.includes(key) }],
  );
};

/** The schema of a place in a document; null: no such place. */
export const schemaAt = (document: Json, path: Path): Schema | null => {
  let schema: Schema = ROOT;
  let value: Json | undefined = document;
  for (const key of path) {
    const shape = shapeOf(schema, value);
    const isPlace = shape.items !== undefined && /^\d+$/.test(key);
    const next = isPlace ? shape.items : shape.properties?.[key];
    if (!next) return null;
    schema = resolved(next);
    value = isPlace
      ? (value as readonly Json[] | undefined)?.[Number(key)]
      : isMapOf(value)
        ? value[key]
        : undefined;
  }
  return schema;
};

export const isType = ({ type }: Schema, name: string): boolean => [type].flat().includes(name);

/** What a new one begins with: choices at their first, figures and texts left for the person. */
export const blankOf = (schema: Schema): Json | undefined => {
  const whole = resolved(schema);
  if (whole.const !== undefined) return whole.const;
  if (whole.enum) return whole.enum[0];
  if (isType(whole, 'boolean')) return false;
  if (whole.items) {
    const { items, minItems = 0 } = whole;
    const element = blankOf(items) ?? (isType(resolved(items), 'number') ? 0 : '');
    return Array.from({ length: minItems }, () => element);
  }
  return isType(whole, 'object') && !isType(whole, 'string') ? filled(whole, {}) : undefined;
};

/** With every required field in it that can be begun without the person. */
const filled = (schema: Schema, value: JsonMap): JsonMap => {
  let map: JsonMap = value;
  for (const { key, schema: field, required } of fieldsOf(schema, map)) {
    if (!required || map[key] !== undefined) continue;
    const blank = blankOf(field);
    if (blank !== undefined) map = { ...map, [key]: blank };
  }
  return Object.keys(map).length === Object.keys(value).length ? map : filled(schema, map);
};

/** Of another kind: what the new kind has no field for goes, what it needs begins. */
export const ofKind = (schema: Schema, value: JsonMap, kind: string): JsonMap => {
  const next: JsonMap = { ...value, kind };
  const known = new Set(fieldsOf(schema, next).map(({ key }) => key));
  const kept = Object.fromEntries(Object.entries(next).filter(([key]) => known.has(key)));
  return filled(schema, kept);
};

/** Is what stands there a map with fields of its own? */
export const isMapSchema = (schema: Schema): boolean => {
  const { type, properties = {} } = resolved(schema);
  return [type].flat().includes('object') && Object.keys(properties).length > 0;
};
