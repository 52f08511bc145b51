/** Quantities drawn as traces: name, unit and how each is read from an observation. Signs: right, up and nose right positive. */
import type { Observation } from '#shared/model/plant-types.ts';
import { DEG, FT, KT } from '#shared/units/constants.ts';

export type ChannelId = 'sideslip' | 'bank' | 'heading' | 'pedal' | 'ball' | 'rudder' | 'speed' | 'height';

export interface Channel {
  id: ChannelId;
  name: string;
  unit: string;
  digits: number;
  low: number;
  high: number;
  read: (now: Observation, startPsiRad: number) => number;
}

export const CHANNELS: Readonly<Record<ChannelId, Channel>> = {
  sideslip: {
    id: 'sideslip',
    name: 'Sideslip',
    unit: 'deg',
    digits: 1,
    low: -12,
    high: 12,
    read: (now) => now.betaRad / DEG,
  },
  bank: { id: 'bank', name: 'Bank', unit: 'deg', digits: 1, low: -15, high: 15, read: (now) => now.phiRad / DEG },
  heading: {
    id: 'heading',
    name: 'Heading',
    unit: 'deg off',
    digits: 1,
    low: -15,
    high: 15,
    read: (now, startPsiRad) => (now.psiRad - startPsiRad) / DEG,
  },
  pedal: {
    id: 'pedal',
    name: 'Pedal',
    unit: '% right',
    digits: 0,
    low: -30,
    high: 110,
    read: (now) => now.pedal * 100,
  },
  ball: {
    id: 'ball',
    name: 'Ball',
    unit: 'ball widths',
    digits: 1,
    low: -1.5,
    high: 1.5,
    read: (now) => now.ballWidths,
  },
  rudder: {
    id: 'rudder',
    name: 'Rudder',
    unit: '% right',
    digits: 0,
    low: -30,
    high: 110,
    // Cockpit sign: trailing edge right is δr < 0.
    read: (now) => (now.rudderMaxRad > 0 ? (-now.rudderRad / now.rudderMaxRad) * 100 : 0),
  },
  speed: { id: 'speed', name: 'Airspeed', unit: 'kt', digits: 0, low: 60, high: 120, read: (now) => now.casMps / KT },
  height: {
    id: 'height',
    name: 'Height',
    unit: 'ft',
    digits: 0,
    low: 0,
    high: 600,
    read: (now) => now.heightAboveRunwayM / FT,
  },
};

export const FLYING_CHANNELS: readonly ChannelId[] = ['sideslip', 'bank'];
export const DEBRIEF_CHANNELS: readonly ChannelId[] = ['sideslip', 'bank', 'heading', 'pedal', 'ball'];
