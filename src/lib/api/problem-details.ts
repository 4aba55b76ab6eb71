import type { Refusal, RefusalCode } from '$lib/domain/refusal';

const STATUS: Record<RefusalCode, { status: number; title: string }> = {
  'not-signed-in': { status: 401, title: 'Not signed in' },
  forbidden: { status: 403, title: 'Not allowed' },
  'not-found': { status: 404, title: 'Not found' },
  conflict: { status: 409, title: 'Conflict' },
  invalid: { status: 422, title: 'Not valid' },
  'too-large': { status: 413, title: 'Too large' },
  'too-many': { status: 429, title: 'Too many requests' },
  unsupported: { status: 415, title: 'Not this kind of content' },
  unavailable: { status: 503, title: 'Not available now' },
};

export const statusOf = (code: RefusalCode): number => STATUS[code].status;

/** RFC 9457 problem details. `type` is a fragment of the API's own page, so that it can be looked up. */
export interface ProblemDetails {
  type: string;
  title: string;
  status: number;
  detail: string;
  instance: string;
  mend?: string;
  where?: string;
}

export function problemDetails(refusal: Refusal, instance: string): ProblemDetails {
  const { status, title } = STATUS[refusal.code];
  return {
    type: `/api/v1#${refusal.code}`,
    title,
    status,
    detail: refusal.what,
    instance,
    ...(refusal.mend && { mend: refusal.mend }),
    ...(refusal.where && { where: refusal.where }),
  };
}

/** A refusal as an HTTP response of type application/problem+json. */
export function answerRefusal(refusal: Refusal, instance: string): Response {
  const details = problemDetails(refusal, instance);
  const headers: Record<string, string> = { 'content-type': 'application/problem+json', 'cache-control': 'no-store' };
  if (details.status === 401) headers['www-authenticate'] = 'Bearer';
  if (details.status === 503) headers['retry-after'] = '10';
  return new Response(JSON.stringify(details), { status: details.status, headers });
}
