import type { ControlData, PedalForceData, RudderRatioData } from './aircraft.ts';

/**
 * Cockpit to surface, the only place where the mapping lives: right stick rolls right (δa > 0), right pedal yaws right,
 * and a rudder that yaws right has its trailing edge right (δr < 0).
 */
export const STICK_TO_AILERON = 1;
export const PEDAL_TO_RUDDER = -1;

/** Share of its limit from which a pilot's rudder counts as saturated (ours). */
export const SATURATION_SHARE = 0.999;

/**
 * Aileron commanded by a stick position; rad.
 *
 * @param stick         −1 full left … +1 full right.
 * @param aileronMaxRad Travel; rad.
 * @returns             Aileron; rad.
 * @throws              Nothing.
 * @sign                right stick positive, δa > 0 rolls right
 * @source              Flight model, axes and signs.
 */
export function stickToAileronRad(stick: number, aileronMaxRad: number): number {
  return STICK_TO_AILERON * stick * aileronMaxRad;
}

/**
 * Rudder commanded by a pedal position at full ratio; rad.
 *
 * @param pedal        −1 full left … +1 full right.
 * @param rudderMaxRad Travel; rad.
 * @returns            Rudder; rad.
 * @throws             Nothing.
 * @sign               right pedal positive, δr < 0 yaws right
 * @source             Flight model, axes and signs.
 */
export function pedalToRudderRad(pedal: number, rudderMaxRad: number): number {
  return PEDAL_TO_RUDDER * pedal * rudderMaxRad;
}

/**
 * Ratio of the rudder ratio changer at a speed; 1 without one.
 *
 * "inverse": full up to fullUpTo, then fullUpTo/EAS; "inverse-square": its square; a table is linear in EAS and held
 * beyond its ends.
 *
 * @param ratio   Ratio changer data or null.
 * @param easMps  Equivalent airspeed; m/s.
 * @returns       k; 0 < k ≤ 1.
 * @throws        Nothing.
 * @sign          none
 * @source        Flight model, controls.
 */
export function rudderRatioAt(ratio: RudderRatioData | null, easMps: number): number {
  if (ratio === null) return 1;
  if (ratio.law === 'table') return tableRatio(ratio, easMps);
  if (!(easMps > ratio.fullUpToMps)) return 1;
  const k = ratio.fullUpToMps / easMps;
  return ratio.law === 'inverse' ? k : k * k;
}

function tableRatio({ tableMps, tableRatio: k }: RudderRatioData, easMps: number): number {
  const last = tableMps.length - 1;
  if (easMps <= tableMps[0]) return k[0];
  if (easMps >= tableMps[last]) return k[last];
  let i = 0;
  while (easMps >= tableMps[i + 1]) i++;
  return k[i] + ((easMps - tableMps[i]) / (tableMps[i + 1] - tableMps[i])) * (k[i + 1] - k[i]);
}

/**
 * Rudder beyond which the pedal force limit lets the pedal go no further; rad.
 *
 * @param force   Pedal force data or null.
 * @param easMps  Equivalent airspeed; m/s.
 * @returns       Pilot's share of rudder at the limit, at full ratio for an artificial force; rad; may be Infinity.
 * @throws        Nothing.
 * @sign          none
 * @source        Flight model, controls.
 */
export function forceLimitRudderRad(force: PedalForceData | null, easMps: number): number {
  if (force === null) return Infinity;
  const atRest = force.limitN / force.newtonPerRad;
  if (force.kind === 'artificial') return atRest;
  const speeds = force.atMps / easMps;
  return atRest * speeds * speeds;
}

/**
 * Largest rudder that the pedals can command to either side, zero trim; rad.
 *
 * @param controls  Control data.
 * @param easMps    Equivalent airspeed; m/s.
 * @param ratio     Present ratio k; default what the law gives.
 * @returns         Limit from travel, ratio changer and pedal force; rad; ≥ 0.
 * @throws          Nothing.
 * @sign            none
 * @source          Flight model, controls.
 */
export function pedalRudderLimitRad(
  controls: ControlData,
  easMps: number,
  ratio: number = rudderRatioAt(controls.rudderRatio, easMps),
): number {
  const travel = ratio * controls.rudderMaxRad;
  const force = controls.pedalForce;
  if (force === null) return travel;
  let limit = force.limitN / force.newtonPerRad;
  if (force.kind === 'reversible') {
    const speeds = force.atMps / easMps;
    limit *= speeds * speeds;
  } else if (controls.rudderRatio?.mode !== 'limit') {
    // An artificial force goes with the pedal, not with the surface: the pedal is stopped, then scaled by the ratio.
    limit *= ratio;
  }
  return limit < travel ? limit : travel;
}

/**
 * The pilot's share of the rudder command; rad.
 *
 * @param controls  Control data.
 * @param pedal     −1 full left … +1 full right.
 * @param easMps    Equivalent airspeed; m/s.
 * @param ratio     Present ratio k.
 * @returns         Rudder before trim and damper; rad.
 * @throws          Nothing.
 * @sign            right pedal gives δr < 0
 * @source          Flight model, controls.
 */
export function pilotRudderRad(controls: ControlData, pedal: number, easMps: number, ratio: number): number {
  const scale = controls.rudderRatio?.mode === 'limit' ? 1 : ratio;
  const wanted = scale * pedalToRudderRad(pedal, controls.rudderMaxRad);
  const limit = pedalRudderLimitRad(controls, easMps, ratio);
  return wanted > limit ? limit : wanted < -limit ? -limit : wanted;
}

/**
 * Pedal force; N.
 *
 * @param controls      Control data.
 * @param pilotShareRad Rudder held against the springs or the air: δr − trim − damper share; rad.
 * @param pedal         −1 full left … +1 full right; used by an artificial force.
 * @param easMps        Equivalent airspeed; m/s.
 * @returns             Force; N; ≥ 0; at most the limit for an artificial force.
 * @throws              Nothing.
 * @sign                none
 * @source              Flight model, controls.
 */
export function pedalForceN(controls: ControlData, pilotShareRad: number, pedal: number, easMps: number): number {
  const force = controls.pedalForce;
  if (force === null) return 0;
  if (force.kind === 'artificial') {
    return Math.min(force.newtonPerRad * Math.abs(pedal) * controls.rudderMaxRad, force.limitN);
  }
  return (force.newtonPerRad * Math.abs(pilotShareRad) * (easMps * easMps)) / (force.atMps * force.atMps);
}
