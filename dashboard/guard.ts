import type { NextFunction, Request, Response } from 'express';
import { Refusal } from './refusal.js';

/** Longest address answered: a filter and a choice of columns fit several times. */
export const LONGEST_ADDRESS = 8000;

/** Lets through only what a reader of this dashboard sends. A page of another site that resolves its own name to
 *  this machine still sends its own Host and Origin, and is refused by them. */
export function guard(
  hosts: readonly string[],
): (request: Request, response: Response, next: NextFunction) => void {
  const allowed = new Set(['localhost', '127.0.0.1', '[::1]', ...hosts.map((host) => host.toLowerCase())]);
  return (request, response, next) => {
    const host = hostName(request.headers.host);
    if (host === undefined || !allowed.has(host)) {
      throw new Refusal(403, 'This address is not served here', refusedHost(request.headers.host));
    }
    const origin = request.headers.origin;
    if (origin !== undefined && !allowed.has(hostName(origin.replace(/^https?:\/\//, '')) ?? '')) {
      throw new Refusal(
        403,
        'Requests from other sites are refused',
        `The request says it comes from ${cut(origin)}.`,
      );
    }
    if (request.method !== 'GET' && request.method !== 'HEAD') {
      response.setHeader('Allow', 'GET, HEAD');
      throw new Refusal(
        405,
        'Nothing can be changed here',
        `The dashboard only reads; ${request.method} was asked.`,
      );
    }
    if (request.originalUrl.length > LONGEST_ADDRESS) {
      throw new Refusal(
        414,
        'This address is too long',
        `At most ${LONGEST_ADDRESS} characters are answered; this one has ${request.originalUrl.length}. A shorter filter helps.`,
      );
    }
    next();
  };
}

/** The name without its port; undefined for anything that is not a plain host. */
function hostName(host: string | undefined): string | undefined {
  const found = /^(\[[0-9a-f:.]+\]|[a-z0-9.-]+)(?::\d{1,5})?$/.exec((host ?? '').toLowerCase());
  return found?.[1];
}

function refusedHost(host: string | undefined): string {
  return `It was asked for as ${host ? cut(host) : 'nothing'}; open it as localhost or 127.0.0.1.`;
}

function cut(text: string): string {
  return `“${text.length > 80 ? `${text.slice(0, 80)}…` : text}”`;
}
