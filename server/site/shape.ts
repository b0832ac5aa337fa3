import { readFileSync } from 'node:fs';
import { Ajv2020, type ErrorObject } from 'ajv/dist/2020.js';
import formats from 'ajv-formats';
import type { Fault } from '../../shared/model/fault.ts';
import { packageFile } from '../package-root.ts';
import { shapeFault } from './shape-words.ts';

const readSchema = (): object =>
  JSON.parse(readFileSync(packageFile('docs', 'site.schema.json'), 'utf8')) as object;

const ajv = new Ajv2020({ allErrors: true, verbose: true, strictTypes: false });
formats.default(ajv, ['date-time']);
const validate = ajv.compile(readSchema());

/** `if` only says that a `then` failed, which speaks for itself. */
const speaks = ({ keyword }: ErrorObject): boolean => keyword !== 'if';

/** Everything in which a file departs from the published schema: one fault a place. */
export const shapeFaults = (json: unknown): Fault[] => {
  if (validate(json)) return [];
  const faults = new Map<string, Fault>();
  for (const fault of (validate.errors ?? []).filter(speaks).map(shapeFault)) {
    if (!faults.has(fault.path)) faults.set(fault.path, fault);
  }
  return [...faults.values()];
};
