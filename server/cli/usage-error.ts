/** Wrong input from the user: printed as one line, exit code 2, never a stack trace. */
export class UsageError extends Error {
  constructor(message: string) {
    super(message.replaceAll(/\s*\p{Cc}[\s\p{Cc}]*/gu, ' '));
    this.name = 'UsageError';
  }
}
