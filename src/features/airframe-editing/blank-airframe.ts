/** A new airframe to begin from: a plain light twin-sized wing without engines, every value to be replaced. */
export function blankAirframe(name: string): Record<string, unknown> {
  return {
    format: 'sidewash.airframe/1',
    name,
    class: 'I',
    geometry: { wingArea_m2: 16, wingSpan_m: 11, meanChord_m: 1.5 },
    mass: { mass_kg: 1500, Ixx_kgm2: 2800, Izz_kgm2: 5200 },
    configurations: [
      {
        name: 'clean',
        CLmax: 1.5,
        derivatives: [
          {
            CL: 0.5,
            CY_beta: -0.5,
            CY_dr: 0.15,
            Cl_beta: -0.09,
            Cl_p: -0.45,
            Cl_r: 0.12,
            Cl_da: 0.15,
            Cl_dr: 0.01,
            Cn_beta: 0.08,
            Cn_p: -0.05,
            Cn_r: -0.11,
            Cn_da: -0.01,
            Cn_dr: -0.07,
          },
        ],
      },
    ],
    controls: { aileronMax_deg: 20, rudderMax_deg: 25, aileronRate_deg_s: 60, rudderRate_deg_s: 60, lag_s: 0.1 },
    sources: [
      {
        field: '*',
        text: 'Placeholder values to begin from, not any aeroplane. Replace each with its source.',
        uncertainty_pct: 50,
      },
    ],
  };
}
