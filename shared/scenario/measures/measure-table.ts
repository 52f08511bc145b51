/** Every measure: what it means, its dimension, the unit a new criterion starts with, and which way its limit usually points. */
import { ANGLE, ANGULAR_RATE, FORCE, LENGTH, NUMBER, SPEED, TIME, WIDTH } from '../expression/units.ts';
import type { Dimension } from '../expression/units.ts';
import type { MeasureName } from '../scenario-format.ts';

export interface MeasureSpec {
  /** Name for people, as it begins a sentence. */
  label: string;
  /** What is measured, in one clause. */
  meaning: string;
  /** Null for "expression": the expression decides. */
  dimension: Dimension | null;
  /** Unit that a new criterion starts with. */
  unit: string;
  direction: 'max' | 'min';
  /** True for the measures of the reaction itself, which the reaction budget leaves out. */
  reaction?: true;
  /** True where the value is a time that may never come: "never" is then not met. */
  mayNeverCome?: true;
}

export const MEASURE_TABLE: Readonly<Record<MeasureName, MeasureSpec>> = {
  'heading-deviation': {
    label: 'Heading change',
    meaning: 'greatest heading change from the heading at the start of the window',
    dimension: ANGLE,
    unit: 'deg',
    direction: 'max',
  },
  'track-deviation': {
    label: 'Track error',
    meaning: 'greatest angle between ground track and runway heading (start heading without a runway)',
    dimension: ANGLE,
    unit: 'deg',
    direction: 'max',
  },
  'track-offset': {
    label: 'Offset from the line',
    meaning: 'greatest distance from the runway centre line (line of the start without a runway)',
    dimension: LENGTH,
    unit: 'm',
    direction: 'max',
  },
  bank: { label: 'Bank', meaning: 'greatest bank to either side', dimension: ANGLE, unit: 'deg', direction: 'max' },
  'bank-dead-side': {
    label: 'Bank toward the dead side',
    meaning: 'greatest bank toward the dead side',
    dimension: ANGLE,
    unit: 'deg',
    direction: 'max',
  },
  sideslip: { label: 'Sideslip', meaning: 'greatest sideslip', dimension: ANGLE, unit: 'deg', direction: 'max' },
  'yaw-rate': {
    label: 'Yaw rate',
    meaning: 'greatest yaw rate',
    dimension: ANGULAR_RATE,
    unit: 'deg/s',
    direction: 'max',
  },
  'roll-rate': {
    label: 'Roll rate',
    meaning: 'greatest roll rate',
    dimension: ANGULAR_RATE,
    unit: 'deg/s',
    direction: 'max',
  },
  ball: {
    label: 'Slip ball',
    meaning: 'greatest deflection of the slip ball',
    dimension: WIDTH,
    unit: 'widths',
    direction: 'max',
  },
  'height-loss': {
    label: 'Height loss',
    meaning: 'greatest loss of height from the start of the window',
    dimension: LENGTH,
    unit: 'ft',
    direction: 'max',
  },
  'speed-loss': {
    label: 'Speed loss',
    meaning: 'greatest loss of indicated airspeed from the start of the window',
    dimension: SPEED,
    unit: 'kt',
    direction: 'max',
  },
  'speed-deviation': {
    label: 'Speed deviation',
    meaning: 'greatest difference of indicated airspeed from the speed of the start',
    dimension: SPEED,
    unit: 'kt',
    direction: 'max',
  },
  'first-correct-pedal': {
    label: 'First correct pedal',
    meaning:
      'time to the first pedal of at least 10 % toward the live side (against the yaw when no engine has failed), held 0.2 s',
    dimension: TIME,
    unit: 's',
    direction: 'max',
    reaction: true,
    mayNeverCome: true,
  },
  'wrong-pedal-time': {
    label: 'Wrong pedal',
    meaning: 'time with at least 10 % of pedal toward the dead side (with the yaw when no engine has failed)',
    dimension: TIME,
    unit: 's',
    direction: 'max',
    reaction: true,
  },
  'yaw-arrested': {
    label: 'Yaw arrested',
    meaning: 'time to the first second with less than 1°/s of yaw after it has exceeded 2°/s',
    dimension: TIME,
    unit: 's',
    direction: 'max',
    mayNeverCome: true,
  },
  'pedal-force': {
    label: 'Pedal force',
    meaning: 'greatest pedal force',
    dimension: FORCE,
    unit: 'N',
    direction: 'max',
  },
  'rudder-saturation-time': {
    label: 'Rudder at its limit',
    meaning: 'time with the rudder at its limit',
    dimension: TIME,
    unit: 's',
    direction: 'max',
  },
  'pedal-reversals': {
    label: 'Pedal reversals',
    meaning: 'swings from over 60 % one way to over 60 % the other within 3 s',
    dimension: NUMBER,
    unit: 'count',
    direction: 'max',
  },
  'lever-reduced': {
    label: 'Live lever back',
    meaning: 'time until the live lever is down by at least 20 % of its travel',
    dimension: TIME,
    unit: 's',
    direction: 'max',
    mayNeverCome: true,
  },
  'nose-lowered': {
    label: 'Nose lowered',
    meaning: 'time until the path is at least 3° below its value at the start of the window',
    dimension: TIME,
    unit: 's',
    direction: 'max',
    mayNeverCome: true,
  },
  'speed-regained': {
    label: 'Speed regained',
    meaning: 'time until the indicated airspeed is above the given value',
    dimension: TIME,
    unit: 's',
    direction: 'max',
    mayNeverCome: true,
  },
  'wrong-engine': {
    label: 'Wrong engine',
    meaning: 'live engines shut or feathered',
    dimension: NUMBER,
    unit: 'count',
    direction: 'max',
  },
  'feathered-within': {
    label: 'Dead engine feathered',
    meaning: 'time until every failed engine is feathered',
    dimension: TIME,
    unit: 's',
    direction: 'max',
    mayNeverCome: true,
  },
  'climb-rate': {
    label: 'Climb rate',
    meaning: 'mean rate of climb over the window',
    dimension: SPEED,
    unit: 'ft/min',
    direction: 'min',
  },
  'touchdown-crab': {
    label: 'Crab at touchdown',
    meaning: 'angle between heading and ground track at touchdown',
    dimension: ANGLE,
    unit: 'deg',
    direction: 'max',
  },
  'touchdown-drift': {
    label: 'Drift at touchdown',
    meaning: 'sideways ground speed across the runway at touchdown',
    dimension: SPEED,
    unit: 'kt',
    direction: 'max',
  },
  'touchdown-bank': {
    label: 'Bank at touchdown',
    meaning: 'bank at touchdown',
    dimension: ANGLE,
    unit: 'deg',
    direction: 'max',
  },
  'touchdown-offset': {
    label: 'Offset at touchdown',
    meaning: 'distance from the centre line at touchdown',
    dimension: LENGTH,
    unit: 'm',
    direction: 'max',
  },
  'touchdown-sink': {
    label: 'Sink at touchdown',
    meaning: 'rate of descent at touchdown',
    dimension: SPEED,
    unit: 'ft/min',
    direction: 'max',
  },
  'outside-data-time': {
    label: 'Outside the data',
    meaning: 'time outside the data',
    dimension: TIME,
    unit: 's',
    direction: 'max',
  },
  'stall-warning-time': {
    label: 'Stall warning',
    meaning: 'time with the stall warning',
    dimension: TIME,
    unit: 's',
    direction: 'max',
  },
  'fin-stall-time': {
    label: 'Fin stalled',
    meaning: 'time with the fin stalled',
    dimension: TIME,
    unit: 's',
    direction: 'max',
  },
  expression: {
    label: 'Expression',
    meaning: 'greatest value of the expression',
    dimension: null,
    unit: 'deg',
    direction: 'max',
  },
};
