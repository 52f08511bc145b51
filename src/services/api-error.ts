import type { ChunkRefusal, FieldError, Problem, ProblemCode } from '#shared/contracts/problem.ts';

/** Codes of failures that no server reported: nothing answered, or the answer does not fit its contract. */
export type LocalCode = 'unreachable' | 'unreadable-answer';
export type ApiErrorCode = ProblemCode | LocalCode;

/** A request that did not do what was asked. `detail` is one sentence for a person. */
export class ApiError extends Error {
  override readonly name = 'ApiError';

  constructor(
    readonly code: ApiErrorCode,
    readonly status: number,
    readonly detail: string,
    readonly errors: readonly FieldError[] = [],
    readonly problem: Problem | null = null,
    options?: ErrorOptions,
  ) {
    super(detail, options);
  }

  /** Seconds to wait, where the server said so. */
  get retryAfterS(): number | null {
    return this.problem?.retryAfterS ?? null;
  }

  get chunk(): ChunkRefusal | null {
    return this.problem?.chunk ?? null;
  }

  get missing(): readonly number[] {
    return this.problem?.missing ?? [];
  }

  /** Message of one field of the body, by JSON Pointer or plain name. */
  messageFor(field: string): string | undefined {
    const found = this.errors.find((error) => error.field === field || error.field === `/${field}`);
    return found && [found.message, found.remedy].filter((text) => text !== '').join(' ');
  }
}

export function isApiError(error: unknown, code?: ApiErrorCode): error is ApiError {
  return error instanceof ApiError && (code === undefined || error.code === code);
}

/** One sentence for a person, from whatever was thrown. */
export function causeOf(error: unknown): string {
  return error instanceof ApiError
    ? error.detail
    : 'Something in this page failed. Reload it; nothing recorded is lost.';
}
