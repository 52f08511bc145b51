/**
 * Layout and interpolation of the derivative rows: fifteen numbers per row in one flat array.
 * SIDE is CY, ROLL is Cl, YAW is Cn; BETA, P, R, DA, DR are sideslip, roll rate, yaw rate, aileron, rudder.
 */
export const SIDE_BETA = 0;
export const SIDE_P = 1;
export const SIDE_R = 2;
export const SIDE_DA = 3;
export const SIDE_DR = 4;
export const ROLL_BETA = 5;
export const ROLL_P = 6;
export const ROLL_R = 7;
export const ROLL_DA = 8;
export const ROLL_DR = 9;
export const YAW_BETA = 10;
export const YAW_P = 11;
export const YAW_R = 12;
export const YAW_DA = 13;
export const YAW_DR = 14;
/** Numbers per row. */
export const DERIVATIVE_COUNT = 15;

/** Rows further outside than this in CL are "outside the data". */
export const CL_MARGIN = 0.1;

export interface DerivativeTable {
  /** Lift coefficients of the rows, ascending. */
  readonly CL: Float64Array;
  /** `count` rows of `DERIVATIVE_COUNT`; per rad, rates made non-dimensional by b/(2V). */
  readonly values: Float64Array;
  /** Slope of each value with CL from its row to the next; the last row's slopes are zero. */
  readonly slopes: Float64Array;
  /** Angle of attack of each row where the data gives it, else NaN; rad. */
  readonly alphaRad: Float64Array;
}

/**
 * A table from rows in ascending CL.
 *
 * @param CL        Lift coefficients; ascending; length n.
 * @param values    n rows of fifteen derivatives; per rad.
 * @param alphaRad  Angles of attack or NaN; rad; length n.
 * @returns         The table with its slopes.
 * @throws          Nothing.
 * @sign            Stability axes of this folder's README.
 * @source          Flight model, airframe data: linear in CL.
 */
export function buildTable(CL: Float64Array, values: Float64Array, alphaRad: Float64Array): DerivativeTable {
  const slopes = new Float64Array(values.length);
  for (let row = 0; row + 1 < CL.length; row++) {
    for (let i = 0; i < DERIVATIVE_COUNT; i++) {
      const at = row * DERIVATIVE_COUNT + i;
      slopes[at] = (values[at + DERIVATIVE_COUNT] - values[at]) / (CL[row + 1] - CL[row]);
    }
  }
  return { CL, values, slopes, alphaRad };
}

/**
 * Writes the fifteen derivatives at a lift coefficient into `out`.
 *
 * Linear in CL between rows, held beyond the ends.
 *
 * @param out    Derivatives; length 15; per rad.
 * @param table  Rows.
 * @param CL     Lift coefficient.
 * @returns      Nothing.
 * @throws       Nothing.
 * @sign         Stability axes of this folder's README.
 * @source       Flight model, airframe data.
 */
export function derivativesAtInto(out: Float64Array, table: DerivativeTable, CL: number): void {
  const rows = table.CL;
  const last = rows.length - 1;
  let row = 0;
  while (row < last && CL >= rows[row + 1]) row++;
  const beyond = CL - rows[row];
  const delta = beyond > 0 ? beyond : 0;
  const from = row * DERIVATIVE_COUNT;
  for (let i = 0; i < DERIVATIVE_COUNT; i++) out[i] = table.values[from + i] + delta * table.slopes[from + i];
}

/**
 * The angle of attack of the rows at a lift coefficient; NaN where the data gives none; rad.
 *
 * @param table  Rows.
 * @param CL     Lift coefficient.
 * @returns      Angle of attack; rad; linear in CL, held beyond the ends.
 * @throws       Nothing.
 * @sign         nose above the path positive
 * @source       Flight model, airframe data.
 */
export function rowAlphaRad(table: DerivativeTable, CL: number): number {
  const rows = table.CL;
  const last = rows.length - 1;
  if (CL <= rows[0]) return table.alphaRad[0];
  if (CL >= rows[last]) return table.alphaRad[last];
  let row = 0;
  while (CL >= rows[row + 1]) row++;
  const share = (CL - rows[row]) / (rows[row + 1] - rows[row]);
  return table.alphaRad[row] + share * (table.alphaRad[row + 1] - table.alphaRad[row]);
}

/**
 * How far a lift coefficient lies outside the rows; 0 inside.
 *
 * @param table  Rows.
 * @param CL     Lift coefficient.
 * @returns      Distance to the nearest row's CL; ≥ 0. Above `CL_MARGIN` a run says "outside the data".
 * @throws       Nothing.
 * @sign         none
 * @source       Flight model, airframe data.
 */
export function outsideRows(table: DerivativeTable, CL: number): number {
  const rows = table.CL;
  const below = rows[0] - CL;
  const above = CL - rows[rows.length - 1];
  return below > 0 ? below : above > 0 ? above : 0;
}
