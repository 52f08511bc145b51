/** Names of rooms, in one place so that no two topics share one by accident. */
export const personRoom = (personId: string): string => `person:${personId}`;
export const sessionRoom = (sessionId: string): string => `session:${sessionId}`;
/** Everybody admitted to a class. */
export const classRoom = (classId: string): string => `class:${classId}`;
export const instructorsRoom = (classId: string): string => `instructors:${classId}`;
/** Who follows the board of a class. */
export const boardRoom = (classId: string): string => `board:${classId}`;
export const memberRoom = (memberId: string): string => `member:${memberId}`;
/** A guest who waits to be let in. */
export const doorRoom = (memberId: string): string => `door:${memberId}`;
