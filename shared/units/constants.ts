/** Exact conversion factors to SI and radians. Multiply a value in the named unit to get SI. */
export const KT = 1852 / 3600; // m/s, international knot (exact)
export const FT = 0.3048; // m, international foot (exact)
export const DEG = 3.141592653589793 / 180; // rad
export const LBF = 4.4482216152605; // N (exact)
export const LB = 0.45359237; // kg (exact)
export const SLUG = 14.593902937206364; // kg, lbf·s²/ft
/** Standard acceleration of gravity, m/s² (CGPM 1901, exact). */
export const G0 = 9.80665;
