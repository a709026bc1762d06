import { describe, expect, it } from 'vitest';
import { z } from 'zod';
import { jobs } from '../../../src/lib/server/jobs/definitions';
import { handlers } from '../../../src/lib/server/jobs/handlers';
import { checkHandlers, defineJob, handle } from '../../../src/lib/server/jobs/job';

const print = defineJob('print', z.object({ sheet: z.string() }));
const tidy = defineJob('tidy', z.object({}));
const done = async () => undefined;

describe('jobs and their handlers', () => {
  it('match in the program itself', () => {
    expect(() => checkHandlers(jobs, handlers)).not.toThrow();
  });

  it('are refused when a job has none or two, or is not listed', () => {
    expect(() => checkHandlers([print, tidy], [handle(print, done)])).toThrow('tidy: 0 handlers');
    expect(() => checkHandlers([print], [handle(print, done), handle(print, done)])).toThrow(
      'print: 2 handlers'
    );
    expect(() => checkHandlers([print], [handle(print, done), handle(tidy, done)])).toThrow(
      'tidy: not in the list'
    );
    expect(() => checkHandlers([print, print], [handle(print, done)])).toThrow('print: listed twice');
  });

  it('check what a job carries before the work begins', async () => {
    const seen: string[] = [];
    const handler = handle(print, async ({ sheet }) => void seen.push(sheet));
    const run = { id: 'j-1', signal: new AbortController().signal };
    await handler.run({ sheet: 'bench' }, run);
    expect(() => handler.run({ sheet: 7 }, run)).toThrow();
    expect(seen).toEqual(['bench']);
  });
});
