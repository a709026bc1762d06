import { pino, type Logger } from 'pino';
import { logLevels } from './config';
import { requestContext } from './request-context';

/** Property names whose values never reach a log line, at the top and one level down. */
const secretNames = [
  'password',
  'passwordHash',
  'token',
  'tokenHash',
  'secret',
  'authSecret',
  'databaseUrl',
  'smtpUrl',
  'authorization',
  'cookie',
  'accessKey'
];

/** PostgreSQL error classes whose messages repeat a stored or typed value: 22 data exception. */
const repeatsAValue = /^22/;

interface LoggedError {
  readonly type: string;
  readonly message: string;
  readonly stack?: string;
  readonly code?: string;
  readonly table?: string;
  readonly constraint?: string;
  readonly cause?: LoggedError;
}

const textOf = (source: object, key: string): string | undefined => {
  const value: unknown = Reflect.get(source, key);
  return typeof value === 'string' && value !== '' ? value : undefined;
};

/**
 * What a log line says of an error: its kind, message and stack, and for database errors the code, table and constraint.
 * Statements, parameters and details are left out, since they repeat measured data and personal data.
 */
export function describeError(error: unknown, depth = 0): LoggedError {
  if (!(error instanceof Error))
    return { type: typeof error, message: 'a value that is not an error was thrown' };
  const origin: unknown = Reflect.get(error, 'original') ?? Reflect.get(error, 'parent');
  const database = origin instanceof Error ? origin : error;
  const code = textOf(database, 'code');
  const hidesValue = code !== undefined && repeatsAValue.test(code);
  const message = hidesValue ? error.message.replace(/: .*$/s, '') : error.message;
  const stack = error.stack?.replace(error.message, () => message);
  return {
    type: error.name,
    message,
    ...(stack === undefined ? {} : { stack }),
    ...(code === undefined ? {} : { code }),
    ...(textOf(database, 'table') === undefined ? {} : { table: textOf(database, 'table') }),
    ...(textOf(database, 'constraint') === undefined ? {} : { constraint: textOf(database, 'constraint') }),
    ...(error.cause instanceof Error && depth < 3 ? { cause: describeError(error.cause, depth + 1) } : {})
  };
}

/** The level asked for, or info when the variable holds something else: `config()` is the one to complain. */
function level(): string {
  const asked = process.env.LOG_LEVEL;
  return (logLevels as readonly (string | undefined)[]).includes(asked) ? (asked as string) : 'info';
}

/** Makes a logger that writes one JSON object a line; `destination` defaults to standard output. */
export function createLogger(destination?: { write(line: string): void }): Logger {
  const options = {
    level: level(),
    base: { process: process.env.HEADWATER_PROCESS ?? 'script', pid: process.pid },
    timestamp: () => `,"time":"${new Date().toISOString()}"`,
    formatters: { level: (label: string) => ({ level: label }) },
    serializers: { err: (error: unknown) => describeError(error) },
    redact: { paths: secretNames.flatMap((name) => [name, `*.${name}`]), censor: '[withheld]' },
    mixin: () => {
      const context = requestContext();
      return context ? { requestId: context.requestId, userId: context.actorId ?? undefined } : {};
    }
  };
  return destination ? pino(options, destination) : pino(options);
}

/** The logger of this process. Log what happened and to which id; never what was measured or typed. */
export const logger: Logger = createLogger();
