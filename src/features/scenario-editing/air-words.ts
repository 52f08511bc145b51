/** The steady air of a draft in a few words, as "Wind 330°, 15 kt; light turbulence"; empty when it is still. */
import type { Json } from '../airframe-editing/draft-document.ts';
import { isMember, numberOf, textOf } from './lane-layout.ts';

export function airWords(air: Json | undefined): string {
  if (!isMember(air)) return '';
  const parts: string[] = [];
  const knots = numberOf(air['wind_kt']) ?? 0;
  if (knots > 0) {
    const from = (Math.round(numberOf(air['windFrom_deg']) ?? 360) + 720) % 360 || 360;
    parts.push(`wind ${String(from).padStart(3, '0')}°, ${knots} kt`);
  }
  const turbulence = textOf(air['turbulence']);
  if (turbulence !== '' && turbulence !== 'none') parts.push(`${turbulence} turbulence`);
  const words = parts.join('; ');
  return words === '' ? '' : words[0].toUpperCase() + words.slice(1);
}
