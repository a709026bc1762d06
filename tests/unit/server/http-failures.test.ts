import { error as kitError, isHttpError } from '@sveltejs/kit';
import { describe, expect, it } from 'vitest';
import { Conflict, Forbidden, Invalid, NotFound, TooManyRequests } from '../../../src/lib/server/errors';
import { answerTypedErrors, toHttp } from '../../../src/lib/server/hooks/error';
import { problemResponse } from '../../../src/lib/server/hooks/problem';
import { runInContext } from '../../../src/lib/server/request-context';

describe('toHttp', () => {
  it.each([
    [new NotFound(), 404, 'not-found'],
    [new Forbidden(), 403, 'forbidden'],
    [Invalid.at('volume', 'The volume is missing.'), 400, 'invalid'],
    [new Conflict('It changed.'), 409, 'conflict'],
    [new TooManyRequests(30), 429, 'too-many-requests']
  ])('answers %s with %i', (failure, status, code) => {
    expect(toHttp(failure)).toMatchObject({ status, body: { message: failure.message, code } });
  });

  it('hands on every problem, what is stored now, and how long to wait', () => {
    const problems = [
      { path: 'a', message: 'First.' },
      { path: 'b', message: 'Second.', found: '48,2l3', expected: 'an area' }
    ];
    expect(toHttp(new Invalid(problems)).body).toMatchObject({
      problems,
      message: '2 entries need mending.'
    });
    expect(toHttp(new Conflict('It changed.', { title: 'now' })).body.current).toEqual({ title: 'now' });
    expect(toHttp(new TooManyRequests(29.2)).body.retryAfterSeconds).toBe(30);
  });

  it('tells nothing of an unforeseen error but the id under which the log has it', () => {
    const failure = runInContext({ requestId: 'r-7' }, () => toHttp(new Error('password hush in line 3')));
    expect(failure.status).toBe(500);
    expect(failure.body.errorId).toBe('r-7');
    expect(JSON.stringify(failure)).not.toContain('hush');
  });
});

describe('answerTypedErrors', () => {
  it('lets the framework take typed errors for its own, with status and body, and nothing else', () => {
    answerTypedErrors();
    const failure = new NotFound('No such study.');
    expect(isHttpError(failure, 404)).toBe(true);
    expect(Reflect.get(failure, 'body')).toMatchObject({ message: 'No such study.', code: 'not-found' });
    expect(failure).toBeInstanceOf(Error);
    expect(isHttpError(new Error('other'))).toBe(false);
    expect(() => kitError(418, 'short and stout')).toThrow(expect.objectContaining({ status: 418 }) as Error);
  });
});

describe('problemResponse', () => {
  it('is problem+json with the standard members and ours beside them', async () => {
    const response = problemResponse(Invalid.at('Carbon!F18', 'An area was expected.', { found: '48,2l3' }));
    expect(response.status).toBe(400);
    expect(response.headers.get('content-type')).toBe('application/problem+json');
    expect(await response.json()).toEqual({
      type: 'about:blank',
      title: 'Entries need mending',
      status: 400,
      detail: 'An area was expected.',
      code: 'invalid',
      problems: [{ path: 'Carbon!F18', message: 'An area was expected.', found: '48,2l3' }]
    });
  });

  it('says when to try again', () => {
    expect(problemResponse(new TooManyRequests(90)).headers.get('retry-after')).toBe('90');
  });
});
