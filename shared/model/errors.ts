/** Stable names of everything that can go wrong in the model. */
export type ModelErrorCode =
  | 'unknown-configuration'
  | 'unknown-loading'
  | 'unknown-engine'
  | 'wrong-engine-count'
  | 'bad-argument'
  | 'non-finite-input'
  | 'singular-trim'
  | 'no-bank-holds'
  | 'trim-beyond-travel'
  | 'no-runway'
  | 'too-many-gusts';

/** A named failure of the model: `code` is stable, `message` is for people, `field` names the input where there is one. */
export class ModelError extends Error {
  readonly code: ModelErrorCode;
  readonly field: string | undefined;

  constructor(code: ModelErrorCode, message: string, field?: string, options?: { cause?: unknown }) {
    super(message, options);
    this.name = 'ModelError';
    this.code = code;
    this.field = field;
  }
}

/**
 * Lets a finite number pass.
 *
 * @param value  The number; any unit.
 * @param name  What it is, for the message.
 * @returns  Nothing.
 * @throws  {ModelError} non-finite-input when the value is NaN or infinite.
 * @sign  none
 * @source  House style, numerical functions.
 */
export function requireFiniteNumber(value: number, name: string): void {
  if (!Number.isFinite(value))
    throw new ModelError('non-finite-input', `${name} is ${value}; a finite number is needed`, name);
}
