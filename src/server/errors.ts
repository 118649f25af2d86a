/** Every way in which a service refuses, with the HTTP status that it answers. */
export const errorCodes = {
  invalid: { status: 400, title: 'Not understood' },
  unsigned: { status: 401, title: 'Sign in first' },
  forbidden: { status: 403, title: 'Not yours to do' },
  not_found: { status: 404, title: 'Not found' },
  conflict: { status: 409, title: 'Not possible now' },
  taken: { status: 409, title: 'Somebody was quicker' },
  too_large: { status: 413, title: 'Too large' },
  refused: { status: 422, title: 'Refused' },
  too_many: { status: 429, title: 'Too many tries' },
  provider: { status: 502, title: 'The payment provider did not answer' },
  internal: { status: 500, title: 'Something went wrong here' },
} as const satisfies Record<string, { status: number; title: string }>;

export type ErrorCode = keyof typeof errorCodes;

/** Field name → one sentence for the person who filled it in. */
export type FieldErrors = Record<string, string>;

/** The one error that services throw; the message is a sentence for the person who asked. */
export class DomainError extends Error {
  constructor(
    readonly code: ErrorCode,
    message: string,
    readonly fields: FieldErrors = {},
  ) {
    super(message);
    this.name = 'DomainError';
  }
}

/** Problem details as RFC 9457 has them, with `fields` as our extension member. */
export interface Problem {
  type: string;
  title: string;
  status: number;
  detail: string;
  instance: string;
  fields?: FieldErrors;
}

/** The problem document of an error; what is not a {@link DomainError} gets a general sentence. */
export function problemOf(error: unknown, requestId: string): Problem {
  const known = error instanceof DomainError ? error : undefined;
  const code = known?.code ?? 'internal';
  const { status, title } = errorCodes[code];
  return {
    type: `urn:rigwright:problem:${code.replaceAll('_', '-')}`,
    title,
    status,
    detail:
      known?.message ??
      `It was not done, and nothing was changed. Please try again; if it stays, give the works this number: ${requestId}.`,
    instance: `urn:rigwright:request:${requestId}`,
    ...(known !== undefined && Object.keys(known.fields).length > 0 ? { fields: known.fields } : {}),
  };
}
