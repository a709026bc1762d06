import { error as kitError, type HandleServerError } from '@sveltejs/kit';
import { Conflict, ExpectedError, FileProblems, Invalid, TooManyRequests } from '../errors';
import { logger } from '../logger';
import { requestContext } from '../request-context';

/** A failure as it goes over HTTP: the status, and what pages and programs are told. */
export interface HttpFailure {
  readonly status: number;
  readonly body: App.Error;
}

/** Sentences for what the framework refuses by itself. */
const refusals: Readonly<Record<number, string>> = {
  400: 'The request cannot be read as it was sent.',
  403: 'This request came from another site and was refused.',
  404: 'There is nothing at this address that you can open.',
  405: 'This address does not take requests of that kind.',
  413: 'What was sent is larger than this server takes.',
  415: 'What was sent is not of a kind that this address takes.'
};

/** What a person reads when something failed that nobody foresaw. The log line with the same id has the rest. */
const unforeseen = 'Something failed on our side. Nothing that was stored before is lost.';

/**
 * The one mapping from failures to HTTP. Messages of typed errors are meant for the person and are passed on;
 * of any other error only the id is told under which the log has it.
 */
export function toHttp(failure: unknown): HttpFailure {
  if (!(failure instanceof ExpectedError)) {
    return {
      status: 500,
      body: { message: unforeseen, code: 'unforeseen', errorId: requestContext()?.requestId }
    };
  }
  const { status, message, code } = failure;
  return {
    status,
    body: {
      message,
      code,
      ...(failure instanceof Invalid || failure instanceof FileProblems
        ? { problems: failure.problems }
        : {}),
      ...(failure instanceof FileProblems ? { importId: failure.importId } : {}),
      ...(failure instanceof Conflict && failure.current !== null ? { current: failure.current } : {}),
      ...(failure instanceof TooManyRequests ? { retryAfterSeconds: failure.retryAfterSeconds } : {})
    }
  };
}

/**
 * Lets typed errors thrown from a load, an action or an endpoint be answered with their own status: the framework
 * knows no errors but its own, and would answer 500. Done once, at the start, so that no route has to wrap its calls.
 */
export function answerTypedErrors(): void {
  const FrameworkError = frameworkErrorClass();
  Object.defineProperty(FrameworkError, Symbol.hasInstance, {
    configurable: true,
    value: (candidate: unknown) =>
      candidate instanceof ExpectedError ||
      Function.prototype[Symbol.hasInstance].call(FrameworkError, candidate)
  });
  Object.defineProperty(ExpectedError.prototype, 'body', {
    configurable: true,
    get(this: ExpectedError) {
      return toHttp(this).body;
    }
  });
}

/** The class of what the framework's `error()` throws. */
function frameworkErrorClass(): object {
  try {
    kitError(404);
  } catch (thrown) {
    return (thrown as object).constructor;
  }
}

/** What the framework calls for everything that is not a typed error: unknown addresses, refusals, our own mistakes. */
export const answerUnexpected: HandleServerError = ({ error, event, status }) => {
  if (status < 500) {
    return {
      message: refusals[status] ?? 'The request was refused.',
      code: status === 404 ? 'not-found' : 'refused'
    };
  }
  logger.error({ err: error, route: event.route.id, method: event.request.method }, 'unexpected error');
  return toHttp(error).body;
};
