/** Etkin & Reid, Dynamics of Flight, 3rd ed. 1996, eq. 6.7,1: states v (ft/s), p, r (rad/s), φ (rad); u0 = 774 ft/s. */
export const ETKIN_747_MATRIX: readonly number[] = [
  -0.0558, 0, -774, 32.2, -0.003865, -0.4342, 0.4136, 0, 0.001086, -0.006112, -0.1458, 0, 0, 1, 0, 0,
];
export const ETKIN_747_SPEED = 774;

/** Nelson, 2nd ed. 1998, chapter 5 example, printed matrix (memory): states β, p, r, φ. */
export const NAVION_MATRIX: readonly number[] = [
  -0.254, 0, -1, 0.182, -16.02, -8.4, 2.19, 0, 4.488, -0.35, -0.76, 0, 0, 1, 0, 0,
];
