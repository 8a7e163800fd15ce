import type { ErrorRequestHandler, Response } from 'express';
import { ZodError } from 'zod';
import type { Problem } from '#shared/api/common';

/** An answer other than success: one vocabulary, rendered in one place as RFC 9457 problem details. */
export class Refusal extends Error {
  constructor(
    readonly status: number,
    readonly code: string,
    readonly title: string,
    readonly detail?: string,
    readonly errors?: Problem['errors'],
  ) {
    super(detail ?? title);
  }
}

/** One answer for what does not exist and for what the caller may not see. */
export const notFound = () => new Refusal(404, 'not-found', 'Not found', 'There is nothing at this address, or you may not see it.');
export const signInFirst = () => new Refusal(401, 'sign-in', 'Sign in first', 'Your session has ended or you have not signed in.');
export const forbidden = (detail: string) => new Refusal(403, 'forbidden', 'Not yours to do', detail);
export const conflict = (detail: string) => new Refusal(409, 'changed-meanwhile', 'Changed meanwhile', detail);
export const invalid = (field: string, message: string) => new Refusal(422, 'invalid', 'Some fields need a change', message, [{ field, message }]);
export const unreadable = (code: string, detail: string) => new Refusal(422, code, 'The file cannot be used', detail);

function fromZod(error: ZodError): Refusal {
  const errors = error.issues.map((issue) => ({ field: issue.path.join('.') || 'body', message: issue.message }));
  return new Refusal(422, 'invalid', 'Some fields need a change', errors.map(({ field, message }) => `${field}: ${message}`).join('; '), errors);
}

/** Errors of the body parser and the router carry a status; what they say is for people too. */
function fromExpress(error: { status?: unknown; type?: unknown }): Refusal | null {
  if (error.status === 413) return new Refusal(413, 'too-large', 'Too large', 'The request is larger than this address takes.');
  if (error.type === 'entity.parse.failed') return new Refusal(400, 'malformed', 'Malformed', 'The body is not valid JSON.');
  if (error instanceof URIError) return notFound();
  if (error.status === 404) return notFound();
  if (error.status === 416) return new Refusal(416, 'range', 'No such range', 'The file is shorter than the range that was asked for.');
  if (typeof error.status === 'number' && error.status >= 400 && error.status < 500) return new Refusal(error.status, 'malformed', 'Malformed', 'The request cannot be read.');
  return null;
}

/** What PostgreSQL refuses: a policy's refusal answers like a missing row. */
function fromDatabase(error: { code?: unknown; original?: { code?: string } }): Refusal | null {
  const code = error.original?.code ?? error.code;
  if (code === '42501' || code === '22P02') return notFound();
  if (code === '23503') return notFound();
  if (code === '23505') return conflict('The same thing is here already.');
  if (code === '23514' || code === '22001' || code === '22021' || code === '22P05') return new Refusal(422, 'invalid', 'Some fields need a change', 'A value is outside what is allowed.');
  return null;
}

export function asRefusal(error: unknown): Refusal | null {
  if (error instanceof Refusal) return error;
  if (error instanceof ZodError) return fromZod(error);
  if (typeof error !== 'object' || error === null) return null;
  return fromDatabase(error) ?? fromExpress(error);
}

export function sendRefusal(response: Response, refusal: Refusal): void {
  const body: Problem = {
    type: 'about:blank', title: refusal.title, status: refusal.status, code: refusal.code,
    ...(refusal.detail ? { detail: refusal.detail } : {}), ...(refusal.errors ? { errors: refusal.errors } : {}),
  };
  response.status(refusal.status).type('application/problem+json').send(JSON.stringify(body));
}

/** The one place where an error becomes an answer. `report` gets what nobody foresaw. */
export function renderErrors(report: (error: unknown, path: string) => void): ErrorRequestHandler {
  return (error, request, response, next) => {
    if (response.headersSent) {
      next(error);
      return;
    }
    const refusal = asRefusal(error);
    if (!refusal) report(error, request.path);
    sendRefusal(response, refusal ?? new Refusal(500, 'failed', 'Something failed here', 'Crosstie could not do this. It has been noted; try again.'));
  };
}
