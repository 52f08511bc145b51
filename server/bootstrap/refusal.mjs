/** Something in the surroundings that the user can put right: shown as one sentence, without a stack trace. */
export class Refusal extends Error {
  /**
   * @param {string} problem what is wrong, naming value and limit; no full stop
   * @param {string} remedy what to do; no full stop
   * @param {string[]} [details] further lines, such as the last words of a program that failed
   */
  constructor(problem, remedy, details = []) {
    super(`${problem}; ${remedy}.`);
    this.name = 'Refusal';
    this.details = details;
  }
}

/**
 * Prints an error the way its kind deserves: a refusal as its sentence, a fault of ours with its stack.
 * @param {string} lead such as "Sidewash did not start"
 * @param {unknown} error
 */
export function printError(lead, error) {
  if (error instanceof Refusal) {
    for (const line of error.details) console.error(`  | ${line}`);
    console.error(`\n${lead}: ${error.message}`);
  } else {
    console.error(`\n${lead} because of a fault in its own start script:`);
    console.error(error);
  }
}

/**
 * The error's code, such as EACCES; empty when it has none.
 * @param {unknown} error
 * @returns {string}
 */
export function codeOf(error) {
  return typeof error === 'object' && error !== null && 'code' in error ? String(error.code) : '';
}
