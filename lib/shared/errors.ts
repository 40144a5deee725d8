/** What went wrong and which HTTP status says so; the one table from which both the type and the answer come. */
export const statusOf = {
  invalid: 422,
  unauthorized: 401,
  forbidden: 403,
  notFound: 404,
  conflict: 409,
  tooLarge: 413,
  unsupported: 415,
  tooMany: 429,
} as const;
export type UserErrorCode = keyof typeof statusOf;

/** The one error a person is meant to read: its message is a sentence that says what to do. Becomes an RFC 9457 problem. */
export class UserError extends Error {
  readonly code: UserErrorCode;
  /** Field → sentence, for forms. */
  readonly fields: Record<string, string> | undefined;

  constructor(code: UserErrorCode, message: string, fields?: Record<string, string>) {
    super(message);
    this.name = 'UserError';
    this.code = code;
    this.fields = fields;
  }
}

/** RFC 9457 problem details as the API answers them. */
export interface Problem {
  type: string;
  title: string;
  status: number;
  detail: string;
  fields?: Record<string, string>;
}
