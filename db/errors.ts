/** Every expected fault has one code here; the table gives its HTTP status and the sentence a person reads. */
export const ERRORS = {
  'not-signed-in': { status: 401, sentence: 'Please sign in; what you typed stays on this page.' },
  'sign-in-failed': { status: 401, sentence: 'Login name or password is not right.' },
  forbidden: { status: 403, sentence: 'Your role here does not allow this. Ask an owner of the notebook.' },
  'foreign-origin': { status: 403, sentence: 'This request came from another site and was refused.' },
  'not-found': { status: 404, sentence: 'There is nothing here that you may see.' },
  'bad-input': {
    status: 400,
    sentence: 'Something in the form is not right. The remark beside the field says what.',
  },
  conflict: {
    status: 409,
    sentence: 'Somebody changed this in the meantime. Reload the page and try again.',
  },
  locked: { status: 409, sentence: 'This entry is no longer a draft, so it cannot be edited.' },
  'too-big': { status: 413, sentence: 'The file is larger than allowed.' },
  'wrong-type': { status: 415, sentence: 'The content of this file is not what its name says.' },
  unreadable: { status: 422, sentence: 'The file could not be read as trajectories.' },
  'slow-down': { status: 429, sentence: 'Too many attempts. Wait a little and try again.' },
  'storage-down': {
    status: 503,
    sentence: 'The store cannot be reached at the moment. Nothing was changed; try again.',
  },
  unexpected: { status: 500, sentence: 'Something went wrong on our side. Nothing was changed.' },
} as const;

export type ErrorCode = keyof typeof ERRORS;

/**
 * A fault with a known meaning. `message` is for the log; `sentence` (by default the table's) is for the person;
 * `fields` names what is wrong with each form field. `cause` never leaves the server.
 */
export class AppError extends Error {
  readonly code: ErrorCode;
  readonly sentence: string;
  readonly fields: Readonly<Record<string, string>>;

  constructor(
    code: ErrorCode,
    options: { message?: string; sentence?: string; fields?: Record<string, string>; cause?: unknown } = {},
  ) {
    super(options.message ?? options.sentence ?? ERRORS[code].sentence, { cause: options.cause });
    this.name = 'AppError';
    this.code = code;
    this.sentence = options.sentence ?? ERRORS[code].sentence;
    this.fields = options.fields ?? {};
  }

  get status(): number {
    return ERRORS[this.code].status;
  }
}

/** What an action or a route answers when it could not do what was asked. */
export interface Refusal {
  readonly code: ErrorCode;
  readonly sentence: string;
  readonly fields: Readonly<Record<string, string>>;
  /** Identifies the line in the server's log; only on unexpected faults. */
  readonly incident?: string;
}
