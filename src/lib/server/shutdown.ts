import { logger } from './logger';

/** What closes first: things that take or do work; then the connections to the database that the work needed. */
export type ShutdownPhase = 'work' | 'database';

interface Step {
  readonly phase: ShutdownPhase;
  readonly name: string;
  readonly close: () => Promise<unknown> | unknown;
}

const order: readonly ShutdownPhase[] = ['work', 'database'];
const steps = new Set<Step>();
let running: Promise<void> | null = null;

/**
 * Registers what has to close when the process ends.
 * @returns a function that takes the registration back, for things that close earlier by themselves
 */
export function onShutdown(phase: ShutdownPhase, name: string, close: Step['close']): () => void {
  const step: Step = { phase, name, close };
  steps.add(step);
  return () => steps.delete(step);
}

/**
 * Closes everything that is registered: the work together, then the database. One that fails is logged and does not
 * keep the others open. A second call waits for the first.
 */
export function runShutdown(reason: string): Promise<void> {
  running ??= closeAll(reason).finally(() => (running = null));
  return running;
}

/** Whether closing has begun and is not over. */
export function isShuttingDown(): boolean {
  return running !== null;
}

async function closeAll(reason: string): Promise<void> {
  logger.info({ reason }, 'closing');
  for (const phase of order) {
    const closing = [...steps].filter((step) => step.phase === phase);
    await Promise.all(
      closing.map(async (step) => {
        steps.delete(step);
        try {
          await step.close();
        } catch (error) {
          logger.error({ err: error, step: step.name }, 'could not be closed');
        }
      })
    );
  }
}
