/** Builders of JSON Schema 2020-12, the dialect of OpenAPI 3.1. */
export type Schema = Readonly<Record<string, unknown>>;

/** A map of exactly these fields, all of them present. */
export const map = (description: string, properties: Readonly<Record<string, Schema>>): Schema => ({
  type: 'object',
  description,
  required: Object.keys(properties),
  additionalProperties: false,
  properties,
});

export const ref = (name: string): Schema => ({ $ref: `#/components/schemas/${name}` });

export const list = (items: Schema, description?: string): Schema => ({
  type: 'array',
  items,
  ...(description === undefined ? {} : { description }),
});

export const text = (description: string): Schema => ({ type: 'string', description });
export const figure = (description: string): Schema => ({ type: 'number', description });
export const count = (description: string): Schema => ({
  type: 'integer',
  minimum: 0,
  description,
});
export const flag = (description: string): Schema => ({ type: 'boolean', description });
export const word = (description: string, ...words: readonly string[]): Schema => ({
  type: 'string',
  enum: words,
  description,
});
export const exactly = (value: string): Schema => ({ const: value });

/** The same, or null; what null says. */
export const orNull = (schema: Schema, meaning: string): Schema => ({
  anyOf: [schema, { type: 'null' }],
  description: meaning,
});

export const time = (description: string): Schema =>
  figure(`${description}; UTC seconds since 1970-01-01T00:00:00Z`);

/** Only one of the shapes fits: each has its own word in `kind`, or its own constants. */
export const oneOf = (description: string, ...shapes: readonly Schema[]): Schema => ({
  description,
  oneOf: shapes,
});
