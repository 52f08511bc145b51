/** The quantities of a data set and the labels under which sheets write them. */
export const DERIVATIVE_KEYS = [
  'CY_beta',
  'CY_p',
  'CY_r',
  'CY_da',
  'CY_dr',
  'Cl_beta',
  'Cl_p',
  'Cl_r',
  'Cl_da',
  'Cl_dr',
  'Cn_beta',
  'Cn_p',
  'Cn_r',
  'Cn_da',
  'Cn_dr',
] as const;
export const SIZE_KEYS = [
  'mass',
  'wingArea',
  'wingSpan',
  'meanChord',
  'speed',
  'density',
  'Ixx',
  'Iyy',
  'Izz',
  'Ixz',
  'alphaDeg',
  'CL',
] as const;
export type Quantity = (typeof SIZE_KEYS)[number] | (typeof DERIVATIVE_KEYS)[number];
export const QUANTITIES: readonly Quantity[] = [...SIZE_KEYS, ...DERIVATIVE_KEYS];
const OPTIONAL = new Set<Quantity>(['Iyy', 'Ixz', 'alphaDeg', 'CL', 'meanChord', 'CY_p', 'CY_r', 'CY_da']);
export const isDerivative = (quantity: Quantity): boolean => DERIVATIVE_KEYS.some((key) => key === quantity);
export const isOptional = (quantity: Quantity): boolean => OPTIONAL.has(quantity);

export const QUANTITY_WORDS: Readonly<Record<(typeof SIZE_KEYS)[number], string>> = {
  mass: 'Mass, or weight in lb',
  wingArea: 'Wing area',
  wingSpan: 'Wing span',
  meanChord: 'Mean chord',
  speed: 'True airspeed',
  density: 'Air density',
  Ixx: 'Ixx',
  Iyy: 'Iyy',
  Izz: 'Izz',
  Ixz: 'Ixz',
  alphaDeg: 'Angle of attack, deg',
  CL: 'Lift coefficient',
};
export const quantityWords = (quantity: Quantity): string =>
  SIZE_KEYS.some((key) => key === quantity)
    ? QUANTITY_WORDS[quantity as keyof typeof QUANTITY_WORDS] // one of its keys: just checked
    : quantity.replace('_', ' ');

/** Letters and digits only, Greek in words: "C_l,β" and "Clbeta" are the same label. */
export function plainLabel(text: string): string {
  return text
    .normalize('NFKD')
    .replace(/\(.*?\)|\[.*?\]/g, '')
    .replace(/β/g, 'beta')
    .replace(/δ|Δ/g, 'd')
    .replace(/ρ/g, 'rho')
    .replace(/α/g, 'alpha')
    .replace(/[^a-zA-Z0-9']/g, '');
}

const SYNONYMS: Partial<Record<Quantity, readonly string[]>> = {
  mass: ['mass', 'weight', 'w', 'm'],
  wingArea: ['wingarea', 's', 'area'],
  wingSpan: ['wingspan', 'b', 'span'],
  meanChord: ['meanchord', 'c', 'chord', 'cbar'],
  speed: ['speed', 'v', 'tas', 'vt', 'u0', 'vto', 'trueairspeed'],
  density: ['density', 'rho', 'airdensity'],
  Ixx: ['ixx', 'ix'],
  Iyy: ['iyy', 'iy'],
  Izz: ['izz', 'iz'],
  Ixz: ['ixz'],
  alphaDeg: ['alpha', 'alphadeg', 'alpha0', 'angleofattack'],
  CL: ['cl', 'liftcoefficient', 'clift'],
};
/** Labels under which each derivative is written: as a coefficient, or dimensional with Y, L and N, primed too. */
function derivativeLabels(key: (typeof DERIVATIVE_KEYS)[number]): string[] {
  const [family, input] = key.split('_');
  const inputs: Record<string, string[]> = {
    beta: ['beta', 'b', 'v'],
    p: ['p'],
    r: ['r'],
    da: ['da', 'deltaa', 'ail'],
    dr: ['dr', 'deltar', 'rud'],
  };
  const dimensional: Record<string, string> = { CY: 'y', Cl: 'l', Cn: 'n' };
  const letter = dimensional[family] ?? '';
  return (inputs[input] ?? []).flatMap((name) => [
    `${family.toLowerCase()}${name}`,
    `${letter}${name}`,
    `${letter}'${name}`,
    `${letter}${name}'`,
  ]);
}

/** Place of each quantity among plain labels; an empty label is none. */
export function guessLabels(labels: readonly string[]): Partial<Record<Quantity, number>> {
  const found: Partial<Record<Quantity, number>> = {};
  const take = (quantity: Quantity, wanted: readonly string[], exact: boolean): void => {
    const index = labels.findIndex((label) =>
      wanted.some((name) => (exact ? label === name : label.toLowerCase() === name)),
    );
    if (index >= 0 && found[quantity] === undefined && !Object.values(found).includes(index)) found[quantity] = index;
  };
  // "CL" is the lift, "Cl" begins a rolling moment: letters first with their case, then without.
  take('CL', ['CL', 'CLift'], true);
  for (const key of DERIVATIVE_KEYS) take(key, derivativeLabels(key), false);
  for (const key of SIZE_KEYS) take(key, SYNONYMS[key] ?? [], false);
  return found;
}
