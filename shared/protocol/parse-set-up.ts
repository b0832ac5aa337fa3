/** Bodies that carry a site file; what the file says is judged elsewhere. */
import type { Fault } from '../model/fault.ts';
import { isMap } from '../pipeline/1-decode/frame.ts';
import { show } from '../pipeline/1-decode/topics.ts';
import type { SetUpRequest } from './http.ts';
import { reportStrangers, type Parsed, type Report } from './parse.ts';

const reporting = () => {
  const faults: Fault[] = [];
  const report: Report = (path, expected, came) =>
    faults.push({ path, expected, came: show(came) });
  return { faults, report };
};

const PREVIEW_FIELDS = ['document'];
const REQUEST_FIELDS = ['document', 'basedOn', 'author', 'reason'];

export const parseSetUpPreview = (body: unknown): Parsed<Pick<SetUpRequest, 'document'>> => {
  const { faults, report } = reporting();
  if (!isMap(body)) {
    report('/', `a map of ${PREVIEW_FIELDS.join(', ')}`, body);
    return { ok: false, faults };
  }
  if (!isMap(body.document)) report('/document', 'a site file: a map', body.document);
  reportStrangers(body, PREVIEW_FIELDS, '', report);
  return faults.length === 0
    ? { ok: true, value: { document: body.document } }
    : { ok: false, faults };
};

export const parseSetUpRequest = (body: unknown): Parsed<SetUpRequest> => {
  const { faults, report } = reporting();
  if (!isMap(body)) {
    report('/', `a map of ${REQUEST_FIELDS.join(', ')}`, body);
    return { ok: false, faults };
  }
  const { document, basedOn, author, reason } = body;
  if (!isMap(document)) report('/document', 'a site file: a map', document);
  if (typeof author !== 'string') report('/author', 'text: who changes the set-up', author);
  if (typeof reason !== 'string') report('/reason', 'text: why', reason);
  const revision = typeof basedOn === 'number' && Number.isInteger(basedOn) ? basedOn : null;
  if (revision === null) report('/basedOn', 'the revision that it was made from', basedOn);
  reportStrangers(body, REQUEST_FIELDS, '', report);
  if (faults.length > 0 || revision === null) return { ok: false, faults };
  if (typeof author !== 'string' || typeof reason !== 'string') return { ok: false, faults };
  return { ok: true, value: { document, basedOn: revision, author, reason } };
};
