/** Columns of a plain table. */
export interface TableColumn {
  key: string;
  title: string;
  /** Heading that is only read out, where none is shown. */
  spoken?: string;
  /** Numbers stand at the right, in mono. */
  numeric?: boolean;
  /** Name in the sort parameter of the address and the server; without it the column does not sort. */
  sort?: string;
  /** On a phone the cell has no heading of its own (title cell, drawing). */
  bare?: boolean;
  /** On a phone the cell takes the whole line (time line). */
  wide?: boolean;
}

/** "title" ascending, "-title" descending. */
export function nextSort(current: string, column: string): string {
  return current === column ? `-${column}` : column;
}

export function ariaSort(current: string, column: string | undefined): 'ascending' | 'descending' | undefined {
  if (column === undefined) return undefined;
  if (current === column) return 'ascending';
  return current === `-${column}` ? 'descending' : undefined;
}
