import { describe, expect, it } from 'vitest';
import { analyseLateral } from '#shared/analysis/lateral-analysis.ts';
import { prepareAircraft, stallTasMps } from '#shared/model/aircraft.ts';
import { densityAt } from '#shared/model/atmosphere.ts';
import { KT } from '#shared/units/constants.ts';
import { SHIPPED, SHIPPED_SLUGS } from './shipped-airframes.ts';

/** Flight model §9: modes with the yaw damper off. */
const MODAL = ['dutch-damping', 'dutch-frequency', 'roll-mode', 'spiral', 'coupled-roll-spiral'];

function worstModalLevel(slug: (typeof SHIPPED_SLUGS)[number], configuration: string, tasMps: number): number {
  const { criteria } = analyseLateral(prepareAircraft(SHIPPED[slug], { configuration }), { tasMps, heightM: 0 });
  const levels = criteria
    .filter(({ id, level }) => MODAL.includes(id) && level !== null)
    .map(({ level }) => Number(level));
  return Math.max(...levels);
}

describe('shipped airframes, damper off', () => {
  it.each(SHIPPED_SLUGS.flatMap((slug) => SHIPPED[slug].configurations.map(({ name }) => [slug, name] as const)))(
    '%s, %s: modes at Level 2 or better from 1.13 stall speed up',
    (slug, configuration) => {
      const stall = stallTasMps(prepareAircraft(SHIPPED[slug], { configuration }), densityAt(0));
      for (let share = 1.13; share < 4; share += 0.05) {
        expect(
          worstModalLevel(slug, configuration, share * stall),
          `${share.toFixed(2)} of the stall speed`,
        ).toBeLessThanOrEqual(2);
      }
    },
  );

  it('twin jet, take-off: Level 1 above about 141 kt (independent implementation, ±1 kt)', () => {
    expect(worstModalLevel('twin-jet', 'take-off', 140 * KT)).toBe(2);
    for (let kt = 142; kt < 320; kt += 2) expect(worstModalLevel('twin-jet', 'take-off', kt * KT)).toBe(1);
  });
});
