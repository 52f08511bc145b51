/** Names of measures for tables and charts; the criterion's own title stays the full sentence. */
const WORDS: Readonly<Record<string, string>> = {
  'heading-deviation': 'Heading change',
  'track-deviation': 'Track angle',
  'track-offset': 'Off the line',
  bank: 'Bank',
  'bank-dead-side': 'Bank, dead side',
  sideslip: 'Sideslip, peak',
  'yaw-rate': 'Yaw rate',
  'roll-rate': 'Roll rate',
  ball: 'Ball',
  'height-loss': 'Height lost',
  'speed-loss': 'Speed lost',
  'speed-deviation': 'Speed kept',
  'first-correct-pedal': 'First pedal',
  'wrong-pedal-time': 'Wrong pedal',
  'yaw-arrested': 'Yaw arrested',
  'pedal-force': 'Pedal force',
  'rudder-saturation-time': 'Rudder at its limit',
  'pedal-reversals': 'Pedal reversals',
  'lever-reduced': 'Lever reduced',
  'nose-lowered': 'Nose lowered',
  'speed-regained': 'Speed regained',
  'wrong-engine': 'Wrong engine',
  'feathered-within': 'Feathered',
  'climb-rate': 'Climb rate',
  'touchdown-crab': 'Crab at touchdown',
  'touchdown-drift': 'Drift at touchdown',
  'touchdown-bank': 'Bank at touchdown',
  'touchdown-offset': 'Offset at touchdown',
  'touchdown-sink': 'Sink at touchdown',
  'outside-data-time': 'Outside the data',
  'stall-warning-time': 'Stall warning',
  'fin-stall-time': 'Fin stalled',
};

export function measureWords(measure: string): string {
  return WORDS[measure] ?? measure;
}

const SYMBOLS: Readonly<Record<string, string>> = { deg: '°', 'deg/s': '°/s', widths: ' widths', count: '' };

/** "+2.7°", "−0.1 s": a value in the unit its criterion was written in. */
export function valueWords(value: number | null, unit: string, signed = false, digits = 1): string {
  if (value === null || !Number.isFinite(value)) return '–';
  const places = unit === 'count' ? 0 : Math.abs(value) >= 100 ? 0 : digits;
  const text = Math.abs(value).toFixed(places);
  const zero = Number(text) === 0;
  const sign = value < 0 && !zero ? '−' : signed && !zero ? '+' : '';
  return `${sign}${text}${SYMBOLS[unit] ?? (unit === '' ? '' : ` ${unit}`)}`;
}

/** "at most 20°", "at least 200 ft/min", "−5° to 5°". */
export function limitWords(limit: {
  max?: number;
  min?: number;
  within?: readonly [number, number];
  unit: string;
}): string {
  const { max, min, within, unit } = limit;
  if (within) return `${valueWords(within[0], unit)} to ${valueWords(within[1], unit)}`;
  const trim = (value: number): string => valueWords(value, unit, false, Number.isInteger(value) ? 0 : 1);
  if (max !== undefined) return `at most ${trim(max)}`;
  if (min !== undefined) return `at least ${trim(min)}`;
  return '–';
}
