import { ln, PI } from '../numerics/elementary.ts';
import { NumericsError } from '../numerics/errors.ts';

/** A body of revolution for the handbook estimates. Lengths in m. */
export interface BodyGeometry {
  wingAreaM2: number;
  wingSpanM: number;
  lengthM: number;
  /** Greatest depth and width. */
  depthM: number;
  widthM: number;
  /** Volume over that of the box length × depth × width; an ellipsoid has π/6 = 0.52. */
  fullness: number;
}

function requirePositive(values: Readonly<Record<string, number>>): void {
  for (const [name, value] of Object.entries(values)) {
    if (!(value > 0) || !Number.isFinite(value))
      throw new NumericsError('bad-argument', `${name} is ${value}; it must be a positive number`);
  }
}

/**
 * Apparent mass of a prolate spheroid along and across its axis, as shares of the displaced mass.
 *
 * α₀ = 2(1 − e²)/e³·(½ ln((1 + e)/(1 − e)) − e), β₀ = 1/e² − (1 − e²)/(2e³)·ln((1 + e)/(1 − e)),
 * k₁ = α₀/(2 − α₀), k₂ = β₀/(2 − β₀), with e² = 1 − 1/f².
 *
 * @param slenderness  Length over greatest diameter f; > 1.
 * @returns            k₁ along, k₂ across.
 * @throws {NumericsError} bad-argument for a slenderness of 1 or less.
 * @sign               none
 * @source             H. Lamb, Hydrodynamics, sections 114–115; tabled in M. Munk, NACA Report 184 (1924) (from memory).
 */
export function spheroidApparentMass(slenderness: number): { k1: number; k2: number } {
  if (!(slenderness > 1) || !Number.isFinite(slenderness))
    throw new NumericsError('bad-argument', `a body slenderness of ${slenderness} must be above 1`);
  const e2 = 1 - 1 / (slenderness * slenderness);
  const e = Math.sqrt(e2);
  const log = ln((1 + e) / (1 - e));
  const alpha = ((2 * (1 - e2)) / (e2 * e)) * (0.5 * log - e);
  const beta = 1 / e2 - ((1 - e2) / (2 * e2 * e)) * log;
  return { k1: alpha / (2 - alpha), k2: beta / (2 - beta) };
}

/**
 * What the body alone contributes to side force and yawing moment by sideslip.
 *
 * Cn_β = −2(k₂ − k₁)·Vol/(S·b): the moment of a slender body in potential flow, in full, since the wing hardly
 * turns the flow sideways. CY_β = −2·S₀/S with S₀ the greatest cross-section, without interference of the wing: a wing
 * high or low on the body raises it by up to half.
 *
 * @param g  Geometry.
 * @returns  Contributions; 1/rad.
 * @throws {NumericsError} bad-argument naming the size that is not possible.
 * @sign     Cn_β negative: the body destabilises.
 * @source   M. Munk, NACA Report 184 (1924) for the moment; slender-body form of the USAF Stability and Control DATCOM for
 *           the force (from memory).
 */
export function estimateBody(g: BodyGeometry): { CY_beta: number; Cn_beta: number } {
  const { wingAreaM2, wingSpanM, lengthM, depthM, widthM, fullness } = g;
  requirePositive({ wingAreaM2, wingSpanM, lengthM, depthM, widthM, fullness });
  if (fullness > 1) throw new NumericsError('bad-argument', `a body fullness of ${fullness} is outside 0 … 1`);
  const { k1, k2 } = spheroidApparentMass(lengthM / Math.sqrt(depthM * widthM));
  const volumeM3 = fullness * lengthM * depthM * widthM;
  return {
    CY_beta: (-2 * (PI / 4) * depthM * widthM) / wingAreaM2,
    Cn_beta: (-2 * (k2 - k1) * volumeM3) / (wingAreaM2 * wingSpanM),
  };
}

/**
 * Roll damping of a straight-tapered wing: Cl_p = −(a/12)(1 + 3λ)/(1 + λ)·(A + 2)/(A + 4).
 *
 * Strips at the wing's own lift slope, times what the antisymmetric load of rolling loses more to its induced flow than
 * the symmetric load does: a₀A/(A + 4) against a₀A/(A + 2) for an elliptic wing.
 *
 * @param liftSlopePerRad  Lift slope a of the whole wing; 1/rad.
 * @param taper            Tip chord over root chord λ; 0 … 1.
 * @param aspectRatio      A; > 0.
 * @returns                Per unit of pb/2V.
 * @throws {NumericsError} bad-argument for a taper outside 0 … 1 or an aspect ratio that is not positive.
 * @sign                   Negative damps.
 * @source                 Strips: derived here, −(4a/(S b²))·∫ c(y) y² dy over the half span. Induced flow: H. Glauert, The Elements of
 *                         Aerofoil and Airscrew Theory, lifting line of the elliptic wing in roll (from memory).
 */
export function estimateWingRollDamping(liftSlopePerRad: number, taper: number, aspectRatio: number): number {
  if (!(taper >= 0 && taper <= 1)) throw new NumericsError('bad-argument', `a taper of ${taper} is outside 0 … 1`);
  requirePositive({ aspectRatio });
  const strips = ((-liftSlopePerRad / 12) * (1 + 3 * taper)) / (1 + taper);
  return (strips * (aspectRatio + 2)) / (aspectRatio + 4);
}

/**
 * Rolling moment due to sideslip of a wing set below or above the body's centre line: 1.2·√A·(z_w/b)·(d + w)/b.
 *
 * @param aspectRatio      A of the wing.
 * @param wingSpanM        b; m.
 * @param wingBelowCentreM z_w, positive for a low wing; m.
 * @param depthM           Body depth d at the wing; m.
 * @param widthM           Body width w at the wing; m.
 * @returns                1/rad.
 * @throws {NumericsError} bad-argument naming the size that is not positive.
 * @sign                   A low wing takes from the dihedral effect: positive.
 * @source                 Wing–body term of the USAF Stability and Control DATCOM, as given in several texts (from memory).
 */
export function estimateWingPosition(
  aspectRatio: number,
  wingSpanM: number,
  wingBelowCentreM: number,
  depthM: number,
  widthM: number,
): number {
  requirePositive({ aspectRatio, wingSpanM, depthM, widthM });
  return (1.2 * Math.sqrt(aspectRatio) * wingBelowCentreM * (depthM + widthM)) / (wingSpanM * wingSpanM);
}
