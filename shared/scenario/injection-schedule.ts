/** Adds the events of a class to a run at their ticks and takes them back, also after the run went to another moment. */
import type { EventQueue } from './event-queue.ts';
import type { InjectedEvent } from './run-types.ts';
import type { ScenarioEvent } from './scenario-format.ts';

export class InjectionSchedule {
  private list: readonly InjectedEvent[] = [];
  private withdrawals: { id: string; until: number }[] = [];
  /** Ids that were ever on a list: what the class added, and nobody else. */
  private readonly known = new Set<string>();
  private next = 0;
  private nextWithdrawal = 0;
  /** The queue may hold what is not on the list, or lack what is. */
  private unsure = false;

  constructor(
    private readonly queue: EventQueue,
    private readonly inject: (event: ScenarioEvent) => void,
    list: readonly InjectedEvent[],
  ) {
    this.replace(list);
    this.unsure = false;
  }

  replace(list: readonly InjectedEvent[]): void {
    this.list = list;
    this.withdrawals = list
      .flatMap(({ event, until }) => (until === null ? [] : [{ id: event.id, until }]))
      .sort((a, b) => a.until - b.until);
    for (const { event } of list) this.known.add(event.id);
    this.unsure = true;
  }

  /** The run stands at another moment. */
  moved(): void {
    this.unsure = this.known.size > 0;
  }

  /** Before the inputs of a tick are read. */
  keepTo(tick: number): void {
    if (this.unsure) this.settle(tick);
    while (this.next < this.list.length && this.list[this.next].tick <= tick) this.inject(this.list[this.next++].event);
    while (this.nextWithdrawal < this.withdrawals.length && this.withdrawals[this.nextWithdrawal].until <= tick) {
      this.queue.withdraw(this.withdrawals[this.nextWithdrawal++].id, false);
    }
  }

  private settle(tick: number): void {
    const wanted = new Set(this.list.map(({ event }) => event.id));
    for (const id of this.known) if (!wanted.has(id)) this.queue.withdraw(id, true);
    this.next = 0;
    while (this.next < this.list.length && this.list[this.next].tick < tick) {
      const { event, until } = this.list[this.next++];
      if (this.queue.get(event.id) === undefined && (until === null || until > tick)) this.inject(event);
    }
    // One that was added at this very tick may be there already.
    while (this.next < this.list.length && this.queue.get(this.list[this.next].event.id) !== undefined) this.next += 1;
    this.nextWithdrawal = 0;
    this.unsure = false;
  }
}
