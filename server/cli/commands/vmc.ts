import { criticalEngine } from '#shared/analysis/critical-engine.ts';
import { minimumControlSpeed } from '#shared/analysis/minimum-control-speed.ts';
import type { BankRule, ControlSpeed, NoControlSpeed } from '#shared/analysis/minimum-control-speed.ts';
import type { Aircraft } from '#shared/model/aircraft.ts';
import { DEG, FT } from '#shared/units/constants.ts';
import { readAirframe } from '../airframe-file.ts';
import { angleOption, heightOption, numberOption } from '../arguments.ts';
import type { ParsedArguments } from '../arguments.ts';
import type { Command } from '../command.ts';
import { aircraftOption, knots, named } from '../condition.ts';
import { fixed, printJson, printText, table } from '../output.ts';
import { UsageError } from '../usage-error.ts';

export const command: Command = {
  name: 'vmc',
  usage:
    'AIRFRAME.json --height 0ft [--bank 5 | --bank-limit 5] [--lever 1] [--failed NAME[,NAME]] [--feathered] [--configuration NAME] [--json]',
  summary: 'Static minimum control speed (air) with what binds; the critical engine unless others are named.',
  positionals: ['AIRFRAME.json'],
  options: {
    height: 'value',
    bank: 'value',
    'bank-limit': 'value',
    lever: 'value',
    failed: 'value',
    feathered: 'flag',
    configuration: 'value',
    json: 'flag',
  },
  async run(args) {
    const [file] = args.positionals;
    const json = args.flags.has('json');
    const airframe = await readAirframe(file, json);
    const aircraft = aircraftOption(args, airframe, file);
    const heightM = heightOption(args, 0);
    const lever = numberOption(args, 'lever', 0, 1) ?? 1;
    const feathered = args.flags.has('feathered');
    const bank = bankRule(args);
    const failed = named(file, () => failedEngines(args, aircraft, { heightM, lever, feathered, bank }, file));
    const result = named(file, () => minimumControlSpeed(aircraft, { heightM, lever, feathered, bank, failed }));
    const names = failed.map((index) => aircraft.engines[index].name);
    if (json) printJson(jsonOf(result, names));
    else printText(textOf(result, names, aircraft, heightM));
    return 0;
  },
};

function bankRule(args: ParsedArguments): BankRule {
  const exactly = angleOption(args, 'bank', -30, 30);
  const upTo = angleOption(args, 'bank-limit', 0, 30);
  if (exactly !== undefined && upTo !== undefined) throw new UsageError('--bank and --bank-limit: give one of them');
  return exactly === undefined ? { upToRad: upTo ?? 5 * DEG } : { exactlyRad: exactly };
}

function failedEngines(
  args: ParsedArguments,
  aircraft: Aircraft,
  request: { heightM: number; lever: number; feathered: boolean; bank: BankRule },
  file: string,
): number[] {
  const list = args.values.get('failed');
  if (aircraft.engines.length === 0)
    throw new UsageError(`${file}: /engines: the airframe has no engine that could fail`);
  if (list === undefined || list === 'critical') return [criticalEngine(aircraft, request).index];
  const known = aircraft.engines.map((engine) => engine.name);
  // A name may hold a comma itself.
  const parts = known.includes(list) ? [list] : list.split(',');
  const indices = parts.map((part) => {
    const index = known.indexOf(part.trim());
    if (index < 0)
      throw new UsageError(`--failed: "${part.trim()}" is no engine of ${file} (known: ${known.join(', ')})`);
    return index;
  });
  if (new Set(indices).size < indices.length) throw new UsageError(`--failed: an engine is named twice in "${list}"`);
  return indices;
}

function jsonOf(result: ControlSpeed | NoControlSpeed, failed: string[]): Record<string, unknown> {
  const name = failed.join(',');
  const stall_kt = knots(result.stallCasMps);
  if (!result.found) {
    return {
      vmc_kt: null,
      reason: result.reason,
      message: result.message,
      vmc_tas_kt: null,
      failed: name,
      limitedBy: null,
      bank_deg: null,
      beta_deg: null,
      aileron_deg: null,
      rudder_deg: null,
      zeroSideslipBank_deg: null,
      stall_kt,
      belowStall: false,
    };
  }
  return {
    vmc_kt: knots(result.casMps),
    vmc_tas_kt: knots(result.tasMps),
    failed: name,
    limitedBy: result.limitedBy,
    bank_deg: result.phiRad / DEG,
    beta_deg: result.betaRad / DEG,
    aileron_deg: result.aileronRad / DEG,
    rudder_deg: result.rudderRad / DEG,
    zeroSideslipBank_deg: result.zeroSideslipBankRad === null ? null : result.zeroSideslipBankRad / DEG,
    stall_kt,
    belowStall: result.belowStall,
  };
}

function textOf(
  result: ControlSpeed | NoControlSpeed,
  failed: string[],
  aircraft: Aircraft,
  heightM: number,
): string[] {
  const head = [
    `${aircraft.name}, ${aircraft.configuration}, ${fixed(heightM / FT, 0)} ft; failed: ${failed.join(', ')}`,
    '',
  ];
  const stall = `${fixed(knots(result.stallCasMps), 1)} kt`;
  if (!result.found) {
    return [...head, `No static minimum control speed: ${result.message} (${result.reason}).`, `Stall (1 g): ${stall}`];
  }
  const degrees = (rad: number | null) => (rad === null ? '–' : `${fixed(rad / DEG, 1)}°`);
  const rows = [
    ['Minimum control speed (calibrated)', `${fixed(knots(result.casMps), 1)} kt`],
    ['True airspeed', `${fixed(knots(result.tasMps), 1)} kt`],
    ['Limited by', result.limitedBy],
    ['Bank (right positive)', degrees(result.phiRad)],
    ['Sideslip (wind from the right positive)', degrees(result.betaRad)],
    ['Aileron (rolls right positive)', degrees(result.aileronRad)],
    ['Rudder (yaws left positive)', degrees(result.rudderRad)],
    ['Bank for zero sideslip', degrees(result.zeroSideslipBankRad)],
    ['Stall (1 g, calibrated)', stall],
  ];
  const lines = [...head, ...table(rows)];
  if (result.belowStall) {
    lines.push(
      '',
      'The stall comes first: practising this control limit would be a spin hazard. Take the stall as the limit.',
    );
  }
  return lines;
}
