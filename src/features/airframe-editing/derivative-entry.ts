/** A derivative as typed: a plain number is per radian, "0.0021 /deg" is per degree. */
import { DEG } from '#shared/units/constants.ts';

export type TypedDerivative = { ok: true; value: number } | { ok: false; message: string };

const PATTERN = /^([+-]?(?:\d+(?:\.\d*)?|\.\d+)(?:e[+-]?\d+)?)\s*(\S.*)?$/i;
const PER_RADIAN = /^(?:\/|per\s*|1\/)rad(?:ian)?$/i;
const PER_DEGREE = /^(?:\/|per\s*|1\/)(?:deg(?:ree)?|°)$/i;

/** The value per radian; `plain` is a number without an angle, such as a lift coefficient. */
export function readDerivative(typed: string, plain = false): TypedDerivative {
  const text = typed.trim().replace('−', '-').replace(',', '.');
  const match = PATTERN.exec(text);
  const wanted = plain ? 'Type a decimal number.' : 'Type a number per radian, or with its unit as “0.0021 /deg”.';
  const number = match ? Number(match[1]) : NaN;
  if (!match || !Number.isFinite(number)) return { ok: false, message: `“${typed}” is not a number. ${wanted}` };
  const unit = match[2]?.trim();
  if (unit === undefined || unit === '') return { ok: true, value: number };
  if (!plain && PER_RADIAN.test(unit)) return { ok: true, value: number };
  if (!plain && PER_DEGREE.test(unit)) return { ok: true, value: Number((number / DEG).toPrecision(12)) };
  return { ok: false, message: `The unit “${unit}” does not fit here. ${wanted}` };
}
