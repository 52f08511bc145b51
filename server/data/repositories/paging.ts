export interface PageRequest {
  page: number;
  pageSize: number;
}

export interface Rows<T> {
  items: T[];
  total: number;
}

export interface SortOrder {
  key: string;
  direction: 'ASC' | 'DESC';
}

/** "-startedAt" → startedAt, descending. */
export function sortOrder(sort: string): SortOrder {
  return sort.startsWith('-') ? { key: sort.slice(1), direction: 'DESC' } : { key: sort, direction: 'ASC' };
}

export const offsetOf = ({ page, pageSize }: PageRequest): number => (page - 1) * pageSize;
