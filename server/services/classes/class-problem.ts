import type { ClassRefusal } from '#shared/contracts/class-socket.ts';

/** A refusal within a class: reason of the contract and a sentence. */
export class ClassProblem extends Error {
  constructor(
    readonly reason: ClassRefusal,
    detail: string,
  ) {
    super(detail);
    this.name = 'ClassProblem';
  }
}
