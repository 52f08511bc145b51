import type { Airframe } from '#shared/model/airframe-schema.ts';

export const DATA_PARTS = [
  'derivatives',
  'configuration',
  'fin',
  'engines',
  'controls',
  'damper',
  'loadings',
  'sources',
  'preview',
] as const;
/** Parts of a revision's page; one is shown at a time. */
export type DataPart = (typeof DATA_PARTS)[number];

/** Tabs of the page with how many things each holds. */
export function partTabs(airframe: Airframe | null): { value: DataPart; text: string; count?: number | undefined }[] {
  return [
    { value: 'derivatives', text: 'Derivatives' },
    { value: 'configuration', text: 'Configuration' },
    { value: 'fin', text: 'Fin' },
    { value: 'engines', text: 'Engines', count: airframe?.engines.length },
    { value: 'controls', text: 'Controls' },
    { value: 'damper', text: 'Yaw damper' },
    { value: 'loadings', text: 'Loadings', count: airframe?.loadings?.length },
    { value: 'sources', text: 'Sources', count: airframe?.sources?.length },
    { value: 'preview', text: '3-D' },
  ];
}

export const isDataPart = (text: unknown): text is DataPart => DATA_PARTS.some((part) => part === text);

const PLACES: readonly (readonly [RegExp, DataPart])[] = [
  [/^\/configurations\/\d+\/derivatives/, 'derivatives'],
  [/^\/configurations/, 'configuration'],
  [/^\/fin/, 'fin'],
  [/^\/engines/, 'engines'],
  [/^\/controls/, 'controls'],
  [/^\/yawDamper/, 'damper'],
  [/^\/loadings/, 'loadings'],
  [/^\/sources/, 'sources'],
];

/** Where the value of a pointer is edited; null for what stands beside every part (geometry, mass, rudder ratio). */
export function partOf(pointer: string): { part: DataPart; configuration: number | null } | null {
  if (pointer.startsWith('/controls/rudderRatio')) return null;
  const part = PLACES.find(([place]) => place.test(pointer))?.[1];
  const configuration = /^\/configurations\/(\d+)/.exec(pointer)?.[1];
  return part === undefined
    ? null
    : { part, configuration: configuration === undefined ? null : Number(configuration) };
}
