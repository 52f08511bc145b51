/** What a whole sheet may mean by its numbers, in words for the form. */
import { z } from 'zod';
import type { SheetMeaning } from './sheet-mapping.ts';

const AXES = [
  { value: 'stability', text: 'stability' },
  { value: 'body', text: 'body' },
];
export const MEANINGS: readonly {
  key: 'units' | 'form' | 'axes' | 'inertiaAxes' | 'angles' | 'rates' | 'aileron' | 'rudder' | 'airplaneClass';
  label: string;
  options: { value: string; text: string }[];
}[] = [
  {
    key: 'units',
    label: 'Units',
    options: [
      { value: 'SI', text: 'SI: kg, m, m/s, kg/m³, kg·m²' },
      { value: 'US', text: 'US: lb, ft, ft/s, slug/ft³, slug·ft²' },
    ],
  },
  {
    key: 'form',
    label: 'Derivatives are',
    options: [
      { value: 'non-dimensional', text: 'non-dimensional' },
      { value: 'dimensional', text: 'dimensional' },
      { value: 'dimensional-primed', text: 'dimensional, primed' },
    ],
  },
  { key: 'axes', label: 'Axes of the derivatives', options: AXES },
  { key: 'inertiaAxes', label: 'Axes of the inertias', options: AXES },
  {
    key: 'angles',
    label: 'Angles per',
    options: [
      { value: 'rad', text: 'radian' },
      { value: 'degree', text: 'degree' },
    ],
  },
  {
    key: 'rates',
    label: 'Rates made non-dimensional by',
    options: [
      { value: 'b/2V', text: 'b/2V' },
      { value: 'b/V', text: 'b/V' },
    ],
  },
  {
    key: 'aileron',
    label: 'Positive aileron rolls',
    options: [
      { value: 'right', text: 'right' },
      { value: 'left', text: 'left' },
    ],
  },
  {
    key: 'rudder',
    label: 'Positive rudder: trailing edge',
    options: [
      { value: 'left', text: 'left' },
      { value: 'right', text: 'right' },
    ],
  },
  {
    key: 'airplaneClass',
    label: 'Airplane class',
    options: ['I', 'II-L', 'II-C', 'III', 'IV'].map((value) => ({ value, text: value })),
  },
];
export const meaningSchema = z.object({
  units: z.enum(['SI', 'US']),
  form: z.enum(['non-dimensional', 'dimensional', 'dimensional-primed']),
  axes: z.enum(['stability', 'body']),
  inertiaAxes: z.enum(['stability', 'body']),
  angles: z.enum(['rad', 'degree']),
  rates: z.enum(['b/2V', 'b/V']),
  aileron: z.enum(['right', 'left']),
  rudder: z.enum(['left', 'right']),
  airplaneClass: z.string(),
});
export const MEANING_NUMBERS = [
  { key: 'CLmax', label: 'Greatest lift coefficient' },
  { key: 'aileronMaxDeg', label: 'Aileron travel, deg' },
  { key: 'rudderMaxDeg', label: 'Rudder travel, deg' },
] as const;

/** How most sheets are written; the person corrects it. */
export const USUAL_MEANING: SheetMeaning = {
  units: 'SI',
  axes: 'stability',
  inertiaAxes: 'stability',
  form: 'non-dimensional',
  aileron: 'right',
  rudder: 'left',
  angles: 'rad',
  rates: 'b/2V',
  name: '',
  airplaneClass: 'II-L',
  configuration: 'approach',
  CLmax: 1.8,
  aileronMaxDeg: 20,
  rudderMaxDeg: 25,
  source: '',
};
