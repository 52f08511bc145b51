import type { Aircraft } from '../model/aircraft.ts';
import { stallTasMps } from '../model/aircraft.ts';
import { machFromTas } from '../model/airspeeds.ts';
import { standardAtmosphere } from '../model/atmosphere.ts';
import { CL_MARGIN, outsideRows } from '../model/derivatives.ts';
import { G0 } from '../units/constants.ts';

/**
 * What a reader must know of a condition that lies outside the data: below the stall, beyond the rows, supersonic.
 *
 * @param aircraft  Prepared aircraft.
 * @param tasMps    True airspeed; m/s; above 0.
 * @param heightM   Height above sea level; m.
 * @returns         One sentence each; none for a condition inside the data.
 * @throws          Nothing.
 * @sign            none
 * @source          Flight model, airframe data (rows are held beyond their ends) and validity.
 */
export function conditionRemarks(aircraft: Aircraft, tasMps: number, heightM: number): string[] {
  const { densityKgM3 } = standardAtmosphere(heightM);
  const CL = (aircraft.massKg * G0) / (0.5 * densityKgM3 * tasMps * tasMps * aircraft.wingAreaM2);
  const out: string[] = [];
  if (tasMps < stallTasMps(aircraft, densityKgM3)) {
    out.push(
      `Below the 1 g stall: level flight needs CL ${CL.toPrecision(3)}, CLmax is ${aircraft.CLmax.toPrecision(3)}.`,
    );
  }
  if (outsideRows(aircraft.derivatives, CL) > CL_MARGIN) {
    const rows = aircraft.derivatives.CL;
    out.push(
      `Outside the data: CL ${CL.toPrecision(3)} lies more than ${CL_MARGIN} outside the rows (${rows[0]} to ${rows[rows.length - 1]}); their ends are held.`,
    );
  }
  const mach = machFromTas(tasMps, heightM);
  if (mach >= 1) out.push(`Outside the data: Mach ${mach.toFixed(2)}; the airspeed relations hold below 1.`);
  return out;
}
