/** Who of a class is connected, over all processes: this one's sockets, and what the others have said in the last seconds. */

/** A process that has been silent for so long is gone, and its sockets with it. */
const SILENT_AFTER_MS = 7000;

interface Elsewhere {
  heardMs: number;
  classes: Map<string, Set<string>>;
}

export class ClassPresence {
  private readonly here = new Map<string, Map<string, Set<string>>>();
  private readonly elsewhere = new Map<string, Elsewhere>();

  /** @returns True when the member was not connected before. */
  arrive(classId: string, memberId: string, socketId: string): boolean {
    const before = this.isPresent(classId, memberId);
    const members = this.here.get(classId) ?? new Map<string, Set<string>>();
    this.here.set(classId, members);
    const sockets = members.get(memberId) ?? new Set<string>();
    members.set(memberId, sockets);
    sockets.add(socketId);
    return !before;
  }

  /** @returns True when the member is not connected any more. */
  depart(classId: string, memberId: string, socketId: string): boolean {
    const members = this.here.get(classId);
    const sockets = members?.get(memberId);
    if (!members || !sockets?.delete(socketId)) return false;
    if (sockets.size === 0) members.delete(memberId);
    if (members.size === 0) this.here.delete(classId);
    return !this.isPresent(classId, memberId);
  }

  isPresent(classId: string, memberId: string): boolean {
    if (this.here.get(classId)?.has(memberId)) return true;
    for (const { classes } of this.elsewhere.values()) if (classes.get(classId)?.has(memberId)) return true;
    return false;
  }

  /** Whether this process holds a socket of the class. */
  isHosted(classId: string): boolean {
    return this.here.has(classId);
  }

  hosted(): string[] {
    return [...this.here.keys()];
  }

  present(classId: string): string[] {
    const all = new Set(this.here.get(classId)?.keys());
    for (const { classes } of this.elsewhere.values()) for (const id of classes.get(classId) ?? []) all.add(id);
    return [...all];
  }

  /** What this process tells the others. */
  census(): Record<string, string[]> {
    return Object.fromEntries([...this.here].map(([classId, members]) => [classId, [...members.keys()]]));
  }

  /** What another process has told. @returns Members whose presence changed. */
  hear(processId: string, census: Readonly<Record<string, readonly string[]>>, nowMs: number): Change[] {
    const classes = new Map(Object.entries(census).map(([id, members]) => [id, new Set(members)]));
    return this.replace(processId, { heardMs: nowMs, classes });
  }

  /** Forgets processes that have fallen silent. @returns Members whose presence changed. */
  forgetSilent(nowMs: number): Change[] {
    const gone = [...this.elsewhere].filter(([, { heardMs }]) => nowMs - heardMs > SILENT_AFTER_MS);
    return gone.flatMap(([id]) => this.replace(id, null));
  }

  private replace(processId: string, next: Elsewhere | null): Change[] {
    const before = this.elsewhere.get(processId);
    const concerned = new Set([...(before?.classes.keys() ?? []), ...(next?.classes.keys() ?? [])]);
    const was = new Map([...concerned].map((id) => [id, new Set(this.present(id))]));
    if (next === null) this.elsewhere.delete(processId);
    else this.elsewhere.set(processId, next);
    const changes: Change[] = [];
    for (const [classId, members] of was) {
      const now = new Set(this.present(classId));
      for (const member of now) if (!members.has(member)) changes.push({ classId, member, here: true });
      for (const member of members) if (!now.has(member)) changes.push({ classId, member, here: false });
    }
    return changes;
  }
}

export interface Change {
  classId: string;
  member: string;
  here: boolean;
}
