const UNITS = ['B', 'kB', 'MB', 'GB', 'TB'] as const;

/** "14.2 MB": powers of a thousand, three figures at most after the first unit. */
export function sizeWords(bytes: number): string {
  let [value, unit] = [bytes, 0];
  while (value >= 999.5 && unit < UNITS.length - 1) {
    value /= 1000;
    unit++;
  }
  const digits = unit === 0 || value >= 99.95 ? 0 : value >= 9.995 ? 1 : 2;
  return `${value.toFixed(digits)} ${UNITS[unit] ?? ''}`;
}

/** "3 days 4 h", "12 min". */
export function spanWords(seconds: number): string {
  const minutes = Math.floor(seconds / 60);
  if (minutes < 60) return `${minutes} min`;
  const hours = Math.floor(minutes / 60);
  if (hours < 24) return `${hours} h ${minutes % 60} min`;
  const days = Math.floor(hours / 24);
  return `${days} day${days === 1 ? '' : 's'} ${hours % 24} h`;
}
