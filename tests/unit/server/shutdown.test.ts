import { describe, expect, it } from 'vitest';
import { isShuttingDown, onShutdown, runShutdown } from '../../../src/lib/server/shutdown';

describe('runShutdown', () => {
  it('closes the work before the database, whatever was registered first', async () => {
    const closed: string[] = [];
    onShutdown('database', 'pool', () => closed.push('pool'));
    onShutdown('work', 'jobs', async () => {
      await new Promise((done) => setImmediate(done));
      closed.push('jobs');
    });
    const running = runShutdown('test');
    expect(isShuttingDown()).toBe(true);
    await running;
    expect(closed).toEqual(['jobs', 'pool']);
    expect(isShuttingDown()).toBe(false);
  });

  it('closes the rest when one fails, and each once', async () => {
    const closed: string[] = [];
    onShutdown('work', 'broken', () => Promise.reject(new Error('stuck')));
    onShutdown('database', 'pool', () => closed.push('pool'));
    await Promise.all([runShutdown('test'), runShutdown('test again')]);
    await runShutdown('later');
    expect(closed).toEqual(['pool']);
  });

  it('leaves out what took its registration back', async () => {
    const closed: string[] = [];
    const takeBack = onShutdown('work', 'child', () => closed.push('child'));
    takeBack();
    await runShutdown('test');
    expect(closed).toEqual([]);
  });
});
