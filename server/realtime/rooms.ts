/** Names of rooms, in one place so that no two topics share one by accident. */
export const personRoom = (personId: string): string => `person:${personId}`;
export const sessionRoom = (sessionId: string): string => `session:${sessionId}`;
