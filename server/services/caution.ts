/** The fixed sentence of everything with a speed or a limit that leaves the program as text. */
export const CAUTION =
  'Not an approved training device, not for operational use. The approved flight manual and licensed instruction govern.';

/** The fixed caution and, below it, what the organisation adds; the addition never stands alone. */
export function cautionLines(addition: string | undefined): string[] {
  return addition ? [CAUTION, addition] : [CAUTION];
}
