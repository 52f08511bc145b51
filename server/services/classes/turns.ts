/** Lets work of the same key run one after another. */
export function createTurns(): <T>(key: string, work: () => Promise<T>) => Promise<T> {
  const last = new Map<string, Promise<unknown>>();
  return (key, work) => {
    const turn = (last.get(key) ?? Promise.resolve()).then(work, work);
    const settled = turn.catch(() => undefined);
    last.set(key, settled);
    void settled.then(() => {
      if (last.get(key) === settled) last.delete(key);
    });
    return turn;
  };
}
