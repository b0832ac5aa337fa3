import { Ajv2020 } from 'ajv/dist/2020.js';
import { openApi } from '../../server/http/openapi/document.ts';

const ROOT = '#/components/schemas/';

/** Validators of the document's schemas, made by ajv in strict mode under JSON Schema 2020-12. */
export const schemaValidators = () => {
  const { schemas } = openApi('0.0.0').components;
  const ajv = new Ajv2020({ strict: true, allErrors: true, strictRequired: false });
  const text = JSON.stringify(schemas).replaceAll(ROOT, 'api:');
  const named = JSON.parse(text) as Record<string, object>;
  for (const [name, schema] of Object.entries(named)) {
    ajv.addSchema({ ...schema, $id: `api:${name}` });
  }
  /** What is wrong with the value by the schema; an empty text if nothing is. */
  return (name: string, value: unknown): string => {
    const validate = ajv.getSchema(`api:${name}`);
    if (!validate) throw new Error(`${name}: the document has no such schema`);
    return validate(value) ? '' : ajv.errorsText(validate.errors);
  };
};
