import type { RequestHandler } from 'express';
import { hostAllowed, sameOrigin } from '../../shared/protocol/origin.ts';
import { sendProblem } from './problem.ts';

/** CSP Level 3: everything from here, nothing inline, nobody frames us. */
const CONTENT_SECURITY_POLICY = [
  "default-src 'none'",
  "script-src 'self'",
  "style-src 'self'",
  "img-src 'self' data:",
  "font-src 'self'",
  "connect-src 'self'",
  "manifest-src 'self'",
  "base-uri 'none'",
  "form-action 'none'",
  "frame-ancestors 'none'",
].join('; ');

export const headers =
  (simulated: boolean): RequestHandler =>
  (_request, response, next) => {
    response.set({
      'Content-Security-Policy': CONTENT_SECURITY_POLICY,
      'Cross-Origin-Opener-Policy': 'same-origin',
      'Cross-Origin-Resource-Policy': 'same-origin',
      'Referrer-Policy': 'no-referrer',
      'X-Content-Type-Options': 'nosniff',
      'X-Simulated': simulated ? 'yes' : 'no',
    });
    next();
  };

/** Answers only to its own names, RFC 9110 §7.4 and §15.5.20. */
export const ownHost =
  (listensOn: string): RequestHandler =>
  (request, response, next) => {
    const { host } = request.headers;
    if (hostAllowed(host, listensOn)) return next();
    sendProblem(response, 421, 'This server does not answer to that name.', [
      {
        path: 'Host',
        expected: 'localhost or the address that the server listens on',
        came: host ?? 'nothing',
      },
    ]);
  };

const READING: readonly string[] = ['GET', 'HEAD', 'OPTIONS'];

/**
 * Changes come from our own page or from a program, never from another site's
 * page: browsers say whose page it was in Sec-Fetch-Site (Fetch Metadata) and Origin.
 */
export const ownPage: RequestHandler = (request, response, next) => {
  if (READING.includes(request.method)) return next();
  const site = request.headers['sec-fetch-site'];
  const { origin, host } = request.headers;
  if (site !== undefined && site !== 'same-origin' && site !== 'none') {
    return sendProblem(response, 403, 'Changes are not taken from another site.', [
      { path: 'Sec-Fetch-Site', expected: 'same-origin', came: String(site) },
    ]);
  }
  if (origin !== undefined && !sameOrigin(origin, host)) {
    return sendProblem(response, 403, 'Changes are not taken from another site.', [
      { path: 'Origin', expected: `the origin of ${host ?? 'this server'}`, came: origin },
    ]);
  }
  next();
};

/** The only body that is read: no form of another site can send this type (Fetch §4.8). */
export const jsonOnly: RequestHandler = (request, response, next) => {
  const came = request.headers['content-type'] ?? 'nothing';
  if (/^application\/json *(;|$)/i.test(came)) return next();
  sendProblem(response, 415, 'The body has to be JSON.', [
    { path: 'Content-Type', expected: 'application/json', came },
  ]);
};
