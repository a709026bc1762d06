import { interruptSteps } from './steps.mjs';

/**
 * What has to be closed when the command ends, in the order of closing; each is closed once.
 * @typedef {{ add: (close: () => Promise<void> | void) => void, close: () => Promise<void>, interrupted: () => boolean }} Closers
 */

/**
 * Closes, in reverse order of their beginning, what the command has started: after Ctrl-C, a TERM signal, or when asked.
 * A second signal does not wait.
 * @param {Readonly<{ exitCode?: number }>} [options] the exit code after a signal: 0 where a signal is the way to stop
 * @returns {Closers}
 */
export function closeInOrder({ exitCode = 0 } = {}) {
  /** @type {(() => Promise<void> | void)[]} */
  const closers = [];
  /** @type {Promise<void> | null} */
  let closing = null;
  let firstSignal = 0;

  const close = () => {
    closing ??= (async () => {
      for (let next = closers.pop(); next; next = closers.pop()) {
        try {
          await next();
        } catch (error) {
          console.error(error);
        }
      }
    })();
    return closing;
  };
  const onSignal = async () => {
    if (firstSignal > 0) {
      // npm passes on the Ctrl-C that the terminal has sent here already: that is not a second one.
      if (Date.now() - firstSignal > 1500) process.exit(1);
      return;
    }
    firstSignal = Date.now();
    console.log('\nStopping.');
    interruptSteps();
    await close();
    process.exit(exitCode);
  };
  for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP']) process.on(signal, onSignal);
  return {
    add: (closer) => void closers.push(closer),
    close,
    interrupted: () => firstSignal > 0
  };
}
