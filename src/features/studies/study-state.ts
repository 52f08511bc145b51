/** What of the Analysis screen's address belongs to a study: all but which study it came from, with the airframe pinned. */
export type AddressMembers = Readonly<Record<string, string>>;

export function stateToSave(query: AddressMembers, slug: string, revision: number): Record<string, string> {
  const members = Object.entries(query).filter(([name]) => name !== 'study');
  return { ...Object.fromEntries(members), airframe: slug, revision: String(revision) };
}

/** Address members that show a saved state again. */
export const addressOf = (id: string, state: AddressMembers): Record<string, string> => ({ ...state, study: id });

/** True when the screen shows something else than what was saved. */
export function differs(saved: AddressMembers, shown: AddressMembers): boolean {
  const names = new Set([...Object.keys(saved), ...Object.keys(shown)]);
  return [...names].some((name) => saved[name] !== shown[name]);
}

/** Only the study is named: its saved state has still to be read. A screen moved since then names its airframe as well. */
export const asksForStudy = (query: Readonly<Record<string, unknown>>): string =>
  typeof query['study'] === 'string' && query['airframe'] === undefined ? query['study'] : '';
