/** One thing that is wrong with what was sent: where, what stood there, what would be right. */
export interface Problem {
  /** Field path of a form or body (`spikes.2.amount`), or sheet and cell of a workbook (`Carbon!F18`). */
  readonly path: string;
  readonly found?: string;
  readonly expected?: string;
  /** A sentence for the person who can mend it. */
  readonly message: string;
}

/** A failure that the program foresees: its message may be shown to the person, unlike that of any other error. */
export abstract class ExpectedError extends Error {
  /** The HTTP status that this failure is answered with. */
  abstract readonly status: number;
  /** A stable word for programs that read the answer. */
  abstract readonly code: string;
}

/** There is no such thing, or it is not this person's to see: the two answer alike. */
export class NotFound extends ExpectedError {
  override readonly name = 'NotFound';
  readonly status = 404;
  readonly code = 'not-found';
  constructor(message = 'There is nothing at this address that you can open.') {
    super(message);
  }
}

/** Nobody is signed in, and the thing asked for needs somebody. */
export class Unauthenticated extends ExpectedError {
  override readonly name = 'Unauthenticated';
  readonly status = 401;
  readonly code = 'unauthenticated';
  constructor(message = 'Sign in first.') {
    super(message);
  }
}

/** The person may see the thing, but their role may not do this to it. */
export class Forbidden extends ExpectedError {
  override readonly name = 'Forbidden';
  readonly status = 403;
  readonly code = 'forbidden';
  constructor(message = 'Your role in this lab does not include this.') {
    super(message);
  }
}

/** What was sent cannot be taken as it is. Carries every problem found, not only the first. */
export class Invalid extends ExpectedError {
  override readonly name = 'Invalid';
  readonly status = 400;
  readonly code = 'invalid';
  readonly problems: readonly Problem[];
  /** @param problems at least one; @param message defaults to the sentence of the only problem, or a count of them. */
  constructor(problems: readonly Problem[], message?: string) {
    super(
      message ?? (problems.length === 1 ? problems[0]!.message : `${problems.length} entries need mending.`)
    );
    this.problems = problems;
  }

  /** One problem at one place. */
  static at(
    path: string,
    message: string,
    detail: Readonly<{ found?: string; expected?: string }> = {}
  ): Invalid {
    return new Invalid([{ path, message, ...detail }]);
  }
}

/** More was sent than is taken. */
export class TooLarge extends ExpectedError {
  override readonly name = 'TooLarge';
  readonly status = 413;
  readonly code = 'too-large';
}

/** What was sent is of a kind that is not taken here. */
export class Unsupported extends ExpectedError {
  override readonly name = 'Unsupported';
  readonly status = 415;
  readonly code = 'unsupported';
}

/** A data file was received and kept, and cannot be stored as it is. Carries every problem, by sheet and cell. */
export class FileProblems extends ExpectedError {
  override readonly name = 'FileProblems';
  readonly status = 422;
  readonly code = 'file-problems';
  readonly problems: readonly Problem[];
  /** The import that keeps the file. */
  readonly importId: string;
  /** @param problems errors first; may hold questions and notes beside them */
  constructor(importId: string, problems: readonly Problem[], message: string) {
    super(message);
    this.importId = importId;
    this.problems = problems;
  }
}

/** The thing changed, or its state changed, since the person looked at it. */
export class Conflict extends ExpectedError {
  override readonly name = 'Conflict';
  readonly status = 409;
  readonly code = 'conflict';
  /** What is stored now, as plain data, so that both can be shown side by side. */
  readonly current: unknown;
  constructor(message: string, current: unknown = null) {
    super(message);
    this.current = current;
  }
}

/** Too many attempts in a span of time. */
export class TooManyRequests extends ExpectedError {
  override readonly name = 'TooManyRequests';
  readonly status = 429;
  readonly code = 'too-many-requests';
  readonly retryAfterSeconds: number;
  constructor(retryAfterSeconds: number, message?: string) {
    const seconds = Math.max(1, Math.ceil(retryAfterSeconds));
    super(
      message ??
        `Too many attempts. Try again in ${seconds < 90 ? `${seconds} s` : `${Math.ceil(seconds / 60)} min`}.`
    );
    this.retryAfterSeconds = seconds;
  }
}
