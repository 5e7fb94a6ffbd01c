import { createHash, timingSafeEqual } from 'node:crypto';
import type { RequestHandler } from 'express';
import { sendProblem } from './problem.ts';

/** The names under which a server that listens on this machine alone may be called. */
const LOOPBACK = new Set(['127.0.0.1', 'localhost', '[::1]']);

/** Whether an address to listen on is reached from this machine only. */
export function isLoopback(host: string): boolean {
  return LOOPBACK.has(host) || host === '::1';
}

const POLICY = [
  "default-src 'self'",
  "img-src 'self' data: blob:",
  "object-src 'none'",
  "base-uri 'none'",
  "form-action 'self'",
  "frame-ancestors 'none'",
].join('; ');

/** Headers that keep the page to its own files, out of frames, and to what the server says a file is. */
export const safeHeaders: RequestHandler = (_request, response, next) => {
  response.set({
    'Content-Security-Policy': POLICY,
    'Cross-Origin-Opener-Policy': 'same-origin',
    'Cross-Origin-Resource-Policy': 'same-origin',
    'Referrer-Policy': 'no-referrer',
    'X-Content-Type-Options': 'nosniff',
    'X-Frame-Options': 'DENY',
  });
  next();
};

/**
 * Refuses a page elsewhere that has its own name point at this machine (DNS rebinding): the browser then sends that
 * name as the host.
 */
export const loopbackNamesOnly: RequestHandler = (request, response, next) => {
  const name = (request.headers.host ?? '').replace(/:\d+$/, '').toLowerCase();
  if (LOOPBACK.has(name)) return next();
  sendProblem(response, 421, 'This server answers to localhost and 127.0.0.1 only.');
};

/** Refuses changes that a page from elsewhere asks a browser to make: a form or a text body needs no permission there. */
export const sameOriginWrites: RequestHandler = (request, response, next) => {
  const { origin, host } = request.headers;
  if (request.method === 'GET' || request.method === 'HEAD' || origin === undefined) return next();
  if (URL.canParse(origin) && new URL(origin).host === host) return next();
  sendProblem(response, 403, 'Changes are taken from pages of this server only.');
};

/** Lets nobody in who does not bring the token, as `Authorization: Bearer …`. */
export function requireToken(token: string): RequestHandler {
  const wanted = digest(`Bearer ${token}`);
  return (request, response, next) => {
    // Digests have one length and are compared in constant time, so that answers tell nothing of the token.
    if (timingSafeEqual(digest(request.headers.authorization ?? ''), wanted)) return next();
    response.set('WWW-Authenticate', 'Bearer');
    sendProblem(response, 401, 'This server wants a token: send it as "Authorization: Bearer …".');
  };
}

function digest(text: string): Buffer {
  return createHash('sha256').update(text).digest();
}
