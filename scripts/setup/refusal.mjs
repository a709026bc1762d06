/** A reason not to go on that the person can do something about: one sentence, printed without a stack. */
export class Refusal extends Error {
  name = 'Refusal';
}

/**
 * Runs a command's body; a Refusal is printed as its sentence, anything else with its stack. Either way the exit code is 1.
 * @param {() => Promise<void>} body
 */
export async function runCommand(body) {
  try {
    await body();
  } catch (error) {
    if (error instanceof Refusal) console.error(`\n${error.message}`);
    else console.error(error);
    process.exitCode = 1;
  }
}
