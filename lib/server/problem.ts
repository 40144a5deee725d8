import 'server-only';
import { ZodError } from 'zod';
import { MeasurementError } from '@/analysis/errors';
import { type Problem, statusOf, UserError, type UserErrorCode } from '@/lib/shared/errors';

const titles: Record<UserErrorCode, string> = {
  invalid: 'Something in the request needs another look',
  unauthorized: 'Not signed in',
  forbidden: 'Not allowed',
  notFound: 'Not found',
  conflict: 'Not possible in this state',
  tooLarge: 'Too large',
  unsupported: 'Kind of file not supported',
  tooMany: 'Too many attempts',
};

/** Field → first sentence; a field of a list is named by its path, such as `checks.0.note`. */
export function fieldsOf(error: ZodError): Record<string, string> {
  const fields: Record<string, string> = {};
  for (const issue of error.issues) {
    fields[issue.path.join('.') || 'body'] ??= issue.message;
  }
  return fields;
}

/** Turns anything thrown into RFC 9457 problem details; what isn't meant for people is logged and answered plainly. */
export function problemOf(error: unknown): Problem {
  if (error instanceof UserError) return problem(error.code, error.message, error.fields);
  if (error instanceof ZodError) {
    const fields = fieldsOf(error);
    return problem('invalid', Object.values(fields).join(' '), fields);
  }
  if (error instanceof MeasurementError) return problem('invalid', error.message);
  console.error(error);
  return {
    type: 'about:blank',
    title: 'Something went wrong',
    status: 500,
    detail:
      'The server could not finish this. Nothing you entered caused it; try again in a moment.',
  };
}

export function problemResponse(error: unknown): Response {
  const body = problemOf(error);
  return new Response(JSON.stringify(body), {
    status: body.status,
    headers: { 'content-type': 'application/problem+json', 'cache-control': 'no-store' },
  });
}

function problem(code: UserErrorCode, detail: string, fields?: Record<string, string>): Problem {
  const base = { type: 'about:blank', title: titles[code], status: statusOf[code], detail };
  return fields ? { ...base, fields } : base;
}
