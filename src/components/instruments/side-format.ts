/** Numbers with a side instead of a sign: 8.2°L, 49%R. */

/** Rounded, without "−0". */
export function fixed(value: number, digits: number): string {
  const text = value.toFixed(digits);
  return Number(text) === 0 ? (0).toFixed(digits) : text.replace('-', '−');
}

function withSide(value: number, digits: number, unit: string, side: (positive: boolean) => string): string {
  if (!Number.isFinite(value)) return '–';
  const size = Math.abs(value).toFixed(digits);
  return Number(size) === 0 ? `${size}${unit}` : `${size}${unit}${side(value > 0)}`;
}

/** Positive is right. */
export const sided = (value: number, digits: number, unit: string): string =>
  withSide(value, digits, unit, (positive) => (positive ? 'R' : 'L'));

/** The nose is left of its flight path when sideslip is positive. */
export const noseText = (betaDeg: number): string => withSide(betaDeg, 1, '°', (positive) => (positive ? 'L' : 'R'));

/** A sign always shown, true minus. */
export function signed(value: number, digits: number): string {
  const text = Math.abs(value).toFixed(digits);
  if (Number(text) === 0) return text;
  return `${value < 0 ? '−' : '+'}${text}`;
}

/** Run time against the event: "+01.9", "−01.8", "00.0". */
export function tickerTime(seconds: number): string {
  const tenths = Math.round(Math.abs(seconds) * 10) / 10;
  const body = tenths.toFixed(1).padStart(4, '0');
  return tenths === 0 ? body : `${seconds < 0 ? '−' : '+'}${body}`;
}

/** Clock face: "+00:01.9". */
export function clockText(seconds: number): string {
  const tenths = Math.round(Math.abs(seconds) * 10) / 10;
  const minutes = Math.floor(tenths / 60);
  const rest = (tenths - minutes * 60).toFixed(1).padStart(4, '0');
  return `${seconds < 0 && tenths > 0 ? '−' : '+'}${String(minutes).padStart(2, '0')}:${rest}`;
}
