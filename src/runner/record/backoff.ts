/** How long to wait before the next try: 1, 2, 4 … 30 s, or what the server asks for. */
const FIRST_MS = 1000;
const LONGEST_MS = 30_000;

export function backoffMs(failures: number, askedS: number | null = null): number {
  if (askedS !== null && askedS > 0) return Math.min(askedS * 1000, 120_000);
  return Math.min(LONGEST_MS, FIRST_MS * 2 ** Math.max(0, failures - 1));
}
