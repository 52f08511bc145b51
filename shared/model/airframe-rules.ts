import { AIRFRAME_DEFAULTS } from './airframe-format.ts';
import type { Airframe } from './airframe-format.ts';
import { valueAt } from './field-issue.ts';
import type { FieldIssue } from './field-issue.ts';

/** Most engines an airframe may have. */
export const MAX_ENGINES = 8;
const ASPECT_RATIO_RANGE = [1, 40] as const;

type Report = (path: (string | number)[], rule: string, message: string, remedy: string) => void;

/**
 * Reports every rule between members that the airframe breaks.
 *
 * @param airframe  Members that are each valid on their own.
 * @param report  Called for each breach with path, rule, message and remedy.
 * @returns  Nothing.
 * @throws  Nothing.
 * @sign  none
 * @source  Flight model, airframe data: refusals.
 */
export function checkAirframe(airframe: Airframe, report: Report): void {
  checkGeometry(airframe, report);
  checkInertias(airframe, report);
  checkEngines(airframe, report);
  checkNames(airframe, report);
  checkRows(airframe, report);
  checkControls(airframe, report);
  airframe.sources?.forEach((source, i) => {
    if (source.field === '*' || source.field.startsWith('/')) return;
    report(
      ['sources', i, 'field'],
      'json-pointer',
      `"${source.field}" is not a JSON Pointer`,
      'Start it with "/", as "/mass/mass_kg", or write "*" for all members.',
    );
  });
}

function checkGeometry({ geometry }: Airframe, report: Report): void {
  if (!(geometry.wingSpan_m > 0 && geometry.wingArea_m2 > 0)) return;
  const ratio = (geometry.wingSpan_m * geometry.wingSpan_m) / geometry.wingArea_m2;
  const [low, high] = ASPECT_RATIO_RANGE;
  if (ratio >= low && ratio <= high) return;
  report(
    ['geometry', 'wingSpan_m'],
    'aspect-ratio',
    `span²/area is ${ratio.toPrecision(3)}; it must lie between ${low} and ${high}`,
    'Check span and area: both are in metres and square metres.',
  );
}

function checkInertias(airframe: Airframe, report: Report): void {
  const { mass } = airframe;
  const check = (path: (string | number)[], Ixx: number, Izz: number, Ixz: number): void => {
    if (Ixx * Izz > Ixz * Ixz) return;
    report(
      path,
      'inertia',
      `Ixx·Izz (${(Ixx * Izz).toPrecision(4)}) is not above Ixz² (${(Ixz * Ixz).toPrecision(4)})`,
      'Correct Ixx, Izz or Ixz: no body has such moments of inertia.',
    );
  };
  check(['mass', 'Ixz_kgm2'], mass.Ixx_kgm2, mass.Izz_kgm2, mass.Ixz_kgm2);
  airframe.loadings?.forEach((loading, i) => {
    check(
      ['loadings', i],
      loading.Ixx_kgm2 ?? mass.Ixx_kgm2,
      loading.Izz_kgm2 ?? mass.Izz_kgm2,
      loading.Ixz_kgm2 ?? mass.Ixz_kgm2,
    );
  });
}

function checkEngines({ engines }: Airframe, report: Report): void {
  if (engines.length > MAX_ENGINES) {
    report(
      ['engines'],
      'engine-count',
      `there are ${engines.length} engines; at most ${MAX_ENGINES} are modelled`,
      'Leave out engines, or join neighbours on one side into one.',
    );
  }
  engines.forEach((engine, i) => {
    if (engine.kind !== 'propeller' || engine.power_W !== undefined) return;
    report(
      ['engines', i, 'power_W'],
      'required',
      `power_W of the propeller engine "${engine.name}" is missing`,
      'Add the shaft power in watts.',
    );
  });
}

function checkNames(airframe: Airframe, report: Report): void {
  const unique = (member: 'engines' | 'configurations' | 'loadings', what: string): void => {
    const seen = new Set<string>();
    airframe[member]?.forEach(({ name }, i) => {
      if (seen.has(name)) {
        report([member, i, 'name'], 'unique', `the ${what} name "${name}" is used twice`, 'Give each its own name.');
      }
      seen.add(name);
    });
  };
  unique('engines', 'engine');
  unique('configurations', 'configuration');
  unique('loadings', 'loading');
  airframe.speeds?.forEach(({ configuration }, i) => {
    if (configuration === undefined || airframe.configurations.some(({ name }) => name === configuration)) return;
    report(
      ['speeds', i, 'configuration'],
      'known-configuration',
      `there is no configuration "${configuration}"`,
      'Name one of the configurations of this file.',
    );
  });
}

