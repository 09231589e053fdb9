/** One code, one HTTP status. The message is for the person: what happened, what it means, what to do. */
export const ERROR_STATUS = {
  BAD_INPUT: 400,
  NOT_SIGNED_IN: 401,
  WRONG_PASSWORD: 401,
  NOT_ALLOWED: 403,
  NOT_FOUND: 404,
  CHANGED_MEANWHILE: 409,
  WRONG_STATE: 409,
  ALREADY_THERE: 409,
  TOO_LARGE: 413,
  NOT_A_PICTURE: 415,
  CANNOT_FIT: 422,
  TOO_MANY: 429,
  BROKEN: 500,
  STORE_DOWN: 503,
  DATABASE_DOWN: 503,
  BUSY: 503,
} as const;
export type ErrorCode = keyof typeof ERROR_STATUS;

export class AppError extends Error {
  readonly code: ErrorCode;
  /** Field name -> sentence, for forms. */
  readonly fields: Record<string, string> | undefined;
  constructor(code: ErrorCode, message: string, fields?: Record<string, string>) {
    super(message);
    this.name = 'AppError';
    this.code = code;
    this.fields = fields;
  }
  get status(): number {
    return ERROR_STATUS[this.code];
  }
}

/** What a server action answers. Never throws across the wire. */
export type ActionAnswer<T> =
  { ok: true; value: T } | { ok: false; code: ErrorCode; message: string; fields?: Record<string, string> };
