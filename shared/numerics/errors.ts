/** Stable names of everything that can go wrong in numerics. */
export type NumericsErrorCode =
  | 'bad-dimension'
  | 'non-finite-input'
  | 'non-finite-derivative'
  | 'tolerance-not-held'
  | 'singular-matrix'
  | 'no-convergence'
  | 'uncontrollable-pair'
  | 'no-stabilising-solution'
  | 'bad-argument';

/** A named numerical failure: `code` is stable, `message` is for people and says which limit was met. */
export class NumericsError extends Error {
  readonly code: NumericsErrorCode;

  constructor(code: NumericsErrorCode, message: string, options?: { cause?: unknown }) {
    super(message, options);
    this.name = 'NumericsError';
    this.code = code;
  }
}

/**
 * Passes an array of the wanted length without NaN or infinity, refuses any other.
 *
 * @param values  What the caller was given.
 * @param length  How many are needed.
 * @param name    How the message calls them.
 * @throws {NumericsError} bad-dimension when the length differs, non-finite-input when a value is NaN or infinite.
 * @source        derived here.
 */
export function requireFinite(values: ArrayLike<number>, length: number, name: string): void {
  if (values.length !== length) {
    throw new NumericsError('bad-dimension', `${name} has ${values.length} values, ${length} are needed`);
  }
  for (let i = 0; i < length; i++) {
    if (!Number.isFinite(values[i])) {
      throw new NumericsError('non-finite-input', `${name}[${i}] is ${values[i]}`);
    }
  }
}