function checkRows(airframe: Airframe, report: Report): void {
  airframe.configurations.forEach(({ derivatives }, c) => {
    const seen = new Set<number>();
    derivatives.forEach((row, i) => {
      const path = ['configurations', c, 'derivatives', i];
      if (seen.has(row.CL)) {
        report([...path, 'CL'], 'unique', `two rows are given for CL ${row.CL}`, 'Remove one of them.');
      }
      seen.add(row.CL);
      if (airframe.mass.axes === 'body' && row.alpha_deg === undefined) {
        report(
          [...path, 'alpha_deg'],
          'required',
          'alpha_deg is missing on a row; inertias in body axes need it',
          'Add the angle of attack of each row, or give the inertias in stability axes.',
        );
      }
    });
  });
}

function checkControls({ controls }: Airframe, report: Report): void {
  const { rudderRatio, pedalForce } = controls;
  if (rudderRatio?.law === 'table') {
    if (rudderRatio.table === undefined) {
      report(
        ['controls', 'rudderRatio', 'table'],
        'required',
        'the law "table" needs a table',
        'Add [[speed in kt EAS, ratio], …].',
      );
    }
    rudderRatio.table?.forEach(([kt], i, table) => {
      if (i === 0 || kt > table[i - 1][0]) return;
      report(
        ['controls', 'rudderRatio', 'table', i],
        'ascending',
        `the speed ${kt} kt does not lie above the one before it`,
        'Order the table by rising speed.',
      );
    });
  } else if (rudderRatio !== undefined && rudderRatio.fullUpTo_kt === undefined) {
    report(
      ['controls', 'rudderRatio', 'fullUpTo_kt'],
      'required',
      `the law "${rudderRatio.law}" needs fullUpTo_kt`,
      'Add the speed up to which full travel is available.',
    );
  }
  if (pedalForce?.kind === 'reversible' && pedalForce.at_kt === undefined) {
    report(
      ['controls', 'pedalForce', 'at_kt'],
      'required',
      'a reversible pedal force needs at_kt',
      'Add the equivalent airspeed at which N_per_deg holds.',
    );
  }
}

/**
 * The remarks an airframe deserves without being refused.
 *
 * @param airframe  Parsed airframe.
 * @param input  What was parsed; shows which members were absent.
 * @returns  Warnings; none for complete, plausible data.
 * @throws  Nothing.
 * @sign  none
 * @source  Flight model, airframe data: warnings.
 */
export function warningsOf(airframe: Airframe, input: unknown): FieldIssue[] {
  const out: FieldIssue[] = [];
  const warn = (field: string, rule: string, message: string, remedy: string): void => {
    out.push({ field, rule, message, remedy });
  };
  const { mass } = airframe;
  if (mass.Iyy_kgm2 === undefined) {
    const taken = Math.max(mass.Izz_kgm2 - mass.Ixx_kgm2, mass.Ixx_kgm2);
    warn(
      '/mass/Iyy_kgm2',
      'default',
      `Iyy is absent; ${Number(taken.toPrecision(6))} kg·m² is taken (the larger of Izz − Ixx and Ixx)`,
      'Add it where it is known; only the large-angle model uses it.',
    );
  }
  if (mass.Ixx_kgm2 + (mass.Iyy_kgm2 ?? Infinity) < mass.Izz_kgm2) {
    warn(
      '/mass/Izz_kgm2',
      'inertia-sum',
      'Ixx + Iyy is below Izz, which no rigid body allows; published sets do it',
      'Check the three values against their source.',
    );
  }
  airframe.configurations.forEach((configuration, c) => {
    for (const member of ['CD0', 'kInduced', 'CD_beta2'] as const) {
      if (valueAt(input, `/configurations/${c}/${member}`) !== undefined) continue;
      warn(
        `/configurations/${c}/${member}`,
        'default',
        `${member} is absent; ${AIRFRAME_DEFAULTS[member]} is taken`,
        'Add it where the polar is known.',
      );
    }
    configuration.derivatives.forEach((row, i) => {
      const at = `/configurations/${c}/derivatives/${i}`;
      if (row.Cl_p >= 0) {
        warn(`${at}/Cl_p`, 'roll-damping', `Cl_p is ${row.Cl_p}: rolling is not damped`, 'Check the sign.');
      }
      if (row.Cn_beta <= 0) {
        warn(`${at}/Cn_beta`, 'weathercock', `Cn_beta is ${row.Cn_beta}: no directional stability`, 'Check the sign.');
      }
    });
  });
  airframe.sources?.forEach(({ field }, i) => {
    if (field === '*' || valueAt(airframe, field) !== undefined) return;
    warn(`/sources/${i}/field`, 'json-pointer', `${field} names no member of this file`, 'Correct the pointer.');
  });
  return out;
}
