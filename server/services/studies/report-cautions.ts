/** The cautions of a printed report: those of every one, and those that its own figures give rise to. */
import { stallKt, type PreparedSubject } from '#shared/analysis/bench-condition.ts';
import { minimumControlSpeed } from '#shared/analysis/minimum-control-speed.ts';
import { DEG, KT } from '#shared/units/constants.ts';
import { formatQuantity, type UnitPreference } from '#shared/units/quantity.ts';
import type { AnalysisSubject } from './analysis-subject.ts';
import type { ControlCase } from './report-spreads.ts';

/** The most bank of a minimum control speed, toward the live engine; degrees (14 CFR 25.149). */
export const FULL_BANK = 5;
/** Further outside the rows of the data than this in CL deserves a word. */
const ROW_REACH = 0.1;

const CAUTIONS = [
  'Linear derivatives, quasi-steady; spins and flight past the stall are not modelled. Minimum control speed here is static: straight flight that can just be held, with no allowance for the time to recognise a failure.',
  'Criteria are a published military specification and two civil paragraphs, used for comparison and not as a certification basis. Values carry the uncertainty of their sources; ±2σ of limits follows from independent normal draws of every uncertain value.',
];

export function reportCautions(
  lead: PreparedSubject,
  subject: AnalysisSubject,
  control: ControlCase | null,
  units: UnitPreference,
): string[] {
  return [...CAUTIONS, ...edgeWords(lead, subject, units), ...hazardWords(lead, subject, control, units)];
}

/** Where the condition leaves what the data covers. */
function edgeWords(
  { airframe, aircraft, system }: PreparedSubject,
  { casKt, condition }: AnalysisSubject,
  units: UnitPreference,
): string[] {
  const out: string[] = [];
  const stall = stallKt(aircraft, condition.heightM);
  if (casKt < stall)
    out.push(
      `The speed of ${speedWords(casKt, units)} lies below the 1 g stall at ${speedWords(stall, units)}, where this data does not hold.`,
    );
  const rows = airframe.configurations.find(({ name }) => name === aircraft.configuration)?.derivatives ?? [];
  const [low, high] = [Math.min(...rows.map(({ CL }) => CL)), Math.max(...rows.map(({ CL }) => CL))];
  if (system.CL < low - ROW_REACH || system.CL > high + ROW_REACH)
    out.push(
      `The lift coefficient ${system.CL.toFixed(2)} lies outside the rows of the data (${low} to ${high}); the nearest row is held.`,
    );
  return out;
}

/** The further cautions, where something printed gives rise to them. */
function hazardWords(
  lead: PreparedSubject,
  { condition }: AnalysisSubject,
  control: ControlCase | null,
  units: UnitPreference,
): string[] {
  const rudder =
    'Never alternate full rudder: structural limits hold for one input only, and control power here is not strength.';
  if (control === null) return [rudder];
  const out = [rudder, 'Engine cuts are not practised in the air on the strength of this report.'];
  const best = minimumControlSpeed(lead.aircraft, { ...control, bank: { upToRad: FULL_BANK * DEG } });
  if (best.found && best.belowStall)
    out.unshift(
      `The computed control limit lies below the stall: the stall, ${speedWords(stallKt(lead.aircraft, condition.heightM), units)}, is the limit. Practising at the control limit would be a stall and spin hazard.`,
    );
  return out;
}

export const speedWords = (kt: number, units: UnitPreference): string => formatQuantity(kt * KT, 'speed', units, 0);
