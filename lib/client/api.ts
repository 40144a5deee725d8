import type { Problem } from '@/lib/shared/errors';

/** What the server answered instead of the thing asked for; its message is meant to be read. */
export class ApiError extends Error {
  readonly status: number;
  readonly fields: Record<string, string>;

  constructor(status: number, message: string, fields: Record<string, string> = {}) {
    super(message);
    this.name = 'ApiError';
    this.status = status;
    this.fields = fields;
  }
}

const away = 'The server did not answer. Check the connection and try again.';

/** One call of the API: JSON in, JSON out, problems as ApiError. */
export async function call<T>(path: string, method = 'GET', body?: unknown): Promise<T> {
  const init: RequestInit =
    body === undefined
      ? { method }
      : { method, body: JSON.stringify(body), headers: { 'content-type': 'application/json' } };
  const response = await fetch(path, init).catch(() => {
    throw new ApiError(0, away);
  });
  if (!response.ok) throw problemOf(response.status, await response.text());
  if (response.status === 204) return undefined as T;
  return (await response.json()) as T;
}

/** Reads an RFC 9457 answer; anything else becomes a plain sentence. */
export function problemOf(status: number, text: string): ApiError {
  try {
    const problem = JSON.parse(text) as Partial<Problem>;
    const message = problem.detail ?? problem.title;
    if (message) return new ApiError(status, message, problem.fields);
  } catch {
    // Not JSON: a proxy's page, say.
  }
  return new ApiError(status, status >= 500 ? 'Something went wrong on the server.' : away);
}

/** The sentence to show for anything thrown. */
export function sentenceOf(error: unknown): string {
  return error instanceof Error ? error.message : away;
}
