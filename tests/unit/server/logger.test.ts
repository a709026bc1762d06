import { beforeEach, describe, expect, it, vi } from 'vitest';
import { createLogger, describeError } from '../../../src/lib/server/logger';
import { noteActor, runInContext } from '../../../src/lib/server/request-context';

const lines: Record<string, unknown>[] = [];
const log = () =>
  createLogger({ write: (line) => void lines.push(JSON.parse(line) as Record<string, unknown>) });

beforeEach(() => {
  lines.length = 0;
  vi.stubEnv('LOG_LEVEL', 'info');
});

describe('a log line', () => {
  it('carries the request and, once known, the user of the code that writes it', async () => {
    const logger = log();
    await runInContext({ requestId: 'r-1' }, async () => {
      logger.info('before');
      await Promise.resolve();
      noteActor('u-1', 'l-1');
      logger.info('after');
    });
    logger.info('outside');
    expect(lines.map(({ requestId, userId }) => [requestId, userId])).toEqual([
      ['r-1', undefined],
      ['r-1', 'u-1'],
      [undefined, undefined]
    ]);
  });

  it('withholds secrets, at the top and one level down', () => {
    log().info({ password: 'hush', settings: { databaseUrl: 'hush', port: 1 } }, 'started');
    expect(JSON.stringify(lines)).not.toContain('hush');
    expect(lines[0]).toMatchObject({ password: '[withheld]', settings: { port: 1 } });
  });

  it('tells of a database error the code and the constraint, never statement, parameters or detail', () => {
    const original = Object.assign(new Error('duplicate key'), {
      code: '23505',
      table: 'users',
      constraint: 'users_email',
      detail: 'Key (email)=(someone@lab.example) already exists.',
      sql: 'INSERT 48.2',
      parameters: ['48.2']
    });
    const error = Object.assign(new Error('Validation error'), {
      original,
      sql: 'INSERT 48.2',
      parameters: ['48.2']
    });
    log().error({ err: error }, 'failed');
    expect(lines[0]?.err).toMatchObject({ code: '23505', table: 'users', constraint: 'users_email' });
    expect(JSON.stringify(lines)).not.toMatch(/someone@lab|48\.2/);
  });
});

describe('describeError', () => {
  it('leaves out the value that a data exception repeats, in the message and in the stack', () => {
    const error = Object.assign(new Error('invalid input syntax for type double precision: "48,2l3"'), {
      code: '22P02'
    });
    const described = describeError(error);
    expect(described.message).toBe('invalid input syntax for type double precision');
    expect(described.stack).not.toContain('48,2l3');
  });

  it('follows the cause', () => {
    expect(describeError(new Error('outer', { cause: new TypeError('inner') })).cause).toMatchObject({
      type: 'TypeError',
      message: 'inner'
    });
  });
});
