import type { Airframe } from '#shared/model/airframe-schema.ts';
import { formatQuantity, type UnitPreference } from '#shared/units/quantity.ts';

export interface Fact {
  name: string;
  value: string;
  unit: string;
}

/** The first figures of an airframe for reading; straight from its data. */
export function airframeFacts(airframe: Airframe, units: UnitPreference): Fact[] {
  const { geometry, mass, engines, configurations } = airframe;
  const split = (name: string, text: string): Fact => {
    const [value = '–', ...unit] = text.split(' ');
    return { name, value, unit: unit.join(' ') };
  };
  const kinds = new Set(engines.map((engine) => (engine.kind === 'jet' ? 'jet' : 'propeller')));
  return [
    split('Span', formatQuantity(geometry.wingSpan_m, 'distance', units, 2)),
    split('Wing area', formatQuantity(geometry.wingArea_m2, 'area', units, 1)),
    split('Mass', formatQuantity(mass.mass_kg, 'mass', units)),
    { name: 'Engines', value: String(engines.length), unit: [...kinds].join(', ') },
    { name: 'Configurations', value: String(configurations.length), unit: '' },
  ];
}
